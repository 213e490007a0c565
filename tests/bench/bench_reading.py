"""How long it takes to read 1,000 and 2,000 known rows, and the ratio of the two (2 when reading is linear).

Run as a script: ``python tests/bench/bench_reading.py``.
"""

from __future__ import annotations

import time

from routeheat.notation.build import build_sheet


def known_rows(count: int) -> str:
    """A sheet of combustions of alkanes, each with a heat, an uncertainty and a source."""
    rows = []
    for index in range(count):
        carbons = index % 40 + 1
        rows.append(
            f"  [K{index}] C{carbons}H{2 * carbons + 2}(l) + {3 * carbons + 1}/2 O2(g) -> "
            f"{carbons} CO2(g) + {carbons + 1} H2O(l)\n"
            f'       dH -{653 * carbons + 238}.5 ± 0.4 kJ/mol | source "invented"\n'
        )
    return "uncertainty k = 2\nknown\n" + "".join(rows)


def milliseconds(count: int, repeats: int = 5) -> float:
    """Best time of several readings."""
    text = known_rows(count)
    best = float("inf")
    for _ in range(repeats):
        start = time.perf_counter()
        _, faults = build_sheet(text)
        best = min(best, time.perf_counter() - start)
        assert faults == ()
    return best * 1000


def main() -> None:
    """Print the times and their ratio."""
    thousand, two_thousand = milliseconds(1000), milliseconds(2000)
    print(f"1,000 rows: {thousand:.0f} ms")
    print(f"2,000 rows: {two_thousand:.0f} ms")
    print(f"ratio: {two_thousand / thousand:.2f}")


if __name__ == "__main__":
    main()
