"""Tables as LaTeX: plain ``tabular``, no packages needed; no text of a sheet becomes a command."""

from __future__ import annotations

import re
import unicodedata

from routeheat.present.markup import Rich, as_rich
from routeheat.present.show import Shown
from routeheat.present.table import Table
from routeheat.present.text import cell_text, column_header, shared_coverage, visible
from routeheat.report.tables import every_table

_STYLES = {"": "{}", "sub": "\\textsubscript{{{}}}", "sup": "\\textsuperscript{{{}}}", "italic": "\\textit{{{}}}"}

_COMMANDS = {
    "\\": "\\textbackslash{}", "{": "\\{", "}": "\\}", "$": "\\$", "&": "\\&", "#": "\\#", "%": "\\%", "_": "\\_",
    "^": "\\textasciicircum{}", "~": "\\textasciitilde{}", "<": "\\textless{}", ">": "\\textgreater{}",
    "|": "\\textbar{}", '"': "\\char34{}", "`": "\\`{}",
    # behind \\ these two would be read as its options
    "[": "{[}", "*": "{*}",
}  # fmt: skip


def _greek(char: str) -> str:
    """The command of a Greek letter, from its name in Unicode (which spells lambda without its b)."""
    *_, size, _letter, name = unicodedata.name(char).split()
    name = name.lower().replace("lamda", "lambda")
    return f"\\{name.capitalize() if size == 'CAPITAL' else name}"


_MATHEMATICS = {
    "\N{MINUS SIGN}": "-", "±": "\\pm", "×": "\\times", "·": "\\cdot", "→": "\\rightarrow", "⇌": "\\rightleftharpoons",
    "≤": "\\leq", "≥": "\\geq", "≈": "\\approx", "°": "^\\circ", "⟨": "\\langle", "⟩": "\\rangle", "½": "\\frac{1}{2}",
    "¼": "\\frac{1}{4}", "¾": "\\frac{3}{4}", "√": "\\surd", "∞": "\\infty", "∂": "\\partial", "↵": "\\hookleftarrow",
    "⋅": "\\cdot", "²": "^2", "³": "^3", "¹": "^1", "µ": "\\mu", "⁻": "^{-}", "⁺": "^{+}",
    **{chr(0x2070 + digit): f"^{digit}" for digit in (0, 4, 5, 6, 7, 8, 9)},
    **{chr(0x2080 + digit): f"_{digit}" for digit in range(10)},
    **{char: _greek(char) for char in "αβγδεζηθικλμνξπρστυφχψωΓΔΘΛΞΠΣΥΦΨΩ"},
}  # fmt: skip
_TEXTUAL = {
    "…": "\\ldots{}", "–": "\\textendash{}", "—": "\\textemdash{}", "‘": "\\textquoteleft{}", "’": "\\textquoteright{}",
    "“": "\\textquotedblleft{}", "”": "\\textquotedblright{}", "\N{NO-BREAK SPACE}": "~",
}  # fmt: skip
_LIGATURE = re.compile("-(?=-)|'(?=')|,(?=,)")
_WRITTEN = str.maketrans({
    **_COMMANDS, **{char: f"\\ensuremath{{{command}}}" for char, command in _MATHEMATICS.items()}, **_TEXTUAL,
})  # fmt: skip


def latex(item: Shown | Table) -> str:
    """A table, or every table of a result, each as a ``table`` with its caption, and its notes below.

    Greek letters, signs and arrows are commands; pdfLaTeX reads Latin letters with accents as they are, other scripts
    need LuaLaTeX or XeLaTeX with a font that has them.
    """
    return "\n\n".join(_table(table) for table in every_table(item)) + "\n"


def latex_text(text: str) -> str:
    """``text`` as LaTeX prints it literally."""
    return _LIGATURE.sub(lambda match: f"{match.group()}{{}}", visible(text).translate(_WRITTEN))


def _table(table: Table) -> str:
    says_k = [shared_coverage(table, index) is None for index in range(len(table.columns))]
    align = "".join("r" if column.align == "right" else "l" for column in table.columns)
    lines = ["\\begin{table}[htbp]", "\\centering"]
    if table.title:
        lines.append(f"\\caption{{{_rich(table.title)}}}")
    lines += [f"\\begin{{tabular}}{{{align}}}", "\\hline"]
    lines += [_line([_rich(column_header(table, index)) for index in range(len(table.columns))]), "\\hline"]
    for number, row in enumerate(table.rows):
        cells = []
        for index, (cell, column) in enumerate(zip(row, table.columns, strict=True)):
            text = _rich(cell if isinstance(cell, tuple) else cell_text(cell, column, say_k=says_k[index]))
            cells.append(f"\\textbf{{{text}}}" if number in table.strong and text else text)
        lines.append(_line(cells))
    lines += ["\\hline", "\\end{tabular}"]
    if table.notes:
        lines += ["", "\\medskip\\raggedright\\small", *(f"{latex_text(note)}\\par" for note in table.notes)]
    return "\n".join([*lines, "\\end{table}"])


def _line(cells: list[str]) -> str:
    return " & ".join(cells) + " \\\\"


def _rich(rich: Rich | str) -> str:
    return "".join(_STYLES[run.style].format(latex_text(run.text)) for run in as_rich(rich))
