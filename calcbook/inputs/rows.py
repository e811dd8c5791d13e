"""Rows of a CSV file as values by column: each cell read by the rules of its field, every fault reported."""

from __future__ import annotations

from collections.abc import Iterator

from calcbook.inputs.faults import FaultList
from calcbook.inputs.heads import Heads, read_heads
from calcbook.inputs.table import Line, read_lines
from calcbook.inputs.text import shown
from calcbook.inputs.value import Value, number_in

MOST_ROWS = 100_000


class Row:
    """One row: its valid values by column name, and the names of the columns in which a fault was already reported."""

    def __init__(self, file: str, number: int, heads: Heads, faults: FaultList) -> None:
        """An empty row; needed columns that the file does not have count as reported."""
        self.values: dict[str, Value] = {}
        self.wrong: set[str] = set(heads.absent)
        self._file = file
        self._number = number
        self._heads = heads.written
        self._faults = faults

    @property
    def place(self) -> str:
        """The row as a message names it."""
        return f"row {self._number}"

    def fault(self, column: str, message: str) -> None:
        """Report a fault in a column of this row ("" for the row as a whole)."""
        self.wrong.add(column)
        place = self.place + (f", {self._heads.get(column, column)}" if column else "")
        self._faults.add(self._file, place, message)

    def text(self, column: str) -> str:
        """The text of a column, "" where it is empty or faulty."""
        value = self.values.get(column)
        return value.text if value else ""

    def number(self, column: str, unit: str) -> float | None:
        """The number of a column in `unit`, None where it is empty or faulty."""
        value = self.values.get(column)
        return number_in(value.quantity, unit) if value and value.quantity else None

    def lacks(self, column: str) -> bool:
        """Whether a column is empty: no value, and no fault reported for it."""
        return column not in self.values and column not in self.wrong


def read_rows(file: str, place: str, text: str, decimal: str, faults: FaultList) -> Iterator[Row]:
    """The rows of a CSV text with a decimal mark, whose columns are the fields of `place`; faults are reported."""
    lines = read_lines(file, text, faults)
    first = next(lines, None)
    if first is None:
        faults.add(file, "", "is empty; its first row holds the heads of its columns")
        return
    heads = read_heads(file, place, first, faults)
    if heads is None:
        return
    for count, line in enumerate(lines, start=1):
        if count > MOST_ROWS:
            faults.stop(file, f"row {line.number}", f"more than {MOST_ROWS} rows; the rest was not read")
            return
        row = Row(file, line.number, heads, faults)
        if _is_shifted(line, heads, file, decimal):
            _refuse_shifted(row, line, heads)
        _read_cells(row, line, heads, file, decimal)
        yield row


def _is_shifted(line: Line, heads: Heads, file: str, decimal: str) -> bool:
    """Whether a row has too many cells; empty ones at its end count only where the others do not fit their heads."""
    surplus = line.cells[len(heads.columns) :]
    if not surplus or any(cell.strip() for cell in surplus):
        return bool(surplus)
    cells = zip(heads.columns, line.cells, strict=False)
    return any(column and cell.strip() and isinstance(column.read(cell, file, decimal), str) for column, cell in cells)


def _refuse_shifted(row: Row, line: Line, heads: Heads) -> None:
    """Report a row with too many cells, once: what its cells hold would only be reported in the wrong columns."""
    last = next(cell for cell in reversed(line.cells) if cell.strip())
    hint = "a comma or semicolon within a number or a text splits a cell, unless the cell stands in quotation marks"
    row.fault("", f"{len(line.cells)} cells under {len(heads.columns)} heads, the last is {shown(last)}; {hint}")
    row.wrong.update(heads.written)


def _read_cells(row: Row, line: Line, heads: Heads, file: str, decimal: str) -> None:
    for number, (column, cell) in enumerate(zip(heads.columns, line.cells, strict=False)):
        if not cell or cell.isspace():
            continue
        if column is None:
            if number in heads.empty:
                row.fault("", f"{shown(cell)} stands in a column without a head")
        elif column.name == "tag" or column.name not in row.wrong:
            value = column.read(cell, file, decimal)
            if isinstance(value, Value):
                row.values[column.name] = value
            else:
                row.fault(column.name, value)
    if not heads.needed <= row.values.keys():
        for name in (name for name in heads.written if name in heads.needed and row.lacks(name)):
            row.fault(name, "is empty; it is needed in every row")
