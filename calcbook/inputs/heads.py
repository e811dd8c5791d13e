"""The head row of a CSV file: which column holds which field, in which unit."""

from __future__ import annotations

import re
from dataclasses import dataclass

from calcbook.errors import QuantityFault, nearest
from calcbook.inputs.faults import FaultList
from calcbook.inputs.fields import Field, fields_of
from calcbook.inputs.table import Line
from calcbook.inputs.text import shown, wrong_text
from calcbook.inputs.value import Value, has_decimal_comma, read_value
from calcbook.records.quantity import check_unit

_HEAD = re.compile(r"([^\[\]]*?)\s*(?:\[\s*([^\[\]]*?)\s*\])?")
_DECLARE_COMMAS = '; where a whole file has decimal commas, inputs.toml says so: [files."{file}"] decimal = ","'


class Column:
    """One column of the file: its field, its head as written and the unit in its brackets."""

    def __init__(self, field: Field, head: str, unit: str | None) -> None:
        """A column whose cells may leave out `unit`."""
        self.field = field
        self.name = field.name
        self.head = head
        self.unit = unit
        self._read: dict[str, Value | str] = {}

    def read(self, cell: str, file: str, decimal: str) -> Value | str:
        """The value of a cell, or what is wrong with it; equal cells of a column are read once."""
        value = self._read.get(cell)
        if value is None:
            value = read_value(self.field, cell, self.unit, decimal)
            if isinstance(value, str) and self.field.holds == "quantity" and decimal == "." and has_decimal_comma(cell):
                value += _DECLARE_COMMAS.format(file=file)
            if self.field.holds not in {"tag", "text"}:
                self._read[cell] = value
        return value


@dataclass(frozen=True)
class Heads:
    """The head row: a column for each cell, None where the head is empty or refused.

    `absent` are columns that are missing though needed, or whose head is refused: nothing is said of their cells.
    """

    columns: tuple[Column | None, ...]
    needed: frozenset[str]
    absent: frozenset[str]
    written: dict[str, str]
    empty: frozenset[int]


def read_heads(file: str, place: str, line: Line, faults: FaultList) -> Heads | None:
    """The heads of a file whose columns are the fields of `place`; what is wrong with them is reported.

    None where no cell is a head: then the file is not what it should be, and is not read on.
    """
    read = [_column(head, place) for head in line.cells]
    meant = {name for head, column in zip(line.cells, read, strict=True) for name in _meant(head, column)}
    refused = meant & fields_of(place).keys()
    if not refused and not any(isinstance(column, Column) for column in read):
        _refuse_head_row(file, place, line, faults)
        return None
    written: dict[str, str] = {}
    columns: list[Column | None] = []
    for number, column in enumerate(read, start=1):
        if isinstance(column, Column) and column.name in written:
            message = f"the column stands twice, first as {shown(written[column.name])}"
            faults.add(file, f"row {line.number}, {column.head}", message)
        elif isinstance(column, Column):
            written[column.name] = column.head
            columns.append(column)
            continue
        elif column:
            faults.add(file, f"row {line.number}, column {number}", column)
        columns.append(None)
    needed = frozenset(name for name, field in fields_of(place).items() if field.needed)
    for name in fields_of(place):
        if name in needed - written.keys() - refused:
            faults.add(file, f"row {line.number}", f'the column "{name}" is missing')
    empty = frozenset(number for number, column in enumerate(read) if column == "")
    absent = (needed | refused) - written.keys()
    return Heads(tuple(columns), needed, absent, written, empty)


def _refuse_head_row(file: str, place: str, line: Line, faults: FaultList) -> None:
    found = shown(line.cells[0])
    first = ", ".join(list(fields_of(place))[:3])
    hint = f"the first row that is no comment holds them ({first}, ...), separated by commas or semicolons"
    faults.stop(file, f"row {line.number}", f"{found} begins a row without a head of a column; {hint}")


def unknown_name(place: str, name: str) -> str:
    """The sentence that refuses a name which is not a field of `place`, with the nearest one."""
    if place == "circuits" and name.startswith("adopted_"):
        return f"{shown(name)}: adopted values stand in adopted.csv (tag, line, value, reason, by, date)"
    return f"{shown(name)} is not known here; {nearest(name[:60], fields_of(place))}"


def _column(head: str, place: str) -> Column | str:
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
        return Column(field, head.strip(), None)
    return _column_with_unit(field, head.strip(), "1" if unit == "-" else unit)


def _column_with_unit(field: Field, head: str, unit: str) -> Column | str:
    if field.holds != "quantity":
        return f"{shown(head)}: {field.name} has no unit; write the head without brackets"
    wrong = ""
    for kind in field.kinds:
        try:
            return Column(field, head, check_unit(unit, kind))
        except QuantityFault as fault:
            wrong = fault.message
    return f"{shown(head)}: {wrong}"


def _meant(head: str, column: Column | str) -> set[str]:
    """The names that a refused head may mean: the one it begins with, and the one that its message offers."""
    if isinstance(column, Column):
        return set()
    return {head.strip().partition(" ")[0].partition("[")[0], *re.findall(r'did you mean "(\w+)"\?', column)}
