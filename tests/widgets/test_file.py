"""The desk's file: whole or not at all, and nobody's text is lost."""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from routeheat import RouteheatError
from routeheat_widgets._file import SheetFile

NEW = "known\n  [K1] formation of H2O(l) | dH -286 ± 1 kJ/mol (k = 2)\n"


def test_an_edit_is_saved_and_leaves_no_other_file(tmp_path: Path, make_desk: Callable[..., Any]) -> None:
    path = tmp_path / "routes.txt"
    path.write_text("known\n", encoding="utf-8")
    desk = make_desk(path=path)
    assert desk.text == "known\n"
    desk.text = NEW
    assert path.read_text(encoding="utf-8") == NEW
    assert desk.file_state.kind == "saved"
    assert os.listdir(tmp_path) == ["routes.txt"]


def test_a_new_file_is_made_by_the_first_edit(tmp_path: Path, make_desk: Callable[..., Any]) -> None:
    desk = make_desk(path=tmp_path / "new.txt")
    assert desk.file_state.kind == "new"
    assert not (tmp_path / "new.txt").exists()
    desk.text = NEW
    assert (tmp_path / "new.txt").read_text(encoding="utf-8") == NEW


def test_a_change_underneath_keeps_both_texts(tmp_path: Path, make_desk: Callable[..., Any]) -> None:
    path = tmp_path / "routes.txt"
    path.write_text("known\n", encoding="utf-8")
    desk = make_desk(path=path)
    path.write_text("# theirs\n", encoding="utf-8")
    desk.text = NEW
    assert desk.file_state.kind == "changed"
    assert path.read_text(encoding="utf-8") == "# theirs\n"
    assert (tmp_path / "routes.desk.txt").read_text(encoding="utf-8") == NEW
    desk.text = NEW + "# more\n"
    assert (tmp_path / "routes.desk.txt").read_text(encoding="utf-8") == NEW + "# more\n"
    assert desk.payload["file"]["kind"] == "changed"


def test_a_change_underneath_is_noticed_without_an_edit(tmp_path: Path, make_desk: Callable[..., Any]) -> None:
    path = tmp_path / "routes.txt"
    path.write_text("known\n", encoding="utf-8")
    desk = make_desk(path=path)
    path.write_text("# theirs\n", encoding="utf-8")
    desk._receive(desk, {"kind": "file", "what": "look"}, [])
    assert desk.payload["file"]["kind"] == "changed"
    assert desk.text == "known\n"


def test_taking_the_files_text_leaves_the_desks_beside_it(tmp_path: Path, make_desk: Callable[..., Any]) -> None:
    path = tmp_path / "routes.txt"
    path.write_text("known\n", encoding="utf-8")
    desk = make_desk(path=path)
    path.write_text("# theirs\n", encoding="utf-8")
    desk.text = NEW
    desk.take_file_text()
    assert desk.text == "# theirs\n"
    assert desk.file_state.kind == "saved"
    assert path.read_text(encoding="utf-8") == "# theirs\n"
    assert (tmp_path / "routes.desk.txt").read_text(encoding="utf-8") == NEW


def test_keeping_the_desks_text_leaves_the_files_beside_it(tmp_path: Path, make_desk: Callable[..., Any]) -> None:
    path = tmp_path / "routes.txt"
    path.write_text("known\n", encoding="utf-8")
    desk = make_desk(path=path)
    path.write_text("# theirs\n", encoding="utf-8")
    desk.text = NEW
    desk.keep_desk_text()
    assert desk.file_state.kind == "saved"
    assert path.read_text(encoding="utf-8") == NEW
    assert (tmp_path / "routes.other.txt").read_text(encoding="utf-8") == "# theirs\n"
    assert sorted(os.listdir(tmp_path)) == ["routes.other.txt", "routes.txt"]


def test_a_file_beside_it_is_never_overwritten(tmp_path: Path) -> None:
    path = tmp_path / "routes.txt"
    path.write_text("a", encoding="utf-8")
    (tmp_path / "routes.desk.txt").write_text("older", encoding="utf-8")
    file = SheetFile(path)
    file.read()
    path.write_text("b", encoding="utf-8")
    assert file.save("mine").kind == "changed"
    assert (tmp_path / "routes.desk.txt").read_text(encoding="utf-8") == "older"
    assert (tmp_path / "routes.desk2.txt").read_text(encoding="utf-8") == "mine"


def test_a_path_that_cannot_be_written_is_shown_and_raised(tmp_path: Path, make_desk: Callable[..., Any]) -> None:
    desk = make_desk(path=tmp_path / "missing folder" / "routes.txt")
    with pytest.raises(OSError, match="No such file"):
        desk.text = NEW
    assert desk.text == NEW
    assert desk.payload["text"] == NEW
    assert desk.payload["file"]["kind"] == "unwritable"
    assert "not saved" in desk.payload["file"]["message"]
    assert isinstance(desk.last_error, OSError)


def test_a_failed_write_leaves_the_old_file_whole(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "routes.txt"
    path.write_text("old", encoding="utf-8")
    file = SheetFile(path)
    file.read()

    def full(_handle: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    assert file.save("new").kind == "unwritable"
    assert path.read_text(encoding="utf-8") == "old"
    assert os.listdir(tmp_path) == ["routes.txt"]


def test_line_ends_byte_order_mark_and_mode_are_kept(tmp_path: Path) -> None:
    path = tmp_path / "routes.txt"
    path.write_bytes(b"\xef\xbb\xbfa\r\nb\r\n")
    path.chmod(0o640)
    file = SheetFile(path)
    assert file.read() == "a\nb\n"
    assert file.save("a\nc\n").kind == "saved"
    assert path.read_bytes() == b"\xef\xbb\xbfa\r\nc\r\n"
    assert path.stat().st_mode & 0o777 == 0o640


def test_a_link_stays_a_link(tmp_path: Path) -> None:
    real = tmp_path / "real.txt"
    real.write_text("a", encoding="utf-8")
    link = tmp_path / "link.txt"
    link.symlink_to(real)
    file = SheetFile(link)
    file.read()
    file.save("b")
    assert link.is_symlink()
    assert real.read_text(encoding="utf-8") == "b"


def test_a_file_that_is_no_text_is_refused(tmp_path: Path, make_desk: Callable[..., Any]) -> None:
    path = tmp_path / "picture.bin"
    path.write_bytes(b"\xff\xfe\x00")
    with pytest.raises(RouteheatError, match="no UTF-8"):
        make_desk(path=path)
