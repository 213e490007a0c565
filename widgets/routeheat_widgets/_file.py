"""A desk's file: saved whole or not at all, and watched for changes that others make to it."""

from __future__ import annotations

import contextlib
import hashlib
import os
import stat
import tempfile
from dataclasses import dataclass
from pathlib import Path
from typing import Literal

from routeheat.errors import RouteheatError

_BOM = b"\xef\xbb\xbf"
_FREE_NAMES = 1000

Kind = Literal["saved", "new", "changed", "unwritable"]


@dataclass(frozen=True, slots=True)
class FileState:
    """Where the desk's text stands with respect to its file."""

    kind: Kind
    """``saved``; ``new``: the file does not exist yet; ``changed``: the file holds another text, both are kept;
    ``unwritable``: the text is on the desk only."""
    message: str
    """One sentence for the reader."""
    problem: OSError | None = None
    """Why the file cannot be read or written."""


class SheetFile:
    """One UTF-8 text file. Not safe under threads by itself: the desk calls it under a lock."""

    def __init__(self, path: str | os.PathLike[str]) -> None:
        self.path = Path(path)
        """As given; messages name it."""
        self._target = Path(os.path.realpath(self.path))
        self._digest: str | None = None
        self._crlf = False
        self._bom = False
        self._aside: Path | None = None

    def read(self) -> str:
        """The file's text with line feeds as line ends; an empty text when there is no file yet.

        Raises ``OSError`` when it cannot be read and :class:`~routeheat.errors.RouteheatError` when it is no UTF-8.
        """
        try:
            data = self._target.read_bytes()
        except FileNotFoundError:
            self._digest = None
            return ""
        text = self._decode(data)
        self._digest = _digest(data)
        self._bom = data.startswith(_BOM)
        self._crlf = b"\r\n" in data and data.count(b"\n") == data.count(b"\r\n")
        return text

    def state(self) -> FileState:
        """Whether the file still holds what the desk last read from it or saved to it."""
        if self._aside is not None:
            return self._changed()
        try:
            found = self._found()
        except OSError as problem:
            message = f"{self.path} cannot be read: {problem.strerror}. The text is kept here."
            return FileState("unwritable", message, problem)
        if found != self._digest:
            return self._changed()
        if found is None:
            return FileState("new", f"{self.path} does not exist yet: the first edit creates it.")
        return FileState("saved", f"saved in {self.path}")

    def save(self, text: str) -> FileState:
        """Write ``text``: to the file, or beside it when the file was changed by someone else."""
        try:
            if self._aside is None and self._found() == self._digest:
                self._digest = self._write(self._target, text)
                return FileState("saved", f"saved in {self.path}")
            if self._aside is None:
                self._aside = self._free_name("desk")
            self._write(self._aside, text)
            return self._changed()
        except OSError as problem:
            reason = problem.strerror or str(problem)
            message = f"{self.path} cannot be written: {reason}. The text is kept here, not saved."
            return FileState("unwritable", message, problem)

    def take_file(self, text: str) -> str:
        """Leave the desk's ``text`` beside the file, and give the file's text."""
        if self._aside is None:
            self._aside = self._free_name("desk")
        self._write(self._aside, text)
        found = self.read()
        self._aside = None
        return found

    def keep_desk(self, text: str) -> FileState:
        """Leave the file's text beside it, and write the desk's ``text`` to the file."""
        with contextlib.suppress(FileNotFoundError):
            data = self._target.read_bytes()
            _replace(self._free_name("other"), data, self._target)
        self._digest = self._write(self._target, text)
        if self._aside is not None:
            # what stands beside the file is this very text, now saved
            self._aside.unlink(missing_ok=True)
            self._aside = None
        return FileState("saved", f"saved in {self.path}")

    def _changed(self) -> FileState:
        beside = f" The desk's text is saved beside it, in {self._aside.name}." if self._aside is not None else ""
        return FileState("changed", f"{self.path} was changed by someone else; the desk shows its own text.{beside}")

    def _found(self) -> str | None:
        try:
            return _digest(self._target.read_bytes())
        except FileNotFoundError:
            return None

    def _decode(self, data: bytes) -> str:
        try:
            text = data.decode("utf-8-sig")
        except UnicodeDecodeError as problem:
            raise RouteheatError(f"{self.path} is no UTF-8 text (byte {problem.start}): save it as UTF-8") from problem
        return text.replace("\r\n", "\n").replace("\r", "\n")

    def _write(self, target: Path, text: str) -> str:
        data = (text.replace("\n", "\r\n") if self._crlf else text).encode("utf-8")
        if self._bom:
            data = _BOM + data
        _replace(target, data, self._target)
        return _digest(data)

    def _free_name(self, word: str) -> Path:
        """``routes.desk.txt`` beside ``routes.txt``, numbered when that exists."""
        for number in range(1, _FREE_NAMES):
            tail = word if number == 1 else f"{word}{number}"
            name = self._target.with_name(f"{self._target.stem}.{tail}{self._target.suffix}")
            if not name.exists():
                return name
        raise OSError(f"no free name beside {self.path}")


def _replace(target: Path, data: bytes, like: Path) -> None:
    """Write a temporary file in the same folder, flush it to the disk, and rename it to ``target``."""
    if like.exists() and not os.access(like, os.W_OK):
        raise PermissionError(13, "Permission denied", str(like))
    handle, name = tempfile.mkstemp(prefix=f".{target.name}.", suffix=".tmp", dir=target.parent)
    try:
        with os.fdopen(handle, "wb") as stream:
            stream.write(data)
            stream.flush()
            os.fsync(stream.fileno())
        os.chmod(name, stat.S_IMODE(like.stat().st_mode) if like.exists() else 0o666 & ~_umask())
        os.replace(name, target)
    except BaseException:
        with contextlib.suppress(FileNotFoundError):
            os.unlink(name)
        raise
    _sync_folder(target.parent)


def _sync_folder(folder: Path) -> None:
    """Flush the rename itself; some systems cannot open a folder, and then the rename is as safe as they make it."""
    with contextlib.suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)


def _umask() -> int:
    # the mask can only be read by setting it
    mask = os.umask(0o077)
    os.umask(mask)
    return mask


def _digest(data: bytes) -> str:
    return hashlib.sha256(data).hexdigest()
