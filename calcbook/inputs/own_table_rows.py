"""The rows of a table of the project: numbers, ranges, keys that stand once, and values that go the right way."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Mapping
from itertools import pairwise

from calcbook.inputs.own_table_text import TableText
from calcbook.inputs.text import shown
from calcbook.records.notation import Name, named, range_in_words, within
from calcbook.reference.table import NOT_KEYS

_NUMBER = re.compile(r"[+-]?\d{1,15}(\.\d{1,15})?([eE][+-]?\d{1,2})?", re.ASCII)
#: name of the values -> keys along which they rise
_RISING = {"I_t": ("size",)}
#: name of the values -> keys along which they do not rise: more heat, more circuits, drier soil
_NOT_RISING = {"C_a": ("ambient",), "C_g": ("circuits", "trays"), "C_s": ("soil_resistivity",)}

_Cells = Mapping[str, str]
_Group = list[tuple[float, float, int]]


def check_rows(read: TableText) -> None:
    """Report every wrong row of a table whose header and heads are sound."""
    entry = named(read.header["value"])
    sound = [(line, cells) for line, cells in read.rows if _is_sound(read, line, cells, entry)]
    if not read.rows:
        read.fault("", "has no rows; rows of values are needed")
    _report_repeated(read, sound)
    for name in _RISING.get(entry.name, ()):
        _check_way(read, sound, entry, name, rising=True)
    for name in _NOT_RISING.get(entry.name, ()):
        _check_way(read, sound, entry, name, rising=False)


def _is_sound(read: TableText, line: int, cells: _Cells, entry: Name) -> bool:
    wrong = {head: _wrong_cell(head, text, entry) for head, text in cells.items()}
    for head, message in wrong.items():
        if message:
            read.fault(f"line {line}, {head}", message)
    return not any(wrong.values())


def _wrong_cell(head: str, text: str, entry: Name) -> str:
    if head == "beyond" and not text:
        return ""
    if not text or text != text.strip():
        return "is empty; it is needed in every row" if not text.strip() else f"{shown(text)} has a space at its end"
    if head != "value" and not head.endswith("]"):
        return ""
    if not _NUMBER.fullmatch(text):
        unit = f" in {entry.unit}" if head == "value" and entry.unit != "1" else ""
        return f"{shown(text)} is not a number{unit}; write digits, with a decimal point where one is needed"
    if head == "value" and not within(entry.range, float(text)):
        return f"{entry.name} is {text}; allowed is {range_in_words(entry.range)}"
    return ""


def _keys_of(cells: _Cells) -> dict[str, str | float]:
    return {head: float(text) if head.endswith("]") else text for head, text in cells.items() if head not in NOT_KEYS}


def _report_repeated(read: TableText, rows: list[tuple[int, _Cells]]) -> None:
    first: dict[tuple[str | float, ...], int] = {}
    for line, cells in rows:
        earlier = first.setdefault(tuple(_keys_of(cells).values()), line)
        if earlier != line:
            read.fault(f"line {line}", f"has the same keys as line {earlier}; write one")


def _check_way(read: TableText, rows: list[tuple[int, _Cells]], entry: Name, name: str, *, rising: bool) -> None:
    """Report values that go the wrong way along a key, the other keys being equal."""
    head = next((head for head in read.heads if head.startswith(f"{name} [")), None)
    if head is None:
        return
    groups: dict[tuple[str | float, ...], _Group] = defaultdict(list)
    for line, cells in rows:
        others = tuple(value for key, value in _keys_of(cells).items() if key != head)
        groups[others].append((float(cells[head]), float(cells["value"]), line))
    unit = head.partition("[")[2].rstrip("]").removeprefix("1")
    shown_unit = f" {unit}" if unit else ""
    wanted = f"must rise with {name}" if rising else f"must not rise with {name}"
    for group in groups.values():
        group.sort()
        for (key, value, line), (next_key, next_value, next_line) in pairwise(group):
            if key != next_key and (next_value <= value if rising else next_value > value):
                read.fault(
                    f"line {next_line}, value",
                    f"{entry.name} is {next_value:g} at {name} {next_key:g}{shown_unit}, and {value:g} "
                    f"at {key:g}{shown_unit} (line {line}); it {wanted}",
                )
