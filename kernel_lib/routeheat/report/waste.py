"""The section on waste: mass figures of every step and of each route, with their boundary."""

from __future__ import annotations

from collections.abc import Iterator

from routeheat.errors import RouteheatError
from routeheat.present.markup import join
from routeheat.present.table import Column, Table
from routeheat.process.waste import waste
from routeheat.report.document import Block, Paragraph, line, table_block
from routeheat.report.matter import Matter, by_product
from routeheat.report.together import together


def wasted(matter: Matter) -> Iterator[Block]:
    """One table for each product; what cannot be assessed is named."""
    for number, group in enumerate(by_product(matter.profiles), 1):
        tables: list[tuple[str, Table]] = []
        for item in group:
            try:
                tables.append((item.route.name, waste(item).table()))
            except RouteheatError as problem:
                yield Paragraph(line(f"Not assessed: route {item.route.name}: {problem}."), "caution")
        if tables:
            title = join(["Waste of the routes to ", group[0].route.makes.rich, ", per kg of product"])
            yield table_block(f"waste-{number}", together(title, Column("route", "route"), tables))
