"""Looking up known species: candidates for a CAS number, a formula or a name, and the sheet lines that they make.

An isomer is never picked silently: a formula lists everything of its composition, and :func:`known_row` refuses
whatever is not unique.
"""

from __future__ import annotations

import difflib
import re
from dataclasses import dataclass
from fractions import Fraction
from functools import cache

from routeheat.chem.formula import Formula, read_formula
from routeheat.chem.route import Declaration
from routeheat.chem.row import Row
from routeheat.chem.species import Species
from routeheat.errors import FormulaError, UnknownName
from routeheat.known.table import NINETY_FIVE, KnownSpecies, Transition, species_table, transitions
from routeheat.notation.code import row
from routeheat.present.show import Shown
from routeheat.present.table import Column, Reading, Table

NEAR = 8
"""How many near names are listed at most."""

_CAS = re.compile(r"[0-9]{2,7}-[0-9]{2}-[0-9]")


@dataclass(frozen=True, slots=True)
class Candidates(Shown):
    """What the table knows under a query. Nothing is picked: the reader chooses."""

    query: str
    """As asked."""
    exact: tuple[KnownSpecies, ...]
    """Lines whose CAS number, composition or name is the one asked for, in that order."""
    near: tuple[KnownSpecies, ...]
    """Lines whose name only looks like the query."""

    def __len__(self) -> int:
        return len(self.exact)

    @property
    def names(self) -> tuple[str, ...]:
        """Every different substance among the exact matches, once."""
        return tuple(dict.fromkeys(line.name for line in self.exact))

    @property
    def transitions(self) -> tuple[Transition, ...]:
        """Fusions, vaporisations and other transitions of the exact matches."""
        return tuple(change for change in transitions() if change.name in self.names)

    def tables(self) -> tuple[Table, ...]:
        """The candidates and, where there are any, their transitions."""
        return (self.table(), _transition_table(self.transitions)) if self.transitions else (self.table(),)

    def table(self) -> Table:
        """Candidates with phase, CAS number, formation enthalpy, heat capacity and source."""
        columns = (
            Column("match", "match"),
            Column("name", "name"),
            Column("formula", "formula"),
            Column("state", "state"),
            Column("cas", "CAS"),
            Column("formation_enthalpy", "ΔfH°(298.15 K)", "kJ/mol", "right", 2),
            Column("heat_capacity", "Cp(298.15 K)", "J/(mol K)", "right"),
            Column("source", "source"),
            Column("checked", "compared with"),
        )
        rows = tuple(
            (
                match,
                line.name,
                line.formula.rich,
                line.state,
                line.cas or None,
                Reading(float(line.value), None if line.u is None else float(line.u), float(NINETY_FIVE)),
                line.cp,
                line.source,
                line.checked or "not compared",
            )
            for match, lines in (("exact", self.exact), ("near", self.near))
            for line in lines
        )
        return Table(f"Known species: {self.query}", columns, rows, self._notes())

    def _notes(self) -> tuple[str, ...]:
        notes = []
        if not self.exact and not self.near:
            notes.append("Nothing in the table looks like this. It is not a complete list of species.")
        elif not self.exact:
            notes.append("Nothing has exactly this CAS number, composition or name; these names are near.")
        if self.exact or self.near:
            notes.append("'compared with' names independent data sets that agree with the number, or differ from it.")
            notes.append("The attribution of a number to a handbook was typed from memory.")
        if len(self.names) > 1:
            notes.append("Several substances fit. Choose by name or CAS number: isomers have different heats.")
        if any(not line.verified for line in (*self.exact, *self.near)):
            notes.append("A source with 'unverified' was typed from memory and could not be compared: confirm it.")
        if any(line.phase == "aq" and line.formula.charge for line in self.exact):
            notes.append("Aqueous ions are at infinite dilution, on the scale H^+(aq) = 0.")
        return tuple(notes)

    def rows(self) -> str:
        """The exact matches as lines of a sheet, ready to paste: declarations, then known rows."""
        return rows_text(self.exact)


def _transition_table(changes: tuple[Transition, ...]) -> Table:
    columns = (
        Column("name", "name"),
        Column("kind", "transition"),
        Column("change", "change"),
        Column("temperature", "T", "K", "right", 2),
        Column("enthalpy", "ΔH", "kJ/mol", "right", 2),
        Column("source", "source"),
    )
    rows = tuple(
        (
            change.name,
            change.kind,
            f"({change.before}{', ' + change.form if change.form else ''}) → ({change.after})",
            change.temperature,
            float(change.enthalpy),
            change.source,
        )
        for change in changes
    )
    return Table("Transitions", columns, rows)


def find_species(query: str) -> Candidates:
    """Known species by CAS number, by formula in any writing, or by name.

    Exact matches come first: CAS number, composition with charge, name. Names that only look like the query follow.
    """
    asked = query.strip()
    found: list[KnownSpecies] = []
    if _CAS.fullmatch(asked):
        found += [line for line in species_table() if line.cas == asked]
    else:
        wanted = _composition(asked)
        named = _by_name().get(_plain(asked), ())
        found += [line for line in species_table() if wanted is not None and line.composition == wanted]
        found += [line for line in named if line not in found]
    taken = {line.name for line in found}
    near = [line for name in _near_names(asked) for line in _by_name()[name] if line.name not in taken]
    return Candidates(asked, tuple(found), tuple(dict.fromkeys(near)))


def known_row(query: str, phase: str, form: str = "", *, label: str = "") -> Row:
    """The formation row of a species that is unique under its name, CAS number or formula, in one phase.

    ``label`` is the label of the row; by default it is made from the formula or name and the phase. Raises
    :class:`~routeheat.errors.UnknownName` with the candidates when nothing or more than one thing fits, and
    ``ValueError`` for a reference state, whose formation is zero by definition.
    """
    candidates = find_species(query)
    lines = [line for line in candidates.exact if line.phase == phase and (not form or line.form == form)]
    if len(lines) != 1:
        fitting = lines or [*candidates.exact, *candidates.near]
        raise UnknownName(
            "single species", f"{query}({phase})", [f"{line.name}{line.state} [{line.cas}]" for line in fitting]
        )
    line = lines[0]
    if line.is_reference:
        raise ValueError(f"{line.name}{line.state} is a reference state: its formation is zero by definition")
    return row(
        label or row_label(line),
        _equation(line),
        line.measured.text,
        source=line.source,
        species={line.name: _declaration(line)} if must_be_declared(line) else None,
    )


def rows_text(lines: tuple[KnownSpecies, ...]) -> str:
    """Lines of the table as sheet text: a species section where names are needed, then known rows.

    A reference state makes no row, because its formation is zero by definition; a comment says so.
    """
    declared = {line.name: line for line in lines if must_be_declared(line)}
    blocks = []
    if declared:
        width = max(len(name) for name in declared)
        made = [
            f"  {name:<{width}}  {line.formula.text}" + (f" | cas {line.cas}" if line.cas else "")
            for name, line in declared.items()
        ]
        blocks.append("\n".join(["species", *made]))
    if lines:
        blocks.append("\n".join(["known", *(_sheet_line(line) for line in lines)]))
    return "\n\n".join(blocks) + "\n" if blocks else ""


def _sheet_line(line: KnownSpecies) -> str:
    if line.is_reference:
        return f"  # {_written(line)} is a reference state: zero by definition"
    source = line.source.replace('"', "'")
    return f'  [{row_label(line)}] {_equation(line)} | dH {line.measured.text} | source "{source}"'


def must_be_declared(line: KnownSpecies) -> bool:
    """Whether a sheet needs a declared name for the species, because its formula would not say which isomer it is.

    Ions, inorganic species and hydrocarbons of one or two carbon atoms are typed as formulas, unless the table itself
    holds another substance of that composition.
    """
    atoms, charge = line.composition
    if len(_names_of_composition()[_key(line.formula)]) > 1:
        return True
    small = set(atoms) == {"C", "H"} and atoms["C"] <= 2
    return not charge and {"C", "H"} <= set(atoms) and not small and not set(atoms) & _METALS


_METALS = frozenset(["Na", "K", "Ca"])


def row_label(line: KnownSpecies) -> str:
    """A label for the row of a species: ``H2O_l``, ``SO4_2-_aq``, ``C_s_diamond``."""
    name = line.name if must_be_declared(line) else line.formula.text
    parts = [name.replace("^", "_"), line.phase, line.form]
    label = re.sub(r"[^\w.\-+*']+", "_", "_".join(part for part in parts if part)).strip("_")
    return label[:40]


def _written(line: KnownSpecies) -> str:
    return (line.name if must_be_declared(line) else line.formula.text) + line.state


def _declaration(line: KnownSpecies) -> Declaration:
    return Declaration(Species(line.name, "", "", line.formula, declared=True), cas=line.cas)


def _equation(line: KnownSpecies) -> str:
    return f"formation of {_written(line)}"


def _composition(text: str) -> tuple[dict[str, Fraction], int] | None:
    try:
        formula = read_formula(text)
    except FormulaError:
        return None
    return formula.composition, formula.charge


def _key(formula: Formula) -> tuple[frozenset[tuple[str, Fraction]], int]:
    return frozenset(formula.counts), formula.charge


@cache
def _names_of_composition() -> dict[tuple[frozenset[tuple[str, Fraction]], int], frozenset[str]]:
    found: dict[tuple[frozenset[tuple[str, Fraction]], int], set[str]] = {}
    for line in species_table():
        # the forms of an element (diamond, graphite) are told apart by the form, not by a name
        name = "" if len(line.formula.counts) == 1 else line.name
        found.setdefault(_key(line.formula), set()).add(name)
    return {key: frozenset(names) for key, names in found.items()}


def _plain(name: str) -> str:
    return re.sub(r"[\s\-]+", "", name.casefold())


@cache
def _by_name() -> dict[str, tuple[KnownSpecies, ...]]:
    found: dict[str, list[KnownSpecies]] = {}
    for line in species_table():
        for name in (line.name, *line.other_names):
            lines = found.setdefault(_plain(name), [])
            if line not in lines:
                lines.append(line)
    return {name: tuple(lines) for name, lines in found.items()}


def _near_names(asked: str) -> list[str]:
    wanted = _plain(asked)[:80]
    if len(wanted) < 3:
        return []
    inside = [name for name in _by_name() if wanted in name and name != wanted]
    alike = difflib.get_close_matches(wanted, list(_by_name()), n=NEAR, cutoff=0.75)
    return list(dict.fromkeys([*sorted(inside, key=len), *alike]))[:NEAR]
