"""How long reconciliation takes at 100, 500 and 2,000 rows, and the table of next measurements at 500.

Run as ``python tests/bench/bench_reconcile.py``. Networks are invented: half the rows are formations, half are
reactions among twelve neighbouring species; uncertainties spread over three decades.
"""

from __future__ import annotations

import random
import time
from fractions import Fraction

from routeheat.chem.heat import HeatSum
from routeheat.chem.measured import Measured, Spread
from routeheat.chem.reaction import Reaction
from routeheat.chem.row import Heat, Row, Rows
from routeheat.chem.species import Species
from routeheat.hess.reconcile import reconcile
from routeheat.process.next_measurement import next_measurement
from routeheat.units import KJ_PER_MOL


def network(size: int, seed: int = 1) -> Rows:
    """A network of ``size`` rows whose true heats close every cycle."""
    chance = random.Random(seed)
    count = size * 3 // 5
    species = [Species(f"S{index}", "l") for index in range(count)]
    element = Species("E", "s")
    true = [Fraction(chance.randint(-800_000, 100_000), 1000) for _ in species]
    rows = []
    for index in range(size):
        if index < count * 5 // 6:
            numbers = {index: Fraction(1)}
        else:
            start = chance.randrange(count)
            near = [(start + offset) % count for offset in range(12)]
            numbers = {place: Fraction(chance.choice([-2, -1, -1, 1, 1, 2])) for place in chance.sample(near, 4)}
        net = {species[place]: number for place, number in numbers.items()}
        net[element] = -sum(numbers.values(), Fraction(0))
        u = Fraction(f"{10 ** chance.uniform(-2, 1):.6f}")
        heat = sum(number * true[place] for place, number in numbers.items())
        typed = Fraction(f"{float(heat) + chance.gauss(0, float(u)):.6f}")
        rows.append(Row(f"K{index}", Reaction.from_net(net), Heat(Measured(typed, KJ_PER_MOL, Spread(u, Fraction(1))))))
    return Rows(rows, k=1.0)


def main() -> None:
    """Print one line a size."""
    for size in (100, 500, 2000):
        rows = network(size)
        begin = time.perf_counter()
        found = reconcile(rows)
        took = time.perf_counter() - begin
        begin = time.perf_counter()
        found.tables()
        shown = time.perf_counter() - begin
        print(f"reconcile {size:5d} rows, {found.dof:4d} cycles: {took:6.2f} s, its tables {shown:5.2f} s")
        if size == 500:
            assert found.adjusted is not None
            labels = found.labels[-3:]
            target = HeatSum.total((Fraction(1), found.adjusted[label]) for label in labels)
            begin = time.perf_counter()
            table = next_measurement(target, attainable=0.5, known=found)
            print(f"next measurement at 500 rows, {len(table.effects)} candidates: {time.perf_counter() - begin:.2f} s")


if __name__ == "__main__":
    main()
