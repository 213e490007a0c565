"""Routes written in code, for the tests of the process layer: exact, short, without the sheet parser."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import replace
from fractions import Fraction
from types import SimpleNamespace

import pytest

from routeheat.chem.formula import Formula, read_formula
from routeheat.chem.measured import Measured, Spread
from routeheat.chem.reaction import Reaction, Term
from routeheat.chem.route import Route
from routeheat.chem.row import Heat, Row, Rows
from routeheat.chem.species import Species
from routeheat.chem.step import Recycle, Step
from routeheat.units import read_unit


def species(text: str, declared: dict[str, str] | None = None) -> Species:
    """``NAME(phase)``; the formula comes from ``declared``, else from the name, else there is none."""
    name, _, phase = text.partition("(")
    formula: Formula | None = None
    known = (declared or {}).get(name)
    if known is not None:
        formula = read_formula(known, declared=True)
    elif len(name) > 1:
        formula = read_formula(name)
    return Species(name, phase.rstrip(")"), formula=formula, declared=known is not None or formula is None)


def reaction(text: str, declared: dict[str, str] | None = None) -> Reaction:
    """``2 A + B(l) -> C``, each term with an optional coefficient."""

    def side(part: str) -> tuple[Term, ...]:
        terms = []
        for term in part.split(" + "):
            words = term.split()
            number = Fraction(words[0]) if len(words) == 2 else Fraction(1)
            terms.append((number, species(words[-1], declared)))
        return tuple(terms)

    left, right = text.split(" -> ")
    return Reaction(side(left), side(right))


def measured(text: str) -> Measured:
    """``-135 ± 8 kJ/mol`` at k = 1, or without the ±."""
    number, *rest = text.split()
    spread = None
    if rest and rest[0] == "±":
        spread = Spread(Fraction(rest[1]), Fraction(1))
        rest = rest[2:]
    return Measured(Fraction(number), read_unit(" ".join(rest)), spread)


def row(label: str, text: str, heat: str = "", declared: dict[str, str] | None = None, at: str = "") -> Row:
    """A row with a heat such as ``-135 ± 8`` in kJ/mol; no heat when empty."""
    typed = Heat(measured(f"{heat} kJ/mol"), temperature=measured(at) if at else None) if heat else None
    return Row(label, reaction(text, declared), typed)


def step(
    label: str,
    text: str,
    heat: str = "",
    yield_: str = "",
    *,
    declared: dict[str, str] | None = None,
    equiv: dict[str, str] | None = None,
    limiting: str = "",
    product: str = "",
    side: str = "",
    amount: str = "",
    recycle: Iterable[tuple[str, str, str]] = (),
    conc: str = "",
    cp: str = "",
    at: str = "",
    **more: object,
) -> Step:
    """A step from short texts; ``yield_`` and recycled parts like ``90 ± 2 %``."""
    made = Step(
        row(label, text, heat, declared),
        product=species(product, declared) if product else None,
        limiting=species(limiting, declared) if limiting else None,
        equivalents=tuple((species(s, declared), Fraction(n)) for s, n in (equiv or {}).items()),
        yield_=measured(yield_) if yield_ else None,
        side_of=side,
        amount=measured(f"{amount} mol/mol") if amount else None,
        recycles=tuple(Recycle(species(s, declared), source, measured(part)) for s, source, part in recycle),
        temperature=measured(at) if at else None,
        concentration=measured(f"{conc} mol/kg") if conc else None,
        heat_capacity=measured(f"{cp} kJ/(kg K)") if cp else None,
    )
    return replace(made, **more)  # type: ignore[arg-type]


def route(
    name: str,
    makes: str,
    *steps: Step,
    declared: dict[str, str] | None = None,
    known: Iterable[Row] = (),
    k: float = 1.0,
) -> Route:
    """A route at k = 1."""
    return Route(name, "", species(makes, declared), steps, known=Rows(known, k), k=k)


S2 = {
    "AR": "C8H9FO",
    "NIT": "C8H8FNO3",
    "AMI": "C8H10FNO",
    "BRO": "C8H8BrFO",
    "ACL": "C9H8ClFO2",
    "AZI": "C9H8FN3O2",
    "NCO": "C9H8FNO2",
}
S3 = {
    "EST": "C12H16O3",
    "ACI": "C11H14O3",
    "ACL": "C11H13ClO2",
    "NIT": "C10H10N2O4",
    "AMI": "C10H12N2O2",
    "AMD": "C21H24N2O4",
    "CDI": "C7H6N4O",
    "IMI": "C3H4N2",
}


@pytest.fixture
def amine_routes() -> dict[str, Route]:
    """Three invented routes to one amine; all compounds and values are invented."""
    d = S2
    a = route(
        "A",
        "AMI(s)",
        step(
            "A1",
            "AR(l) + HNO3(aq) -> NIT(s) + H2O(l)",
            "-135 ± 8",
            "88 %",
            declared=d,
            conc="1.6",
            cp="1.75",
            at="20 degC",
        ),
        step(
            "A2",
            "NIT(s) + 3 H2(g) -> AMI(s) + 2 H2O(l)",
            "-545 ± 20",
            "94 %",
            declared=d,
            conc="0.9",
            cp="2.3",
            at="60 degC",
        ),
        declared=d,
    )
    b = route(
        "B",
        "AMI(s)",
        step("B1", "AR(l) + Br2(l) -> BRO(l) + HBr(g)", "-70 ± 10", "82 %", declared=d),
        step("B2", "BRO(l) + 2 NH3(aq) -> AMI(s) + NH4Br(aq)", "-75 ± 15", "78 %", declared=d),
        declared=d,
    )
    c = route(
        "C",
        "AMI(s)",
        step("C1", "ACL(l) + NaN3(aq) -> AZI(sln) + NaCl(aq)", "-60 ± 15", "90 %", declared=d),
        step("C2", "AZI(sln) -> NCO(sln) + N2(g)", "-150 ± 20", "85 %", declared=d),
        step("C3", "NCO(sln) + H2O(l) -> AMI(s) + CO2(g)", "-95 ± 15", "92 %", declared=d),
        declared=d,
    )
    return {"A": a, "B": b, "C": c}


def amide_steps(rename: Callable[[str], str] = lambda label: label) -> dict[str, Step]:
    """The steps of the two invented routes to one amide, by their first label."""
    d = S3
    return {
        "X1": step(rename("X1"), "EST(l) + H2O(l) -> ACI(s) + CH4O(l)", "-55 ± 3", "93 %", declared=d),
        "X2": step(rename("X2"), "ACI(s) + SOCl2(l) -> ACL(l) + SO2(g) + HCl(g)", "12 ± 8", "97 %", declared=d),
        "X2q": step(
            rename("X2q"),
            "SOCl2(l) + H2O(l) -> SO2(g) + 2 HCl(aq)",
            "-95 ± 10",
            declared=d,
            side=rename("X2"),
            amount="0.3",
        ),
        "Y1": step(rename("Y1"), "NIT(s) + 3 H2(g) -> AMI(s) + 2 H2O(l)", "-548 ± 15", "91 %", declared=d),
        "C": step(
            rename("C"),
            "ACL(l) + AMI(s) + C6H15N(l) -> AMD(sln) + C6H16NCl(s)",
            "-140 ± 8",
            "89 %",
            declared=d,
            limiting="AMI(s)",
            equiv={"ACL(l)": "1.05"},
        ),
        "C2": step(
            rename("C2"),
            "ACI(s) + AMI(s) + CDI(s) -> AMD(sln) + CO2(g) + 2 IMI(s)",
            "-85 ± 10",
            "84 %",
            declared=d,
            limiting="ACI(s)",
            equiv={"AMI(s)": "1.05"},
        ),
        "F": step(
            rename("F"),
            "AMD(sln) -> AMD(s)",
            "-25 ± 5",
            "94 %",
            declared=d,
            operation="crystallisation",
            loss="reacted",
        ),
    }


def amide_route(name: str, labels: str, rename: Callable[[str], str] = lambda label: label) -> Route:
    """One of the routes to the amide, from the labels of its steps."""
    steps = amide_steps(rename)
    return route(name, "AMD(s)", *(steps[label] for label in labels.split()), declared=S3)


ACID_CHLORIDE = "X1 X2 X2q Y1 C F"
IMIDAZOLIDE = "X1 Y1 C2 F"


@pytest.fixture
def amide_routes() -> dict[str, Route]:
    """Two invented routes to one amide that share X1, Y1 and F; all values are invented."""
    return {"1": amide_route("1", ACID_CHLORIDE), "2": amide_route("2", IMIDAZOLIDE)}


@pytest.fixture
def code() -> SimpleNamespace:
    """The writers above, for test modules that cannot import this file."""
    return SimpleNamespace(
        species=species,
        measured=measured,
        row=row,
        step=step,
        route=route,
        reaction=reaction,
        amide_route=amide_route,
        amide_steps=amide_steps,
        first=ACID_CHLORIDE,
        second=IMIDAZOLIDE,
        amide=S3,
    )
