"""Keep a result the first time, check it afterwards."""

from __future__ import annotations

import os
import re
import threading
from dataclasses import dataclass
from pathlib import Path
from typing import Literal

from routeheat.chem.route import Sheet
from routeheat.errors import ReferenceMoved, RouteheatError
from routeheat.present.show import Shown
from routeheat.present.table import Column, Table
from routeheat.present.text import render_table
from routeheat.report.files import write_whole
from routeheat.rerun.explain import explain
from routeheat.rerun.kept import Kept, keep, read_kept
from routeheat.rerun.leaves import Tolerance, leaves, moved

REFRESH_VARIABLE = "ROUTEHEAT_REFRESH"
Status = Literal["kept", "agrees", "refreshed"]
_NAME = re.compile(r"[A-Za-z0-9][A-Za-z0-9._-]{0,79}")
_DEVICE = re.compile(r"(?:con|prn|aux|nul|com[0-9]|lpt[0-9])(?:\..*)?", re.IGNORECASE)
_NO = ("", "0", "false", "no", "off")

_refreshed: dict[Path, Kept] = {}
_lock = threading.Lock()


@dataclass(frozen=True, slots=True, repr=False)
class Reference(Shown):
    """What became of one check."""

    name: str
    status: Status
    """``kept`` for the first time, ``agrees`` with what is kept, or ``refreshed`` on request."""
    path: Path
    """The file, in the folder as it was given."""
    values: int
    """Values that the reference holds."""
    digest: str
    """Of everything typed that the result rests on."""

    def table(self) -> Table:
        """One line: what was checked, against which file."""
        columns = (
            Column("reference", "reference"), Column("status", "status"), Column("values", "values", align="right"),
            Column("file", "file"), Column("rests_on", "rests on"),
        )  # fmt: skip
        return Table("", columns, ((self.name, self.status, self.values, self.path.as_posix(), self.digest[:19]),))


def reference(
    name: str,
    result: Shown | Table,
    store: str | Path = "references",
    *,
    absolute: float = 0.0,
    relative: float = 1e-9,
    of_uncertainty: float = 0.0,
    refresh: bool | None = None,
    sheet: Sheet | None = None,
) -> Reference:
    """Keep ``result`` as ``store/name.json`` the first time, and check it against that file afterwards.

    A number agrees when it is within any of the tolerances: ``relative`` (part of the number) for all of them, and for
    values with an uncertainty also ``absolute`` (in their own unit) and ``of_uncertainty`` (part of the kept standard
    uncertainty). Coefficients, counts and words have no other tolerance than ``relative``. ``refresh=True`` keeps the
    present result; ``None`` leaves that to the environment variable ``ROUTEHEAT_REFRESH`` (and so to the option
    ``--routeheat-refresh`` of pytest). ``sheet`` adds its digest, and for results that do not know their rows the rows.

    Raises :class:`~routeheat.errors.ReferenceMoved` with what moved, the edited rows and their contributions;
    :class:`~routeheat.errors.RouteheatError` for a bad name, a damaged file, two results under one name, or a reference
    that is missing where ``CI`` is set or the folder cannot be written; ``ValueError`` for a negative tolerance.
    """
    tolerance = _tolerance(absolute, relative, of_uncertainty)
    path = _path(name, store)
    now = keep(name, result, sheet)
    values = leaves(now.result)

    def done(status: Status) -> Reference:
        return Reference(name, status, path, len(values), now.rests_on_digest)

    if refresh or (refresh is None and asked_to_refresh()):
        if refresh is None:
            _refuse_second(path, now)
        _write(path, now, keep_existing=False)
        return done("refreshed")
    if not path.exists():
        if os.environ.get("CI", "").lower() not in _NO:
            raise RouteheatError(f"no reference {name} in {path.parent}: keep it on your machine and commit {path}")
        if _write(path, now, keep_existing=True):
            return done("kept")
    kept = _read(path, name)
    if kept.kind != now.kind:
        raise RouteheatError(
            f"two results under one name: reference {name} holds a {kept.kind}, this is a {now.kind}; "
            "choose another name"
        )
    found = moved(leaves(kept.result), values, tolerance)
    if not found:
        return done("agrees")
    tables = explain(kept, now, found)
    words = f"reference {name}: {len(found)} value{'s' if len(found) > 1 else ''} moved ({path})"
    hint = f"if that is meant, refresh: pytest --routeheat-refresh, {REFRESH_VARIABLE}=1, or refresh=True"
    raise ReferenceMoved("\n\n".join([words, *map(render_table, tables), hint]), name, tables)


def asked_to_refresh() -> bool:
    """Whether the environment asks for a refresh."""
    return os.environ.get(REFRESH_VARIABLE, "").lower() not in _NO


def _tolerance(absolute: float, relative: float, of_uncertainty: float) -> Tolerance:
    for what, size in (("absolute", absolute), ("relative", relative), ("of_uncertainty", of_uncertainty)):
        # the comparison is false for what is not a number, too
        if not 0 <= size < float("inf"):
            raise ValueError(f"the tolerance {what} is a number that is not negative, not {size}")
    return Tolerance(float(absolute), float(relative), float(of_uncertainty))


def _path(name: str, store: str | Path) -> Path:
    if not isinstance(name, str) or _NAME.fullmatch(name) is None or name.endswith(".") or _DEVICE.fullmatch(name):
        raise RouteheatError(
            f"{str(name)[:60]!r} cannot name a reference: use letters, digits and . _ -, at most 80, like routes-per-kg"
        )
    return Path(store) / f"{name}.json"


def _write(path: Path, now: Kept, *, keep_existing: bool) -> bool:
    try:
        return write_whole(path, now.text().encode("utf-8"), keep_existing=keep_existing)
    except OSError as problem:
        why = problem.strerror or str(problem)
        raise RouteheatError(f"reference {now.name} cannot be kept in {path.parent}: {why}") from problem


def _read(path: Path, name: str) -> Kept:
    try:
        kept = read_kept(path)
    except OSError as problem:
        raise RouteheatError(f"reference {name} cannot be read: {problem.strerror or problem}") from problem
    if kept.name != name:
        raise RouteheatError(
            f"{path} holds the reference {kept.name}, not {name}: on some disks capitals make no difference, and a "
            "renamed file keeps its old name inside"
        )
    return kept


def _refuse_second(path: Path, now: Kept) -> None:
    """While everything is refreshed, nothing tells that two results share a name but this memory of the process."""
    with _lock:
        earlier = _refreshed.setdefault(path.absolute(), now)
    if earlier.kind != now.kind or earlier.result != now.result:
        raise RouteheatError(f"two results under one name: {path} was refreshed with another result before")
