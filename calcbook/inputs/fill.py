"""What a circuit leaves out and calcbook fills in: from the basis, or by a default that is safe and printed."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from calcbook.inputs.notes import Notes
from calcbook.records.project import Datum, Origin
from calcbook.records.quantity import Quantity

_LINE_TO_NEUTRAL = ("L1N", "L2N", "L3N")


def fill_gaps(tag: str, data: dict[str, Datum], basis: Mapping[str, Datum], notes: Notes) -> None:
    """Add to `data` of one circuit what it needs and does not state; each with its origin and a remark."""
    if "runs" not in data:
        origin = Origin("default", tag, "runs", "assumed", remark="One run, as none was stated.")
        data["runs"] = Datum("1", Quantity(1.0, "1", "count"), notes.filled(origin, tag, "runs"))
    if "ambient" not in data:
        ambient = basis["ambient_air"]
        data["ambient"] = replace(ambient, origin=notes.filled(ambient.origin, tag, "ambient"))
    if "shaft_power" in data and not data.keys() & {"rated_voltage", "rated_current"}:
        data["rated_voltage"] = _nominal_as_rated(tag, data["phases"].text, basis, notes)


def is_line_to_neutral(phases: str) -> bool:
    """Whether a load stands between one line and the neutral."""
    return phases in _LINE_TO_NEUTRAL


def _nominal_as_rated(tag: str, phases: str, basis: Mapping[str, Datum], notes: Notes) -> Datum:
    nominal = basis["line_to_earth_voltage" if is_line_to_neutral(phases) else "nominal_voltage"]
    remark = "The rated voltage is taken as the nominal voltage, as none was stated."
    origin = replace(nominal.origin, status="assumed", remark=remark)
    return replace(nominal, origin=notes.filled(origin, tag, "rated_voltage"))
