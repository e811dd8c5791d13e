"""The template parameters of a circuit's sheet: where each comes from, circuit, basis or nowhere."""

from __future__ import annotations

from collections.abc import Mapping

from calcbook.records.project import Circuit, Datum

FROM_BASIS = ("nominal_voltage", "line_to_earth_voltage")

#: template parameter -> column of circuits.csv, where they are not called the same
COLUMNS = {"load_current": "current"}

PARAMETERS = (
    "phases",
    "kind",
    "shaft_power",
    "active_power",
    "apparent_power",
    "load_current",
    "power_factor",
    "efficiency",
    "rated_current",
    "nominal_voltage",
    "line_to_earth_voltage",
    "rated_voltage",
    "conductor",
    "insulation",
    "method",
    "size",
    "runs",
    "ambient",
    "grouping",
    "circuits_in_group",
    "device",
    "rating",
    "overload_device",
    "overload_setting",
)


def parameters_of(circuit: Circuit, basis: Mapping[str, Datum]) -> dict[str, Datum | None]:
    """The datum of every template parameter of a circuit, None where it has none."""
    found = {
        name: basis[name] if name in FROM_BASIS else circuit.data.get(COLUMNS.get(name, name)) for name in PARAMETERS
    }
    found["overload_setting"] = _overload_setting(circuit)
    return found


def _overload_setting(circuit: Circuit) -> Datum | None:
    """The setting that overload is judged at: of the overload device, or of the breaker that is its own."""
    return circuit.data.get("overload_setting" if "overload_device" in circuit.data else "setting_Ir")
