"""Which printed table holds a value: a standard spreads one subject over several tables."""

from __future__ import annotations

from calcbook.errors import LookUpFault, nearest

AMBIENT_FACTOR = "iec-60364-5-52-b.52.14"
GROUND_TEMPERATURE_FACTOR = "iec-60364-5-52-b.52.15"
SOIL_FACTOR = "iec-60364-5-52-b.52.16"
GROUPING_FACTOR = "iec-60364-5-52-b.52.17"
HARMONIC_FACTOR = "iec-60364-5-52-e.52.1"
SMALLEST_SIZE = "iec-60364-5-52-52.2"
EQUAL_NEUTRAL = "iec-60364-5-52-524.2"
GREATEST_TEMPERATURE = "iec-60364-5-52-52.1"
REFERENCE_AMBIENT = "iec-60364-5-52-b.52.2-ambient"
LOADED_CONDUCTORS = "iec-60364-5-52-523.6"
RESISTANCE = "iec-60228-resistance"
RESISTANCE_TEMPERATURE = "iec-60228-temperature"
TEMPERATURE_COEFFICIENT = "iec-60287-1-1-1-alpha"
SKIN_CONSTANT = "iec-60287-1-1-constant"
SKIN_FACTOR = "iec-60287-1-1-2"
CONDUCTOR_DIAMETER = "iec-60228-c-diameters"
INSULATION_THICKNESS = "iec-60502-1-insulation"
REACTANCE = "cei-unel-35023-reactance"
REACTANCE_FREQUENCY = "cei-unel-35023-frequency"
GREATEST_DROP = "iec-60364-5-52-g.52.1"
SUPPLEMENT_RATE = "iec-60364-5-52-g.52.1-rate"
SUPPLEMENT_FROM = "iec-60364-5-52-g.52.1-from"
GREATEST_SUPPLEMENT = "iec-60364-5-52-g.52.1-most"

_IN_WALL_OR_GROUND = {("PVC70", 2): "b.52.2", ("XLPE90", 2): "b.52.3", ("PVC70", 3): "b.52.4", ("XLPE90", 3): "b.52.5"}
_FREE_AIR = {
    ("PVC70", "Cu"): "b.52.10",
    ("PVC70", "Al"): "b.52.11",
    ("XLPE90", "Cu"): "b.52.12",
    ("XLPE90", "Al"): "b.52.13",
}
_FREE_AIR_METHODS = ("E", "F", "G")
_IN_GROUND_METHODS = ("D1", "D2")
_THREE_PHASE = ("L1L2L3", "L1L2L3N")
#: method and construction of three loaded single-core cables in free air -> column of the capacity tables; spaced
#: cables are taken as one above the other, the less favourable, unless they are said to lie side by side
_FORMATIONS = {
    ("F", "single_trefoil"): "F_trefoil",
    ("F", "single_flat"): "F_flat_touching",
    ("G", "single_spaced"): "G_vertical",
    ("G", "single_spaced_horizontal"): "G_horizontal",
}
#: clauses of IEC 60364-4-43 that allow overload protection to be omitted
OMISSION_CLAUSES = ("433.3.1", "433.3.2", "433.3.3")
_TRAYS = (
    "unperforated_tray",
    "perforated_tray",
    "perforated_tray_spaced",
    "vertical_tray",
    "vertical_tray_spaced",
    "ladder",
    "ladder_spaced",
)
_BURIED = ("buried", "buried_one_diameter")

#: kind of device that judges overload -> table of its conventional operating current
OPERATING_CURRENT = {
    "mcb60898": "iec-60898-1-7",
    "rcbo61009": "iec-61009-1-conventional",
    "breaker60947": "iec-60947-2-conventional",
    "relay60947": "iec-60947-4-1-conventional",
    "gG": "iec-60269-1-conventional",
}


def capacity_table(insulation: str, conductor: str, method: str, phases: str) -> str:
    """The capacity table of IEC 60364-5-52 Annex B for a cable, a method of installation and the circuit's phases."""
    loaded = 3 if phases in _THREE_PHASE else 2
    chosen = (
        _FREE_AIR.get((insulation, conductor))
        if method[:1] in _FREE_AIR_METHODS
        else _IN_WALL_OR_GROUND.get((insulation, loaded))
    )
    if chosen is None:
        raise LookUpFault("IEC 60364-5-52, Annex B", f"has no capacities for {insulation}, {conductor}, {method}")
    return f"iec-60364-5-52-{chosen}"


def capacity_column(method: str, construction: str, phases: str) -> str:
    """The column of the capacity tables: the method, and in free air the formation of single-core cables."""
    if method not in ("F", "G") or (method == "F" and phases not in _THREE_PHASE):
        return method
    if (method, construction) not in _FORMATIONS or phases not in _THREE_PHASE:
        raise LookUpFault("IEC 60364-5-52, Annex B", f"has no capacities for method {method}, {construction}, {phases}")
    return _FORMATIONS[method, construction]


def is_free_air(method: str) -> bool:
    """Whether the capacity tables of a method part by the number of loaded conductors in their columns."""
    return method in _FREE_AIR_METHODS


def surroundings(method: str) -> str:
    """What gives the reference temperature and the ambient factor of a method: air or ground."""
    return "ground" if method in _IN_GROUND_METHODS else "air"


def ambient_factor_table(method: str) -> str:
    """The table of the ambient factor: of ground temperature for cables in the ground, else of air temperature."""
    return GROUND_TEMPERATURE_FACTOR if method in _IN_GROUND_METHODS else AMBIENT_FACTOR


def cable_kind(grouping: str, construction: str) -> dict[str, str]:
    """The key by which Table B.52.19 of ducts tells cables apart; the other tables of grouping have none."""
    if grouping != "ducts":
        return {}
    return {"cable": "multicore" if construction == "multicore" else "single-core"}


def grouping_table(grouping: str, construction: str) -> str:
    """The table of the grouping factor for an arrangement."""
    if grouping in _TRAYS:
        return f"iec-60364-5-52-b.52.{20 if construction == 'multicore' else 21}"
    if grouping in _BURIED:
        return "iec-60364-5-52-b.52.18"
    return "iec-60364-5-52-b.52.19" if grouping == "ducts" else GROUPING_FACTOR


def grouping_needs(grouping: str) -> str:
    """The further datum that the grouping table of an arrangement needs: trays, spacing or none."""
    return "trays" if grouping in _TRAYS else "spacing" if grouping in (*_BURIED, "ducts") else ""


def operating_current_table(device: str) -> str:
    """The table of the conventional operating current of a kind of overload device."""
    if device not in OPERATING_CURRENT:
        hint = nearest(device, OPERATING_CURRENT)
        raise LookUpFault("conventional operating currents", f'"{device}" does not protect against overload; {hint}')
    return OPERATING_CURRENT[device]
