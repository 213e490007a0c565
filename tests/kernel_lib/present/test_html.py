from __future__ import annotations

import base64
import re
import xml.etree.ElementTree as ET
from fractions import Fraction

import pytest

from routeheat.present.html import escape, figure_html, render_table, rich_html, stylesheet
from routeheat.present.markup import Run
from routeheat.present.table import Column, Reading, Table

HOSTILE = "<script>alert('1')</script> & \"q\" \u202e\u2066\x00"


def sample(text: str = "A1") -> Table:
    columns = (Column("name", text), Column("heat", (Run("H", "italic"),), "kJ/mol", "right"))
    rows = ((text, Reading(-145.0, 4.0)), ((Run("CO"), Run("2", "sub")), Fraction(3, 2)), ("total", None))
    return Table(text, columns, rows, notes=(text,), strong=frozenset({2}))


def test_escape_covers_markup_quotes_and_hidden_characters() -> None:
    assert escape(HOSTILE) == (
        "&lt;script&gt;alert(&#x27;1&#x27;)&lt;/script&gt; &amp; &quot;q&quot; ⟨U+202E⟩⟨U+2066⟩⟨U+0000⟩"
    )


def test_rich_html() -> None:
    rich = (Run("<H>", "italic"), Run("r", "sub"), Run("2", "sup"), Run(" x"))
    assert rich_html(rich) == "<i>&lt;H&gt;</i><sub>r</sub><sup>2</sup> x"


def test_a_table_is_one_well_formed_element_with_caption_scopes_and_notes() -> None:
    root = ET.fromstring(render_table(sample()))
    assert root.attrib == {"class": "routeheat"}
    assert root.findtext("table/caption") == "A1"
    assert [cell.get("scope") for cell in root.iter("th")] == ["col", "col", "row", "row", "row"]
    assert ["".join(cell.itertext()) for cell in root.iter("td")] == ["−145.0 ± 8.0", "3/2", ""]
    assert "".join(root.findall(".//thead//th")[1].itertext()) == "H / (kJ/mol), ± k = 2"
    assert [row.get("class") for row in root.findall(".//tbody/tr")] == [None, None, "total"]
    assert root.findtext("p") == "A1"


def test_hostile_texts_stay_texts() -> None:
    root = ET.fromstring(render_table(sample(HOSTILE)))
    assert {e.tag for e in root.iter()} == {e.tag for e in ET.fromstring(render_table(sample())).iter()}
    assert root.findtext("table/caption") == "<script>alert('1')</script> & \"q\" ⟨U+202E⟩⟨U+2066⟩⟨U+0000⟩"


def test_the_stylesheet_touches_only_routeheat_and_fetches_nothing() -> None:
    css = stylesheet()
    selectors = [part.strip() for rule in re.findall(r"([^{}]+)\{", css) for part in rule.split(",")]
    assert all(selector.startswith(".routeheat") for selector in selectors)
    assert not re.search(r"url\(|@import|</", css)
    assert all("," in use for use in re.findall(r"var\([^)]*\)", css))


@pytest.mark.parametrize("alt", ["plain", HOSTILE])
def test_a_figure_is_an_image_that_holds_its_bytes(alt: str) -> None:
    svg = "<svg xmlns='http://www.w3.org/2000/svg'>−½</svg>"
    match = re.fullmatch(r'<img alt="([^"<>]*)" style="[^"]*" src="data:image/svg\+xml;base64,([^"]+)">',
                         figure_html(svg, alt))  # fmt: skip
    assert match is not None
    assert match[1] == escape(alt)
    assert base64.b64decode(match[2]).decode() == svg


def test_a_title_may_have_subscripts_and_is_escaped() -> None:
    table = Table((Run("<b>CO"), Run("2", "sub")), (Column("a", "a"),), (("x",),))
    assert "<caption>&lt;b&gt;CO<sub>2</sub></caption>" in render_table(table)
