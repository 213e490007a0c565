"""Published worked examples of Hess's law, typed as a chemist would type them, each with its source beside it."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

import pytest

import routeheat as rh

OPENSTAX = "OpenStax, Chemistry 2e (2019), sec. 5.3"


@dataclass(frozen=True)
class Example:
    """A typed sheet with one target T, and what the source prints for it."""

    name: str
    source: str
    sheet: str
    expected: float
    tolerance: float
    coefficients: dict[str, str] | None = None
    u: float | None = None


EXAMPLES = [
    Example(
        "iron(III) chloride",
        f"{OPENSTAX}, FeCl3 example: -399.5 kJ",
        """
known
  [R1] Fe(s) + Cl2(g) -> FeCl2(s)       | dH -341.8 kJ
  [R2] FeCl2(s) + 1/2 Cl2(g) -> FeCl3(s) | dH -57.7 kJ
target [T] Fe(s) + 3/2 Cl2(g) -> FeCl3(s)
""",
        -399.5,
        0.05,
        {"R1": "1", "R2": "1"},
    ),
    Example(
        "chlorine trifluoride",
        f"{OPENSTAX}, a more challenging problem using Hess's law; first heat of the four not needed: -104.5 kJ",
        """
known
  [R2] 2 OF2(g) -> O2(g) + 2 F2(g)                   | dH -49.4 kJ
  [R3] 2 ClF(g) + O2(g) -> Cl2O(g) + OF2(g)          | dH 214.0 kJ
  [R4] ClF3(g) + O2(g) -> 1/2 Cl2O(g) + 3/2 OF2(g)   | dH 236.2 kJ
target [T] ClF(g) + F2(g) -> ClF3(g)
""",
        -104.5,
        0.05,
        {"R2": "-1/2", "R3": "1/2", "R4": "-1"},
    ),
    Example(
        "nitrogen dioxide",
        f"{OPENSTAX}, check your learning: 66.4 kJ",
        """
known
  [R1] N2(g) + O2(g) -> 2 NO(g)      | dH 180.5 kJ
  [R2] NO(g) + 1/2 O2(g) -> NO2(g)   | dH -57.06 kJ
target [T] N2(g) + 2 O2(g) -> 2 NO2(g)
""",
        66.4,
        0.05,
        {"R1": "1", "R2": "2"},
    ),
    Example(
        "mercury(I) chloride reversed",
        f"{OPENSTAX}, exercise: 265 kJ",
        """
known
  [R1] Hg(l) + Cl2(g) -> HgCl2(s)      | dH -224 kJ
  [R2] Hg(l) + HgCl2(s) -> Hg2Cl2(s)   | dH -41.2 kJ
target [T] Hg2Cl2(s) -> 2 Hg(l) + Cl2(g)
""",
        265.2,
        0.5,
        {"R1": "-1", "R2": "-1"},
    ),
    Example(
        "antimony(V) chloride",
        f"{OPENSTAX}, exercise: -394 kJ",
        """
known
  [R1] Sb(s) + 3/2 Cl2(g) -> SbCl3(s) | dH -314 kJ
  [R2] SbCl3(s) + Cl2(g) -> SbCl5(s)  | dH -80 kJ
target [T] Sb(s) + 5/2 Cl2(g) -> SbCl5(s)
""",
        -394,
        0.5,
        {"R1": "1", "R2": "1"},
    ),
    Example(
        "acetylene from combustion",
        "Brown, LeMay, Bursten, Chemistry: The Central Science, ch. 5, sample exercise on Hess's law (from memory): "
        "226.6 kJ",
        """
known
  [K1] C(graphite) + O2(g) -> CO2(g)              | dH -393.5 kJ
  [K2] H2(g) + 1/2 O2(g) -> H2O(l)                | dH -285.8 kJ
  [K3] 2 C2H2(g) + 5 O2(g) -> 4 CO2(g) + 2 H2O(l) | dH -2598.8 kJ
target [T] 2 C(graphite) + H2(g) -> C2H2(g)
""",
        226.6,
        0.1,
        {"K1": "2", "K2": "1", "K3": "-1/2"},
    ),
    Example(
        "carbon monoxide",
        f"{OPENSTAX} prints -394, -283, -111 kJ; standard in general-chemistry texts: -110.5 kJ",
        """
known
  [K1] C(graphite) + O2(g) -> CO2(g) | dH -393.5 kJ
  [K2] CO(g) + 1/2 O2(g) -> CO2(g)   | dH -283.0 kJ
target [T] C(graphite) + 1/2 O2(g) -> CO(g)
""",
        -110.5,
        0.1,
        {"K1": "1", "K2": "-1"},
    ),
    Example(
        "formation of benzoic acid from its combustion",
        "NIST Chemistry WebBook, benzoic acid, Mosselman and Dekker 1969: -385.19 kJ/mol",
        """
known
  [K1] combustion of C7H6O2(s) to CO2(g), H2O(l) | dH -3226.87 ± 0.18 kJ/mol (k = 1)
  [K2] formation of CO2(g) | dH -393.51 kJ/mol
  [K3] formation of H2O(l) | dH -285.83 kJ/mol
target [T] formation of C7H6O2(s)
""",
        -385.19,
        0.02,
        {"K1": "-1", "K2": "7", "K3": "3"},
    ),
    Example(
        "formation of propane from its combustion",
        f"{OPENSTAX}, exercise: -104.5 kJ/mol",
        """
known
  [K1] combustion of C3H8(g) to CO2(g), H2O(l) | dH -2219.2 kJ/mol
  [K2] formation of CO2(g) | dH -393.5 kJ/mol
  [K3] formation of H2O(l) | dH -285.8 kJ/mol
target [T] formation of C3H8(g)
""",
        -104.5,
        0.1,
    ),
    Example(
        "combustion of ethanol from formation",
        f"{OPENSTAX}: -1368 kJ/mol",
        """
known
  [K1] formation of C2H5OH(l) | dH -278 kJ/mol
  [K2] formation of H2O(l)    | dH -286 kJ/mol
  [K3] formation of CO2(g)    | dH -394 kJ/mol
target [T] combustion of C2H5OH(l) to CO2(g), H2O(l)
""",
        -1368,
        0.5,
        {"K1": "-1", "K2": "3", "K3": "2"},
    ),
    Example(
        "hydration of ethene, mixed phases",
        f"{OPENSTAX}, exercise: -88.2 kJ/mol",
        """
known
  [K1] formation of C2H5OH(l) | dH -277.6 kJ/mol
  [K2] formation of C2H4(g)   | dH 52.4 kJ/mol
  [K3] formation of H2O(g)    | dH -241.82 kJ/mol
target [T] C2H4(g) + H2O(g) -> C2H5OH(l)
""",
        -88.2,
        0.1,
    ),
    Example(
        "hydrogenation of nitrobenzene",
        "formation values NIST/Pedley (from memory); expected value is their arithmetic, -552.9 kJ/mol",
        """
known
  [K1] formation of C6H5NO2(l) | dH 12.5 kJ/mol
  [K2] formation of C6H5NH2(l) | dH 31.3 kJ/mol
  [K3] formation of H2O(l)     | dH -285.83 kJ/mol
target [T] C6H5NO2(l) + 3 H2(g) -> C6H5NH2(l) + 2 H2O(l)
""",
        -552.9,
        0.1,
    ),
    Example(
        "hydrolysis of acetic anhydride",
        "formation values OpenStax App. G and Pedley; Wadso 1962, about -58.5 kJ/mol in solution (from memory)",
        """
known
  [K1] formation of CH3CO2H(l) | dH -484.3 kJ/mol
  [K2] formation of C4H6O3(l)  | dH -624.4 kJ/mol
  [K3] formation of H2O(l)     | dH -285.83 kJ/mol
target [T] C4H6O3(l) + H2O(l) -> 2 CH3CO2H(l)
""",
        -58,
        1.5,
    ),
    Example(
        "Fischer esterification, near thermoneutral",
        "formation values Pedley and OpenStax App. G (from memory); expected value is their arithmetic",
        """
known
  [K1] formation of CH3COOC2H5(l) | dH -479.3 kJ/mol
  [K2] formation of H2O(l)        | dH -285.83 kJ/mol
  [K3] formation of CH3COOH(l)    | dH -484.3 kJ/mol
  [K4] formation of C2H5OH(l)     | dH -277.6 kJ/mol
target [T] CH3COOH(l) + C2H5OH(l) -> CH3COOC2H5(l) + H2O(l)
""",
        -3.2,
        1.0,
    ),
    Example(
        "neutralisation at infinite dilution",
        "CODATA Key Values (Cox, Wagman, Medvedev 1989), ion scale H+(aq) = 0: -55.815 kJ/mol; the OH- line is from "
        "memory; the limits combined give 0.057",
        """
known
  [K1] formation of H2O(l) | dH -285.830 ± 0.040 kJ/mol (k = 1)
  [K2] H2(g) + 1/2 O2(g) -> H^+(aq) + OH^-(aq) | dH -230.015 ± 0.040 kJ/mol (k = 1)
target [T] H^+(aq) + OH^-(aq) -> H2O(l)
""",
        -55.815,
        0.01,
        {"K1": "1", "K2": "-1"},
        0.057,
    ),
    Example(
        "neutralisation in a coffee cup",
        "OpenStax, Chemistry 2e (2019), sec. 5.2 and 5.3: 100 g at 4.184 J/(g K) warm by 6.9 K for 0.0500 mol, "
        "-2.9 kJ, -58 kJ/mol",
        f"""
known
  [K1] 0.05 HCl(aq) + 0.05 NaOH(aq) -> 0.05 NaCl(aq) + 0.05 H2O(l) | dH {-100 * 4.184 * 6.9 / 1000:.4f} kJ
target [T] HCl(aq) + NaOH(aq) -> NaCl(aq) + H2O(l)
""",
        -58,
        1.0,
        {"K1": "20"},
    ),
    Example(
        "water-gas shift with uncertainty",
        "CODATA Key Values 1989; JCGM 100:2008 eq. 10: u 0.218 kJ/mol",
        """
uncertainty k = 1
known
  [K1] formation of CO(g)  | dH -110.53 ± 0.17 kJ/mol
  [K2] formation of H2O(g) | dH -241.826 ± 0.040 kJ/mol
  [K3] formation of CO2(g) | dH -393.51 ± 0.13 kJ/mol
target [T] CO(g) + H2O(g) -> CO2(g) + H2(g)
""",
        -41.154,
        0.001,
        {"K1": "-1", "K2": "-1", "K3": "1"},
        0.218,
    ),
]


@pytest.mark.parametrize("example", EXAMPLES, ids=lambda example: example.name)
def test_published_heat(example: Example) -> None:
    sheet = rh.read_sheet(example.sheet)
    found = rh.combine(sheet.targets["T"], sheet.known)
    assert found.heat.value == pytest.approx(example.expected, abs=example.tolerance)
    if example.coefficients is not None:
        assert found.coefficients == {label: Fraction(c) for label, c in example.coefficients.items()}
    if example.u is not None:
        assert found.heat.u == pytest.approx(example.u, abs=0.001)


def test_target_outside_the_span_is_refused() -> None:
    """Rank test: [A] and [A|b] differ in rank; only FeCl2 is known, FeCl3 is asked (OpenStax sec. 5.3, cut short)."""
    sheet = rh.read_sheet("""
known
  [R1] Fe(s) + Cl2(g) -> FeCl2(s) | dH -341.8 kJ
target [T] Fe(s) + 3/2 Cl2(g) -> FeCl3(s)
""")
    with pytest.raises(rh.OutOfReach) as caught:
        rh.combine(sheet.targets["T"], sheet.known)
    assert "FeCl3(s)" in str(caught.value)
    assert any("FeCl2(s) + 1/2 Cl2(g) -> FeCl3(s)" in str(missing) for missing in caught.value.missing)


def test_nitrobenzene_on_three_bases() -> None:
    """-552.9 kJ/mol as written = -184.3 per mol H2 = -4491 kJ/kg nitrobenzene (M 123.111 g/mol), by arithmetic."""
    bases = {"kJ/mol": "-552.9 kJ/mol", "H2": "-184.3 kJ/mol of H2(g)", "kg": "-4491 kJ/kg of C6H5NO2(l)"}
    sheet = rh.read_sheet(
        "known\n"
        + "\n".join(
            f"  [{label.replace('/', '')}] C6H5NO2(l) + 3 H2(g) -> C6H5NH2(l) + 2 H2O(l) | dH {heat}"
            for label, heat in bases.items()
        )
    )
    values = [float(row.datum.value) for row in sheet.known.values() if row.datum is not None]
    assert values == pytest.approx([-552.9, -552.9, -552.9], abs=0.05)


@pytest.mark.parametrize(("typed", "u"), [("k = 1", 8.0), ("k = 2", 4.0), ("95 %", 4.08)])
def test_what_plus_minus_means(typed: str, u: float) -> None:
    """JCGM 100:2008, 6.2.1 and table G.1: expanded uncertainty over coverage factor; 95 % is k = 1.960."""
    row = rh.row("K1", "N2(g) + 3 H2(g) -> 2 NH3(g)", f"-92 ± 8 kJ/mol ({typed})")
    assert row.datum is not None
    assert float(row.datum.u or 0) == pytest.approx(u, abs=0.005)


def test_weighted_mean_of_two_measurements() -> None:
    """JCGM 100:2008 eq. 10 and Bevington: -148 ± 3 and -155 ± 4 give -150.52, u 2.4, chi-squared 1.96 on 1 dof."""
    one, two = (
        rh.row(label, "N2(g) + 3 H2(g) -> 2 NH3(g)", f"{heat} kJ/mol (k = 1)").heat_sum()
        for label, heat in (("K1", "-148 ± 3"), ("K2", "-155 ± 4"))
    )
    assert one is not None
    assert two is not None
    mean = one.scaled(Fraction(16, 25)) + two.scaled(Fraction(9, 25))
    gap = one - two
    assert mean.value == pytest.approx(-150.52, abs=0.01)
    assert mean.u == pytest.approx(2.4, abs=0.01)
    assert (gap.value / gap.u) ** 2 == pytest.approx(1.96, abs=0.01)
