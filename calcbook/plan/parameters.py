"""The template parameters of a circuit's sheet: where each comes from, circuit, basis or nowhere."""

from __future__ import annotations

from collections.abc import Mapping

from calcbook.records.project import Circuit, Datum

FROM_BASIS = (
    "nominal_voltage",
    "line_to_earth_voltage",
    "frequency",
    "length_tolerance",
    "resistance_for_drop",
    "supply_is",
)

#: template parameter -> column of circuits.csv, where they are not called the same
COLUMNS = {"load_current": "current"}

#: what says what a circuit takes, on its own sheet and on that of its board
LOAD = (
    "phases",
    "shaft_power",
    "active_power",
    "apparent_power",
    "load_current",
    "power_factor",
    "efficiency",
    "rated_current",
    "rated_voltage",
    "third_harmonic",
)
CABLE = (
    "phases",
    "conductor",
    "insulation",
    "construction",
    "method",
    "size",
    "neutral_size",
    "runs",
    "terminal_temperature",
    "ambient",
    "soil_resistivity",
    "depth",
    "grouping",
    "circuits_in_group",
    "trays",
    "spacing",
    "device",
    "rating",
    "poles",
    "overload_device",
    "overload_setting",
    "overload_omitted",
    "reason",
)
DROP = (
    "length",
    "length_basis",
    "length_tolerance",
    "frequency",
    "resistance_for_drop",
    "nominal_voltage",
    "drop_limit",
)

#: parameters of a final circuit's sheet, and of a feeder's
PARAMETERS = ("kind", *LOAD, "line_to_earth_voltage", *CABLE[1:], *DROP, "supply_is", "length_supplement")
OF_FEEDER = (*CABLE, *DROP)


def parameters_of(
    circuit: Circuit, basis: Mapping[str, Datum], names: tuple[str, ...] = PARAMETERS
) -> dict[str, Datum | None]:
    """The datum of every template parameter of a circuit, None where it has none."""
    found = {name: basis[name] if name in FROM_BASIS else circuit.data.get(COLUMNS.get(name, name)) for name in names}
    if "overload_setting" in found:
        found["overload_setting"] = _overload_setting(circuit)
    if "drop_limit" in found:
        kind = circuit.data["kind"].text
        found["drop_limit"] = circuit.data.get("drop_limit") or basis.get(f"drop_limits.{kind}")
    return found


def route_of(circuit: Circuit) -> dict[str, dict[str, Datum]]:
    """The data of each part of a circuit's route, by part and parameter; none where the route is one piece."""
    parts: dict[str, dict[str, Datum]] = {}
    for label, datum in circuit.data.items():
        name, _, part = label.partition("[")
        if part:
            parts.setdefault(part.rstrip("]"), {})[name] = datum
    return parts


def _overload_setting(circuit: Circuit) -> Datum | None:
    """The setting that overload is judged at: of the overload device, or of the breaker that is its own."""
    return circuit.data.get("overload_setting" if "overload_device" in circuit.data else "setting_Ir")
