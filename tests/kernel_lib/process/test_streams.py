from __future__ import annotations

from fractions import Fraction
from types import SimpleNamespace

from routeheat.chem.route import Route
from routeheat.process.extents import extents
from routeheat.process.streams import Streams, streams


def named(route: Route) -> tuple[dict[str, Fraction], dict[str, Fraction]]:
    found: Streams = streams(extents(route))
    return ({s.text: n for s, n in found.bought.items()}, {s.text: n for s, n in found.leaving.items()})


def test_excess_is_bought_and_leaves(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A + K -> P + M", "", "50 %", equiv={"K": "1.5"}))
    assert named(made) == ({"A": 2, "K": 3}, {"K": 1, "M": 2})


def test_an_unreacted_loss_leaves_as_reactants(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A + K -> P + M", "", "50 %", loss="unreacted"))
    assert named(made) == ({"A": 2, "K": 2}, {"A": 1, "K": 1, "M": 1})


def test_intermediates_are_not_bought_and_their_excess_leaves(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A -> B"),
        code.step("S2", "K -> D"),
        code.step("S3", "B + D -> P", limiting="B", equiv={"D": "1.2"}),
    )
    assert named(made) == ({"A": 1, "K": Fraction(6, 5)}, {"D": Fraction(1, 5)})


def test_a_recycle_of_a_bought_species_buys_less(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A + K -> P", equiv={"K": "3"}, recycle=[("K", "S1", "75 %")]))
    assert extents(made).values == {"S1": 1}
    assert named(made) == ({"A": 1, "K": Fraction(3, 2)}, {"K": Fraction(1, 2)})


def test_a_catalyst_goes_in_and_out(code: SimpleNamespace) -> None:
    made = code.route("R", "P", code.step("S1", "A + K -> P + K"))
    assert named(made) == ({"A": 1, "K": 1}, {"K": 1})


def test_a_side_row_takes_up_what_leaves_its_parent_first(code: SimpleNamespace) -> None:
    made = code.route(
        "R",
        "P",
        code.step("S1", "A + K -> P", equiv={"K": "1.3"}),
        code.step("Q", "K + W -> N", side="S1", amount="0.5"),
    )
    bought, leaving = named(made)
    assert bought == {"A": 1, "K": Fraction(13, 10) + Fraction(2, 10), "W": Fraction(1, 2)}
    assert leaving == {"N": Fraction(1, 2)}
