"""adopted.csv: values that the engineer puts in place of calculated ones, each with reason, initials and date."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Collection

from calcbook.errors import QuantityFault, nearest
from calcbook.formulas.register import calculated_names
from calcbook.inputs.faults import FaultList
from calcbook.inputs.rows import Row, read_rows
from calcbook.inputs.text import nearest_name, shown
from calcbook.inputs.value import decimal_point
from calcbook.records.notation import notation, out_of_range
from calcbook.records.project import Adopted
from calcbook.records.quantity import read_quantity

FILE = "adopted.csv"


class AdoptedValues:
    """Adopted values by tag, with the rows they came from."""

    def __init__(self) -> None:
        """Begin with none."""
        self._found: dict[str, dict[str, Adopted]] = defaultdict(dict)
        self._rows: list[tuple[str, Row]] = []

    def add(self, tag: str, row: Row, adopted: Adopted) -> None:
        """Take one; a second one for the same line is a fault."""
        if adopted.line in self._found[tag]:
            row.fault("", f"a second value adopted for {tag}, {adopted.line}; write one")
        self._found[tag][adopted.line] = adopted

    def note(self, tag: str, row: Row) -> None:
        """Remember which row names which tag."""
        self._rows.append((tag, row))

    def of(self, tag: str) -> tuple[Adopted, ...]:
        """The values adopted on one sheet, in the order of the file."""
        return tuple(self._found[tag].values()) if tag in self._found else ()

    def report_unknown(self, known: Collection[str]) -> None:
        """Report rows whose tag no circuit has."""
        for tag, row in self._rows:
            if tag not in known:
                row.fault("tag", f"{shown(tag)} is no circuit of circuits.csv; {nearest_name(tag, known)}")


def read_adopted(text: str | None, decimal: str, faults: FaultList) -> AdoptedValues:
    """The adopted values of the project; none where there is no file."""
    values = AdoptedValues()
    for row in read_rows(FILE, "adopted", text, decimal, faults) if text is not None else ():
        if row.text("tag"):
            values.note(row.text("tag"), row)
        adopted = _read_row(row, decimal)
        if adopted:
            values.add(row.text("tag"), row, adopted)
    return values


def _read_row(row: Row, decimal: str) -> Adopted | None:
    line = row.text("line")
    if line and line not in notation():
        row.fault("line", f"{shown(line)} is not a line of the notation list; {nearest(line[:60], notation())}")
    elif line and line not in calculated_names():
        row.fault("line", f'"{line}" is not calculated; no value is adopted for it, change it where it is given')
    if row.wrong:
        return None
    entry = notation()[line]
    try:
        value = read_quantity(decimal_point(row.text("value"), decimal), entry.kind)
    except QuantityFault as fault:
        row.fault("value", fault.message)
        return None
    wrong = out_of_range(entry, value)
    if wrong:
        row.fault("value", wrong)
        return None
    return Adopted(line, value, row.text("reason"), row.text("by"), row.text("date"))
