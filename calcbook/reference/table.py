"""One published table, read from its CSV: header lines say what it is, rows hold keys, value and status.

Header lines read `# key: value`: standard, edition, table, title, conditions, obtained; `value` names the notation
entry of the values; `row` the key that makes the printed row; `fixed` keys that hold for the whole table
(insulation=PVC70); `between` keys whose missing rows take the less favourable neighbour: "circuits up; spacing down",
or the row that ends the band they lie in: "third_harmonic in bands". A key column with a unit in its head is a
quantity, any other a word. A row marked in the column `beyond` also holds past its key.
"""

from __future__ import annotations

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache, cached_property
from importlib.resources import files
from pathlib import Path
from types import MappingProxyType

from calcbook.errors import LookUpFault, nearest
from calcbook.records.dimension import factor
from calcbook.records.notation import Name, named
from calcbook.records.printed import print_plain, with_unit
from calcbook.records.printed_table import PrintedTable
from calcbook.records.project import SignOff
from calcbook.records.quantity import Quantity
from calcbook.records.units import UNITS, kind_in_words

Key = str | Quantity
NO_OWN: Mapping[str, str] = MappingProxyType({})
HEADERS = ("standard", "edition", "table", "title", "obtained", "value", "row")
NOT_KEYS = ("value", "status", "beyond")


@dataclass(frozen=True)
class Found:
    """A value with its place: `row` and `column` as printed, how it was obtained, and a remark on a row not exact."""

    value: Quantity
    row: str
    column: str
    status: str
    remark: str


@dataclass(frozen=True)
class Table:
    """A table with its header and rows; `key` is its file name without ending."""

    key: str
    header: Mapping[str, str]
    heads: tuple[str, ...]
    rows: tuple[Mapping[str, str], ...]

    @property
    def title(self) -> str:
        """Standard, edition and table in one text, the key of a sign-off: "IEC 60364-5-52:2009, B.52.4"."""
        return f"{self.header['standard']}:{self.header['edition']}, {self.header['table']}"

    @property
    def value_name(self) -> Name:
        """The notation entry of the values."""
        return named(self.header["value"])

    @cached_property
    def keys(self) -> dict[str, str]:
        """The key columns: name -> unit, "" for words."""
        pairs = (head.rstrip("]").partition(" [") for head in self.heads if head not in NOT_KEYS)
        return {name: unit for name, _, unit in pairs}

    @cached_property
    def stepped(self) -> dict[str, str]:
        """The keys whose missing rows take a neighbour: name -> "up", "down" or "in bands"."""
        pairs = (part.partition(" ") for part in self.header.get("between", "").split("; ") if part)
        return {name: way for name, _, way in pairs}

    def look_up(self, arguments: Mapping[str, Key]) -> Found:
        """The value for the given keys.

        `arguments` may hold keys that are fixed for this table; they must agree. Raises LookUpFault naming the key,
        what was found and what the table has.
        """
        self._check_arguments(arguments)
        rows = list(self.rows)
        remarks: list[str] = []
        keys = self.keys
        for name in sorted(keys, key=lambda name: name in self.stepped):
            if name in self.stepped:
                rows, remark = self._from_row(rows, name, arguments[name])
                remarks += [remark] if remark else []
            else:
                rows = self._equal(rows, name, arguments[name])
        row = rows[0]
        entry = self.value_name
        columns = [f"{key} {row[self._head(key)]}" for key in keys if key != self.header["row"]]
        return Found(
            value=Quantity(float(row["value"]), entry.unit, entry.kind),
            row=self._row_text(row),
            column=", ".join(columns),
            status=row["status"],
            remark="; ".join(remarks),
        )

    def _check_arguments(self, arguments: Mapping[str, Key]) -> None:
        fixed = dict(pair.split("=") for pair in self.header.get("fixed", "").split("; ") if pair)
        for name, value in arguments.items():
            if name in fixed and _as_text(value) != fixed[name]:
                raise LookUpFault(self.title, f"holds for {name} {fixed[name]}, not {_as_text(value)}")
            if name not in fixed and name not in self.keys:
                raise LookUpFault(self.title, f'has no key "{name}"; {nearest(name, [*self.keys, *fixed])}')
        for name in self.keys:
            if name not in arguments:
                raise LookUpFault(self.title, f"needs {name}")

    def _head(self, name: str) -> str:
        unit = self.keys[name]
        return f"{name} [{unit}]" if unit else name

    def _row_text(self, row: Mapping[str, str]) -> str:
        name = self.header["row"]
        unit = self.keys[name]
        text = row[self._head(name)]
        return with_unit(print_plain(float(text)), unit) if unit else text

    def _equal(self, rows: list[Mapping[str, str]], name: str, wanted: Key) -> list[Mapping[str, str]]:
        head, unit = self._head(name), self.keys[name]
        if unit:
            number = _number(wanted, unit, self.title, name)
            shown = f"{number:g}{_space(unit)}"
            found = [row for row in rows if float(row[head]) == number]
        else:
            shown = _as_text(wanted)
            found = [row for row in rows if row[head] == wanted]
        if not found:
            has = ", ".join(dict.fromkeys(row[head] for row in rows))
            raise LookUpFault(self.title, f"{name} {shown} is not in the table; it has {has}")
        return found

    def _from_row(self, rows: list[Mapping[str, str]], name: str, wanted: Key) -> tuple[list[Mapping[str, str]], str]:
        """The rows of a stepped key: the exact ones, else the less favourable, else a last row that holds beyond."""
        head, unit = self._head(name), self.keys[name]
        number = _number(wanted, unit, self.title, name)
        shown = f"{name} {number:g}{_space(unit)}"
        way = self.stepped[name]
        has = sorted({float(row[head]) for row in rows})
        found = [key for key in has if (key <= number if way == "down" else key >= number)]
        if found:
            key = found[-1] if way == "down" else found[0]
            at = f"{key:g}{_space(unit)}"
            remark = f"in the band that ends at {at}" if way == "in bands" else f"{shown} read at {at}, less favourable"
            return [row for row in rows if float(row[head]) == key], "" if key == number else remark
        last = max(rows, key=lambda row: float(row[head]))
        if last.get("beyond"):
            return [last], f"no further change beyond {last[head]}"
        raise LookUpFault(self.title, f"{shown} is outside the table, {has[0]:g} to {has[-1]:g}{_space(unit)}")

    def printed(self, signed_off: SignOff | None = None) -> PrintedTable:
        """The whole table for the tables page."""
        return PrintedTable(
            key=self.key,
            standard=self.header["standard"],
            edition=self.header["edition"],
            table=self.header["table"],
            title=self.header["title"],
            obtained=self.header["obtained"],
            rows=tuple(dict(row) for row in self.rows),
            signed_off=signed_off,
        )


def _number(wanted: Key, unit: str, title: str, name: str) -> float:
    if isinstance(wanted, str):
        raise LookUpFault(title, f'{name} is a quantity in {unit}, got the word "{wanted}"')
    if wanted.kind not in UNITS[unit].kinds:
        raise LookUpFault(title, f"{name} is a quantity in {unit}, got {kind_in_words(wanted.kind)}")
    if wanted.unit == unit:
        return wanted.number
    return float(f"{wanted.number * factor(wanted.unit) / factor(unit):.12g}")  # 10e-6 m2 is the row of 10 mm2


def _as_text(value: Key) -> str:
    return value if isinstance(value, str) else f"{value.number:g}"


def _space(unit: str) -> str:
    return f" {unit}" if unit and unit != "1" else ""


def read_table(path: Path) -> Table:
    """Read one table file. Raises LookUpFault where its header or columns are not as described above."""
    return parse_table(path.stem, path.read_text("utf-8"))


@cache
def parse_table(key: str, text: str) -> Table:
    """The table of a file's text; `key` is the file's name without ending. Raises LookUpFault like `read_table`."""
    header: dict[str, str] = {}
    body: list[str] = []
    for line in text.splitlines():
        if line.startswith("# "):
            name, _, value = line[2:].partition(": ")
            header[name] = value
        else:
            body.append(line)
    reader = csv.DictReader(body)
    rows = tuple(reader)
    heads = tuple(reader.fieldnames or ())
    for wanted in HEADERS:
        if wanted not in header:
            raise LookUpFault(f"{key}.csv", f'the header line "# {wanted}: ..." is missing')
    if not {"value", "status"} <= set(heads) or not rows:
        raise LookUpFault(f"{key}.csv", "needs the columns value and status, and rows")
    return Table(key, header, heads, rows)


@cache
def tables() -> dict[str, Table]:
    """The tables of the package by key."""
    folder = Path(str(files("calcbook.reference")))
    found = (read_table(path) for path in sorted(folder.glob("*.csv")))
    return {table.key: table for table in found}


def table(key: str, own: Mapping[str, str] = NO_OWN) -> Table:
    """One table by key: of `own`, the texts of a project's tables by key, before those of the package.

    Raises LookUpFault with the nearest key where there is none.
    """
    if key in own:
        return parse_table(key, own[key])
    if key not in tables():
        raise LookUpFault(key, f"there is no such table; {nearest(key, {*tables(), *own})}")
    return tables()[key]
