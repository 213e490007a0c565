"""Known heats of every kind, typed as in a sheet, against published and independently computed values."""

from __future__ import annotations

import pytest

import routeheat as rh


def value(rows: str, target: str) -> float:
    """Heat of the target from the typed rows, kJ/mol."""
    sheet = rh.read_sheet(f"uncertainty k = 2\nspecies\n  GLC  C6H12O6(s)\n  BA  C7H6O2(cr)\nknown\n{rows}\n")
    reaction = rh.read_reaction(target, species=sheet.species)
    return float(rh.combine(reaction, sheet.known).heat.exact)


def test_a_bomb_run_on_glucose() -> None:
    """OpenStax, Chemistry 2e (2019), sec. 5.2: 3.12 g of glucose, q = −48.8 kJ, tabulated ΔcH −2816 kJ/mol.

    −48.8 kJ · 180.156 g/mol / 3.12 g = −2818 kJ/mol; no mole of gas is gained or lost, so ΔcU = ΔcH."""
    run = "  [K1] combustion of GLC to CO2(g), H2O(l) | {} -48.8 kJ for 3.12 g of GLC"
    burning = "GLC(s) + 6 O2(g) -> 6 CO2(g) + 6 H2O(l)"
    assert value(run.format("dU"), burning) == pytest.approx(-2818, abs=0.5)
    assert value(run.format("Q"), burning) == value(run.format("dU"), burning)


def test_benzoic_acid_from_constant_volume_to_constant_pressure() -> None:
    """Δn(gas) = −1/2 at 298.15 K: Δn RT = −1.239 kJ/mol, ΔcU −3225.63 → ΔcH −3226.87 kJ/mol (NIST Chemistry WebBook,
    Mosselman and Dekker 1969); with CO2(g) −393.51 and H2O(l) −285.83 the formation is −385.19 kJ/mol there."""
    bomb = "  [K1] combustion of BA to CO2(g), H2O(l) | dU -3225.63 ± 0.18 kJ/mol\n"
    burning = "BA(cr) + 15/2 O2(g) -> 7 CO2(g) + 3 H2O(l)"
    assert value(bomb, burning) == pytest.approx(-3226.87, abs=0.002)
    assert value(bomb, burning) + 3225.63 == pytest.approx(-1.239, abs=0.002)
    formation = bomb + "  [K2] formation of CO2(g) | dH -393.51 kJ/mol\n  [K3] formation of H2O(l) | dH -285.83 kJ/mol"
    assert value(formation, "7 C(s, graphite) + 3 H2(g) + O2(g) -> BA(cr)") == pytest.approx(-385.19, abs=0.02)


def test_a_bomb_value_per_gram() -> None:
    """Certified under bomb conditions 26 434 J/g, corrected to standard states about 26 414 J/g: 2.4 kJ/mol that the
    typed row does not correct, and says so (E. W. Washburn, J. Res. NBS 10 (1933) 525; sizes from memory)."""
    sheet = rh.read_sheet("known\n  [K1] combustion of C7H6O2(s) to CO2(g), H2O(l) | dU -26434 J/g of C7H6O2(s)\n")
    row = sheet.known["K1"]
    heat = row.heat_sum()
    assert heat is not None
    assert float(heat.exact) == pytest.approx(-26.434 * 122.123 - 1.239, abs=0.05)
    assert "(Washburn) are not included" in row.remarks[0]


def test_calories_and_joules_in_one_sum() -> None:
    """OpenStax, Chemistry 2e (2019), sec. 5.3 exercise: CaC2(s) + 2 H2O(l) → Ca(OH)2(s) + C2H2(g), −122.8 kJ/mol.

    Kilocalories taken for kilojoules would give −171.0."""
    rows = (
        "  [K1] formation of CaC2(s) | dH -15.14 kcal/mol\n"
        "  [K2] formation of Ca(OH)2(s) | dH -985.2 kJ/mol\n"
        "  [K3] formation of C2H2(g) | dH 227.4 kJ/mol\n"
        "  [K4] formation of H2O(l) | dH -285.83 kJ/mol"
    )
    found = value(rows, "CaC2(s) + 2 H2O(l) -> Ca(OH)2(s) + C2H2(g)")
    assert found == pytest.approx(-122.8, abs=0.1)


IONS = (
    "  [K1] formation of Na+(aq) | dH -240.34 ± 0.06 kJ/mol\n"
    "  [K2] formation of OH-(aq) | dH -230.015 ± 0.040 kJ/mol\n"
    "  [K3] formation of NaOH(s) | dH -425.6 kJ/mol\n"
)


def test_solution_of_sodium_hydroxide_from_ions_on_the_scale_of_the_hydrogen_ion() -> None:
    """CODATA Key Values (Cox, Wagman, Medvedev 1989) for the ions, NBS Tables 1982 for NaOH(s) (from memory): −44.5
    kJ/mol, the accepted enthalpy of solution at infinite dilution."""
    assert value(IONS, "NaOH(s) -> Na^+(aq) + OH^-(aq)") == pytest.approx(-44.5, abs=0.3)


def test_the_same_solution_typed_as_a_row_closes_the_cycle() -> None:
    rows = IONS + "  [K4] solution of NaOH(s) to Na+(aq), OH-(aq) | dH -44.5 ± 0.3 kJ/mol"
    sheet = rh.read_sheet(f'unstated u = 0.3 kJ/mol "handbook"\nknown\n{rows}\n')
    found = rh.reconcile(sheet.known)
    (cycle,) = found.cycles
    assert set(cycle.coefficients) == {"K1", "K2", "K3", "K4"}
    assert float(cycle.misclosure.exact) == pytest.approx(0, abs=0.5)
    assert cycle.closes


def test_dilution_of_hydrochloric_acid() -> None:
    """Parker, NSRDS-NBS 2 (1965), as tabulated in the CRC Handbook: −ΔdilH 10.24 (10 mol/kg) and 1.695 kJ/mol
    (1 mol/kg) to infinite dilution; from one to the other −8.545 kJ/mol HCl."""
    rows = (
        "  [K1] dilution of HCl(aq, 10 mol/kg) to HCl(aq) | dH -10.24 kJ/mol\n"
        "  [K2] dilution of HCl(aq, 1 mol/kg) to HCl(aq) | dH -1.695 kJ/mol"
    )
    assert value(rows, "HCl(aq, 10 mol/kg) -> HCl(aq, 1 mol/kg)") == pytest.approx(-8.545, abs=0.01)


def test_integral_heats_of_solution_differ_by_a_dilution() -> None:
    """Felder and Rousseau, table B.11 (from memory): ΔsolH −69.49 kJ/mol in 10 water, −75.14 at infinite dilution;
    Parker 1965 has −5.841 for that dilution."""
    rows = (
        "  [K1] solution of HCl(g) in 10 H2O(l) | dH -69.49 kJ/mol\n"
        "  [K2] solution of HCl(g) in H2O(l) | dH -75.14 kJ/mol"
    )
    found = value(rows, "HCl(aq, 10 H2O) -> HCl(aq)")
    assert found == pytest.approx(-5.65, abs=0.02)
    assert found == pytest.approx(-5.841, abs=0.25)


def test_neutralisation_of_strong_acid_and_base_at_infinite_dilution() -> None:
    """CODATA Key Values 1989: H2O(l) −285.830, OH−(aq) −230.015 kJ/mol: −55.815."""
    rows = "  [K1] formation of OH-(aq) | dH -230.015 kJ/mol\n  [K2] formation of H2O(l) | dH -285.830 kJ/mol"
    typed = "known\n  [N] neutralisation of H+(aq) with OH-(aq) to H2O(l) | Q -2.791 kJ for 50 mmol of H+(aq)\n"
    found = value(rows, "H^+(aq) + OH^-(aq) -> H2O(l)")
    assert found == pytest.approx(-55.815, abs=0.001)
    cup = rh.read_sheet(typed).known["N"].heat_sum()
    assert cup is not None
    assert float(cup.exact) == pytest.approx(found, abs=0.01)
