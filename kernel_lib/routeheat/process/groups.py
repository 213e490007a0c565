"""Energetic groups: which a substance has, as declared or from its structure, and what their decomposition releases.

The table is ``decomposition_groups.csv``, with a source on every line; ranges are in kJ released per mole of group.
Calorimeter cells differ (sealed or pin-hole), and halogen and sulfur compounds read lower in glass: ranges are for
screening only.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from importlib import import_module
from importlib.resources import files
from types import MappingProxyType
from typing import Any

from routeheat.errors import FormulaError, RouteheatError, UnknownName

NONE_DECLARED = ("none", "nil")
_ITEM = re.compile(r"(?:(?P<count>[1-9][0-9]?)\s+)?(?P<name>\S.*)")


@dataclass(frozen=True, slots=True)
class Group:
    """One energetic group."""

    name: str
    spellings: tuple[str, ...]
    released_low: float
    """kJ released per mole of group, least."""
    released_high: float
    """kJ released per mole of group, most."""
    released_mean: float | None
    """kJ per mole of group where a source states a mean."""
    listed: str
    """``explosive`` when it is among the groups that indicate explosive properties, else ``self-reactive``.

    UN Manual of Tests and Criteria, appendix 6 (from memory, check against the source)."""
    smarts: str
    """Pattern by which a structure is searched."""
    source: str


@cache
def groups() -> Mapping[str, Group]:
    """Every group of the table by its name."""
    text = files("routeheat.process").joinpath("decomposition_groups.csv").read_text(encoding="utf-8")
    return MappingProxyType(
        {
            row["group"]: Group(
                row["group"],
                tuple(word for word in row["spellings"].split(";") if word),
                float(row["released_low"]),
                float(row["released_high"]),
                float(row["released_mean"]) if row["released_mean"] else None,
                row["list"],
                row["smarts"],
                row["source"],
            )
            for row in csv.DictReader(text.splitlines())
        }
    )


@cache
def _by_spelling() -> Mapping[str, Group]:
    return {word.lower(): group for group in groups().values() for word in (group.name, *group.spellings)}


def read_groups(text: str) -> Mapping[Group, int] | None:
    """Groups as declared: ``azide``, ``2 nitroarene, epoxide``; ``none`` is an empty mapping, an empty text ``None``.

    Nothing declared is not "no groups". Raises :class:`~routeheat.errors.UnknownName` on a group that is not tabulated.
    """
    if not text.strip():
        return None
    if text.strip().lower() in NONE_DECLARED:
        return {}
    found: dict[Group, int] = {}
    for part in re.split(r"[,;]", text):
        match = _ITEM.fullmatch(part.strip())
        if match is None:
            continue
        group = _by_spelling().get(match["name"].strip().lower())
        if group is None:
            raise UnknownName("energetic group", match["name"].strip(), [*groups(), *NONE_DECLARED])
        found[group] = found.get(group, 0) + int(match["count"] or 1)
    return found


def groups_of_structure(smiles: str) -> Mapping[Group, int]:
    """Groups that a structure has, by substructure search; needs the extra ``routeheat[structures]``.

    A sulfonyl azide is not counted as an azide again. Raises :class:`~routeheat.errors.FormulaError` when the
    structure cannot be read and :class:`~routeheat.errors.RouteheatError` without the extra.
    """
    try:
        chem: Any = import_module("rdkit.Chem")
    except ImportError as problem:
        raise RouteheatError("structures need the extra routeheat[structures]; or declare the groups") from problem
    if len(smiles) > 500:
        raise FormulaError("a structure of more than 500 characters", smiles)
    molecule = chem.MolFromSmiles(smiles)
    if molecule is None:
        raise FormulaError("this structure cannot be read", smiles, hint="as SMILES, like CC(=O)N=[N+]=[N-]")
    found = {}
    for group in groups().values():
        count = len(molecule.GetSubstructMatches(chem.MolFromSmarts(group.smarts)))
        if count:
            found[group] = count
    return found
