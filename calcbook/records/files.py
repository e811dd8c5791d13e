"""Atomic files: a reader sees the old content or the new, never half of it."""

from __future__ import annotations

import os
import tempfile
from pathlib import Path

from calcbook.errors import WorkspaceFault


def write_atomically(path: Path, content: str | bytes) -> None:
    """Write a file beside its place and move it there; raises WorkspaceFault where the disk refuses."""
    data = content.encode("utf-8") if isinstance(content, str) else content
    temporary = ""
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        descriptor, temporary = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}.")
        with os.fdopen(descriptor, "wb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        Path(temporary).chmod(0o644)
        Path(temporary).replace(path)
    except OSError as error:
        if temporary:
            Path(temporary).unlink(missing_ok=True)
        raise WorkspaceFault(f"{path}: cannot be written ({error.strerror or error})") from error


def remove(path: Path) -> None:
    """Remove a file where there is one; raises WorkspaceFault where the disk refuses or a folder has its name."""
    try:
        path.unlink(missing_ok=True)
    except OSError as error:
        raise WorkspaceFault(f"{path}: cannot be removed ({error.strerror or error})") from error


def make_folder(path: Path) -> None:
    """Make a folder that files will be written into, and try it; raises WorkspaceFault where the disk refuses."""
    try:
        path.mkdir(parents=True, exist_ok=True)
        with tempfile.TemporaryFile(dir=path):
            pass
    except OSError as error:
        raise WorkspaceFault(f"{path}: cannot be written to ({error.strerror or error})") from error
