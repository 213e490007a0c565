"""LaTeX source: no text of a sheet is left that TeX would run."""

from __future__ import annotations

import re
from fractions import Fraction

import pytest

from routeheat.present.markup import Run
from routeheat.present.table import Column, Reading, Table
from routeheat.report.latex import latex, latex_text


def test_the_whole_table() -> None:
    table = Table(
        "Heats & more",
        (Column("row", "row"), Column("c", "c", align="right"), Column("heat", "heat", "kJ/mol", "right")),
        (((Run("H"), Run("2", "sub"), Run("O")), Fraction(3, 2), Reading(-5.25, 0.5, 2.0)), ("sum", None, None)),
        ("50 % lost",),
        frozenset([1]),
    )
    assert latex(table) == (
        "\\begin{table}[htbp]\n"
        "\\centering\n"
        "\\caption{Heats \\& more}\n"
        "\\begin{tabular}{lrr}\n"
        "\\hline\n"
        "row & c & heat / (kJ/mol), \\ensuremath{\\pm} k = 2 \\\\\n"
        "\\hline\n"
        "H\\textsubscript{2}O & 3/2 & \\ensuremath{-}5.2 \\ensuremath{\\pm} 1.0 \\\\\n"
        "\\textbf{sum} &  &  \\\\\n"
        "\\hline\n"
        "\\end{tabular}\n\n"
        "\\medskip\\raggedright\\small\n"
        "50 \\% lost\\par\n"
        "\\end{table}\n"
    )


@pytest.mark.parametrize(
    ("text", "written"),
    [
        ("\\input{x}", "\\textbackslash{}input\\{x\\}"),
        ("$\\href{a}$", "\\$\\textbackslash{}href\\{a\\}\\$"),
        ("%{customdata}", "\\%\\{customdata\\}"),
        ("a_b^c~d#e&f", "a\\_b\\textasciicircum{}c\\textasciitilde{}d\\#e\\&f"),
        ("<x>|y|", "\\textless{}x\\textgreater{}\\textbar{}y\\textbar{}"),
        ("[1]*", "{[}1]{*}"),
        ("a--b ''c'' ,,d", "a-{}-b '{}'c'{}' ,{},d"),
        ("---", "-{}-{}-"),
        ("ΔH → −5 °C", "\\ensuremath{\\Delta}H \\ensuremath{\\rightarrow} \\ensuremath{-}5 \\ensuremath{^\\circ}C"),
        ("λ", "\\ensuremath{\\lambda}"),
        ("^^41", "\\textasciicircum{}\\textasciicircum{}41"),
    ],
)  # fmt: skip
def test_special_characters(text: str, written: str) -> None:
    assert latex_text(text) == written


def test_no_character_that_tex_acts_on_is_left() -> None:
    everything = "".join(chr(code) for code in range(0x20, 0x7F))
    written = latex_text(everything)
    allowed = r"\\(?:text\w+\{\}|char34\{\}|`\{\}|[{}$&#%_])|\{[\[*]\}|[-',]\{\}"
    assert not set(re.sub(allowed, "", written)) & set('\\{}$&#%_^~"`<>|[*')
