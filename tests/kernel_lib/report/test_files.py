"""Files that are whole or not there."""

from __future__ import annotations

import os
from concurrent.futures import ThreadPoolExecutor
from pathlib import Path

import pytest

from routeheat.errors import RouteheatError
from routeheat.report import files
from routeheat.report.files import read_whole, write_whole


def test_a_file_is_replaced_and_nothing_is_left_beside_it(tmp_path: Path) -> None:
    path = tmp_path / "a" / "b.txt"
    assert write_whole(path, b"one")
    assert write_whole(path, b"two")
    assert path.read_bytes() == b"two"
    assert list(path.parent.iterdir()) == [path]


def test_an_existing_file_is_kept_on_request(tmp_path: Path) -> None:
    path = tmp_path / "b.txt"
    assert write_whole(path, b"one", keep_existing=True)
    assert not write_whole(path, b"two", keep_existing=True)
    assert path.read_bytes() == b"one"


@pytest.mark.parametrize("links", [True, False])
def test_of_many_that_keep_at_once_one_wins(tmp_path: Path, links: bool, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "b.txt"
    if not links:

        def refuse(*_: object) -> None:
            raise OSError("no hard links here")

        monkeypatch.setattr(os, "link", refuse)
        write_whole(path, b"0", keep_existing=True)
    contents = [str(number).encode() * 10_000 for number in range(16)]
    with ThreadPoolExecutor(8) as pool:
        written = list(pool.map(lambda content: write_whole(path, content, keep_existing=True), contents))
    assert sum(written) == (1 if links else 0)
    assert path.read_bytes() in (contents if links else [b"0"])


def test_a_failed_write_leaves_the_old_file(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "b.txt"
    write_whole(path, b"one")

    def refuse(*_: object) -> None:
        raise OSError("disk full")

    monkeypatch.setattr(os, "replace", refuse)
    with pytest.raises(OSError, match="disk full"):
        write_whole(path, b"two")
    assert path.read_bytes() == b"one"
    assert list(tmp_path.iterdir()) == [path]


def test_a_file_beyond_the_limit_is_not_read(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(files, "LARGEST_FILE", 10)
    (tmp_path / "a").write_bytes(b"x" * 10)
    (tmp_path / "b").write_bytes(b"x" * 11)
    assert read_whole(tmp_path / "a") == b"x" * 10
    with pytest.raises(RouteheatError, match="larger than 10 bytes"):
        read_whole(tmp_path / "b")
