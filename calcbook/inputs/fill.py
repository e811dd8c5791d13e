"""What a circuit leaves out and calcbook fills in: from the basis, or by a default that is safe and printed."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from calcbook.inputs.installation import IN_GROUND
from calcbook.inputs.notes import Notes
from calcbook.inputs.value import number_in
from calcbook.records.project import Datum, Origin, Status
from calcbook.records.quantity import Quantity

_LINE_TO_NEUTRAL = ("L1N", "L2N", "L3N")
_LINEAR_LOADS = ("motor", "heating")
_REFERENCE_SOIL = 2.5
_REFERENCE_DEPTH = 0.7


def fill_gaps(
    tag: str, data: dict[str, Datum], parts: tuple[str, ...], basis: Mapping[str, Datum], notes: Notes
) -> None:
    """Add to `data` of one circuit what it needs and does not state; each with its origin and a remark."""
    gaps = _Gaps(tag, data, notes)
    gaps.fill("runs", Quantity(1.0, "1", "count"), "One run, as none was stated.")
    gaps.fill("terminal_temperature", Quantity(70.0, "degC", "temperature"), "70 °C, as none was stated.")
    gaps.fill("demand_factor", Quantity(1.0, "1", "ratio"), "1, the greatest, as none was stated.")
    if data["phases"].text.endswith("N") and "to" not in data:
        _fill_third_harmonic(gaps, data["kind"].text)
    for part in parts or ("",):
        _fill_place(gaps, part, basis)
    if "shaft_power" in data and not data.keys() & {"rated_voltage", "rated_current"}:
        data["rated_voltage"] = _nominal_as_rated(tag, data["phases"].text, basis, notes)


def fill_basis(basis: dict[str, Datum], notes: Notes) -> None:
    """Add to the basis what it does not state and what has a safe value, each with its origin and a remark."""
    gaps = _Gaps("basis", basis, notes)
    gaps.fill("length_tolerance", Quantity(10.0, "%", "per_cent"), "10 %, as none was stated.")
    remark = "The greatest temperature in service, the warmest, as none was stated."
    origin = Origin("default", "basis", "resistance_for_drop", "assumed", remark=remark)
    filled = Datum("theta_max", None, notes.filled(origin, "basis", "resistance_for_drop"))
    basis.setdefault("resistance_for_drop", filled)


def fill_board(tag: str, board: dict[str, Datum], notes: Notes) -> None:
    """Add to a board the diversity that it does not state: 1, the safe value."""
    _Gaps(tag, board, notes).fill("diversity", Quantity(1.0, "1", "ratio"), "1, the greatest, as none was stated.")


def is_line_to_neutral(phases: str) -> bool:
    """Whether a load stands between one line and the neutral."""
    return phases in _LINE_TO_NEUTRAL


def keyed(name: str, part: str) -> str:
    """The name of a datum of one part of a route: "method[P1]"; without parts the name itself."""
    return f"{name}[{part}]" if part else name


def basis_ambient(method: str) -> str:
    """The key of the basis that gives the ambient temperature of a method."""
    return "ambient_ground" if method in IN_GROUND else "ambient_air"


class _Gaps:
    """The data of one circuit, of a board or of the basis while gaps in them are filled."""

    def __init__(self, tag: str, data: dict[str, Datum], notes: Notes) -> None:
        self.tag, self.data, self.notes = tag, data, notes

    def fill(self, name: str, quantity: Quantity, remark: str, status: Status = "assumed", part: str = "") -> None:
        if keyed(name, part) in self.data:
            return
        origin = Origin("default", self.tag, f"{part}, {name}" if part else name, status, remark=remark)
        number = f"{quantity.number:g}"
        text = number if quantity.unit == "1" else f"{number} {quantity.unit}"
        self.data[keyed(name, part)] = Datum(text, quantity, self.notes.filled(origin, self.tag, name))


def _fill_third_harmonic(gaps: _Gaps, kind: str) -> None:
    if kind in _LINEAR_LOADS:
        remark = f"None, as a load of kind {kind} makes none and none was stated."
        gaps.fill("third_harmonic", Quantity(0.0, "%", "per_cent"), remark)
    else:
        remark = "15 % of the line current, up to which the neutral is not counted, as none was stated."
        gaps.fill("third_harmonic", Quantity(15.0, "%", "per_cent"), remark, "to be confirmed")


def _fill_place(gaps: _Gaps, part: str, basis: Mapping[str, Datum]) -> None:
    data, name = gaps.data, keyed("ambient", part)
    method = data[keyed("method", part)].text
    if name not in data:
        ambient = basis[basis_ambient(method)]
        data[name] = replace(ambient, origin=gaps.notes.filled(ambient.origin, gaps.tag, "ambient"))
    if method in IN_GROUND:
        _fill_soil(gaps, part, basis)
        _fill_depth(gaps, part)
    if data[keyed("grouping", part)].text in ("buried", "buried_one_diameter", "ducts"):
        remark = "Touching, the least favourable, as none was stated."
        if data[keyed("grouping", part)].text == "buried_one_diameter":
            remark = "One cable diameter, as the arrangement says."
        gaps.fill("spacing", Quantity(0.0, "mm", "dimension"), remark, part=part)


def _fill_soil(gaps: _Gaps, part: str, basis: Mapping[str, Datum]) -> None:
    """The soil's resistivity; one lower than the reference needs a status of its own, not one that stands for all."""
    name, data, tag = keyed("soil_resistivity", part), gaps.data, gaps.tag
    noted_as = tag if name in data else "basis"
    if name not in data and "soil_resistivity" in basis:
        data[name] = basis["soil_resistivity"]
    remark = "2.5 K·m/W, the reference of Annex B, as none was stated."
    gaps.fill("soil_resistivity", Quantity(_REFERENCE_SOIL, "K.m/W", "thermal_resistivity"), remark, part=part)
    datum = data[name]
    if datum.quantity and number_in(datum.quantity, "K.m/W") < _REFERENCE_SOIL:
        remark = "Lower than 2.5 K·m/W, the reference of Annex B: it needs a measurement."
        origin = replace(datum.origin, status="to be confirmed", document="", revision="", page="", remark=remark)
        data[name] = replace(datum, origin=gaps.notes.filled(origin, noted_as, "soil_resistivity"))


def _fill_depth(gaps: _Gaps, part: str) -> None:
    name = keyed("depth", part)
    remark = "0.7 m, the reference of Annex B, as none was stated."
    gaps.fill("depth", Quantity(_REFERENCE_DEPTH, "m", "dimension"), remark, part=part)
    datum = gaps.data[name]
    if datum.quantity and abs(number_in(datum.quantity, "m") - _REFERENCE_DEPTH) > 1e-9:
        said = "Annex B has no factor for another depth than 0.7 m."
        remark = f"{datum.origin.remark}; {said}" if datum.origin.remark else said
        gaps.data[name] = replace(datum, origin=replace(datum.origin, remark=remark))


def _nominal_as_rated(tag: str, phases: str, basis: Mapping[str, Datum], notes: Notes) -> Datum:
    nominal = basis["line_to_earth_voltage" if is_line_to_neutral(phases) else "nominal_voltage"]
    remark = "The rated voltage is taken as the nominal voltage, as none was stated."
    origin = replace(nominal.origin, status="assumed", remark=remark)
    return replace(nominal, origin=notes.filled(origin, tag, "rated_voltage"))
