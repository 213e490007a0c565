"""The table of groups, and how groups are declared or found."""

from __future__ import annotations

import sys
from importlib.util import find_spec

import pytest

from routeheat.errors import FormulaError, RouteheatError, UnknownName
from routeheat.process.groups import groups, groups_of_structure, read_groups

HAS_STRUCTURES = find_spec("rdkit") is not None
STRUCTURES = [
    ("CC(=O)N=[N+]=[N-]", {"azide": 1}),
    ("Cc1ccc(S(=O)(=O)N=[N+]=[N-])cc1", {"sulfonyl azide": 1}),
    ("c1ccccc1[N+](=O)[O-]", {"nitroarene": 1}),
    ("C[N+](=O)[O-]", {"nitroalkane": 1}),
    ("CCO[N+](=O)[O-]", {"nitrate ester": 1}),
    ("O=NC1CCCCC1", {"nitroso": 1}),
    ("[O-][n+]1ccccc1", {"N-oxide": 1}),
    ("CN=NC", {"azo": 1}),
    ("CCOC(=O)C=[N+]=[N-]", {"diazo": 1}),
    ("c1ccccc1[N+]#N", {"diazonium": 1}),
    ("CC(C)(C)OO", {"peroxide": 1}),
    ("C1CO1", {"epoxide": 1}),
    ("CC(C)=NO", {"oxime": 1}),
    ("c1ccccc1", {}),
]


def test_every_line_has_a_source_and_a_range() -> None:
    for group in groups().values():
        assert group.source
        assert 0 < group.released_low <= group.released_high
        assert group.listed in ("explosive", "self-reactive")
        assert group.released_mean is None or group.released_low <= group.released_mean <= group.released_high


def test_no_spelling_means_two_groups() -> None:
    words = [word.lower() for group in groups().values() for word in (group.name, *group.spellings)]
    assert len(words) == len(set(words))


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("azide", {"azide": 1}),
        ("2 nitroarene, epoxide", {"nitroarene": 2, "epoxide": 1}),
        ("C=C; oxirane", {"alkene": 1, "epoxide": 1}),
        ("Azide, azide", {"azide": 2}),
        ("none", {}),
        ("nil", {}),
    ],
)
def test_declared_groups(text: str, expected: dict[str, int]) -> None:
    found = read_groups(text)
    assert found is not None
    assert {group.name: count for group, count in found.items()} == expected


def test_nothing_declared_is_not_none() -> None:
    assert read_groups("  ") is None


def test_unknown_group_names_the_nearest() -> None:
    with pytest.raises(UnknownName, match="did you mean 'azide'"):
        read_groups("azid")


def test_structure_without_the_extra(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(sys.modules, "rdkit", None)
    monkeypatch.setitem(sys.modules, "rdkit.Chem", None)
    with pytest.raises(RouteheatError, match="routeheat\\[structures\\]"):
        groups_of_structure("CCO")


if HAS_STRUCTURES:

    @pytest.mark.parametrize(("smiles", "expected"), STRUCTURES)
    def test_groups_of_structures(smiles: str, expected: dict[str, int]) -> None:
        assert {group.name: count for group, count in groups_of_structure(smiles).items()} == expected

    def test_unreadable_structure() -> None:
        with pytest.raises(FormulaError, match="cannot be read"):
            groups_of_structure("C(((")
