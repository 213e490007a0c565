"""Times of combining 20, 100 and 500 known rows, beside sympy.linsolve on the same equations in the same run.

Run as a script. Three kinds of network, all with a target that the rows reach:

formation  formation rows of compounds of four elements, and reactions among the compounds
chain      one long chain of reactions with a common reagent, each link needed
cycles     random reactions among few species, so that many combinations exist

``combine`` goes from rows to the shortest combination. linsolve solves the same equations, handed over as expressions
and as a matrix; "with stating" adds the time to write the expressions down from the rows.
"""

from __future__ import annotations

import random
import time
from collections.abc import Callable
from fractions import Fraction

import sympy

from routeheat.chem.measured import Measured
from routeheat.chem.reaction import Reaction, add_net
from routeheat.chem.row import Heat, Row
from routeheat.chem.species import Species
from routeheat.hess.combination import combine
from routeheat.units import KJ_PER_MOL

SIZES = (20, 100, 500)
LARGEST_MATRIX = 20
"""Rows up to which the matrix form is timed; it takes seconds to minutes beyond."""
Net = dict[Species, Fraction]


def species(name: str) -> Species:
    return Species(name, "g", declared=True)


def rows_of(nets: list[Net]) -> list[Row]:
    heat = Heat(Measured(Fraction(-100), KJ_PER_MOL))
    return [Row(f"K{index}", Reaction.from_net(net), heat) for index, net in enumerate(nets, 1)]


def formation(count: int, rng: random.Random) -> tuple[list[Row], Reaction]:
    elements = [species(f"E{i}") for i in range(4)]
    compounds = [species(f"C{i}") for i in range(count // 2)]
    made_of = {c: {e: Fraction(rng.randint(1, 6), 2) for e in rng.sample(elements, 3)} for c in compounds}
    nets = [{**{e: -n for e, n in made_of[c].items()}, c: Fraction(1)} for c in compounds]
    for _ in range(count - len(compounds)):
        net = dict(zip(rng.sample(compounds, 3), (Fraction(-1), Fraction(-1), Fraction(1)), strict=True))
        balance: Net = {}
        for compound, nu in net.items():
            for element, n in made_of[compound].items():
                balance[element] = balance.get(element, Fraction(0)) - nu * n
        nets.append({**net, **{element: n for element, n in balance.items() if n}})
    rows = rows_of(nets)
    return rows, some_sum(rows, rng, 4)


def chain(count: int, rng: random.Random) -> tuple[list[Row], Reaction]:
    links = [species(f"S{i}") for i in range(count + 1)]
    reagents = [species(f"R{i}") for i in range(7)]
    nets = [
        {links[i]: Fraction(-1), rng.choice(reagents): Fraction(-1), links[i + 1]: Fraction(1)} for i in range(count)
    ]
    rows = rows_of(nets)
    return rows, Reaction.from_net(add_net((Fraction(1), row.reaction) for row in rows))


def cycles(count: int, rng: random.Random) -> tuple[list[Row], Reaction]:
    pool = [species(f"S{i}") for i in range(max(count * 2 // 5, 6))]
    numbers = [Fraction(n) for n in (-2, -1, 1, 2)]
    rows = rows_of([{s: rng.choice(numbers) for s in rng.sample(pool, 3)} for _ in range(count)])
    return rows, some_sum(rows, rng, 3)


def some_sum(rows: list[Row], rng: random.Random, count: int) -> Reaction:
    return Reaction.from_net(add_net((Fraction(1), row.reaction) for row in rng.sample(rows, count)))


def seconds(work: Callable[[], object]) -> float:
    start = time.perf_counter()
    work()
    return time.perf_counter() - start


def expressions(rows: list[Row], target: Reaction) -> list[sympy.Expr]:
    sums: dict[Species, list[sympy.Expr]] = {}
    for row in rows:
        for s, nu in row.reaction.net.items():
            sums.setdefault(s, []).append(sympy.Rational(nu.numerator, nu.denominator) * sympy.Symbol(row.label))
    for s, nu in target.net.items():
        sums.setdefault(s, []).append(-sympy.Rational(nu.numerator, nu.denominator))
    return [sympy.Add(*parts) for parts in sums.values()]


def main() -> None:
    titles = ("network", "rows", "combine", "linsolve", "ratio", "with stating", "ratio", "as matrix", "ratio")
    print("{:10} {:>5} {:>11} {:>11} {:>7} {:>12} {:>7} {:>11} {:>7}".format(*titles))
    for kind in (formation, chain, cycles):
        for count in SIZES:
            rows, target = kind(count, random.Random(count))
            own = min(seconds(lambda r=rows, t=target: combine(t, r)) for _ in range(3))
            stating = seconds(lambda r=rows, t=target: expressions(r, t))
            equations = expressions(rows, target)
            symbols = [sympy.Symbol(row.label) for row in rows]
            solving = seconds(lambda e=equations, s=symbols: sympy.linsolve(e, *s))
            matrix, goal = sympy.linear_eq_to_matrix(equations, *symbols)
            dense = seconds(lambda m=matrix, g=goal: sympy.linsolve((m, g))) if count <= LARGEST_MATRIX else None
            line = f"{kind.__name__:10} {count:5} {own * 1e3:8.1f} ms {solving * 1e3:8.0f} ms {own / solving:7.3f}"
            line += f" {(stating + solving) * 1e3:9.0f} ms {own / (stating + solving):7.3f}"
            print(line + (f" {dense * 1e3:8.0f} ms {own / dense:7.3f}" if dense is not None else ""))


if __name__ == "__main__":
    main()
