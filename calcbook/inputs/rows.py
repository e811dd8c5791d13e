"""Rows of a CSV file as values by column: heads with units, needed columns, cells read by the rules of their field."""

from __future__ import annotations

import re
from collections.abc import Iterator

from calcbook.errors import QuantityFault, nearest
from calcbook.inputs.faults import FaultList
from calcbook.inputs.fields import Field, fields_of
from calcbook.inputs.table import Line, read_lines
from calcbook.inputs.text import shown, wrong_text
from calcbook.inputs.value import Value, has_decimal_comma, number_in, read_value
from calcbook.records.quantity import check_unit

_HEAD = re.compile(r"([^\[\]]*?)\s*(?:\[\s*([^\[\]]*?)\s*\])?")

DECLARE_COMMAS = ', or say in inputs.toml that the whole file has decimal commas: [files."NAME.csv"] decimal = ","'


class Column:
    """One column of the file: its field, its head as written and the unit in its brackets."""

    def __init__(self, field: Field, head: str, unit: str | None, decimal: str) -> None:
        """A column of a file whose decimal mark is `decimal`."""
        self.field = field
        self.head = head
        self._unit = unit
        self._decimal = decimal
        self._read: dict[str, Value | str] = {}

    def read(self, cell: str) -> Value | str:
        """The value of a cell, or what is wrong with it; equal cells of a column are read once."""
        value = self._read.get(cell)
        if value is None:
            value = read_value(self.field, cell, self._unit, self._decimal)
            if isinstance(value, str) and self._decimal == "." and has_decimal_comma(cell):
                value += DECLARE_COMMAS
            if self.field.holds not in {"tag", "text"}:
                self._read[cell] = value
        return value


class Row:
    """One row: its valid values by column name, and the names of the columns in which a fault was already reported."""

    def __init__(self, file: str, number: int, heads: dict[str, str], faults: FaultList) -> None:
        """An empty row; `heads` are the heads as written by column name."""
        self.values: dict[str, Value] = {}
        self.wrong: set[str] = set()
        self._file = file
        self._number = number
        self._heads = heads
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
    """The rows of a CSV text whose columns are the fields of `place`; every fault of heads and cells is reported."""
    lines = read_lines(file, text, faults)
    first = next(lines, None)
    if first is None:
        faults.add(file, "", "is empty; its first row holds the heads of its columns")
        return
    columns = [_column(head, place, decimal) for head in first.cells]
    _report_heads(file, place, first, columns, faults)
    known = [column for column in columns if isinstance(column, Column)]
    heads = {column.field.name: column.head for column in known}
    missing = {name for name in fields_of(place) if name not in heads}
    for line in lines:
        row = Row(file, line.number, heads, faults)
        row.wrong.update(name for name in missing if fields_of(place)[name].needed)
        _fill(row, line, columns)
        yield row


def unknown_name(place: str, name: str) -> str:
    """The sentence that refuses a name which is not a field of `place`, with the nearest one."""
    if place == "circuits" and name.startswith("adopted_"):
        return f"{shown(name)}: adopted values stand in adopted.csv (tag, line, value, reason, by, date)"
    return f"{shown(name)} is not known here; {nearest(name[:60], fields_of(place))}"


def _column(head: str, place: str, decimal: str) -> Column | str:
    """The column of a head; else what is wrong with the head, "" for an empty one."""
    wrong = wrong_text(head)
    if wrong:
        return wrong
    match = _HEAD.fullmatch(head.strip())
    if not match:
        return f"{shown(head)} is not a head; write a name and, in brackets, its unit: length [m]"
    name, unit = match[1], match[2]
    if not name and unit is None:
        return ""
    field = fields_of(place).get(name)
    if field is None:
        return unknown_name(place, name)
    if unit is None:
        return Column(field, head.strip(), None, decimal)
    return _column_with_unit(field, head.strip(), "1" if unit == "-" else unit, decimal)


def _column_with_unit(field: Field, head: str, unit: str, decimal: str) -> Column | str:
    if field.holds != "quantity":
        return f"{shown(head)}: {field.name} has no unit; write the head without brackets"
    wrong = ""
    for kind in field.kinds:
        try:
            return Column(field, head, check_unit(unit, kind), decimal)
        except QuantityFault as fault:
            wrong = fault.message
    return wrong


def _report_heads(file: str, place: str, line: Line, columns: list[Column | str], faults: FaultList) -> None:
    seen: dict[str, str] = {}
    for number, column in enumerate(columns, start=1):
        if isinstance(column, str):
            if column:
                faults.add(file, f"row {line.number}, column {number}", column)
        elif column.field.name in seen:
            first = seen[column.field.name]
            faults.add(file, f"row {line.number}, {column.head}", f"the column stands twice, first as {shown(first)}")
        else:
            seen[column.field.name] = column.head
    for name, field in fields_of(place).items():
        if field.needed and name not in seen and not _meant(name, columns):
            faults.add(file, f"row {line.number}", f'the column "{name}" is missing')


def _meant(name: str, columns: list[Column | str]) -> bool:
    """Whether a refused head already offers this column: then it is not reported as missing too."""
    return any(isinstance(column, str) and f'"{name}"?' in column for column in columns)


def _fill(row: Row, line: Line, columns: list[Column | str]) -> None:
    surplus = [cell for cell in line.cells[len(columns) :] if cell.strip()]
    if surplus:
        row.fault("", _too_many(line, len(columns), surplus))
        row.wrong.update(column.field.name for column in columns if isinstance(column, Column))
        _read_cell(row, line, columns, only="tag")
        return
    _read_cell(row, line, columns)
    for column in columns:
        if isinstance(column, Column) and column.field.needed and row.lacks(column.field.name):
            row.fault(column.field.name, "is empty; it is needed in every row")


def _read_cell(row: Row, line: Line, columns: list[Column | str], only: str = "") -> None:
    for column, cell in zip(columns, line.cells, strict=False):
        if not cell or cell.isspace() or (only and (isinstance(column, str) or column.field.name != only)):
            continue
        if isinstance(column, str):
            if not column:
                row.fault("", f"{shown(cell)} stands in a column without a head")
            continue
        value = column.read(cell)
        if isinstance(value, str):
            row.fault(column.field.name, value)
        else:
            row.values[column.field.name] = value


def _too_many(line: Line, heads: int, surplus: list[str]) -> str:
    hint = "a decimal comma or a comma in a text splits a cell unless the cell stands in quotation marks"
    return f"{len(line.cells)} cells under {heads} heads, {shown(surplus[-1])} is the last; {hint}"
