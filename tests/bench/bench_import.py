"""``import routeheat`` against ``import numpy, pint``, in turn in one run: python tests/bench/bench_import.py"""

from __future__ import annotations

import statistics
import subprocess
import sys
import time


def seconds(code: str) -> float:
    """Wall time of a fresh interpreter that runs ``code``."""
    start = time.perf_counter()
    subprocess.run([sys.executable, "-c", code], check=True)
    return time.perf_counter() - start


def main(runs: int = 15) -> None:
    """Print medians over an empty interpreter, and their ratio."""
    codes = {"nothing": "pass", "routeheat": "import routeheat", "numpy, pint": "import numpy, pint"}
    times: dict[str, list[float]] = {name: [] for name in codes}
    for _ in range(runs):
        for name, code in codes.items():
            times[name].append(seconds(code))
    base = statistics.median(times["nothing"])
    net = {name: statistics.median(values) - base for name, values in times.items()}
    print(f"import routeheat {net['routeheat'] * 1000:.0f} ms, import numpy, pint {net['numpy, pint'] * 1000:.0f} ms")
    print(f"ratio {net['routeheat'] / net['numpy, pint']:.2f} (to be at most 1)")


if __name__ == "__main__":
    main()
