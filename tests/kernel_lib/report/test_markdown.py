"""Markdown, rendered by the renderer of notebooks."""

from __future__ import annotations

import re
from fractions import Fraction
from html import unescape

import pytest
from nbconvert.filters import markdown2html

from routeheat.present.markup import Run
from routeheat.present.table import Column, Reading, Table
from routeheat.report.markdown import markdown, markdown_text

TABLE = Table(
    "Heats of T",
    (Column("row", "row"), Column("c", "coefficient", align="right"), Column("heat", "heat", "kJ/mol", "right")),
    (
        ((Run("H"), Run("2", "sub"), Run("O")), Fraction(3, 2), Reading(-5.25, 0.5, 2.0)),
        ("sum", None, Reading(None, None, words="not entered")),
    ),
    ("- first", "2. second"),
    frozenset([1]),
)


def test_the_whole_table() -> None:
    assert markdown(TABLE) == (
        "**Heats of T**\n\n"
        "| row | coefficient | heat / (kJ/mol), ± k = 2 |\n"
        "| --- | ---: | ---: |\n"
        "| H<sub>2</sub>O | 3/2 | −5.2 ± 1.0 |\n"
        "| **sum** |  | **not entered** |\n\n"
        "- &#45; first\n"
        "- 2&#46; second\n"
    )


def test_it_renders_as_one_table_with_its_notes() -> None:
    page = markdown2html(markdown(TABLE))
    assert (page.count("<table>"), page.count("<tr>"), page.count("<li>")) == (1, 3, 2)
    assert "H<sub>2</sub>O" in page
    assert "<ol>" not in page


@pytest.mark.parametrize(
    "text",
    [
        "<script>alert(1)</script>", "a | b", "**bold** _x_ `code`", "[link](javascript:x)", "![i](x)", "# head",
        "$\\href{x}{y}$", "\\(x\\)", "\\[x\\]", "@@0@@", "~~gone~~", "https://example.org/x", "www.example.org",
        "&amp; &lt;", "{{ x }}", "<!-- x -->", "a\\",
    ],
)  # fmt: skip
def test_every_text_is_shown_literally(text: str) -> None:
    table = Table(text, (Column("x", text),), ((text,),), (text,))
    page = markdown2html(markdown(table))
    assert not re.search(r"<(?:script|a|img|em|code|h1|del)\b", page)
    seen = [unescape(re.sub(r"<[^>]+>", "", line)).strip() for line in page.splitlines()]
    assert [line for line in seen if line] == [text] * 4


def test_a_text_stays_on_its_line() -> None:
    assert markdown_text("a\nb\u202e") == "a↵b⟨U+202E⟩"


def test_a_title_may_have_subscripts() -> None:
    assert markdown(Table((Run("CO"), Run("2", "sub")), TABLE.columns, TABLE.rows)).startswith("**CO<sub>2</sub>**")
