"""Tables as JSON: nothing of them is lost."""

from __future__ import annotations

from routeheat.present.markup import Run
from routeheat.present.table import Column, Reading, Table
from routeheat.report.table_json import read_table, table_content


def test_a_title_with_subscripts_and_an_estimate_come_back_equal() -> None:
    columns = (Column("a", "a"), Column("heat", "heat", "kJ/mol", "right"))
    table = Table((Run("CO"), Run("2", "sub")), columns, (("x", Reading(-5.0, 1.0, estimated=True)),))
    assert read_table(table_content(table)) == table
