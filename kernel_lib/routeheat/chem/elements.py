"""Chemical elements and labelled isotopes: their weights, and the state in which an element enters formation rows.

The values live in ``elements.csv`` and ``isotopes.csv``, each line with its source; both are read when first asked for.
"""

from __future__ import annotations

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import cache
from importlib.resources import files
from types import MappingProxyType

__all__ = ["HYDROGEN_ISOTOPES", "Element", "Isotope", "elements", "isotopes", "weight_bounds", "weight_of"]

HYDROGEN_ISOTOPES: Mapping[str, str] = MappingProxyType({"D": "[2H]", "T": "[3H]"})
"""The two isotopes with a symbol of their own, and the general way to write them."""

_NONMETALS = frozenset(
    [
        "H",
        "He",
        "B",
        "C",
        "N",
        "O",
        "F",
        "Ne",
        "Si",
        "P",
        "S",
        "Cl",
        "Ar",
        "As",
        "Se",
        "Br",
        "Kr",
        "Te",
        "I",
        "Xe",
        "At",
        "Rn",
        "Ts",
        "Og",
    ]
)


@dataclass(frozen=True, slots=True)
class Element:
    """A chemical element with its standard atomic weight."""

    number: int
    """Atomic number."""
    symbol: str
    """Symbol, e.g. ``"Na"``."""
    name: str
    """IUPAC name in English, e.g. ``"sodium"``."""
    weight: Fraction
    """g/mol, as computed with: the standard atomic weight, its conventional (abridged) value where the standard is an
    interval, or the mass number of the longest-lived isotope where there is no standard (``source`` says which)."""
    weight_low: Fraction | None
    """g/mol, lower end of the standard atomic weight; None unless that is an interval."""
    weight_high: Fraction | None
    """g/mol, upper end of the standard atomic weight; None unless that is an interval."""
    reference_state: str
    """The element as it stands in formation reactions at 298.15 K, e.g. ``"C(s, graphite)"``; empty where nobody
    uses one."""
    source: str
    """Where the weight is from."""

    @property
    def is_metal(self) -> bool:
        """Whether a lone atom of it forms a plain cation, as in ``Ca2+``; metalloids B, Si, As, Te count as nonmetals,
        Ge and Sb as metals."""
        return self.symbol not in _NONMETALS


@dataclass(frozen=True, slots=True)
class Isotope:
    """One nuclide that formulas may name, e.g. ``[13C]``."""

    symbol: str
    """As written in a formula, e.g. ``"[13C]"``."""
    element: str
    """Symbol of the element, e.g. ``"C"``."""
    mass_number: int
    """Protons and neutrons together."""
    mass: Fraction
    """g/mol."""
    source: str
    """Where the mass is from."""


def _rows(name: str) -> list[dict[str, str]]:
    text = files("routeheat.chem").joinpath(name).read_text(encoding="utf-8")
    return list(csv.DictReader(text.splitlines()))


def _optional(text: str) -> Fraction | None:
    return Fraction(text) if text else None


@cache
def elements() -> Mapping[str, Element]:
    """All 118 elements by symbol, in order of atomic number."""
    return MappingProxyType(
        {
            row["symbol"]: Element(
                number=int(row["number"]),
                symbol=row["symbol"],
                name=row["name"],
                weight=Fraction(row["weight"]),
                weight_low=_optional(row["weight_low"]),
                weight_high=_optional(row["weight_high"]),
                reference_state=row["reference_state"],
                source=row["source"],
            )
            for row in _rows("elements.csv")
        }
    )


@cache
def isotopes() -> Mapping[str, Isotope]:
    """The common labelled isotopes by the way a formula writes them (``"[2H]"``, ``"[13C]"``)."""
    return MappingProxyType(
        {
            row["symbol"]: Isotope(
                symbol=row["symbol"],
                element=row["element"],
                mass_number=int(row["mass_number"]),
                mass=Fraction(row["mass"]),
                source=row["source"],
            )
            for row in _rows("isotopes.csv")
        }
    )


def weight_of(symbol: str) -> Fraction:
    """g/mol of an element (``"C"``) or isotope (``"[13C]"``); ``KeyError`` for anything else."""
    return isotopes()[symbol].mass if symbol.startswith("[") else elements()[symbol].weight


def weight_bounds(symbol: str) -> tuple[Fraction, Fraction]:
    """g/mol, the least and the greatest weight in normal materials; both are the weight itself unless IUPAC gives an
    interval. The conventional weight is always inside: those of oxygen (15.999) and thallium (204.38) are rounded to
    just below the published interval and widen it.
    """
    weight = weight_of(symbol)
    element = elements().get(symbol)
    if element is None or element.weight_low is None or element.weight_high is None:
        return weight, weight
    return min(element.weight_low, weight), max(element.weight_high, weight)
