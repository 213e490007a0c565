"""Files that are whole or not there: written beside their place, then renamed into it; read with a size limit."""

from __future__ import annotations

import os
import secrets
from pathlib import Path

from routeheat.errors import RouteheatError

LARGEST_FILE = 50_000_000
"""Bytes of a file that is read."""


def write_whole(path: Path, content: bytes, *, keep_existing: bool = False) -> bool:
    """Write a file so that no reader ever sees half of it; its folder is made when missing.

    With ``keep_existing`` a file that is there already, or that another process puts there meanwhile, stays as it is.
    Returns whether ``content`` was written. Raises ``OSError``.
    """
    path.parent.mkdir(parents=True, exist_ok=True)
    part = path.parent / f".{path.name[:40]}.{secrets.token_hex(6)}.part"
    try:
        with part.open("xb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        return _place(part, path, keep_existing)
    finally:
        part.unlink(missing_ok=True)


def _place(made: Path, path: Path, keep_existing: bool) -> bool:
    if keep_existing:
        try:
            os.link(made, path)
        except FileExistsError:
            return False
        except OSError:
            # a file system without hard links: the check and the renaming are then two steps
            if path.exists():
                return False
        else:
            return True
    os.replace(made, path)
    return True


def read_whole(path: Path) -> bytes:
    """The bytes of a file; raises ``OSError``, and :class:`~routeheat.errors.RouteheatError` when it is too large."""
    with path.open("rb") as file:
        content = file.read(LARGEST_FILE + 1)
    if len(content) > LARGEST_FILE:
        raise RouteheatError(f"{path} is larger than {LARGEST_FILE:,} bytes: is this the right file?")
    return content
