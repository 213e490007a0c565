"""Names of species and the states behind them: ``aniline(l)``, ``HNO3(aq, 65 %)``, ``C(graphite)``.

state = "(" phase [ "," form ] ")" | "(" form-of-an-element ")"
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from routeheat.chem.species import PHASES
from routeheat.notation.tokens import Piece

LONGEST_NAME = 80
"""Characters of a declared name."""
LONGEST_FORM = 40
"""Characters of the form within a phase."""
ARROW = re.compile(r"<=>|-->|->|→|⟶|⇌|(?<=\s)=(?=\s)")

_ELEMENT_FORMS = {"graphite", "diamond", "rhombic", "monoclinic", "white", "red", "black", "grey", "gray"}
"""Forms of elements that are typed without their phase: ``C(graphite)``."""
_MEANT = {
    "liq": "(l)", "liquid": "(l)", "gas": "(g)", "vap": "(g)", "solid": "(s)", "c": "(cr)", "sol": "(sln)",
    "soln": "(sln)", "aqueous": "(aq)", "L": "(l)", "G": "(g)", "S": "(s)", "Aq": "(aq)", "AQ": "(aq)",
}  # fmt: skip


_NOT_IN_NAMES = {
    " + ": "a + between blanks", ", ": "a comma before a blank", "  ": "two blanks", '"': "a quotation mark",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class _Bracket:
    """The last bracket of a text, when it ends the text."""

    before: int
    """Index behind what stands before it, blanks left out."""
    start: int
    word: str
    """What stands up to the first comma."""
    form: str
    """What stands behind the first comma."""


def _last_bracket(text: str) -> _Bracket | None:
    start = text.rfind("(")
    if start < 0 or not text.endswith(")") or ")" in text[start:-1]:
        return None
    word, _, form = text[start + 1 : -1].partition(",")
    return _Bracket(len(text[:start].rstrip()), start, word.strip(), " ".join(form.split()))


def split_state(piece: Piece) -> tuple[Piece, str, str]:
    """What stands before the state, the phase and the form; phase and form are empty when none is typed.

    Raises :class:`~routeheat.notation.tokens.Trouble` on a bracket that looks like a state and is none.
    """
    bracket = _last_bracket(piece.text)
    if bracket is None:
        return piece, "", ""
    if bracket.before == 0:
        if bracket.word in PHASES:
            piece.refuse(f"a species is missing before {piece.text}", f"like H2O{piece.text}")
        return piece, "", ""
    body, word, form = piece.part(0, bracket.before), bracket.word, bracket.form
    if word in PHASES:
        if len(form) > LONGEST_FORM or any(char in '"|#+' for char in form):
            piece.refuse("this form of a state cannot be read", "like (aq, 65 %)", bracket.start)
        return body, word, _canonical_form(form)
    if word.lower() in _ELEMENT_FORMS and not form:
        return body, "s", _canonical_form(word)
    if word in _MEANT or (word.isascii() and word.islower() and word.isalpha()):
        near = _MEANT.get(word) or "one of " + ", ".join(f"({symbol})" for symbol in PHASES)
        piece.refuse(f"({word}) is not a state symbol", f"write {near}", bracket.start)
    return piece, "", ""


def state_of_name(text: str) -> tuple[str, str, str] | None:
    """Name, phase and form of a text that ends in a state symbol; ``None`` when it does not."""
    bracket = _last_bracket(text)
    if bracket is None or bracket.before == 0 or bracket.word not in PHASES or len(bracket.form) > LONGEST_FORM:
        return None
    return text[: bracket.before], bracket.word, _canonical_form(bracket.form)


def _canonical_form(form: str) -> str:
    """Known forms of elements in small letters; a per cent sign stands behind one blank."""
    if form.lower() in _ELEMENT_FORMS:
        return "grey" if form.lower() == "gray" else form.lower()
    return re.sub(r"(?<=[0-9])%", " %", form)


def one_spaced(text: str) -> str:
    """The text with single blanks, as declared names have."""
    return " ".join(text.split()) if "  " in text else text


def read_name(piece: Piece) -> str:
    """A name fit to be declared; raises :class:`~routeheat.notation.tokens.Trouble` saying what it must not hold."""
    name = piece.text
    if not name:
        piece.refuse("a name is missing", 'like ANI  C6H7N(l)  name "aniline"')
    if len(name) > LONGEST_NAME:
        piece.refuse(f"a name of more than {LONGEST_NAME} characters", 'put the long name behind: name "…"')
    if re.match(r"[0-9/.½⅓⅔¼¾]+\s", name):
        piece.refuse("a name cannot start with a number and a blank", "it would be read as a coefficient")
    for bad, word in _NOT_IN_NAMES.items():
        if bad in name:
            place = name.index(bad)
            piece.refuse(f"a name cannot hold {word}", "choose a shorter name", place, place + len(bad))
    arrow = ARROW.search(name)
    if arrow is not None:
        piece.refuse("a name cannot hold an arrow", "choose a shorter name", arrow.start(), arrow.end())
    if name[0] == "[":
        piece.refuse("a name cannot start with [", "labels of rows stand in [ ]", 0, 1)
    if name[-1] in "=:,;" or name in ("+", "-"):
        last = len(name) - 1
        piece.refuse(f"a name cannot end with {name[-1]}", "name and formula are separated by blanks", last, last + 1)
    if state_of_name(name) is not None:
        piece.refuse("a name cannot end in a state", "the state stands behind the formula, like ANI  C6H7N(l)")
    return name
