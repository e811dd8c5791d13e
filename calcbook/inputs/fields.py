"""The fields of the inputs as data: every key of inputs.toml and every column of the CSV files.

`fields.csv` says of each: the place it stands in, what it holds, kinds of quantity, the unit its range and choices are
in, the words or numbers allowed, whether it is needed always (what is needed under a condition stands in
`conditions.py`), whether a subject uses it yet, the kinds of source it is for, and a hint for messages.
"""

from __future__ import annotations

import csv
from dataclasses import dataclass
from functools import cache
from importlib.resources import files


@dataclass(frozen=True)
class Field:
    """One key or column; `holds` is tag, text(s), word(s), quantity, flag, date, reference(s) or table."""

    place: str
    name: str
    holds: str
    kinds: tuple[str, ...]
    unit: str
    choices: tuple[str, ...]
    range: str
    needed: bool
    used: bool
    only_for: tuple[str, ...]
    hint: str


@cache
def fields_of(place: str) -> dict[str, Field]:
    """The fields of one place ("circuits", "basis", "boards", "notes", ...) by name, in the order of the file."""
    return {field.name: field for field in _all_fields() if field.place == place}


@cache
def _all_fields() -> tuple[Field, ...]:
    text = files("calcbook.inputs").joinpath("fields.csv").read_text("utf-8")
    return tuple(
        Field(
            place=row["place"],
            name=row["name"],
            holds=row["holds"],
            kinds=_parts(row["kinds"]),
            unit=row["unit"],
            choices=_parts(row["choices"]),
            range=row["range"],
            needed=row["need"] == "always",
            used=row["used"] == "yes",
            only_for=_parts(row["only_for"]),
            hint=row["hint"],
        )
        for row in csv.DictReader(text.splitlines())
    )


def _parts(text: str) -> tuple[str, ...]:
    return tuple(text.split("|")) if text else ()
