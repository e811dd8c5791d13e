"""notes.csv: source document and status of data, by tag and column; `*` stands for every circuit or every column."""

from __future__ import annotations

from collections.abc import Collection, Mapping
from dataclasses import dataclass, replace
from typing import cast

from calcbook.inputs.faults import FaultList
from calcbook.inputs.fields import fields_of
from calcbook.inputs.heads import unknown_name
from calcbook.inputs.rows import Row, read_rows
from calcbook.inputs.settings import TAGGED
from calcbook.inputs.text import nearest_name, shown
from calcbook.records.project import Origin, Status

FILE = "notes.csv"
EVERY = "*"
_NEVER_EMPTY = ("tag", "description")
_NOTED = ("status", "document", "revision", "page", "remark")


@dataclass(frozen=True)
class Note:
    """One row of notes.csv."""

    row: Row
    tag: str
    column: str
    noted: Mapping[str, str]

    def on(self, origin: Origin) -> Origin:
        """An origin with what this note says of it."""
        return replace(
            origin,
            status=cast(Status, self.noted["status"] or "to be confirmed"),
            document=self.noted["document"],
            revision=self.noted["revision"],
            page=self.noted["page"],
            remark=self.noted["remark"],
        )


class Notes:
    """The notes of a project, the most specific one first."""

    def __init__(self, notes: Mapping[tuple[str, str], Note]) -> None:
        """Notes by tag and column, each of which may be `*`."""
        self._notes = notes

    def origin(self, file: str, tag: str, column: str) -> Origin:
        """Where a datum stands, with what the most specific note says: a tag weighs more than a column."""
        origin = Origin(file, tag, column)
        if not self._notes:
            return origin
        tags = (tag, EVERY) if file in ("circuits.csv", "routes.csv") else (tag,)
        keys = ((one, other) for one in tags for other in (column, EVERY))
        note = next((self._notes[key] for key in keys if key in self._notes), None)
        return note.on(origin) if note else origin

    def filled(self, origin: Origin, tag: str, column: str) -> Origin:
        """The origin of a datum that calcbook fills in; only a note that names the column speaks of it."""
        note = self._notes.get((tag, column)) or self._notes.get((EVERY, column))
        return note.on(origin) if note else origin

    def report_unknown(self, known: Mapping[str, Collection[str] | None]) -> None:
        """Report notes on what the inputs do not hold.

        Parameters: `known` maps each tag to the columns that have a value, or to None where that tag has faults.
        """
        for note in self._notes.values():
            if note.tag != EVERY and note.tag not in known:
                note.row.fault("tag", f"{shown(note.tag)} is no tag of the inputs; {nearest_name(note.tag, known)}")
                continue
            if note.column == EVERY:
                continue
            place = _place_of(note.tag)
            if note.column not in fields_of(place):
                note.row.fault("column", unknown_name(place, note.column))
                continue
            columns = known.get(note.tag)
            if columns is not None and note.column not in {*columns, *_NEVER_EMPTY}:
                note.row.fault("column", f"{note.tag} has no {note.column}: the note speaks of nothing")


def _place_of(tag: str) -> str:
    """The place whose fields a tag has: "basis", "boards" of "boards.MB", else circuits."""
    place, dot, _ = tag.partition(".")
    return place if tag == "basis" or (dot and place in TAGGED) else "circuits"


def read_notes(text: str | None, decimal: str, faults: FaultList) -> Notes:
    """The notes of the project; none where there is no file."""
    notes: dict[tuple[str, str], Note] = {}
    for row in read_rows(FILE, "notes", text, decimal, faults) if text is not None else ():
        tag, column = row.text("tag"), row.text("column")
        if not tag or not column:
            continue
        if (tag, column) in notes:
            row.fault("", f"a second note on {shown(tag)}, {shown(column)}; write one")
        notes[tag, column] = Note(row, tag, column, {name: row.text(name) for name in _NOTED})
    return Notes(notes)
