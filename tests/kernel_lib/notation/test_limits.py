"""Size: what is too large is refused at once, and the work of reading grows no faster than the text.

Work is counted in calls, not in seconds, so that a busy machine changes nothing; seconds are for tests/bench.
"""

import signal
import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from types import FrameType

import pytest

from routeheat.notation import build
from routeheat.notation.build import build_sheet


def calls(text: str) -> int:
    """How many calls of functions, built-in ones included, one reading takes."""
    count = 0

    def counted(_frame: FrameType, event: str, _argument: object) -> None:
        nonlocal count
        count += event in ("call", "c_call")

    sys.setprofile(counted)
    try:
        build_sheet(text)
    finally:
        sys.setprofile(None)
    return count


@contextmanager
def not_for_ever(seconds: float = 20) -> Iterator[None]:
    """Fail when the body hangs, as a regular expression that backtracks without end would make it."""

    def stop(_number: int, _frame: FrameType | None) -> None:
        raise TimeoutError(f"still running after {seconds} s")

    before = signal.signal(signal.SIGALRM, stop)
    signal.setitimer(signal.ITIMER_REAL, seconds)
    try:
        yield
    finally:
        signal.setitimer(signal.ITIMER_REAL, 0)
        signal.signal(signal.SIGALRM, before)


@pytest.mark.parametrize("text", ["x" * 10_000_000, "x\n" * 5_000_000, "(" * 10_000_000, "[K] H2 -> O2\n" * 800_000])
def test_ten_megabytes_are_refused_unread(text: str, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(build, "read_sections", None)
    sheet, (fault,) = build_sheet(text)
    assert "are too many for a route sheet (at most 2,000,000)" in fault.message
    assert len(sheet.known) == 0


def test_too_many_lines_rows_and_characters_of_a_line() -> None:
    assert build_sheet("\n" * 40_001)[1][0].message == "40,001 lines are too many for a route sheet (at most 40,000)"
    assert build_sheet("\r\n" * 40_000)[1] == ()
    _, (fault,) = build_sheet("known\n" + "#" * 4001)
    assert (fault.message, fault.line) == ("a line of more than 4,000 characters", 2)
    sheet, faults = build_sheet("species\n" + "".join(f"  s{n}  H2(g)\n" for n in range(10_002)))
    assert faults[-1].message == "more than 10,000 rows and species: the rest is not read"
    assert len(sheet.species) == 10_001


def known_rows(count: int) -> str:
    carbons = [f"C{n % 40 + 1}H6" for n in range(count)]
    rows = (f"  [K{n}] {c}(l) + O2(g) -> {c}O2(l) | dH -{n}.5 ± 2 kJ/mol\n" for n, c in enumerate(carbons))
    return "known\n" + "".join(rows)


def unbalanced_rows(count: int) -> str:
    return "known\n" + "".join(f"  [K{n}] C{n + 1}H6(l) -> C{n + 1}H8O(l) | dH -1 kJ\n" for n in range(count))


def long_names(count: int) -> str:
    declared = "".join(f"  {'x' * 60}{n}  C2H6(l)\n" for n in range(count))
    rows = "".join(f"  [K{n}] {'x' * 60}{n} -> {'x' * 59}{n} | dH 1 kJ\n" for n in range(count))
    return f"species\n{declared}known\n{rows}"


def same_label(count: int) -> str:
    return "known\n" + "  [K] H2(g) -> H2(l) | dH 1 kJ/mol\n" * count


def used_steps(count: int) -> str:
    steps = "".join(
        f"  [S{n}] H2(g) -> H2(l) | dH 1 kJ\n  [Q{n}] H2(g) -> H2(l) | dH 1 kJ | side of S{n}\n" for n in range(count)
    )
    return f"route A makes H2(l)\n{steps}route B makes H2(l)\n" + "".join(f"  use S{n}\n" for n in range(count))


def routes(count: int) -> str:
    return "".join(f"route R{n} makes H2(l)\n  [S{n}] H2(g) -> H2(l) | dH 1 kJ/mol\n" for n in range(count))


def unknown_keys(count: int) -> str:
    return "known\n  [K] H2(g) -> H2(l)\n" + "".join(f"  yeild{n} 9\n" for n in range(count))


@pytest.mark.parametrize(
    "make", [known_rows, unbalanced_rows, long_names, same_label, used_steps, routes, unknown_keys],
    ids=lambda make: make.__name__,
)  # fmt: skip
def test_reading_is_linear(make: Callable[[int], str]) -> None:
    # quadratic reading would take sixteen times the calls for four times the text
    small, large = calls(make(150)), calls(make(600))
    assert large < 6 * small


FULL = 3900
TRAPS = {
    "label": "[ " + " " * FULL,
    "brackets": "[K] " + "(" * FULL,
    "state": "[K] a(l," + " " * FULL + "()) -> b",
    "states": "[K] " + "a(l," * 950 + ") -> b",
    "digits": "[K] " + "1" * FULL + " -> b",
    "fractions": "[K] " + "1/" * 1900 + " -> b",
    "halves": "[K] " + "½" * FULL + " -> b",
    "plus": "[K] " + "+ " * 1900 + "-> b",
    "blanks": "[K] a" + " " * FULL + "b -> c",
    "arrows": "[K] " + "-> " * 1300,
    "equals": "[K] " + "= " * 1900,
    "number": "[K] a -> b | dH " + "1" * FULL,
    "exponents": "[K] a -> b | dH 1" + "e1" * 1900,
    "units": "[K] a -> b | dH 1 " + "kJ " * 1290,
    "unit brackets": "[K] a -> b | dH 1 kJ/" + "(" * FULL,
    "coverage": "[K] a -> b | dH 1 ± 2 " + "( 1 " * 950,
    "basis": "[K] a -> b | dH 1 kJ/kg of " + "at " * 1250,
    "basis blanks": "[K] a -> b | dH 1 kJ/kg of" + " " * FULL + "x",
    "temperatures": "[K] a -> b | dH 1 kJ at 5" + " at 5" * 750,
    "last digits": "[K] a -> b | dH 1(" + "1" * FULL + ") kJ",
    "combustion": "[K] combustion of " + " to " * 950,
    "products": "[K] combustion of C6H6(l) to " + "CO2(g), " * 470,
    "quotes": "[K] a -> b | note " + '"' * FULL,
    "comments": "[K] a -> b " + '#"' * 1900,
    "equivalents": "[K] a -> b | equiv " + "1 of " * 760,
    "recycle": "[K] a -> b | recycle " + " from " * 640,
    "hydrates": "[K] H2O" + ".5H2O" * 770 + " -> b",
    "charges": "[K] H" + "²⁺" * 1900 + " -> b",
    "invisible": "[K] " + "\u200b" * FULL,
    "use": "use " + "A," * 1900,
    "keys": "|" * FULL,
    "words": "a " * 1900,
    "names": "X  " + "name x " * 550,
}


@pytest.mark.parametrize("name", TRAPS)
def test_a_long_line_full_of_traps_comes_to_an_end(name: str) -> None:
    for head in ("species\n  ", "known\n  ", "species\n  a  C2H6(l)\n  b  C2H6(g)\nroute A makes b\n  "):
        with not_for_ever():
            sheet, _ = build_sheet(head + TRAPS[name])
        assert len(sheet.known) <= 1


def test_deep_brackets_are_refused_without_recursion() -> None:
    _, (fault,) = build_sheet("known\n  [K] " + "(" * 15 + "C" + ")" * 15 + "(l) -> H2(g) | dH 1 kJ")
    assert fault.message == "brackets are nested more than 12 deep"
