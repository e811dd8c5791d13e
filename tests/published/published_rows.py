"""The published values in the CSV files of this folder, and the package's own result for each.

A row names a formula, or a look-up in one of the package's tables, and its inputs: "12.75 kW" as the source gives
it; "(415/hypot(3, 4)) A" worked out from the source's data by the grammar of written forms; "[b.52.14: ...]" read
from a table of the package. An a.c. resistance with its cable's data is worked out by the whole chain of tables and
formulas. The tolerance is half a unit in the last printed digit unless the row gives another with
its reason.
"""

from __future__ import annotations

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from pathlib import Path

from cable_resistance import ac_resistance

from calcbook.formulas.register import formulas
from calcbook.records.dimension import factor
from calcbook.records.notation import named
from calcbook.records.quantity import Quantity, check_unit, read_quantity
from calcbook.records.units import UNITS
from calcbook.records.written.evaluate import evaluate
from calcbook.records.written.tree import parse
from calcbook.reference.table import Key, table

FOLDER = Path(__file__).parent
COLUMNS = ("formula", "inputs", "printed", "unit", "source", "place", "obtained", "note", "reason", "tolerance")
COMMON_PRACTICE = "common practice, no source"
LOOK_UP = "look-up "


@dataclass(frozen=True)
class Row:
    """One published value; `file` and `line` say where it stands."""

    file: str
    line: int
    formula: str
    inputs: str
    printed: str
    unit: str
    source: str
    place: str
    obtained: str
    note: str
    reason: str
    tolerance: str

    @property
    def name(self) -> str:
        """The row in a test report."""
        return f"{self.file}:{self.line} {self.formula}"

    @property
    def allowed(self) -> Decimal:
        """How far the package's result may lie from the printed value."""
        exponent = Decimal(self.printed).as_tuple().exponent
        assert isinstance(exponent, int)
        return Decimal(self.tolerance) if self.tolerance else Decimal("0.5").scaleb(exponent)

    @property
    def difference(self) -> Decimal:
        """The package's result less the printed value, in the printed unit."""
        return Decimal(result(self)) - Decimal(self.printed)

    @property
    def used(self) -> float:
        """The share of the tolerance that the difference takes; above 1 the row fails."""
        return float(abs(self.difference) / self.allowed)


@cache
def rows() -> tuple[Row, ...]:
    """Every row of every file, in order."""
    found: list[Row] = []
    for path in sorted(FOLDER.glob("*.csv")):
        lines = path.read_text("utf-8").splitlines()
        head = sum(line.startswith("# ") for line in lines)
        reader = csv.DictReader(lines[head:])
        assert tuple(reader.fieldnames or ()) == COLUMNS, path.name
        found += [Row(file=path.stem, line=head + reader.line_num, **row) for row in reader]
    return tuple(found)


def result(row: Row) -> float:
    """The package's number for a row, in the row's unit."""
    pairs = _pairs(row.inputs, "; ", "=")
    if row.formula.startswith(LOOK_UP):
        found = _looked_up(row.formula.removeprefix(LOOK_UP), pairs)
    elif "insulation" in pairs:
        found = ac_resistance(pairs)
    else:
        inputs = {name: _input(name, text) for name, text in pairs.items()}
        found, _ = formulas()[row.formula].evaluate(inputs)
    check_unit(row.unit, found.kind)
    return found.number * (factor(found.unit) / factor(row.unit)) if row.unit != found.unit else found.number


def _input(name: str, text: str) -> Quantity:
    kind = named(name).kind
    if text.startswith("["):
        key, _, arguments = text.strip("[]").partition(": ")
        return _looked_up(f"iec-60364-5-52-{key}", _pairs(arguments, ", ", "="))
    if text.startswith("("):
        form, _, unit = text.rpartition(")")
        return Quantity(evaluate(parse(form + ")"), {}), check_unit(unit.strip() or "1", kind), kind)
    return read_quantity(text, kind)


def _looked_up(key: str, pairs: Mapping[str, str]) -> Quantity:
    units = table(key).keys
    arguments: dict[str, Key] = {}
    for name, text in pairs.items():
        number = text.removesuffix(f" {units[name]}")
        arguments[name] = Quantity(float(number), units[name], UNITS[units[name]].kinds[0]) if units[name] else text
    return table(key).look_up(arguments).value


def _pairs(text: str, separator: str, sign: str) -> dict[str, str]:
    """The named parts of a text; a separator inside square brackets does not part them."""
    parts: list[str] = []
    for part in text.split(separator):
        if parts and parts[-1].count("[") > parts[-1].count("]"):
            parts[-1] += separator + part
        else:
            parts.append(part)
    return {name: value for name, _, value in (part.partition(sign) for part in parts)}
