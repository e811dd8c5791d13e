"""The text of a table of the project: its header lines, heads and rows, each with the number of its line."""

from __future__ import annotations

import csv
from collections.abc import Mapping
from dataclasses import dataclass, field

from calcbook.inputs.faults import FaultList
from calcbook.inputs.text import shown, wrong_characters

_LONGEST_LINE = 1000


@dataclass
class TableText:
    """A table as written: `header` by key, `heads`, and `rows` of the number of the line with the cells by head."""

    file: str
    faults: FaultList
    header: dict[str, str] = field(default_factory=dict)
    header_lines: dict[str, int] = field(default_factory=dict)
    heads: tuple[str, ...] = ()
    heads_line: int = 0
    rows: list[tuple[int, Mapping[str, str]]] = field(default_factory=list)

    def fault(self, place: str, message: str) -> None:
        """Note a fault of this file."""
        self.faults.add(self.file, place, message)

    def place_of(self, name: str) -> str:
        """The line of a header entry, as a message names it; "" where the entry is missing."""
        return f"line {self.header_lines[name]}" if name in self.header_lines else ""


def read_text(file: str, text: str, faults: FaultList) -> TableText:
    """The parts of a table, with the faults of its lines: what cannot be read, and rows of another length."""
    read = TableText(file, faults)
    for number, line in enumerate(text.replace("\r\n", "\n").split("\n"), start=1):
        wrong = wrong_characters(line)
        if len(line) > _LONGEST_LINE:
            wrong = f"has {len(line)} characters; allowed are {_LONGEST_LINE}"
        if wrong:
            read.fault(f"line {number}", wrong)
        elif line.startswith("#"):
            _take_header(read, number, line)
        elif line:
            _take_row(read, number, line)
    return read


def _take_header(read: TableText, number: int, line: str) -> None:
    name, colon, value = line[2:].partition(": ")
    if not line.startswith("# ") or not colon:
        read.fault(f"line {number}", f'{shown(line)} is not a header line; write "# key: value"')
    elif name in read.header:
        read.fault(f"line {number}", f'"# {name}:" stands twice; write it once')
    else:
        if value != value.strip():
            read.fault(f"line {number}", f"{shown(value)} has a space at its end")
        read.header[name] = value
        read.header_lines[name] = number


def _take_row(read: TableText, number: int, line: str) -> None:
    try:
        cells = next(csv.reader([line], strict=True))
    except csv.Error:
        read.fault(f"line {number}", "a quotation mark is not closed, or text follows a closed one")
        return
    if not read.heads:
        read.heads, read.heads_line = tuple(cells), number
    elif len(cells) != len(read.heads):
        read.fault(f"line {number}", f"has {len(cells)} cells; the heads are {len(read.heads)}, parted by commas")
    else:
        read.rows.append((number, dict(zip(read.heads, cells, strict=True))))
