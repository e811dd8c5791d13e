"""tables/*.csv: tables of the project, in place of those of calcbook that have the same file name, or beside them."""

from __future__ import annotations

import os
import re
from collections.abc import Collection, Mapping
from dataclasses import dataclass
from pathlib import Path

from calcbook.inputs.faults import FaultList
from calcbook.inputs.own_table_rows import check_rows
from calcbook.inputs.own_table_text import TableText, read_text
from calcbook.inputs.source import read_source
from calcbook.inputs.text import nearest_name, shown
from calcbook.records.notation import notation
from calcbook.records.units import UNITS
from calcbook.reference.table import HEADERS, Table, tables

FOLDER = "tables"
LARGEST_TABLE = 2**18  # bytes; each workbook holds the project's tables
MOST_TABLES = 100
_NAME = re.compile(r"[a-z0-9][a-z0-9._-]{0,59}\.csv")
_HEADERS = (*HEADERS, "conditions", "fixed", "between")
_WAYS = ("up", "down", "in bands")
_SAME_HEADERS = ("value", "fixed", "between")


@dataclass(frozen=True)
class OwnTables:
    """The texts of the tables by key, and the titles by which `[signed_off]` names them."""

    texts: Mapping[str, str]
    titles: Collection[str]


def read_own_tables(folder: Path, faults: FaultList) -> OwnTables:
    """Read and check the tables of a project, every fault reported; none where there is no folder of that name."""
    texts: dict[str, str] = {}
    own: dict[str, Table] = {}
    for name in _files_in(folder / FOLDER, faults):
        file, key = f"{FOLDER}/{name}", name.removesuffix(".csv")
        text = read_source(folder, file, faults, needed=True, largest=LARGEST_TABLE)
        if text is None:
            continue
        read = read_text(file, text, faults)
        texts[key] = text
        own[key] = Table(key, read.header, read.heads, ())
        _check(read, tables().get(key), faults)
    _report_taken_numbers(own, faults)
    said = (table for table in own.values() if {"standard", "edition", "table"} <= set(table.header))
    return OwnTables(texts, tuple(table.title for table in said))


def _files_in(folder: Path, faults: FaultList) -> list[str]:
    if not os.path.lexists(folder):
        return []
    try:
        names = sorted(path.name for path in folder.iterdir() if path.name.lower().endswith(".csv"))
    except OSError as error:
        faults.add(FOLDER, "", f"cannot be read as a folder of tables ({error.strerror})")
        return []
    if len(names) > MOST_TABLES:
        faults.add(FOLDER, "", f"holds {len(names)} tables; allowed are {MOST_TABLES}")
        return []
    for name in names:
        if not _NAME.fullmatch(name):
            allowed = 'a name has 1 to 60 small letters a to z, digits, "-", "." and "_", then .csv'
            faults.add(FOLDER, "", f"{shown(name)} is not the name of a table; {allowed}")
        elif not (folder / name).is_file():
            faults.add(f"{FOLDER}/{name}", "", "is not a file")
    return [name for name in names if _NAME.fullmatch(name) and (folder / name).is_file()]


def _check(read: TableText, replaced: Table | None, faults: FaultList) -> None:
    """Report what is wrong with a table; its rows are judged where header and heads are sound."""
    _check_header(read, replaced)
    _check_heads(read, replaced)
    if not faults.any_in(read.file):
        check_rows(read)


def _check_header(read: TableText, replaced: Table | None) -> None:
    for name in read.header:
        if name not in _HEADERS:
            read.fault(read.place_of(name), f"{shown(name)} is no header line; {nearest_name(name, _HEADERS)}")
    for name in HEADERS:
        if not read.header.get(name):
            read.fault("", f'the header line "# {name}: ..." is missing or empty')
    value = read.header.get("value")
    if value and value not in notation():
        read.fault(
            read.place_of("value"),
            f"{shown(value)} is not a name of the notation list; {nearest_name(value, notation())}",
        )
    for name in _SAME_HEADERS if replaced else ():
        found, wanted = read.header.get(name, ""), replaced.header.get(name, "") if replaced else ""
        if found != wanted and (found or name != "value"):
            read.fault(
                read.place_of(name),
                f'"# {name}:" says {shown(found)}; the table that it replaces says {shown(wanted)}',
            )


def _check_heads(read: TableText, replaced: Table | None) -> None:
    if not read.heads:
        read.fault("", "has no columns and no rows; a row of heads and rows of values are needed")
        return
    place = f"line {read.heads_line}"
    for head in read.heads:
        if read.heads.count(head) > 1:
            read.fault(place, f"the column {shown(head)} stands twice; write it once")
        if head.startswith("value [") or head.startswith("status ["):
            read.fault(place, f"the head {shown(head)} has a unit; values are in the unit of the notation list")
    wanted = [head for head in replaced.heads if head != "beyond"] if replaced else ["value", "status"]
    for head in wanted:
        if head not in read.heads:
            has = f"; the table that it replaces has: {', '.join(wanted)}" if replaced else ""
            read.fault(place, f"the column {shown(head)} is missing{has}")
    for head in read.heads:
        if replaced and head not in replaced.heads:
            read.fault(place, f"the column {shown(head)} is not in the table that it replaces: {', '.join(wanted)}")
    keys = Table("", read.header, read.heads, ()).keys
    for name, unit in keys.items():
        if unit and unit not in UNITS:
            read.fault(place, f"{shown(unit)} of the column {shown(name)} is not a unit; {nearest_name(unit, UNITS)}")
    _check_named_keys(read, keys)


def _check_named_keys(read: TableText, keys: Mapping[str, str]) -> None:
    """Report header lines that speak of keys which the table does not have."""
    row = read.header.get("row")
    if row and row not in keys:
        read.fault(read.place_of("row"), f"{shown(row)} is not a key of the table; {nearest_name(row, keys)}")
    for pair in filter(None, read.header.get("fixed", "").split("; ")):
        if not re.fullmatch(r"[^=\s]+=[^=\s]+", pair):
            read.fault(read.place_of("fixed"), f"{shown(pair)} is not key=value; several are parted by a semicolon")
    for part in filter(None, read.header.get("between", "").split("; ")):
        name, _, way = part.partition(" ")
        if not keys.get(name) or way not in _WAYS:
            allowed = f"a key with a unit, then {', '.join(_WAYS[:-1])} or {_WAYS[-1]}"
            read.fault(read.place_of("between"), f"{shown(part)} is not allowed; allowed: {allowed}")


def _report_taken_numbers(own: Mapping[str, Table], faults: FaultList) -> None:
    """Report a table under another file name than the one of the same standard and number."""
    every = {**tables(), **own}
    numbers = {key: (table.header.get("standard"), table.header.get("table")) for key, table in every.items()}
    for key in own:
        same = next((other for other in every if other != key and numbers[other] == numbers[key]), None)
        if same and all(numbers[key]):
            number = ", ".join(str(part) for part in numbers[key])
            faults.add(
                f"{FOLDER}/{key}.csv", "", f"is {number}, as is {same}; to replace that one name the file {same}.csv"
            )
