"""A CSV file as rows of cells: separator, heads, comments and the rows' numbers. Knows nothing of what cells mean."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterator
from dataclasses import dataclass

from calcbook.inputs.faults import FaultList

_COMMENT = ("#", '"#')


@dataclass(frozen=True)
class Line:
    """One row of the file: the number of the line it begins on, counted from 1, and its cells."""

    number: int
    cells: list[str]


def read_lines(file: str, text: str, faults: FaultList) -> Iterator[Line]:
    """The rows of a CSV text, the heads first; comments and blank rows are left out. A comment begins with `#`, which a
    spreadsheet may have put in quotation marks.

    The separator is the semicolon where the heads have one, else the comma. Text that breaks the rules of quotes is a
    fault and ends the rows.
    """
    numbered = _NumberedLines(text)
    reader = csv.reader(numbered, delimiter=_separator(text), strict=True)
    while True:
        numbered.first = 0
        try:
            cells = next(reader)
        except StopIteration:
            return
        except csv.Error as error:
            wrong = "a cell is far too long" if "limit" in str(error) else "text follows a closed quotation mark"
            faults.stop(file, f"row {numbered.first}", f"{wrong}, or a quotation mark is not closed")
            return
        if any(cell.strip() for cell in cells):
            yield Line(numbered.first, cells)


class _NumberedLines:
    """Lines of a text without comments; `first` is the number of the first line taken since it was set to 0."""

    def __init__(self, text: str) -> None:
        self._lines = enumerate(io.StringIO(text, newline=""), start=1)
        self.first = 0

    def __iter__(self) -> _NumberedLines:
        return self

    def __next__(self) -> str:
        for number, line in self._lines:
            if line.startswith(_COMMENT):
                continue
            self.first = self.first or number
            return line
        raise StopIteration


def _separator(text: str) -> str:
    for line in io.StringIO(text, newline=""):
        if line.strip(" \r\n;,") and not line.startswith(_COMMENT):
            return ";" if ";" in line else ","
    return ","
