"""The text of an input file: read whole, checked for its encoding, without its byte order mark."""

from __future__ import annotations

import codecs
import os
from pathlib import Path

from calcbook.inputs.faults import FaultList

#: bytes, by the ending of the name; what is larger is no input written for a project
LARGEST = {".toml": 2**20, ".csv": 64 * 2**20}


def read_source(folder: Path, name: str, faults: FaultList, *, needed: bool, largest: int = 0) -> str | None:
    """The text of `folder/name`; None, with a fault where that is one, when there is none to be had.

    `largest` is the allowed number of bytes where it is not that of the ending.
    """
    path = folder / name
    if not needed and not os.path.lexists(path):
        return None
    try:
        allowed = largest or LARGEST[path.suffix]
        if path.stat().st_size > allowed:
            faults.add(name, "", f"has {path.stat().st_size} bytes; allowed are {allowed}")
            return None
        data = path.read_bytes()
    except FileNotFoundError:
        faults.add(name, "", f"is missing; a project folder holds inputs.toml and circuits.csv (looked in {folder})")
    except OSError as error:
        faults.add(name, "", f"cannot be read ({error.strerror})")
    else:
        return _decoded(name, data, faults)
    return None


def _decoded(name: str, data: bytes, faults: FaultList) -> str | None:
    try:
        return data.removeprefix(codecs.BOM_UTF8).decode("utf-8")
    except UnicodeDecodeError as error:
        place = error.start + (len(codecs.BOM_UTF8) if data.startswith(codecs.BOM_UTF8) else 0)
        row = data.count(b"\n", 0, place) + 1
        faults.add(
            name,
            f"{'line' if name.endswith('.toml') else 'row'} {row}",
            f"is not UTF-8: byte {place + 1} of the file is 0x{data[place]:02X}; save the file with the encoding UTF-8",
        )
        return None
