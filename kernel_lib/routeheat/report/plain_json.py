"""JSON as it is written and read here: sorted, readable, exact fractions as text, nothing invisible, capped."""

from __future__ import annotations

import hashlib
import json
import re
from fractions import Fraction
from pathlib import Path
from typing import Any, NoReturn

from routeheat.errors import RouteheatError
from routeheat.report.files import LARGEST_FILE, read_whole

_LONGEST_EXACT = 4_000
_EXACT = re.compile(r"-?\d+(?:/[1-9]\d*)?")
# Outside the ASCII that structures the text: control, format (bidirectional, zero-width), surrogate, private,
# unassigned characters and separators, all of which hide or reorder what a reader sees
_ORDINARY = re.compile(r"[ -~\n]")


def json_text(content: Any) -> str:
    """``content`` as JSON with sorted keys, two blanks of indentation and a line end.

    Characters that cannot be seen are written as ``\\uXXXX``, which reads back the same. Raises ``ValueError`` on a
    number that is not finite, ``TypeError`` on what JSON cannot hold.
    """
    text = json.dumps(content, indent=2, sort_keys=True, ensure_ascii=False, allow_nan=False)
    return "".join(char if _ORDINARY.match(char) or char.isprintable() else _escaped(char) for char in text) + "\n"


def _escaped(char: str) -> str:
    return json.dumps(char)[1:-1]


def read_json_text(source: str | Path) -> Any:
    """The content of a JSON text, or of a UTF-8 file.

    Raises :class:`~routeheat.errors.RouteheatError` when it is no JSON or too large, ``OSError``.
    """
    name = str(source) if isinstance(source, Path) else "the text"
    text = source
    if isinstance(source, Path):
        try:
            text = read_whole(source).decode("utf-8-sig")
        except UnicodeDecodeError as problem:
            raise RouteheatError(f"{name} is no UTF-8 text (byte {problem.start})") from problem
    assert isinstance(text, str)
    if len(text) > LARGEST_FILE:
        raise RouteheatError(f"{name} is longer than {LARGEST_FILE:,} characters")
    try:
        return json.loads(text, parse_constant=_refuse)
    except (ValueError, RecursionError) as problem:
        raise RouteheatError(f"{name} is no JSON: {problem or 'nested too deeply'}") from problem


def _refuse(constant: str) -> NoReturn:
    raise ValueError(f"{constant} is no number")


def is_exact(text: object) -> bool:
    """True for the text of an exact number: ``2``, ``-3/2``."""
    return isinstance(text, str) and len(text) <= _LONGEST_EXACT and _EXACT.fullmatch(text) is not None


def exact(text: object) -> Fraction:
    """The number of such a text; raises :class:`~routeheat.errors.RouteheatError`."""
    if not is_exact(text):
        raise RouteheatError(f"{str(text)[:40]!r} is no exact number like 3/2")
    return Fraction(str(text))


def digest(text: str) -> str:
    """``sha256:`` and the SHA-256 of a text in UTF-8, hexadecimal."""
    return "sha256:" + hashlib.sha256(text.encode("utf-8", "surrogatepass")).hexdigest()
