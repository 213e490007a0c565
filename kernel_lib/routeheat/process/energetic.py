"""Energetic screening from composition and groups: formulas. Each says little alone, and none is a proof.

Energies here are energies released, positive, as hazard tables state them, and named so.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction

from routeheat.chem.elements import elements, isotopes
from routeheat.chem.formula import Formula
from routeheat.units import CALORIE

HALOGENS = ("F", "Cl", "Br", "I")
METAL_OXYGEN: Mapping[str, tuple[Fraction, str]] = {
    "Li": (Fraction(1, 2), "Li2O"),
    "Na": (Fraction(1, 2), "Na2O"),
    "K": (Fraction(1, 2), "K2O"),
    "Cs": (Fraction(1, 2), "Cs2O"),
    "Ag": (Fraction(0), "Ag"),
    "Mg": (Fraction(1), "MgO"),
    "Ca": (Fraction(1), "CaO"),
    "Sr": (Fraction(1), "SrO"),
    "Ba": (Fraction(1), "BaO"),
    "Zn": (Fraction(1), "ZnO"),
    "Cu": (Fraction(1), "CuO"),
    "Pb": (Fraction(1), "PbO"),
    "Sn": (Fraction(2), "SnO2"),
    "Ti": (Fraction(2), "TiO2"),
    "Al": (Fraction(3, 2), "Al2O3"),
    "Fe": (Fraction(3, 2), "Fe2O3"),
    "Cr": (Fraction(3, 2), "Cr2O3"),
    "B": (Fraction(3, 2), "B2O3"),
    "Si": (Fraction(2), "SiO2"),
    "P": (Fraction(5, 2), "P2O5"),
}
"""Oxygen atoms that one atom takes into the oxide stated; a convention."""
HIGH_BAND = (-120.0, 80.0)
MEDIUM_BAND = (-240.0, 160.0)
"""Oxygen balance in per cent between which the hazard is ranked high, and between which at least medium.

W. C. Lothrop, G. R. Handrick, Chem. Rev. 44 (1949) 419; CCPS, Guidelines for Chemical Reactivity Evaluation, 1995
(from memory, check); criticised by R. E. Shanley and G. A. Melhem, Process Saf. Prog. 14 (1995) 29: never alone."""
WAIVER_BALANCE = -200.0
WAIVER_ENERGY = 500.0
"""J/g; UN Manual of Tests and Criteria, appendix 6, and GHS chapter 2.1."""
WAIVER_ONSET = 500.0
SELF_REACTIVE_ENERGY = 300.0
"""J/g; GHS chapter 2.8."""
SELF_REACTIVE_SADT = 75.0
YOSHIDA = ((0.38, 1.67), (0.72, 0.98))
"""Slope and constant for explosion propagation and shock sensitivity, Q in cal/g and T in °C.

T. Yoshida et al., Kogyo Kayaku 48 (1987) 311 (coefficients from memory, check)."""
YOSHIDA_CAUTIOUS = ((0.285, 1.67), (0.54, 0.98))
"""A more cautious published variant, whose slopes are 0.75 times the originals (from memory, check)."""


@dataclass(frozen=True, slots=True)
class Balance:
    """An oxygen balance with the products it assumes."""

    per_cent: float
    """g of oxygen left over (positive) or missing (negative) per 100 g."""
    products: str
    """``C as CO2, H as H2O, N as N2, Cl as HCl``."""


def atoms(formula: Formula) -> dict[str, Fraction]:
    """Atoms by element; isotopes count as their element."""
    found: dict[str, Fraction] = {}
    for symbol, count in formula.counts:
        element = isotopes()[symbol].element if symbol in isotopes() else symbol
        found[element] = found.get(element, Fraction(0)) + count
    return found


def oxygen_balance(formula: Formula) -> Balance | str:
    """Oxygen balance −1600/M (2 C + (H − X)/2 + 2 S + metal oxide O − O), or why there is none.

    Halogen X leaves as HX (as X2 once hydrogen is used up), sulfur as SO2, nitrogen as N2, metals as the oxide of
    :data:`METAL_OXYGEN`. R. Meyer, J. Köhler, A. Homburg, Explosives (tables; halogen term from memory, check).
    """
    count = atoms(formula)
    halogen = sum((count.get(x, Fraction(0)) for x in HALOGENS), Fraction(0))
    hydrogen = count.get("H", Fraction(0))
    need = 2 * count.get("C", Fraction(0)) + max(hydrogen - halogen, Fraction(0)) / 2 + 2 * count.get("S", Fraction(0))
    products = [
        f"{symbol} as {product}"
        for symbol, product in (("C", "CO2"), ("H", "H2O"), ("N", "N2"), ("S", "SO2"))
        if symbol in count
    ]
    products += [f"{x} as H{x}" for x in HALOGENS if x in count]
    if halogen > hydrogen:
        products.append("excess halogen as X2")
    for symbol, number in count.items():
        if symbol in (*HALOGENS, "C", "H", "N", "S", "O"):
            continue
        if symbol not in METAL_OXYGEN:
            return f"the oxide of {elements()[symbol].name} is not tabulated"
        oxygen, oxide = METAL_OXYGEN[symbol]
        need += oxygen * number
        products.append(f"{symbol} as {oxide}")
    left = count.get("O", Fraction(0)) - need
    return Balance(float(1600 * left / formula.molar_mass), ", ".join(products))


def un_oxygen_balance(formula: Formula) -> float:
    """−1600 (2x + y/2 − z)/M of CxHyOz in per cent, the formula of the UN screening, which counts C, H and O only."""
    count = atoms(formula)
    x, y, z = (count.get(symbol, Fraction(0)) for symbol in ("C", "H", "O"))
    return float(-1600 * (2 * x + y / 2 - z) / formula.molar_mass)


def band(balance: float) -> str:
    """``high``, ``medium`` or ``low`` ranking of an oxygen balance; a balance on a limit counts as the worse side."""
    if HIGH_BAND[0] <= balance <= HIGH_BAND[1]:
        return "high"
    return "medium" if MEDIUM_BAND[0] <= balance <= MEDIUM_BAND[1] else "low"


def azide_ratios(formula: Formula) -> tuple[float, float] | None:
    """(C + O)/N and C/N; ``None`` without nitrogen.

    S. Bräse, C. Gil, K. Knepper, V. Zimmermann, Angew. Chem. Int. Ed. 44 (2005) 5188 (from memory, check).
    """
    count = atoms(formula)
    nitrogen = count.get("N", Fraction(0))
    if not nitrogen:
        return None
    carbon = count.get("C", Fraction(0))
    return float((carbon + count.get("O", Fraction(0))) / nitrogen), float(carbon / nitrogen)


def azide_limit(carbon_to_nitrogen: float) -> str:
    """What a university fact sheet allows by C/N; ratios on a limit take the stricter tier, which is our choice."""
    if carbon_to_nitrogen > 3:
        return "may be isolated, at most 20 g"
    if carbon_to_nitrogen > 1:
        return "at most 5 g, at most 1 mol/L, below room temperature"
    return "never isolate, at most 1 g as a transient"


def six_per_group(formula: Formula, energetic: int) -> float:
    """Carbon atoms per energetic group; below six is little dilution. Other atoms are not counted, to be cautious."""
    return float(atoms(formula).get("C", Fraction(0)) / energetic)


def available_oxygen(parts: tuple[tuple[int, float, float], ...]) -> float:
    """Available oxygen of an organic peroxide in per cent, 16 Σ n c/m (GHS chapter 2.15).

    ``parts`` are (peroxy groups in a molecule, content in mass per cent, molar mass in g/mol).
    """
    return 16 * sum(n * content / mass for n, content, mass in parts)


def peroxide_waiver(oxygen_per_cent: float, hydrogen_peroxide_per_cent: float) -> bool:
    """True when a formulation need not be classified as an organic peroxide (GHS 2.15.2.1).

    At most 1.0 % available oxygen with at most 1.0 % hydrogen peroxide, or at most 0.5 % with up to 7 %.
    """
    if hydrogen_peroxide_per_cent <= 1.0:
        return oxygen_per_cent <= 1.0
    return hydrogen_peroxide_per_cent <= 7.0 and oxygen_per_cent <= 0.5


def specific_energy(released_kj_per_mol: float, molar_mass: float) -> float:
    """J/g released."""
    return released_kj_per_mol * 1000 / molar_mass


def joule_to_calorie(released_j_per_g: float) -> float:
    """cal/g of an energy in J/g (1 cal = 4.184 J, exact)."""
    return released_j_per_g / float(CALORIE)


def yoshida(released_j_per_g: float, onset_c: float, *, cautious: bool = False) -> tuple[float, float]:
    """(EP, SS): explosion propagation and shock sensitivity, log Q − a log(T − 25) − b; 0 or more reads positive.

    Takes J/g and converts: the correlation is in cal/g, and with J/g instead both figures are 0.62 too high. Raises
    ``ValueError`` unless Q > 0 and T > 25 °C. A negative figure is no proof.
    """
    if released_j_per_g <= 0 or onset_c <= 25:
        raise ValueError("needs a released energy above 0 and an onset above 25 °C")
    pairs = YOSHIDA_CAUTIOUS if cautious else YOSHIDA
    energy, place = math.log10(joule_to_calorie(released_j_per_g)), math.log10(onset_c - 25)
    propagation, shock = (energy - slope * place - constant for slope, constant in pairs)
    return propagation, shock
