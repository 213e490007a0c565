"""What cannot be run as typed is refused, with the place and the repair."""

from __future__ import annotations

from dataclasses import replace
from types import SimpleNamespace

import pytest

from routeheat.chem.route import Route
from routeheat.errors import RouteError
from routeheat.process.extents import extents, route_faults
from routeheat.process.linking import read_links


def messages(route: Route) -> str:
    return "\n".join(str(fault) for fault in route_faults(route))


def test_the_main_product_is_the_only_one_used_later(amide_routes: dict[str, Route]) -> None:
    links = read_links(amide_routes["1"])
    assert {label: made.text for label, made in links.product.items()} == {
        "X1": "ACI(s)",
        "X2": "ACL(l)",
        "Y1": "AMI(s)",
        "C": "AMD(sln)",
        "F": "AMD(s)",
    }


def test_limiting_defaults(amide_routes: dict[str, Route]) -> None:
    links = read_links(amide_routes["1"])
    assert links.limiting["X1"].text == "EST(l)"  # nothing comes in: the first typed reactant
    assert links.limiting["X2"].text == "ACI(s)"  # the incoming intermediate
    assert links.limiting["C"].text == "AMI(s)"  # as typed


def test_the_incoming_intermediate_is_limiting_wherever_it_stands(code: SimpleNamespace) -> None:
    made = code.route("R", "C", code.step("S1", "A -> B"), code.step("S2", "K + B -> C"))
    assert read_links(made).limiting["S2"].text == "B"


def test_no_steps(code: SimpleNamespace) -> None:
    assert messages(code.route("R", "P")) == "route R has no steps"


def test_a_label_twice(code: SimpleNamespace) -> None:
    made = code.route("R", "C", code.step("S", "A -> B"), code.step("S", "B -> C"))
    assert "step S stands twice in route R" in messages(made)


def test_several_candidates_are_listed(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A -> B + K"), code.step("S2", "B + K -> P"))
    assert messages(made).startswith("S1: which is the main product: B or K? (type product B)")


def test_a_typed_product_settles_it(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A -> B + K", product="B"), code.step("S2", "B + K -> P"))
    assert route_faults(made) == ()


def test_a_species_taken_by_recycle_is_no_candidate(code: SimpleNamespace) -> None:
    made = code.route(
        "R", "P", code.step("S1", "A -> B + K"), code.step("S2", "B + K -> P", recycle=[("K", "S1", "50 %")])
    )
    assert route_faults(made) == ()


@pytest.mark.parametrize("product", ["A", "Z"])
def test_a_typed_product_that_is_not_made(code: SimpleNamespace, product: str) -> None:
    made = code.route("R", "P", code.step("S1", "A -> P", product=product))
    assert f"{product} is typed as product but its net coefficient is not positive" in messages(made)


def test_a_product_that_cancels_is_not_made(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A + K -> P + K", product="K"))
    assert "K is typed as product but its net coefficient is not positive" in messages(made)


def test_made_and_never_used(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A -> B"), code.step("S2", "A -> P"))
    assert messages(made).startswith("S1: B is made and never used")


def test_a_phase_that_jumps_to_a_later_step(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("C", "A -> B(sln)"), code.step("F", "B(s) -> P"))
    assert messages(made) == (
        "C: a phase that jumps between steps: B(sln) made by C, B(s) used by F (add a row for B(sln) -> B(s))"
    )


def test_a_phase_that_jumps_though_the_made_one_is_used_too(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A -> B(s)"), code.step("S2", "B(s) + B(sln) -> P"))
    assert "B(s) made by S1, B(sln) used by S2" in messages(made)


def test_a_phase_that_jumps_to_what_the_route_makes(code: SimpleNamespace) -> None:
    made = code.route("R", "P(s)", code.step("S1", "A -> P(l)"))
    assert "P(l) made by S1, P(s) is what the route makes" in messages(made)


def test_a_declared_species_and_its_bare_formula_are_one_substance(code: SimpleNamespace) -> None:
    d = {"NB": "C6H5NO2"}
    made = code.route("R", "P", code.step("S1", "A -> NB(l)", declared=d), code.step("S2", "C6H5NO2(s) -> P"))
    assert "NB(l) made by S1, C6H5NO2(s) used by S2" in messages(made)


def test_two_declared_isomers_are_not_one_substance(code: SimpleNamespace) -> None:
    d = {"ISO": "C3H8O", "NOR": "C3H8O"}
    made = code.route(
        "R", "P", code.step("S1", "A -> ISO(l)", declared=d), code.step("S2", "ISO(l) + NOR(s) -> P", declared=d)
    )
    assert route_faults(made) == ()


def test_used_before_it_is_made(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A + B -> D"), code.step("S2", "K -> B"), code.step("S3", "D -> P"))
    assert "S1: B is used before it is made (by S2)" in messages(made)


def test_used_before_and_after_it_is_made(code: SimpleNamespace) -> None:
    made = code.route(
        "R", "P", code.step("S1", "A + B -> D"), code.step("S2", "K -> B"), code.step("S3", "D + B -> P", limiting="D")
    )
    assert messages(made).startswith("S1: B is used before it is made (by S2)")


def test_two_makers_of_one_main_product(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A -> B"), code.step("S2", "K -> B"), code.step("S3", "B -> P"))
    assert "S2: B is already made by S1" in messages(made)


def test_a_route_that_does_not_make_its_product(code: SimpleNamespace) -> None:
    made = code.route("R", "Q", code.step("S1", "A -> B"), code.step("S2", "B -> P"))
    assert "route R does not make Q" in messages(made)


def test_two_incoming_intermediates_need_a_limiting_one(amide_routes: dict[str, Route]) -> None:
    route = amide_routes["1"]
    steps = tuple(replace(step, limiting=None) if step.label == "C" else step for step in route.steps)
    assert "C: 2 intermediates come in, ACL(l) and AMI(s): which one is limiting?" in messages(
        replace(route, steps=steps)
    )


@pytest.mark.parametrize("typed", ["0 %", "101 %", "-5 %"])
def test_an_impossible_yield(code: SimpleNamespace, typed: str) -> None:
    assert "S1: a yield of" in messages(code.route("R", "P", code.step("S1", "A -> P", "", typed)))


@pytest.mark.parametrize(
    ("keys", "message"),
    [
        ({"limiting": "P"}, "S1: P is typed as limiting but is not used up"),
        ({"limiting": "Z"}, "S1: Z is typed as limiting but is not used up"),
        ({"equiv": {"Z": "2"}}, "S1: equivalents are typed for Z, which is not charged"),
        ({"equiv": {"K": "0.9"}}, "S1: 9/10 equivalents of K are less than the reaction needs"),
        ({"equiv": {"A": "1.1"}}, "S1: A is limiting, so it has 1 equivalent"),
        ({"recycle": [("Z", "S1", "50 %")]}, "S1: recycle Z from S1: Z is not used by S1"),
        ({"recycle": [("K", "S9", "50 %")]}, "S1: recycle K from S9: S9 is no step of the route"),
        ({"recycle": [("K", "S1", "50 %")]}, "S1: nothing of K leaves S1: there is nothing to recycle"),
        ({"recycle": [("K", "S1", "120 %")], "equiv": {"K": "2"}}, "S1: recycle K from S1: a part of 120 % cannot be"),
        (
            {"recycle": [("K", "S1", "60 %"), ("K", "S1", "50 %")], "equiv": {"K": "2"}},
            "S1: 110 % of the K that leaves S1 are recycled",
        ),
    ],
)
def test_numbers_and_species_that_do_not_fit(code: SimpleNamespace, keys: dict[str, object], message: str) -> None:
    made = code.route("R", "P", code.step("S1", "A + K -> P", **keys))
    assert message in messages(made)


def test_recycling_a_main_product(code: SimpleNamespace) -> None:
    made = code.route(
        "R", "P", code.step("S1", "A -> B"), code.step("S2", "B -> P", recycle=[("B", "S1", "50 %")], equiv={})
    )
    assert "made and never used" in messages(made)
    typed = code.route(
        "R",
        "P",
        code.step("S1", "A -> B"),
        code.step("S2", "B -> D"),
        code.step("S3", "D + B -> P", limiting="D", recycle=[("B", "S1", "50 %")]),
    )
    assert "recycle B from S1: it is the main product of S1" in messages(typed)


def test_a_recycle_in_another_phase_is_asked_for(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A + K(l) -> P + K(g)", recycle=[("K(l)", "S1", "50 %")]))
    assert "nothing of K(l) leaves S1: there is nothing to recycle (did you mean K(g)?)" in messages(made)


@pytest.mark.parametrize(
    ("keys", "message"),
    [
        ({"side": "S9", "amount": "1"}, "Q: it is a side row of S9, which is no step of the route"),
        ({"side": "S1"}, "Q: a side row needs an amount"),
        ({"side": "S1", "amount": "-1"}, "Q: the amount of a side row cannot be negative"),
        ({"side": "S1", "amount": "1", "recycle": [("K", "S1", "50 %")]}, "Q: a side row takes no recycle"),
    ],
)
def test_side_rows(code: SimpleNamespace, keys: dict[str, str], message: str) -> None:
    made = code.route("R", "P", code.step("S1", "A -> P"), code.step("Q", "K -> N", **keys))
    assert message in messages(made)


def test_all_faults_at_once(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A -> B", "", "0 %"), code.step("S2", "B -> P", "", "200 %"))
    assert len(route_faults(made)) == 2
    with pytest.raises(RouteError, match=r"route R has 2 faults: S1: .*; S2: "):
        extents(made)


def test_a_single_fault_keeps_its_place(code: SimpleNamespace) -> None:
    with pytest.raises(RouteError) as caught:
        extents(code.route("R", "P", code.step("S1", "A -> P", "", "0 %")))
    assert (caught.value.route, caught.value.step, caught.value.hint) == ("R", "S1", "more than 0 and at most 100 %")


def test_a_loop_that_returns_everything(code: SimpleNamespace) -> None:
    loop = code.route(
        "R",
        "P",
        code.step("S1", "A -> B"),
        code.step("S2", "2 B + K -> P + M", recycle=[("B", "S3", "100 %")], product="M"),
        code.step("S3", "M -> P + 2 B", product="P"),
    )
    assert "the recycle returns everything that is needed, so the step would run 0 times" in messages(loop)


def test_a_recycle_larger_than_the_need(code: SimpleNamespace) -> None:
    made = code.route(
        "R", "P", code.step("S1", "K + A -> B", recycle=[("K", "S2", "100 %")]), code.step("S2", "B -> P + 2 K")
    )
    assert "S1: the recycle returns more K than the step uses" in messages(made)


def test_a_circle_that_never_delivers(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A + D -> B", recycle=[("D", "S3", "10 %")]),
        code.step("S2", "B -> D"),
        code.step("S3", "D + K -> P", limiting="K", equiv={"D": "2"}),
    )
    assert messages(made).startswith("route R never delivers P: the recycle returns everything that is made")
