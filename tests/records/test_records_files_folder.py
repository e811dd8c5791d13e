"""Folders and removal: what the disk refuses is one sentence."""

from __future__ import annotations

from pathlib import Path

import pytest

from calcbook.errors import WorkspaceFault
from calcbook.records.files import make_folder, remove


def test_a_file_in_place_of_the_folder(tmp_path: Path) -> None:
    (tmp_path / "sheets").write_text("a file", "utf-8")
    with pytest.raises(WorkspaceFault, match=r"sheets: cannot be written to \(File exists\)"):
        make_folder(tmp_path / "sheets")


def test_a_folder_in_place_of_the_file(tmp_path: Path) -> None:
    (tmp_path / "Z.html").mkdir()
    with pytest.raises(WorkspaceFault, match=r"Z\.html: cannot be removed"):
        remove(tmp_path / "Z.html")
    remove(tmp_path / "nothing.html")
    make_folder(tmp_path / "new" / "sheets")
    assert (tmp_path / "new" / "sheets").is_dir()
