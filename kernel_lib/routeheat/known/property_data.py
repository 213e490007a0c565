"""One general reference library as a further source: by CAS number, phase and named data set only.

Needs the extra ``data`` (``pip install routeheat[data]``), which installs the ``chemicals`` package. Its defaults are
never used, because they choose silently between data sets. Refused, each with its reason: values at 0 K, estimates that
do not say so, averages over entries, vaporisation of carboxylic acids (to the dimer), and signs that are wrong.
"""

from __future__ import annotations

import math
import re
from fractions import Fraction
from importlib import metadata
from typing import Any, Literal

from routeheat.chem.formula import read_formula
from routeheat.errors import FormulaError, RouteheatError, UnknownName
from routeheat.known.table import KnownSpecies, species_table

Phase = Literal["s", "l", "g"]

DATA_SETS: dict[tuple[str, str], str] = {
    ("CRC", "s"): "CRC",
    ("CRC", "l"): "CRC",
    ("CRC", "g"): "CRC",
    ("ATcT", "l"): "ATCT_L",
    ("ATcT", "g"): "ATCT_G",
    ("JANAF", "l"): "JANAF",
    ("JANAF", "g"): "JANAF",
}
"""Data sets that are read, by (name, phase), with the library's own name for them."""
REFUSED: dict[str, str] = {
    "TRC": "its gas values are enthalpies at 0 K, not at 298.15 K",
    "JOBACK": "it is a group estimate that does not say so in its result",
    "YAWS": "it mixes measured and estimated values without saying which is which",
    "API_TDB": "it mixes measured and estimated values without saying which is which",
    "WEBBOOK": "it is an average over the entries of a collection, not a value of any of them",
}
"""Data sets of the library that are never read, and why."""

_SAME_SIZE = 0.05
"""Relative difference up to which two numbers of opposite sign are taken for one number with a wrong sign."""
_CAS = re.compile(r"[0-9]{2,7}-[0-9]{2}-[0-9]")
_ACID = re.compile(r"C\(=O\)O(?:$|\))|^OC\(=O\)|^OC=O$")
"""A carboxyl group in a SMILES."""
_YEARS = {"CRC": 2013, "ATcT": 2013, "JANAF": 1998}


class DataRefused(RouteheatError):
    """The reference library has no value that may be used; ``.reason`` says why."""

    def __init__(self, cas: str, data_set: str, reason: str) -> None:
        self.cas = cas
        self.data_set = data_set
        self.reason = reason
        super().__init__(f"{data_set} for CAS {cas[:20]} is refused: {reason}")


def fetch(cas: str, phase: Phase, data_set: str) -> KnownSpecies:
    """ΔfH°(298.15 K) of one CAS number and phase from one named data set, as an ordinary line with its source.

    The library's data sets give no uncertainty: it is "not stated". Raises :class:`DataRefused` for a data set of
    :data:`REFUSED`, a missing value, a wrong sign or an unreadable formula; :class:`~routeheat.errors.UnknownName` for
    a data set that does not exist; :class:`~routeheat.errors.RouteheatError` when the library is not installed.
    """
    if data_set.upper() in REFUSED:
        raise DataRefused(cas, data_set, REFUSED[data_set.upper()])
    method = DATA_SETS.get((data_set, phase))
    if method is None:
        raise UnknownName("data set and phase", f"{data_set} ({phase})", [f"{s} ({p})" for s, p in DATA_SETS])
    chemicals = _library()
    identity = _identity(chemicals, cas, data_set)
    reader = {"s": chemicals.Hfs, "l": chemicals.Hfl, "g": chemicals.Hfg}[phase]
    found = reader(cas, method=method) if _has(chemicals, cas, phase, method) else None
    if found is None:
        raise DataRefused(cas, data_set, f"it has no value for the phase ({phase})")
    value = Fraction(repr(round(float(found), 3))) / 1000
    _check_sign(cas, phase, data_set, value)
    try:
        formula = read_formula(identity.formula)
    except FormulaError as problem:
        raise DataRefused(cas, data_set, f"its formula cannot be read: {problem}") from None
    version = metadata.version("chemicals")
    return KnownSpecies(
        name=str(identity.common_name),
        other_names=(),
        formula=formula,
        phase=phase,
        form="",
        cas=cas,
        value=value,
        decimals=2,
        half_width=None,
        u_kind="not stated",
        cp=None,
        cp_source="",
        source=f"chemicals {version}, data set {data_set}, CAS {cas}",
        year=_YEARS[data_set],
        checked="",
    )


def fetch_vaporisation(cas: str) -> tuple[Fraction, str]:
    """Enthalpy of vaporisation at 298.15 K in kJ/mol from the library's CRC table, and its source.

    Raises :class:`DataRefused` when there is none, and for a carboxylic acid: its vapour holds dimers, so the tabulated
    enthalpy does not lead to the monomer whose formation enthalpy is tabulated.
    """
    chemicals = _library()
    name = "CRC vaporisation"
    if _ACID.search(str(_identity(chemicals, cas, name).smiles)):
        raise DataRefused(cas, name, "the vapour of a carboxylic acid holds dimers")
    table = chemicals.phase_change.Hvap_data_CRC
    value = float(table.at[cas, "Hvap298"]) if cas in table.index else math.nan
    if not math.isfinite(value):
        raise DataRefused(cas, name, "it has no value at 298.15 K")
    source = f"chemicals {metadata.version('chemicals')}, data set CRC (vaporisation at 298.15 K), CAS {cas}"
    return Fraction(repr(value)) / 1000, source


def _library() -> Any:
    try:
        import chemicals
    except ImportError:
        raise RouteheatError("the reference library is not installed: pip install routeheat[data]") from None
    return chemicals


def _has(chemicals: Any, cas: str, phase: Phase, method: str) -> bool:
    listed = {"s": chemicals.Hfs_methods, "l": chemicals.Hfl_methods, "g": chemicals.Hfg_methods}[phase]
    return method in listed(cas)


def _identity(chemicals: Any, cas: str, data_set: str) -> Any:
    """What the library says a CAS number is; a name is never accepted in its place."""
    if not _CAS.fullmatch(cas):
        raise DataRefused(cas, data_set, "this is no CAS Registry Number")
    try:
        return chemicals.identifiers.search_chemical(cas)
    except ValueError:
        raise DataRefused(cas, data_set, "the library does not know this CAS number") from None


def _check_sign(cas: str, phase: Phase, data_set: str, value: Fraction) -> None:
    for line in species_table():
        if line.cas == cas and line.phase == phase and line.value * value < 0:
            size = max(abs(line.value), abs(value))
            if abs(line.value + value) <= _SAME_SIZE * size:
                reason = f"its sign is wrong: {float(value):.2f} kJ/mol, against {float(line.value):.2f} in this table"
                raise DataRefused(cas, data_set, reason)
