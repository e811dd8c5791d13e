"""routes.csv: routes in several parts, one part a row; capacity is that of the most adverse part."""

from __future__ import annotations

from collections.abc import Collection

from calcbook.inputs.faults import FaultList
from calcbook.inputs.installation import PLACE, report_installation
from calcbook.inputs.rows import Row, read_rows
from calcbook.inputs.text import nearest_name, shown

FILE = "routes.csv"
MOST_PARTS = 8
_ROUNDING = 1e-9


class Routes:
    """The parts of the routes by circuit, in the order of the file."""

    def __init__(self) -> None:
        """Begin with none."""
        self._parts: dict[str, dict[str, Row]] = {}

    def add(self, row: Row) -> None:
        """Take one part; a second one of the same name is a fault, and so are too many."""
        circuit, part = row.text("circuit"), row.text("part")
        if not circuit or not part:
            return
        parts = self._parts.setdefault(circuit, {})
        if part in parts:
            row.fault("part", f"{shown(part)} of {circuit} stands twice, first in {parts[part].place}")
        elif len(parts) == MOST_PARTS:
            row.fault("part", f"{circuit} has more than {MOST_PARTS} parts; join those that lie alike")
        else:
            parts[part] = row

    def of(self, circuit: str) -> dict[str, Row]:
        """The parts of one circuit by name; none where its route is one piece."""
        return self._parts.get(circuit, {})

    def report_unknown(self, tags: Collection[str]) -> None:
        """Report parts of circuits that circuits.csv does not have."""
        for circuit in self._parts:
            for row in self._parts[circuit].values() if circuit not in tags else ():
                row.fault("circuit", f"{shown(circuit)} is not one of the circuits; {nearest_name(circuit, tags)}")


def read_routes(text: str | None, decimal: str, faults: FaultList) -> Routes:
    """The routes of the project; none where there is no file."""
    routes = Routes()
    for row in read_rows(FILE, "routes", text, decimal, faults) if text is not None else ():
        routes.add(row)
    return routes


def report_route(parts: dict[str, Row], cable: Row) -> None:
    """Report what does not fit together between the parts of a route and the row of their circuit."""
    for name in PLACE:
        if cable.text(name):
            cable.fault(name, "stands in routes.csv for this circuit, part by part; leave it empty here")
    for row in parts.values():
        report_installation(row, cable)
    lengths = [row.number("length", "m") for row in parts.values()]
    whole = cable.number("length", "m")
    total = sum(length for length in lengths if length is not None)
    if whole is not None and total > whole * (1 + _ROUNDING):
        last = list(parts.values())[-1]
        last.fault("length", f"the parts are {total:g} m long together, the circuit is {cable.text('length')}")
