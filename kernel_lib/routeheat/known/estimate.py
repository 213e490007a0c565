"""Formation enthalpies of gases estimated from their structure, group by group: wide, and marked as estimates.

Method of K. G. Joback, R. C. Reid, Chem. Eng. Commun. 57 (1987) 233, ΔfH°(298.15 K) = 68.29 kJ/mol + Σ groups, as the
``thermo`` library computes it; it quotes an average absolute error of 2.2 kcal/mol over the 370 compounds of the fit.
Needs the extra ``structures``. Structures outside what the method was found to hold for are refused with the reason.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from importlib import import_module, metadata
from typing import Any

from routeheat.chem.formula import Formula, read_formula
from routeheat.chem.measured import Measured, Spread
from routeheat.chem.route import Declaration
from routeheat.chem.species import PHASES
from routeheat.errors import RouteheatError
from routeheat.notation.names import read_name
from routeheat.notation.tokens import Piece, Trouble
from routeheat.present.numbers import number
from routeheat.present.show import Shown
from routeheat.present.table import Column, Reading, Table
from routeheat.units import KJ_PER_MOL

LEAST_U = 10
"""kJ/mol: no estimate is taken to be better known than this, whatever was found for compounds like it."""
FOUND: tuple[tuple[str, int], ...] = (
    ("a ring of five or six atoms that is no benzene ring", 30),
    ("a nitro group", 20),
    ("more than 14 atoms other than hydrogen", 20),
    ("open chains and benzene rings", 15),
)
"""Standard uncertainty in kJ/mol by what the structure holds; the first that applies counts.

Root mean square differences, rounded up, from gas values of the CRC data set of the ``chemicals`` library (version
1.5.2) over the structures that are accepted: 27.8 (76 substances), 17.4 (13), 18.4 (29), 11.7 (469).
"""
REFUSED: tuple[tuple[str, str], ...] = (
    ("an amide, urea, carbamate or imide: known to be off by about 90 kJ/mol", "[#6X3](=[O,S])[#7]"),
    ("an aromatic ring with nitrogen, oxygen or sulfur", "[n,o,s]"),
    ("two nitrogen atoms side by side: off by 100 kJ/mol and more", "[#7]~[#7]"),
    ("two oxygen atoms side by side: off by about 200 kJ/mol", "[#8]~[#8]"),
    ("nitrogen on oxygen, other than in a nitro group", "[#7;!$([#7+](=O)[O-])]~[#8]"),
    ("a nitrate or nitrite: off by more than 100 kJ/mol", "[#8X2][#7]"),
    ("two nitro groups on one carbon", "[#6]([N+](=O)[O-])[N+](=O)[O-]"),
    ("two halogens on one carbon", "[#6]([F,Cl,Br,I])[F,Cl,Br,I]"),
    ("two double bonds side by side", "*=*=*"),
    ("two carbonyl groups side by side", "[#6](=O)[#6](=O)"),
    ("a quinone: off by about 130 kJ/mol", "O=C1C=CC(=O)C=C1"),
    ("a carbonate", "[#8][#6](=O)[#8]"),
    ("an anhydride", "[#6](=O)[#8][#6](=O)"),
    ("an acyl halide", "C(=O)[F,Cl,Br,I]"),
    ("two of O, S and N on one saturated carbon", "[#8X2,#16X2,#7X3][#6X4][#8X2,#16X2,#7X3]"),
    ("a triple bond beside an atom other than carbon", "[!#6;!#1]-[#6]#*"),
    ("two nitrile groups on one carbon", "C(C#N)C#N"),
    ("two triple bonds side by side", "C#C-C#*"),
    ("two sulfur atoms side by side", "[#16]~[#16]"),
    ("sulfur with a double bond", "[#16]=*"),
)
"""Reason and pattern (SMARTS) of what is refused; the sizes are from the comparison of :data:`FOUND`."""
_MOST_HALOGENS = 3
_LARGE = 14
_LONGEST = 500
_SOURCE = "estimate: groups of Joback and Reid, Chem. Eng. Commun. 57 (1987) 233; thermo {}"


class EstimateRefused(RouteheatError):
    """A structure that the groups do not describe; ``.reason`` says why."""

    def __init__(self, structure: str, reason: str) -> None:
        self.structure = structure
        """The SMILES, or the name where there is none."""
        self.reason = reason
        super().__init__(f"no estimate for {structure[:80]}: {reason}")


@dataclass(frozen=True, slots=True, repr=False)
class Estimate(Shown):
    """ΔfH°(298.15 K) of a gas, estimated. Never a measured value."""

    name: str
    """What the species is called in a sheet."""
    declared: bool
    """True when the sheet declares that name already."""
    formula: Formula
    smiles: str
    value: Fraction
    """kJ/mol, to one decimal."""
    u: Fraction
    """Standard uncertainty in kJ/mol; at least 10."""
    why_u: str
    """What in the structure the uncertainty was found for."""
    groups: tuple[tuple[str, int], ...]
    """Groups as the method writes them, with how often each occurs."""
    source: str

    @property
    def measured(self) -> Measured:
        """The value with its uncertainty (k = 2) as it is typed in a sheet."""
        return Measured(self.value, KJ_PER_MOL, Spread(2 * self.u, Fraction(2), "k = 2"), 1)

    def row(self, label: str = "") -> str:
        """Lines of a sheet, ready to paste: the species where the sheet does not declare it, and the known row."""
        lines = [] if self.declared else ["species", f'  {self.name}  {self.formula.text} | smiles "{self.smiles}"', ""]
        lines += [
            "known",
            f"  [{label or 'estimate_' + _label(self.name)}] formation of {self.name}(g)",
            f'       dH {self.measured.text} | source "{self.source}" | estimated dH',
        ]
        return "\n".join(lines) + "\n"

    def table(self) -> Table:
        """The groups, and the estimate last."""
        columns = (Column("group", "group"), Column("count", "count", align="right"),
                   Column("heat", "ΔfH°(298.15 K)", "kJ/mol", "right"))  # fmt: skip
        total = Reading(float(self.value), float(self.u), 2.0, estimated=True)
        rows = (*((name, count, None) for name, count in self.groups), (f"{self.name}(g)", None, total))
        notes = (
            f"estimated; u = {number(float(self.u), 0)} kJ/mol is what was found for {self.why_u}",
            "Gas at 298.15 K; a liquid also needs its vaporisation, a solid its sublimation.",
            "What stands beside a group is not seen: isomers with the same groups get the same number.",
            self.source,
        )
        return Table(f"Estimate: formation of {self.name}(g)", columns, rows, notes, frozenset([len(rows) - 1]))

    def to_dict(self) -> dict[str, Any]:
        """JSON-safe content; kJ/mol."""
        return {
            "name": self.name, "formula": self.formula.text, "smiles": self.smiles, "estimated": True,
            "heat": {"value": float(self.value), "u": float(self.u), "k": 2.0, "unit": "kJ/mol"},
            "groups": dict(self.groups), "why_u": self.why_u, "source": self.source,
        }  # fmt: skip


def estimate_formation(structure: Declaration | str, *, name: str = "", phase: str = "") -> Estimate:
    """ΔfH°(298.15 K) of a gas from the groups of its structure.

    ``structure`` is a SMILES, or a declared species with the key ``smiles`` (``sheet.species["X"]``). ``name`` is what
    a SMILES is to be called in a sheet; without it, its formula. ``phase`` is that of the declared species, else gas.

    Raises :class:`EstimateRefused` with the reason for another phase than gas, a structure whose atoms are not all
    assigned to groups, and structures for which the method is known to be far off (:data:`REFUSED`, small, large and
    fused rings, fewer than three carbon atoms, many halogens, ions, radicals, isotopes);
    :class:`~routeheat.errors.RouteheatError` when the extra is not installed.
    """
    smiles, called = _smiles(structure, name)
    wanted = phase or (structure.species.phase if isinstance(structure, Declaration) else "") or "g"
    if wanted != "g":
        where = PHASES.get(wanted, wanted)
        raise EstimateRefused(called or smiles, f"the groups give the gas, not the species as {where} ({wanted}); ask "
                              'with phase="g", and type its vaporisation or sublimation as a row')  # fmt: skip
    chem, joback = _libraries()
    if len(smiles) > _LONGEST:
        raise EstimateRefused(smiles, f"a structure of more than {_LONGEST} characters")
    with import_module("rdkit.rdBase").BlockLogs():
        molecule = chem.MolFromSmiles(smiles)
    if molecule is None or not molecule.GetNumAtoms():
        raise EstimateRefused(smiles, "this is no SMILES of a structure")
    reason = next(_reasons(chem, molecule), "")
    if reason:
        raise EstimateRefused(smiles, f"it holds {reason}")
    found = joback.Joback(molecule)
    value = joback.Joback.Hf(found.counts) if found.success and found.counts else None
    if found.status != "OK" or value is None:
        raise EstimateRefused(smiles, f"not every atom belongs to a group ({found.status})")
    formula = read_formula(chem.rdMolDescriptors.CalcMolFormula(molecule), declared=True)
    if isinstance(structure, Declaration):
        _same_formula(structure, formula)
    u, why = _uncertainty(chem, molecule)
    names = [line[1] for line in joback.J_BIGGS_JOBACK_SMARTS]
    return Estimate(
        name=called or formula.text,
        declared=isinstance(structure, Declaration) or not called,
        formula=formula,
        smiles=smiles,
        value=Fraction(round(value / 100), 10),
        u=Fraction(u),
        why_u=why,
        groups=tuple((names[group - 1], count) for group, count in sorted(found.counts.items())),
        source=_SOURCE.format(metadata.version("thermo")),
    )


def _smiles(structure: Declaration | str, name: str) -> tuple[str, str]:
    if isinstance(structure, Declaration):
        typed = dict(structure.settings).get("smiles")
        if not isinstance(typed, str):
            hint = 'its structure is not typed: smiles "CCO" on its species line'
            raise EstimateRefused(structure.species.name, hint)
        return typed.strip(), structure.species.name
    try:
        return structure.strip(), read_name(Piece(name.strip(), 1, 0)) if name.strip() else ""
    except Trouble as trouble:
        raise EstimateRefused(name.strip(), f"{trouble.fault.message}: {trouble.fault.hint}") from None


def _libraries() -> tuple[Any, Any]:
    """RDKit's chemistry and the module of the groups."""
    try:
        chem = import_module("rdkit.Chem")
        import_module("rdkit.Chem.rdMolDescriptors")
        return chem, import_module("thermo.group_contribution.joback")
    except ImportError:
        raise RouteheatError("estimates need the extra structures: pip install routeheat[structures]") from None


def _reasons(chem: Any, molecule: Any) -> Iterator[str]:
    """Everything for which the groups were found to be wrong, or do not hold at all."""
    atoms = list(molecule.GetAtoms())
    if len(chem.GetMolFrags(molecule)) > 1:
        yield "more than one molecule"
    if chem.GetFormalCharge(molecule):
        yield "a charge: the groups are for neutral molecules"
    if any(atom.GetNumRadicalElectrons() for atom in atoms):
        yield "an unpaired electron"
    if any(atom.GetIsotope() for atom in atoms):
        yield "an isotope"
    rings = molecule.GetRingInfo()
    sizes = {len(ring) for ring in rings.AtomRings()}
    if sizes & {3, 4}:
        yield "a ring of three or four atoms: known to be off by about 80 kJ/mol"
    if any(size > 6 for size in sizes):
        yield "a ring of more than six atoms"
    if any(rings.NumAtomRings(atom.GetIdx()) > 1 for atom in atoms):
        yield "fused or bridged rings: known to be off by about 120 kJ/mol"
    for reason, pattern in REFUSED:
        if molecule.HasSubstructMatch(chem.MolFromSmarts(pattern)):
            yield reason
    if len(molecule.GetSubstructMatches(chem.MolFromSmarts("[F,Cl,Br,I]"))) > _MOST_HALOGENS:
        yield "more than three halogens: known to be off by about 140 kJ/mol"
    if sum(atom.GetAtomicNum() == 6 for atom in atoms) < 3:
        yield "fewer than three carbon atoms: look it up, do not estimate it"


def _uncertainty(chem: Any, molecule: Any) -> tuple[int, str]:
    """Standard uncertainty in kJ/mol, and what it was found for."""
    atoms = list(molecule.GetAtoms())
    holds = (
        any(atom.IsInRing() and not atom.GetIsAromatic() for atom in atoms),
        molecule.HasSubstructMatch(chem.MolFromSmarts("[N+](=O)[O-]")),
        len(atoms) > _LARGE,
        True,
    )
    why, u = next(found for found, applies in zip(FOUND, holds, strict=True) if applies)
    return max(u, LEAST_U), why


def _same_formula(declared: Declaration, drawn: Formula) -> None:
    formula = declared.species.formula
    if formula is not None and formula.composition != drawn.composition:
        raise EstimateRefused(declared.species.name, f"its SMILES is {drawn.text}, its formula is {formula.text}")


def _label(name: str) -> str:
    return "".join(char if char.isalnum() else "_" for char in name)[:30]
