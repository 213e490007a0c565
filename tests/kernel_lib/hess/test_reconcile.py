"""Reconciliation against a direct numpy solution, against sampling, at its limits, and in words."""

from __future__ import annotations

import json
import math
import random
from fractions import Fraction
from typing import Any

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

import routeheat as rh
from routeheat.chem.heat import HeatSum
from routeheat.chem.measured import Measured, Spread
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Heat, Row, Rows
from routeheat.chem.species import Species
from routeheat.errors import RouteheatError, UnknownName
from routeheat.hess.chi_square import upper_tail
from routeheat.hess.reconcile import Reconciled, reconcile
from routeheat.units import KJ_PER_MOL

LETTERS = [Species(letter, "l") for letter in "ABCDEFGHIJ"]


def made(label: str, net: dict[Species, int], heat: Fraction, u: Fraction | None, **settings: str) -> Row:
    spread = None if u is None else Spread(u, Fraction(1))
    reaction = Reaction.from_net({species: Fraction(number) for species, number in net.items()})
    return Row(label, reaction, Heat(Measured(heat, KJ_PER_MOL, spread, 3)), settings=tuple(settings.items()))


def loop(heats: tuple[float, float, float], us: tuple[float | None, ...] = (2, 2, 1), **third: str) -> Rows:
    a, b, c = LETTERS[:3]
    nets: list[dict[Species, int]] = [{a: -1, b: 1}, {b: -1, c: 1}, {a: -1, c: 1}]
    return Rows(
        (
            made(f"K{index}", net, Fraction(str(heat)), None if u is None else Fraction(str(u)),
                 **(third if index == 3 else {}))
            for index, (net, heat, u) in enumerate(zip(nets, heats, us, strict=True), 1)
        ),
        k=1.0,
    )  # fmt: skip


def network(seed: int, size: int, *, decades: float = 1.0, shared: bool = False, noise: float = 1.0) -> Rows:
    """A random network whose true heats close every cycle."""
    chance = random.Random(seed)
    true = {species: chance.uniform(-500, 500) for species in LETTERS}
    rows = []
    for index in range(size):
        taking_part = chance.sample(LETTERS[: max(4, size // 2)], chance.choice([2, 2, 3, 3, 4]))
        net = {species: chance.choice([-2, -1, 1, 2]) for species in taking_part}
        u = Fraction(f"{10 ** chance.uniform(-decades, 0):.9f}")
        heat = sum(number * true[species] for species, number in net.items()) + chance.gauss(0, noise * float(u))
        typed = {"shared": '"calorimeter A" 0.5 % (k = 1)'} if shared and chance.random() < 0.5 else {}
        rows.append(made(f"K{index}", net, Fraction(f"{heat:.6f}"), u, **typed))
    return Rows(rows, k=1.0)


def direct(rows: Rows) -> tuple[Any, Any, float, int]:
    """Adjusted heats and covariance by weighted least squares over enthalpies of the species; chi-square; dof."""
    species = list(dict.fromkeys(item for row in rows.values() for item in row.reaction.net))
    matrix = np.array([[float(row.reaction.net.get(item, 0)) for item in species] for row in rows.values()])
    data = [row.datum for row in rows.values()]
    x0 = np.array([float(datum.value) for datum in data if datum is not None])
    covariance = np.diag([float(datum.u or 0) ** 2 for datum in data if datum is not None])
    common = np.array([0.005 * x if row.setting("shared") else 0.0 for x, row in zip(x0, rows.values(), strict=True)])
    covariance += np.outer(common, common)
    whiten = np.linalg.inv(np.linalg.cholesky(covariance))
    inverse = np.linalg.pinv(whiten @ matrix, rcond=1e-10)
    adjusted = matrix @ inverse @ whiten @ x0
    after = matrix @ inverse @ inverse.T @ matrix.T
    gap = whiten @ (x0 - adjusted)
    return adjusted, after, float(gap @ gap), len(x0) - int(np.linalg.matrix_rank(matrix))


def numbers(found: Reconciled) -> tuple[Any, Any]:
    return (
        np.array([found.fitted[label].value for label in found.labels]),
        np.array([found.fitted[label].u for label in found.labels]),
    )


@given(st.integers(0, 10**6), st.integers(2, 14), st.booleans())
@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.too_slow])
def test_it_is_generalised_least_squares(seed: int, size: int, shared: bool) -> None:
    rows = network(seed, size, shared=shared)
    found = reconcile(rows, accept="a random network may contradict itself")
    adjusted, after, chi2, dof = direct(rows)
    values, us = numbers(found)
    assert found.dof == dof
    assert found.chi2 == pytest.approx(chi2, rel=1e-6, abs=1e-6)
    assert values == pytest.approx(adjusted, abs=1e-6)
    assert us == pytest.approx(np.sqrt(np.diag(after)), rel=1e-6)
    assert found.covariance == pytest.approx(after, abs=1e-7)


@given(st.integers(0, 10**6), st.integers(2, 14), st.sampled_from([1.0, 3.0, 6.0, 8.0]))
@settings(max_examples=60, deadline=None)
def test_covariance_is_symmetric_positive_and_never_larger(seed: int, size: int, decades: float) -> None:
    rows = network(seed, size, decades=decades, shared=seed % 2 == 0)
    found = reconcile(rows, accept="covariance only")
    covariance = found.covariance
    assert covariance is not None
    assert np.array_equal(covariance, covariance.T)
    before = np.diag([0.0] * len(rows)).astype(float)
    for i, one in enumerate(found.labels):
        for j, other in enumerate(found.labels):
            before[i, j] = float(found.network.heats[one].covariance(found.network.heats[other]))
    tolerance = 1e-10 * float(before.max())
    assert np.linalg.eigvalsh(covariance).min() >= -tolerance
    assert np.linalg.eigvalsh(before - covariance).min() >= -tolerance


@given(st.integers(0, 10**6), st.integers(3, 14))
@settings(max_examples=40, deadline=None)
def test_adjusted_heats_close_every_cycle_exactly(seed: int, size: int) -> None:
    found = reconcile(network(seed, size, decades=3), accept="cycles only")
    for cycle in found.cycles:
        total = along(found, cycle.coefficients)
        assert total.exact == 0
        assert total.terms == ()


def along(found: Reconciled, coefficients: dict[str, int]) -> HeatSum:
    return HeatSum.total((Fraction(number), found.fitted[label]) for label, number in coefficients.items())


@given(st.integers(0, 10**6), st.integers(3, 12), st.randoms())
@settings(max_examples=30, deadline=None)
def test_the_order_of_rows_does_not_matter(seed: int, size: int, chance: random.Random) -> None:
    rows = network(seed, size)
    mixed = list(rows.values())
    chance.shuffle(mixed)
    one, other = reconcile(rows, accept="order"), reconcile(Rows(mixed, 1.0), accept="order")
    assert one.chi2 == pytest.approx(other.chi2, rel=1e-9, abs=1e-9)
    for label in one.labels:
        assert one.fitted.value(label) == pytest.approx(other.fitted.value(label), abs=1e-9)


def test_it_is_what_sampling_gives() -> None:
    """20,000 sets of heats drawn from their uncertainties, with one calibration shared, each adjusted on its own."""
    rows = network(5, 10, shared=True)
    found = reconcile(rows, accept="sampling")
    chance = np.random.default_rng(1)
    labels = list(found.labels)
    weights = found.fitted
    own = np.array([float(rows[label].datum.u) for label in labels])  # type: ignore[union-attr,arg-type]
    shared = np.array(
        [
            float(dict(found.network.heats[label].terms[1:]).popitem()[1])
            if len(found.network.heats[label].terms) > 1
            else 0.0
            for label in labels
        ]
    )
    errors = chance.normal(size=(20_000, len(labels))) * own + chance.normal(size=(20_000, 1)) * shared
    columns = {label: index for index, label in enumerate(labels)}
    matrix = np.zeros((len(labels), len(labels)))
    for line, label in enumerate(labels):
        for datum, c in weights[label].terms:
            if datum.what == "heat":
                matrix[line, columns[datum.label]] = float(c)
    sampled = np.cov((errors @ matrix.T).T)
    assert found.covariance is not None
    scale = np.sqrt(np.outer(np.diag(found.covariance), np.diag(found.covariance)))
    assert np.abs(sampled - found.covariance).max() / scale.max() < 0.03


def test_uncertainties_a_million_times_apart_stay_sound() -> None:
    """A precise way A to C over B, and wide direct measurements, which must end up as certain as the precise ones."""
    a, b, c = LETTERS[:3]
    tiny, huge = Fraction(1, 10**6), Fraction(10**3)
    rows = Rows([
        made("P1", {a: -1, b: 1}, Fraction("-50"), tiny),
        made("P2", {b: -1, c: 1}, Fraction("-30"), tiny),
        made("W1", {a: -1, c: 1}, Fraction("-500"), huge),
        made("W2", {a: -1, c: 1}, Fraction("700"), huge),
        made("W3", {a: -2, c: 2}, Fraction("-160"), huge),
    ], 1.0)  # fmt: skip
    found = reconcile(rows)
    assert found.adjusted is not None
    for label, factor in (("W1", 1), ("W2", 1), ("W3", 2)):
        assert found.adjusted[label].value == pytest.approx(-80 * factor, abs=1e-6)
        assert found.adjusted[label].u == pytest.approx(factor * math.sqrt(2) * 1e-6, rel=1e-9)
    assert found.adjusted["P1"].u == pytest.approx(1e-6, rel=1e-9)
    assert found.covariance is not None
    assert found.covariance[2, 0] == pytest.approx(1e-12, rel=1e-6)


def test_wide_rows_that_share_a_wide_row_stay_sound() -> None:
    """Two cycles through one wide row: their difference is known a million times better than either."""
    a, b = LETTERS[:2]
    rows = Rows([
        made("W", {a: -1, b: 1}, Fraction(0), Fraction(10**4)),
        made("P1", {a: -1, b: 1}, Fraction("10.00"), Fraction("0.01")),
        made("P2", {a: -1, b: 1}, Fraction("10.02"), Fraction("0.01")),
    ], 1.0)  # fmt: skip
    found = reconcile(rows)
    assert found.chi2 == pytest.approx(2 + 1e-6, rel=1e-6)
    assert found.adjusted is not None
    assert found.adjusted["W"].value == pytest.approx(10.01, abs=1e-9)
    assert found.adjusted["W"].u == pytest.approx(0.01 / math.sqrt(2), rel=1e-9)


def test_exact_rows_are_never_adjusted() -> None:
    found = reconcile(loop((-50, -30, -83), (2, 2, 0)))
    assert found.adjusted is not None
    assert (found.adjusted["K3"].value, found.adjusted["K3"].u) == (-83, 0)
    assert found.adjusted["K1"].value + found.adjusted["K2"].value == pytest.approx(-83)
    assert found.adjusted["K1"].u == pytest.approx(math.sqrt(2))
    assert found.residuals["K3"] is None


def test_exact_rows_that_contradict_each_other_are_never_accepted() -> None:
    found = reconcile(loop((-50, -30, -83), (0, 0, 0)), accept="they are conventions")
    assert found.p == 0
    assert found.adjusted is None
    assert "without any uncertainty contradict" in found.verdict
    assert not found.cycles[0].closes


def test_exact_rows_that_agree_are_no_degree_of_freedom() -> None:
    found = reconcile(loop((-50, -30, -80), (0, 0, 0)))
    assert (found.dof, found.p, found.birge) == (0, None, None)
    assert found.adjusted is not None


def test_rank_deficiency_of_repeated_rows() -> None:
    """The same reaction three times is a weighted mean (JCGM 100:2008, H.5.2.3 in principle)."""
    a, b = LETTERS[:2]
    heats = ((1, 10), (2, 11), (3, 15))
    rows = Rows([made(f"K{i}", {a: -i, b: i}, Fraction(i * heat), Fraction(i)) for i, heat in heats], 1.0)
    found = reconcile(rows)
    assert found.dof == 2
    assert [found.fitted[f"K{i}"].value for i in (1, 2, 3)] == pytest.approx([12, 24, 36])
    assert found.fitted["K1"].u == pytest.approx(1 / math.sqrt(3))


def test_a_shared_calibration_cancels_where_both_ways_have_it() -> None:
    """Both rows carry the same 10 % error; the cycle only sees their own."""
    a, b = LETTERS[:2]
    calibrated = {"shared": '"calorimeter A" 10 % (k = 1)'}
    rows = Rows(
        [made(f"K{i}", {a: -1, b: 1}, Fraction(heat), Fraction(1), **calibrated) for i, heat in ((1, 100), (2, 100))],
        1.0,
    )
    found = reconcile(rows)
    assert found.adjusted is not None
    assert found.cycles[0].u == pytest.approx(math.sqrt(2))
    assert found.adjusted["K1"].u == pytest.approx(math.hypot(10, math.sqrt(0.5)))
    assert any("calorimeter A: its error is shared by K1, K2" in note for note in found.table().notes)


def test_a_shared_percentage_takes_the_coverage_factor_of_the_sheet() -> None:
    rows = Rows(loop((-50, -30, -80), shared='"calorimeter A" 2 %').values(), k=2.0)
    assert float(reconcile(rows).network.heats["K3"].terms[1][1]) == pytest.approx(-0.8)
    typed = Rows(loop((-50, -30, -80), shared='"A" 2 % (k = 1), "B" 1 % (95 %)').values(), k=2.0)
    terms = {datum.label: float(c) for datum, c in reconcile(typed).network.heats["K3"].terms}
    assert terms == pytest.approx({"K3": 1, "A": -1.6, "B": -0.8 / 1.96})


def test_a_row_outside_every_cycle_moves_with_the_calibration_it_shares() -> None:
    """The cycle shows that the calorimeter reads too high; the lonely row was measured with it too."""
    a, b, c = LETTERS[:3]
    calibrated = {"shared": '"calorimeter A" 10 % (k = 1)'}
    rows = Rows([
        made("S", {a: -1, b: 1}, Fraction(110), Fraction("0.001"), **calibrated),
        made("R", {a: -1, b: 1}, Fraction(100), Fraction("0.001")),
        made("L", {b: -1, c: 1}, Fraction(55), Fraction("0.001"), **calibrated),
    ], 1.0)  # fmt: skip
    found = reconcile(rows)
    assert found.adjusted is not None
    assert found.adjusted["L"].value == pytest.approx(50, abs=0.01)


def test_rows_that_have_only_a_shared_error_and_disagree_contradict() -> None:
    a, b = LETTERS[:2]
    calibrated = {"shared": '"calorimeter A" 1 % (k = 1)'}
    rows = Rows(
        [made(f"K{i}", {a: -1, b: 1}, Fraction(heat), Fraction(0), **calibrated) for i, heat in ((1, 100), (2, 101))],
        1.0,
    )
    assert reconcile(rows).contradicts
    same = Rows([made(f"K{i}", {a: -1, b: 1}, Fraction(100), Fraction(0), **calibrated) for i in (1, 2)], 1.0)
    found = reconcile(same)
    assert (found.dof, found.p) == (0, None)
    assert found.fitted["K1"].u == pytest.approx(1)


def test_not_stated_takes_part_only_as_a_class() -> None:
    rows = loop((-50, -30, -83), (2, 2, None))
    left_out = reconcile(rows)
    assert left_out.dof == 0
    assert left_out.adjusted is not None
    assert "K3" not in left_out.adjusted
    assert "uncertainty is not stated" in left_out.network.left_out["K3"]
    assert left_out.rows()["K3"] == rows["K3"]
    classed = reconcile(rows, unstated=1)
    assert classed.chi2 == pytest.approx(1)
    assert "rows that state no uncertainty take part with u = 1 kJ/mol" in classed.table().notes


def test_a_contradiction_needs_a_decision_and_every_report_names_it() -> None:
    rows = loop((-50, -30, -95))
    undecided = reconcile(rows)
    assert undecided.covariance is None
    with pytest.raises(RouteheatError, match="no adjusted value until"):
        undecided.rows()
    accepted = reconcile(rows, accept="K3 was checked twice")
    assert accepted.adjusted is not None
    assert accepted.adjusted["K3"].value == pytest.approx(-95 + 15 / 9)
    assert "accepted: K3 was checked twice" in accepted.verdict
    assert "accepted: K3 was checked twice" in accepted.text
    with pytest.raises(RouteheatError, match="with a reason only"):
        reconcile(rows, accept=" ")


def test_an_acceptance_that_is_not_needed_is_said() -> None:
    notes = reconcile(loop((-50, -30, -83)), accept="to be sure").table().notes
    assert "nothing contradicts, so this is not needed: the contradiction is accepted: to be sure" in notes


def test_excluding_and_widening_are_decisions_too() -> None:
    rows = loop((-50, -30, -95))
    without = reconcile(rows, exclude={"K3": "wrong solvent"})
    assert without.p is None
    assert list(without.rows()) == ["K1", "K2"]
    assert "K3 is excluded: wrong solvent" in without.text
    wider = reconcile(rows, widen={"K3": 10})
    assert wider.chi2 == pytest.approx(225 / 108)
    assert "the own uncertainty of K3 is multiplied by 10, no reason given" in wider.text
    with pytest.raises(UnknownName, match="K9"):
        reconcile(rows, exclude={"K9": ""})
    with pytest.raises(RouteheatError, match="must be positive"):
        reconcile(rows, widen={"K3": 0})


@pytest.mark.parametrize(
    ("key", "typed", "said"),
    [
        ("accept", "checked twice", "the contradiction is accepted (typed at K3): checked twice"),
        ("exclude", "wrong solvent", "K3 is excluded: wrong solvent"),
        ("widen", '10 "leaky cell"', "the own uncertainty of K3 is multiplied by 10: leaky cell"),
    ],
)
def test_decisions_may_stand_in_the_sheet(key: str, typed: str, said: str) -> None:
    found = reconcile(loop((-50, -30, -95), **{key: typed}))
    assert found.adjusted is not None
    assert said in found.text


@pytest.mark.parametrize("typed", ['"calorimeter A" 2 kJ', "calorimeter A 2 %", '"A" 2 % (97 %)', '"A" 2 % "B"'])
def test_a_shared_error_that_is_not_read_leaves_its_row_out(typed: str) -> None:
    found = reconcile(loop((-50, -30, -83), shared=typed))
    assert "is not read" in found.network.left_out["K3"]


def test_cycles_come_smallest_first_as_a_chemist_reads_them() -> None:
    a, b, c, d = LETTERS[:4]
    rows = Rows([
        made("K1", {a: -1, b: 1}, Fraction(10), Fraction(1)),
        made("K2", {b: -1, c: 1}, Fraction(20), Fraction(1)),
        made("K3", {c: -2, d: 2}, Fraction(60), Fraction(2)),
        made("K4", {a: -1, d: 1}, Fraction(60), Fraction(1)),
        made("K5", {a: -1, b: 1}, Fraction(24), Fraction(3)),
    ], 1.0)  # fmt: skip
    found = reconcile(rows)
    assert [cycle.text for cycle in found.cycles] == [
        "K1 − K5 should be 0, is −14.0 ± 3.2 (k = 1)",
        "2 K1 + 2 K2 + K3 − 2 K4 should be 0, is 0.0 ± 4.0 (k = 1)",
    ]
    assert [cycle.closes for cycle in found.cycles] == [False, True]


def test_suspects_are_ranked_by_what_leaving_them_out_does() -> None:
    a, b, c = LETTERS[:3]
    rows = Rows([
        made("K1", {a: -1, b: 1}, Fraction(10), Fraction(1)),
        made("K2", {b: -1, c: 1}, Fraction(20), Fraction(1)),
        made("K3", {a: -1, c: 1}, Fraction(30), Fraction(1)),
        made("BAD", {a: -1, c: 1}, Fraction(45), Fraction(1)),
        made("K5", {a: -1, b: 1}, Fraction("10.5"), Fraction(1)),
    ], 1.0)  # fmt: skip
    found = reconcile(rows)
    assert found.suspects[0].label == "BAD"
    for suspect in found.suspects:
        rest = Rows([row for row in rows.values() if row.label != suspect.label], 1.0)
        alone = reconcile(rest, accept="compare")
        assert (suspect.chi2, suspect.dof) == (pytest.approx(alone.chi2), alone.dof)
        assert suspect.p == pytest.approx(alone.p)
    others = reconcile(Rows([row for row in rows.values() if row.label != "BAD"], 1.0))
    said = others.heat(rows["BAD"].reaction)
    assert found.suspects[0].gap == pytest.approx(45 - said.value)
    assert found.suspects[0].gap_u == pytest.approx(math.hypot(1, said.u))


def test_the_rows_of_one_cycle_cannot_be_told_apart() -> None:
    assert "the heats cannot tell these apart: K1, K2, K3" in reconcile(loop((-50, -30, -95))).text


def test_an_adjusted_heat_knows_what_it_shares() -> None:
    found = reconcile(loop((-50, -30, -83)))
    assert found.adjusted is not None
    sums = found.adjusted
    assert float(sums["K1"].covariance(sums["K2"])) == pytest.approx(-16 / 9)
    assert found.heat(loop((0, 0, 0))["K3"].reaction) == sums["K3"]
    assert [part.datum.label for part in sums["K3"].contributions] == ["K3", "K1", "K2"]
    rows = found.rows()
    assert rows["K1"].heat_sum(1.0) == sums["K1"]
    assert rows["K1"].datum == loop((-50, -30, -83))["K1"].datum


def test_symbols_mixtures_and_rows_without_a_heat_are_left_out_with_a_reason() -> None:
    sheet = rh.read_sheet("""
known
  [K1] formation of H2O(l)  | dH x
  [K3] formation of NH3(g)
  [K4] formation of HCl(g)  | dH -92.31(10) kJ/mol
""")
    dissolved = made("K2", {LETTERS[0]: -1, Species("A", "sln"): 1}, Fraction(-70), Fraction(1))
    found = reconcile(Rows([*sheet.known.values(), dissolved]))
    assert found.labels == ("K4",)
    assert {label: reason.split(":")[0] for label, reason in found.network.left_out.items()} == {
        "K1": "its heat is the unknown x", "K2": "A(sln) is in the reaction mixture", "K3": "no heat typed",
    }  # fmt: skip
    assert "no cycle checks it" in found.text


def test_rows_of_a_cycle_at_different_temperatures_are_named() -> None:
    sheet = rh.read_sheet("""
known
  [K1] formation of H2O(l)    | dH -285.83(4) kJ/mol
  [K2] vaporisation of H2O(l) | dH 40.65(5) kJ/mol at 373.15 K
  [K3] formation of H2O(g)    | dH -241.83(4) kJ/mol
""")
    notes = reconcile(sheet.known, accept="different temperatures").table().notes
    assert any("K2 373.15 K" in note and "would change the sum by" in note for note in notes)


def test_results_are_plain_data() -> None:
    for rows in (loop((-50, -30, -83)), loop((-50, -30, -95)), loop((-50, -30, -83), (0, 0, 0))):
        plain = json.loads(json.dumps(reconcile(rows).to_dict(), allow_nan=False))
        assert len(plain["rows"]) == 3


def test_the_upper_tail_of_chi_square() -> None:
    """M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions, table 26.8 (from memory), to five digits."""
    for chi2, dof, p in (
        (3.84146, 1, 0.05),
        (6.63490, 1, 0.01),
        (9.21034, 2, 0.01),
        (11.0705, 5, 0.05),
        (29.5883, 10, 0.001),
        (124.342, 100, 0.05),
        (67.3276, 100, 0.995),
    ):
        assert upper_tail(chi2, dof) == pytest.approx(p, rel=2e-5)
    assert upper_tail(0, 3) == 1
    assert upper_tail(math.inf, 3) == 0
    with pytest.raises(ValueError, match="no probability"):
        upper_tail(1, 0)


@pytest.mark.parametrize(
    ("chi2", "dof", "p"),
    [(1000.0, 3, 1.799e-216), (25.0, 1, 5.733e-7), (0.001, 7, 1.0), (2100.0, 2000, 0.0587), (1500.0, 2000, 1.0)],
)
def test_extreme_probabilities_keep_their_digits(chi2: float, dof: int, p: float) -> None:
    """scipy.stats.chi2.sf of scipy 1.17.1."""
    assert upper_tail(chi2, dof) == pytest.approx(p, rel=1e-3)
