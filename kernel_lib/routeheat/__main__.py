"""``python -m routeheat SHEET --out DIR``: the whole job without a browser.

Prints the comparison, writes tables as CSV and diagrams as SVG. Exit status: 0 when everything was written, 1 when
the sheet has faults (rendered on the error stream), 2 when the command line is wrong.
"""

from __future__ import annotations

import argparse
import re
import sys
from collections.abc import Iterator
from pathlib import Path

import routeheat as rh
from routeheat.chem.route import Sheet
from routeheat.notation.faults import render
from routeheat.present.show import Shown
from routeheat.report.tables import csv_text


def main(arguments: list[str] | None = None) -> int:
    """Run the command line; returns the exit status."""
    parser = argparse.ArgumentParser(prog="python -m routeheat", description="Heats of synthesis routes from a sheet.")
    parser.add_argument("sheet", type=Path, help="route sheet, a UTF-8 text file")
    parser.add_argument("--out", type=Path, required=True, help="folder for tables (CSV) and diagrams (SVG)")
    parser.add_argument("--per", default="mol", help='basis of the profiles: mol, kg, or an amount such as "12 kg"')
    options = parser.parse_args(arguments)
    try:
        sheet = rh.read_sheet(options.sheet)
        results = list(_results(sheet, options.per))
        written = _write(results, options.out)
    except rh.RouteheatError as problem:
        print(problem, file=sys.stderr)
        return 1
    except OSError as problem:
        print(f"{problem.filename or options.out}: {problem.strerror}", file=sys.stderr)
        return 1
    if sheet.notices:
        print(render(options.sheet.read_text(encoding="utf-8-sig"), sheet.notices), end="\n\n")
    for _, result in results:
        print(result.text, end="\n\n")
    print(f"{len(written)} files in {options.out}")
    return 0


def _results(sheet: Sheet, per: str) -> Iterator[tuple[str, Shown]]:
    """Every result of a sheet with the name of its files: comparison, profiles, combinations."""
    if len(sheet.routes) > 1:
        yield "comparison", rh.compare_routes(sheet.routes, per=per)
    for name, route in sheet.routes.items():
        yield f"route_{name}", rh.profile(route, per=per)
    for label, target in sheet.targets.items():
        try:
            yield f"target_{label}", rh.combine(target, sheet.known)
        except rh.OutOfReach as reason:
            yield f"target_{label}", rh.Refusal(label, target.reaction, reason)


def _write(results: list[tuple[str, Shown]], folder: Path) -> list[Path]:
    folder.mkdir(parents=True, exist_ok=True)
    written: list[Path] = []
    for name, result in results:
        stem = re.sub(r"[^\w.-]", "_", name)
        for number, table in enumerate(result.tables()):
            suffix = f"_{number + 1}" if number else ""
            written.append(folder / f"{stem}{suffix}.csv")
            written[-1].write_text(csv_text(table), encoding="utf-8", newline="")
        if hasattr(result, "ladder"):
            written.append(folder / f"{stem}.svg")
            written[-1].write_text(rh.svg(result), encoding="utf-8")
    return written


if __name__ == "__main__":
    raise SystemExit(main())
