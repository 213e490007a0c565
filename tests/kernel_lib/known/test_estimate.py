"""Formation enthalpies from groups: accepted where the method holds, wide, and marked as estimates."""

from __future__ import annotations

import math
from fractions import Fraction

import chemicals
import pytest
from chemicals.reaction import Hfg_sources
from thermo.group_contribution.joback import Joback

import routeheat as rh
from routeheat.known.estimate import FOUND, REFUSED, EstimateRefused, _libraries, estimate_formation


def test_an_estimate_is_the_sum_of_its_groups() -> None:
    """2 CH3 (−76.45), CH2 (−20.64), ketone (−133.22) and the constant 68.29 kJ/mol (Joback, Reid 1987, table; from
    memory)."""
    found = estimate_formation("CCC(C)=O")
    assert found.groups == (("-CH3", 2), ("-CH2-", 1), (">C=O (nonring)", 1))
    assert float(found.value) == pytest.approx(2 * -76.45 - 20.64 - 133.22 + 68.29, abs=0.06)
    assert (found.name, found.formula.text) == ("C4H8O", "C4H8O")


@pytest.mark.parametrize(
    ("smiles", "u", "why"),
    [
        ("CCC(C)=O", 15, "open chains and benzene rings"),
        ("Cc1ccccc1", 15, "open chains and benzene rings"),
        ("Cc1ccccc1[N+](=O)[O-]", 20, "a nitro group"),
        ("CCCCCCCCCCCCCCC", 20, "more than 14 atoms other than hydrogen"),
        ("OC1CCCCC1", 30, "a ring of five or six atoms that is no benzene ring"),
    ],
)
def test_the_uncertainty_is_the_one_found_for_such_structures(smiles: str, u: int, why: str) -> None:
    found = estimate_formation(smiles)
    assert (found.u, found.why_u) == (u, why)
    assert found.u >= 10


def test_it_is_pasted_into_a_sheet_and_stays_an_estimate() -> None:
    found = estimate_formation("CCC(C)=O", name="MEK")
    sheet = rh.read_sheet("uncertainty k = 1\n" + found.row("E1"))
    row = sheet.known["E1"]
    heat = row.heat_sum()
    assert row.reaction.text == "4 C(s, graphite) + 4 H2(g) + 1/2 O2(g) -> MEK(g)"
    assert heat is not None
    assert (heat.exact, heat.u, heat.estimated) == (found.value, 15.0, ("E1",))
    assert "Joback" in row.source
    assert rh.read_sheet(rh.write_sheet(sheet)) == sheet


def test_a_declared_species_is_not_declared_again() -> None:
    text = 'species\n  MEK  C4H8O  smiles "CCC(C)=O"\n\n'
    found = estimate_formation(rh.read_sheet(text + "known\n").species["MEK"])
    assert found.row().startswith("known\n  [estimate_MEK] formation of MEK(g)\n")
    assert "estimate_MEK" in rh.read_sheet(text + found.row()).known


def test_the_table_says_estimated() -> None:
    found = estimate_formation("CCC(C)=O", name="MEK")
    assert "MEK(g)" in found.text
    assert "(estimated)" in found.text
    assert found.to_dict()["estimated"] is True


@pytest.mark.parametrize(
    ("smiles", "reason"),
    [
        ("CC(=O)NC", "an amide, urea, carbamate or imide: known to be off by about 90 kJ/mol"),
        ("NC(=O)N", "an amide, urea"),
        ("CC1CC1", "a ring of three or four atoms: known to be off by about 80 kJ/mol"),
        ("CC1CCO1", "a ring of three or four atoms"),
        ("C1CCCCCC1", "a ring of more than six atoms"),
        ("c1ccc2ccccc2c1", "fused or bridged rings"),
        ("c1ccncc1", "an aromatic ring with nitrogen, oxygen or sulfur"),
        ("CCCN=[N+]=[N-]", "two nitrogen atoms side by side"),
        ("CC(C)OO", "two oxygen atoms side by side"),
        ("CCCO[N+](=O)[O-]", "nitrogen on oxygen, other than in a nitro group|a nitrate or nitrite"),
        ("CCC(F)(F)F", "two halogens on one carbon"),
        ("FC(C)C(F)C(F)CF", "more than three halogens"),
        ("CCC(=O)OC(=O)C", "an anhydride"),
        ("CCC(=O)Cl", "an acyl halide"),
        ("COCOC", "two of O, S and N on one saturated carbon"),
        ("O=C1C=CC(=O)C=C1", "a quinone"),
        ("CCCS(=O)C", "sulfur with a double bond"),
        ("CO", "fewer than three carbon atoms: look it up"),
        ("CCC[NH3+]", "a charge"),
        ("CC[CH2]", "an unpaired electron"),
        ("[2H]CCC", "an isotope"),
        ("CCC.CCC", "more than one molecule"),
        ("C[Si](C)(C)C", r"not every atom belongs to a group \(Did not match all atoms present\)"),
        ("C(C", "this is no SMILES of a structure"),
        ("", "this is no SMILES of a structure"),
        ("C" * 501, "a structure of more than 500 characters"),
    ],
)
def test_what_the_groups_do_not_describe_is_refused(smiles: str, reason: str) -> None:
    with pytest.raises(EstimateRefused, match=reason):
        estimate_formation(smiles)


def test_amides_pass_the_check_of_atoms_and_are_still_refused() -> None:
    """Every atom of acetamide belongs to a group, and the sum is 75 kJ/mol too high (−238.3 ± 0.8 kJ/mol, Pedley 1986,
    from memory): the status alone would let it through."""
    groups = Joback("CC(=O)N")
    assert groups.status == "OK"
    assert Joback.Hf(groups.counts) / 1000 - -238.3 > 70


@pytest.mark.parametrize(("phase", "word"), [("s", "solid"), ("l", "liquid"), ("aq", "in water")])
def test_only_the_gas_is_estimated(phase: str, word: str) -> None:
    with pytest.raises(EstimateRefused, match=rf"not the species as {word}"):
        estimate_formation("CCC(C)=O", phase=phase)


def test_a_declared_liquid_is_estimated_as_a_gas_when_that_is_asked_for() -> None:
    declared = rh.read_sheet('species\n  MEK  C4H8O(l)  smiles "CCC(C)=O"\n').species["MEK"]
    with pytest.raises(EstimateRefused, match='ask with phase="g"'):
        estimate_formation(declared)
    assert "formation of MEK(g)" in estimate_formation(declared, phase="g").row()


def test_a_structure_that_is_another_substance_is_refused() -> None:
    declared = rh.read_sheet('species\n  MEK  C4H8O  smiles "CCCC(C)=O"\n').species["MEK"]
    with pytest.raises(EstimateRefused, match="its SMILES is C5H10O, its formula is C4H8O"):
        estimate_formation(declared)
    with pytest.raises(EstimateRefused, match="its structure is not typed"):
        estimate_formation(rh.read_sheet("species\n  MEK  C4H8O\n").species["MEK"])


def test_a_name_that_no_sheet_can_hold_is_refused() -> None:
    with pytest.raises(EstimateRefused, match="a name cannot hold"):
        estimate_formation("CCC(C)=O", name="a + b")


def test_without_the_libraries_the_extra_is_named(monkeypatch: pytest.MonkeyPatch) -> None:
    def missing(name: str) -> object:
        raise ImportError(name)

    monkeypatch.setattr("routeheat.known.estimate.import_module", missing)
    with pytest.raises(rh.RouteheatError, match=r"pip install routeheat\[structures\]"):
        estimate_formation("CCC(C)=O")


def test_every_pattern_reads() -> None:
    chem, _ = _libraries()
    assert [reason for reason, pattern in REFUSED if chem.MolFromSmarts(pattern) is None] == []


def test_the_uncertainties_are_those_found_against_gas_data() -> None:
    """Root mean square differences from the CRC gas values of the chemicals library over all structures accepted.

    Left out: two entries of the library whose structure is not that of the value (dicarbon as acetylene; the sign of
    1,2-diiodoethene), which have fewer than three carbon atoms anyway.
    """
    differences: dict[str, list[float]] = {}
    for cas in Hfg_sources["CRC"].index:
        value = chemicals.Hfg(cas, method="CRC")
        try:
            smiles = chemicals.search_chemical(cas).smiles
            found = estimate_formation(smiles)
        except (ValueError, EstimateRefused):
            continue
        if value is not None:
            differences.setdefault(found.why_u, []).append(float(found.value) - value / 1000)
    size = {why: math.sqrt(math.fsum(d * d for d in all_of) / len(all_of)) for why, all_of in differences.items()}
    assert sum(len(all_of) for all_of in differences.values()) > 550
    assert set(size) == {why for why, _ in FOUND}
    for why, u in FOUND:
        assert 0.6 * u < size[why] < u, (why, size[why])


def test_the_value_is_an_exact_decimal() -> None:
    assert estimate_formation("CCC(C)=O").value == Fraction("-238.5")
