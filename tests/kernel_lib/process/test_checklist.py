"""Operations of a route: given, nil, open."""

from __future__ import annotations

import json
from dataclasses import replace
from types import SimpleNamespace

import pytest

from routeheat.chem.route import Route
from routeheat.errors import UnknownName
from routeheat.process.checklist import OPERATIONS, checklist, may_rank


def typed(route: Route, label: str, *settings: tuple[str, object]) -> Route:
    steps = tuple(
        replace(step, row=replace(step.row, settings=(*step.row.settings, *settings))) if step.label == label else step
        for step in route.steps
    )
    return replace(route, steps=steps)


def test_a_bare_route_is_incomplete(amine_routes: dict[str, Route]) -> None:
    found = checklist(amine_routes["A"])
    assert found.open == OPERATIONS
    assert not found.complete
    assert found.words.startswith("total incomplete, no ranking; open: quench, work-up")


def test_crystallisation_step_closes_its_item(amide_routes: dict[str, Route]) -> None:
    found = checklist(amide_routes["1"])
    assert "crystallisation" not in found.open
    assert {item.operation: item.rows for item in found.items}["crystallisation"] == ("F",)


def test_side_row_must_say_what_it_is(amide_routes: dict[str, Route]) -> None:
    found = checklist(amide_routes["1"])
    assert found.unstated == ("X2q",)
    assert "quench" in found.open
    said = checklist(typed(amide_routes["1"], "X2q", ("quench", True)))
    assert said.unstated == ()
    assert "quench" not in said.open


def test_heat_that_includes_an_operation_closes_it(amide_routes: dict[str, Route]) -> None:
    found = checklist(typed(amide_routes["1"], "C", ("includes", "base neutralization, mixing")))
    item = next(item for item in found.items if item.operation == "neutralisation")
    assert item.words == "given: C (included)"


def test_nil_with_a_reason(amine_routes: dict[str, Route]) -> None:
    text = "quench, scrubber: no excess, no gas; work up: telescoped"
    found = checklist(typed(amine_routes["A"], "A2", ("nil", text)))
    item = {item.operation: item.words for item in found.items}
    assert item["quench"] == "nil: no excess, no gas (A2)"
    assert item["work-up"] == "nil: telescoped (A2)"
    assert found.open == ("neutralisation", "dissolution", "crystallisation", "distillation")


@pytest.mark.parametrize("text", ["quench", "quench:", "quensh: no excess"])
def test_nil_without_a_reason_or_of_something_else_is_refused(amine_routes: dict[str, Route], text: str) -> None:
    with pytest.raises(UnknownName):
        checklist(typed(amine_routes["A"], "A2", ("nil", text)))


def test_row_without_a_heat_closes_nothing(code: SimpleNamespace, amine_routes: dict[str, Route]) -> None:
    route = amine_routes["A"]
    quench = code.step("Q", "HNO3(aq) + NaOH(aq) -> NaNO3(aq) + H2O(l)", side="A1", amount="0.1")
    found = checklist(typed(replace(route, steps=(*route.steps, quench)), "Q", ("quench", True)))
    assert found.not_entered == ("Q",)
    assert "quench" in found.open


def test_complete_only_when_nothing_is_open(amine_routes: dict[str, Route]) -> None:
    everything = typed(amine_routes["A"], "A2", ("nil", f"{', '.join(OPERATIONS)}: sold as the solution"))
    found = checklist(everything)
    assert found.complete
    assert found.words == "every operation given or declared nil"
    assert may_rank([found])
    assert not may_rank([found, checklist(amine_routes["B"])])


def test_table_and_dict(amide_routes: dict[str, Route]) -> None:
    found = checklist(amide_routes["1"])
    assert len(found.table().rows) == len(OPERATIONS)
    assert "side rows are no part of a reactor's duty" in found.text.replace("\n", " ")
    assert json.loads(json.dumps(found.to_dict()))["open"] == list(found.open)
