"""circuits.csv: one circuit a row, checked on its own and against the basis and the boards, gaps filled as said."""

from __future__ import annotations

from collections.abc import Collection, Mapping
from dataclasses import dataclass, field, replace

from calcbook.inputs.against_basis import report_against_basis
from calcbook.inputs.conditions import report_conditions
from calcbook.inputs.faults import FaultList
from calcbook.inputs.fields import fields_of
from calcbook.inputs.fill import basis_ambient, fill_gaps, is_line_to_neutral, keyed
from calcbook.inputs.installation import PLACE, report_ambient_of_basis, report_installation, report_place_needed
from calcbook.inputs.neutral import report_neutral
from calcbook.inputs.notes import Notes
from calcbook.inputs.refusals import report_refusals
from calcbook.inputs.routes import FILE as ROUTES_FILE
from calcbook.inputs.routes import Routes, report_route
from calcbook.inputs.rows import Row, read_rows
from calcbook.inputs.text import nearest_name, shown
from calcbook.records.project import Circuit, Datum

FILE = "circuits.csv"


@dataclass(frozen=True)
class Surroundings:
    """What circuits stand in: the basis, the names of boards, sources, cases and couplers, the notes, the routes.

    `known` is False where inputs.toml could not be read: then nothing is checked against it.
    """

    basis: Mapping[str, Datum]
    names: Mapping[str, Collection[str]]
    notes: Notes
    known: bool
    routes: Routes = field(default_factory=Routes)

    @property
    def complete(self) -> bool:
        """Whether circuits can be filled from the basis."""
        return self.known and {"nominal_voltage", "line_to_earth_voltage"} <= self.basis.keys()


@dataclass
class Circuits:
    """The circuits of the file; `columns` by tag, None where a row has faults; `unused` columns that hold something."""

    found: list[Circuit] = field(default_factory=list)
    columns: dict[str, Collection[str] | None] = field(default_factory=dict)
    unused: set[str] = field(default_factory=set)


def read_circuits(text: str, decimal: str, around: Surroundings, faults: FaultList) -> Circuits:
    """All circuits of a CSV text with a decimal mark; faults are reported, and their rows make no circuit."""
    circuits, tags, references = Circuits(), _Tags(around), _References(around)
    unused = {name for name, field in fields_of("circuits").items() if not field.used}
    rows = 0
    for row in read_rows(FILE, "circuits", text, decimal, faults):
        rows += 1
        tags.check(row)
        references.check(row)
        report_conditions(row)
        report_refusals(row)
        report_neutral(row)
        _report_places(row, around)
        if around.complete:
            report_against_basis(row, around.basis)
        circuits.unused |= unused & row.values.keys()
        _take(row, around, circuits)
    if not rows and not faults.any_in(FILE):
        faults.add(FILE, "", "has no circuit")
    if not faults.stopped(FILE):
        references.check_circuits(circuits.columns)
    return circuits


def _report_places(row: Row, around: Surroundings) -> None:
    """Report what does not fit together where the cable lies, in one place or in the parts of its route."""
    parts = around.routes.of(row.text("tag"))
    if parts:
        report_route(parts, row)
    else:
        report_place_needed(row)
        report_installation(row, row)
    for place in parts.values() or (row,):
        needed = basis_ambient(place.text("method"))
        if place.lacks("ambient") and around.known and needed not in around.basis:
            place.fault("ambient", f"is empty, and [basis] has no valid {needed}")
        elif place.lacks("ambient") and around.known:
            report_ambient_of_basis(place, row.text("insulation"), needed, around.basis[needed])
        row.wrong |= {"route"} if place is not row and place.wrong else set()


def _take(row: Row, around: Surroundings, circuits: Circuits) -> None:
    tag = row.text("tag")
    if row.wrong or not around.complete:
        if tag:
            circuits.columns[tag] = None
        return
    circuit = _circuit(row, around)
    circuits.found.append(circuit)
    circuits.columns[tag] = {name.partition("[")[0] for name in circuit.data}


def _circuit(row: Row, around: Surroundings) -> Circuit:
    tag = row.text("tag")
    data = {
        name: Datum(value.text, value.quantity, around.notes.origin(FILE, tag, name))
        for name, value in row.values.items()
        if name not in {"tag", "description"}
    }
    rated = data.get("rated_voltage")
    if rated and rated.quantity and is_line_to_neutral(data["phases"].text):
        data["rated_voltage"] = replace(rated, quantity=replace(rated.quantity, kind="line_to_neutral_voltage"))
    parts = around.routes.of(tag)
    for part, place in parts.items():
        data |= _part(tag, part, place, around.notes)
    fill_gaps(tag, data, tuple(parts), around.basis, around.notes)
    return Circuit(tag, row.text("description"), data)


def _part(tag: str, part: str, place: Row, notes: Notes) -> dict[str, Datum]:
    """The data of one part of a route, as "method[P1]"; its length is the part_length."""
    found = {}
    for name in ("length", *PLACE):
        if name in place.values:
            value, column = place.values[name], "part_length" if name == "length" else name
            origin = replace(notes.origin(ROUTES_FILE, tag, name), column=f"{part}, {name}")
            found[keyed(column, part)] = Datum(value.text, value.quantity, origin)
    return found


class _Tags:
    """Tags seen so far, ignoring case: circuits, boards and sources share them, as they number sheets."""

    def __init__(self, around: Surroundings) -> None:
        self._seen = {name.lower(): f"[{kind}.{name}]" for kind in ("boards", "sources") for name in around.names[kind]}

    def check(self, row: Row) -> None:
        tag = row.text("tag")
        if not tag:
            return
        if tag.lower() in self._seen:
            first = self._seen[tag.lower()]
            row.fault("tag", f"{shown(tag)} is used twice, first in {first}; capitals make no difference")
        else:
            self._seen[tag.lower()] = row.place


class _References:
    """Names that cells of circuits hold: of boards and cases checked at once, of circuits when all are read."""

    def __init__(self, around: Surroundings) -> None:
        self._around = around
        self._columns = {
            name: field for name, field in fields_of("circuits").items() if field.holds.startswith("reference")
        }
        self._pending: list[tuple[Row, str]] = []

    def check(self, row: Row) -> None:
        for column, reference in self._columns.items():
            if column not in row.values:
                continue
            if reference.choices == ("circuits",):
                self._pending.append((row, column))
            elif self._around.known:
                self._check(row, column, [name for kind in reference.choices for name in self._around.names[kind]])

    def check_circuits(self, tags: Collection[str]) -> None:
        for row, column in self._pending:
            self._check(row, column, tags)

    def _check(self, row: Row, column: str, known: Collection[str]) -> None:
        field, text = self._columns[column], row.text(column)
        for name in text.split() if field.holds == "references" else [text]:
            if name not in known:
                kinds = " or ".join(field.choices)
                row.fault(column, f"{shown(name)} is not one of the {kinds}; {nearest_name(name, known)}")
