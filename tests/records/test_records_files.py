"""Files are written whole or not at all."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from calcbook.errors import WorkspaceFault
from calcbook.records.files import write_atomically


def test_text_and_bytes_are_written_as_they_are(tmp_path: Path) -> None:
    path = tmp_path / "sheets" / "C-001.html"
    write_atomically(path, "é\r\n")
    assert path.read_bytes() == b"\xc3\xa9\r\n"
    write_atomically(path, b"\x00\xff")
    assert path.read_bytes() == b"\x00\xff"


def test_nothing_else_is_left_behind_and_others_may_read(tmp_path: Path) -> None:
    write_atomically(tmp_path / "results.json", "{}")
    write_atomically(tmp_path / "results.json", "[]")
    assert [path.name for path in tmp_path.iterdir()] == ["results.json"]
    assert (tmp_path / "results.json").stat().st_mode & 0o777 == 0o644


def test_the_old_content_stands_until_the_new_is_complete(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "results.json"
    write_atomically(path, "old")

    def full(descriptor: int) -> None:
        assert path.read_text("utf-8") == "old"
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(WorkspaceFault) as caught:
        write_atomically(path, "new")
    assert str(caught.value) == f"{path}: cannot be written (No space left on device)"
    assert caught.value.exit_code == 4
    assert path.read_text("utf-8") == "old"
    assert [found.name for found in tmp_path.iterdir()] == ["results.json"]


def test_a_reader_holds_the_old_file_while_the_new_one_arrives(tmp_path: Path) -> None:
    path = tmp_path / "results.json"
    write_atomically(path, "old")
    with path.open(encoding="utf-8") as reader:
        write_atomically(path, "new")
        assert reader.read() == "old"
    assert path.read_text("utf-8") == "new"


def test_a_place_that_cannot_hold_a_file_is_named(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("x", "utf-8")
    with pytest.raises(WorkspaceFault, match="cannot be written"):
        write_atomically(tmp_path / "file" / "C-001.html", "x")
    (tmp_path / "folder").mkdir()
    with pytest.raises(WorkspaceFault, match=r"folder: cannot be written \(Is a directory\)"):
        write_atomically(tmp_path / "folder", "x")
    assert sorted(path.name for path in tmp_path.iterdir()) == ["file", "folder"]
