"""The closed list of unit spellings and the kinds of quantity each may carry.

A spelling is what an inputs file may contain and what a record stores; `printed` is what stands on paper.
`pint_name` is the same unit in the vocabulary of the unit library, which converts and multiplies units but never
reads input.
"""

from __future__ import annotations

from dataclasses import dataclass

# kind of quantity -> coherent unit in which formulas are evaluated (Celsius temperature is an SI unit of its own)
KINDS: dict[str, str] = {
    "active_power": "W",
    "reactive_power": "var",
    "apparent_power": "VA",
    "line_to_line_voltage": "V",
    "line_to_neutral_voltage": "V",
    "phase_voltage": "V",
    "peak_voltage": "V",
    "voltage_drop": "V",
    "instantaneous_voltage": "V",
    "line_current": "A",
    "winding_current": "A",
    "neutral_current": "A",
    "run_current": "A",
    "peak_current": "A",
    "instantaneous_current": "A",
    "prospective_fault_current": "A",
    "let_through_energy": "A2s",
    "temperature": "degC",
    "temperature_difference": "K",
    "one_way_length": "m",
    "loop_length": "m",
    "dimension": "m",
    "resistance": "ohm",
    "reactance": "ohm",
    "impedance": "ohm",
    "resistance_per_length": "ohm/m",
    "reactance_per_length": "ohm/m",
    "thermal_resistivity": "K.m/W",
    "thermal_resistance": "K/W",
    "temperature_coefficient": "1/K",
    "capacitance": "F",
    "permeability": "H/m",
    "area": "m2",
    "time": "s",
    "frequency": "Hz",
    "angular_frequency": "rad/s",
    "energy": "J",
    "angle": "rad",
    "ratio": "1",
    "per_cent": "1",
    "per_cent_per_length": "1/m",
    "count": "1",
    "starts_per_time": "1/s",
}


@dataclass(frozen=True)
class Unit:
    """One allowed spelling: how it prints, its name in the unit library, the kinds of quantity it may carry."""

    spelling: str
    printed: str
    pint_name: str
    kinds: tuple[str, ...]


_VOLTAGES = (
    "line_to_line_voltage",
    "line_to_neutral_voltage",
    "phase_voltage",
    "peak_voltage",
    "voltage_drop",
    "instantaneous_voltage",
)
_CURRENTS = (
    "line_current",
    "winding_current",
    "neutral_current",
    "run_current",
    "peak_current",
    "instantaneous_current",
    "prospective_fault_current",
)
_LENGTHS = ("one_way_length", "loop_length", "dimension")
_OHMS = ("resistance", "reactance", "impedance")
_OHMS_PER_LENGTH = ("resistance_per_length", "reactance_per_length")

_LIST: tuple[Unit, ...] = (
    Unit("W", "W", "watt", ("active_power",)),
    Unit("kW", "kW", "kilowatt", ("active_power",)),
    Unit("MW", "MW", "megawatt", ("active_power",)),
    Unit("hp_imperial", "hp (imperial)", "hp_imperial", ("active_power",)),
    Unit("hp_metric", "hp (metric)", "hp_metric", ("active_power",)),
    Unit("var", "var", "watt", ("reactive_power",)),
    Unit("kvar", "kvar", "kilowatt", ("reactive_power",)),
    Unit("Mvar", "Mvar", "megawatt", ("reactive_power",)),
    Unit("VA", "VA", "watt", ("apparent_power",)),
    Unit("kVA", "kVA", "kilowatt", ("apparent_power",)),
    Unit("MVA", "MVA", "megawatt", ("apparent_power",)),
    Unit("mV", "mV", "millivolt", _VOLTAGES),
    Unit("V", "V", "volt", _VOLTAGES),
    Unit("kV", "kV", "kilovolt", _VOLTAGES),
    Unit("mA", "mA", "milliampere", _CURRENTS),
    Unit("A", "A", "ampere", _CURRENTS),
    Unit("kA", "kA", "kiloampere", _CURRENTS),
    Unit("A2s", "A²s", "ampere**2*second", ("let_through_energy",)),
    Unit("kA2s", "kA²s", "kiloampere**2*second", ("let_through_energy",)),
    Unit("degC", "°C", "kelvin", ("temperature",)),
    Unit("K", "K", "kelvin", ("temperature_difference",)),
    Unit("m", "m", "meter", _LENGTHS),
    Unit("mm", "mm", "millimeter", ("dimension",)),
    Unit("km", "km", "kilometer", _LENGTHS),
    Unit("ohm", "Ω", "ohm", _OHMS),
    Unit("mohm", "mΩ", "milliohm", _OHMS),
    Unit("ohm/m", "Ω/m", "ohm/meter", _OHMS_PER_LENGTH),
    Unit("mohm/m", "mΩ/m", "milliohm/meter", _OHMS_PER_LENGTH),
    Unit("ohm/km", "Ω/km", "ohm/kilometer", _OHMS_PER_LENGTH),
    Unit("K.m/W", "K·m/W", "kelvin*meter/watt", ("thermal_resistivity",)),
    Unit("K/W", "K/W", "kelvin/watt", ("thermal_resistance",)),
    Unit("1/K", "1/K", "1/kelvin", ("temperature_coefficient",)),
    Unit("F", "F", "farad", ("capacitance",)),
    Unit("uF", "µF", "microfarad", ("capacitance",)),
    Unit("H/m", "H/m", "henry/meter", ("permeability",)),
    Unit("uH/m", "µH/m", "microhenry/meter", ("permeability",)),
    Unit("m2", "m²", "meter**2", ("area",)),
    Unit("mm2", "mm²", "millimeter**2", ("area",)),
    Unit("ms", "ms", "millisecond", ("time",)),
    Unit("s", "s", "second", ("time",)),
    Unit("h", "h", "hour", ("time",)),
    Unit("Hz", "Hz", "1/second", ("frequency",)),
    Unit("rad/s", "rad/s", "1/second", ("angular_frequency",)),
    Unit("J", "J", "joule", ("energy",)),
    Unit("kWh", "kWh", "kilowatt*hour", ("energy",)),
    Unit("rad", "rad", "radian", ("angle",)),
    Unit("deg", "°", "degree", ("angle",)),
    Unit("1", "", "dimensionless", ("ratio", "count")),
    Unit("%", "%", "percent", ("per_cent",)),
    Unit("1/m", "1/m", "1/meter", ("per_cent_per_length",)),
    Unit("%/m", "%/m", "percent/meter", ("per_cent_per_length",)),
    Unit("1/s", "1/s", "1/second", ("starts_per_time",)),
    Unit("1/h", "1/h", "1/hour", ("starts_per_time",)),
)

UNITS: dict[str, Unit] = {unit.spelling: unit for unit in _LIST}

#: Two different units share the name "hp"; it is refused and these are offered.
AMBIGUOUS = {"hp": ("hp_imperial", "hp_metric")}


def units_of(kind: str) -> tuple[str, ...]:
    """The spellings that may carry a kind of quantity, in the order of the list."""
    return tuple(unit.spelling for unit in _LIST if kind in unit.kinds)


def kind_in_words(kind: str) -> str:
    """A kind as it reads in a sentence: "active power"."""
    return kind.replace("_", " ").replace("line to ", "line-to-").replace("one way", "one-way")
