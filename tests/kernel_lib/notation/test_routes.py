"""Routes: headers, own steps, steps used from other routes, side rows."""

import pytest

from routeheat.errors import Fault
from routeheat.notation.build import build_sheet

_ANOTHER = "use names a step that another route of this sheet defines"
STEP = "[A1] H2(g) + 1/2 O2(g) -> H2O(l) | dH -3 kJ/mol"
QUENCH = "[A1q] H2(g) -> H2(l) | dH -1 kJ/mol | side of A1 | amount 0.3 mol/mol"


def faults_of(text: str) -> list[Fault]:
    return [fault for fault in build_sheet(text)[1] if fault.severity == "fault"]


@pytest.mark.parametrize(
    ("header", "name", "title", "makes"),
    [
        ("route A makes H2O(l)", "A", "", "H2O(l)"),
        ('route A "over water" makes H2O(l)', "A", "over water", "H2O(l)"),
        ("route 2b “it makes sense” makes H2O", "2b", "it makes sense", "H2O(l)"),
        ("Route: A makes H2O (l)", "A", "", "H2O(l)"),
    ],
)
def test_headers(header: str, name: str, title: str, makes: str) -> None:
    sheet, faults = build_sheet(f"{header}\n  {STEP}\n")
    assert faults == ()
    route = sheet.routes[name]
    assert (route.name, route.title, str(route.makes)) == (name, title, makes)


@pytest.mark.parametrize(
    ("header", "message"),
    [
        ("route", "a route line says its name and what it makes"),
        ("route A", "a route line says its name and what it makes"),
        ('route A "x" make H2O(l)', "a route line says its name and what it makes"),
        ("route A t makes H2O(l)", "a route has a short name of one word, then a title in quotes"),
        ('route A "t makes H2O(l)', "the title of this route is not closed by a quotation mark"),
        ('route "t" makes H2O(l)', "the name of this route is missing before its title"),
        ("route A makes H2O(l) | note x", "a route line holds no keys"),
        ("route " + "A" * 41 + " makes H2O(l)", "a route name of more than 40 characters"),
        ("route A makes water", "water is neither a declared name nor a formula"),
    ],
)
def test_wrong_headers(header: str, message: str) -> None:
    (fault,) = faults_of(header)
    assert fault.message == message
    assert fault.hint


def test_a_route_makes_the_only_product_of_that_name() -> None:
    text = "species\n  AMD  C2H5NO\nroute A makes AMD\n  [A1] C2H4O2(l) + NH3(g) -> AMD(sln) + H2O(l) | dH 1 kJ\n"
    assert str(build_sheet(text)[0].routes["A"].makes) == "AMD(sln)"
    two = text + "  [A2] AMD(sln) -> AMD(s) | dH 1 kJ\n"
    assert str(build_sheet(two)[0].routes["A"].makes) == "AMD"


def test_two_routes_of_one_name() -> None:
    (fault,) = faults_of(f"route A makes H2O(l)\n  {STEP}\nroute A makes H2O(l)\n")
    assert (fault.message, fault.line, fault.hint) == (
        "a second route is called A", 3, "first in line 1: give it another name",
    )  # fmt: skip


def test_use_runs_the_same_step_in_working_order() -> None:
    sheet, faults = build_sheet(
        "route B makes H2O(l)\n  use [A1]\n  [B1] H2O(l) -> H2O(g) | dH 44 kJ\n  use A2,\n"
        f"route A makes H2O(l)\n  {STEP}\n"
        "  [A2] H2O(g) -> H2O(l) | dH -44 kJ\n"
    )
    assert faults == ()
    route = sheet.routes["B"]
    assert [step.label for step in route.steps] == ["A1", "B1", "A2"]
    assert route.used == ("A1", "A2")
    assert route.steps[0] == sheet.routes["A"].steps[0]


@pytest.mark.parametrize(
    ("line", "message", "hint"),
    [
        ("use A9", "no route defines a step A9", _ANOTHER),
        ("use A11", "no route defines a step A11", "did you mean A1?"),
        ("use K1", "K1 is a known row, not a step", _ANOTHER),
        ("use B1", "B1 already runs in this route", "a step runs once in a route: leave this out"),
        ("use A1, A1", "A1 already runs in this route", "a step runs once in a route: leave this out"),
        ("use", "a label is missing behind use", "like use A1, A2"),
        ("use A1 B1", "A1 B1 is no label", "separate labels by commas, like use A1, A2"),
        ("use A1 | yield 3 %", "A1 | yield 3 % is no label", "a use line holds labels only"),
        ("use A1\n    yield 3 %", "nothing belongs to a use line", "a step runs here as its own route defines it"),
    ],
)
def test_wrong_use_lines(line: str, message: str, hint: str) -> None:
    (fault,) = faults_of(
        f"known\n  [K1] H2(g) -> H2(l) | dH 1 kJ\nroute A makes H2O(l)\n  {STEP}\nroute B makes H2O(l)\n"
        f"  [B1] H2O(g) -> H2O(l) | dH -44 kJ\n  {line}\n"
    )
    assert (fault.message, fault.hint) == (message, hint)


def test_a_forgotten_side_row_is_worth_a_notice() -> None:
    text = f"route A makes H2O(l)\n  {STEP}\n  {QUENCH}\nroute B makes H2O(l)\n  use A1"
    _, (notice,) = build_sheet(text)
    assert notice.severity == "notice"
    assert notice.message == "A1q, a side row of A1 in route A, does not run here"
    assert notice.hint == "if it does: use A1, A1q"
    assert build_sheet(f"{text}, A1q")[1] == ()


def test_a_name_without_its_state_is_the_one_of_the_row() -> None:
    sheet, faults = build_sheet(
        "species\n  AMD  C2H5NO\nroute A makes AMD(s)\n"
        "  [A1] AMD(sln) -> AMD(s) | dH 9 kJ/kg of AMD(s) | limiting AMD\n"
        "  [A2] AMD(sln) + H2O(l) -> C2H7NO2(l) | dH 9 kJ/mol of AMD | limiting AMD | equiv 2 of H2O\n"
    )
    assert faults == ()
    ambiguous, clear = sheet.routes["A"].steps
    assert str(ambiguous.limiting) == "AMD"
    assert str(clear.limiting) == "AMD(sln)"
    assert [str(species) for species, _ in clear.equivalents] == ["H2O(l)"]


def test_a_step_may_take_its_name_from_a_section_word() -> None:
    sheet, faults = build_sheet("route A makes H2O(g)\n  [known] H2O(l) -> H2O(g) | dH 1 kJ\n")
    assert faults == ()
    assert sheet.routes["A"].steps[0].label == "known"
