"""Which printed table holds a value: a standard spreads one subject over several tables."""

from __future__ import annotations

from calcbook.errors import LookUpFault, nearest

AMBIENT_FACTOR = "iec-60364-5-52-b.52.14"
GROUPING_FACTOR = "iec-60364-5-52-b.52.17"
GREATEST_TEMPERATURE = "iec-60364-5-52-52.1"
REFERENCE_AMBIENT = "iec-60364-5-52-b.52.2-ambient"
LOADED_CONDUCTORS = "iec-60364-5-52-523.6"
RESISTANCE = "iec-60228-resistance"

_IN_WALL_OR_GROUND = {("PVC70", 2): "b.52.2", ("XLPE90", 2): "b.52.3", ("PVC70", 3): "b.52.4", ("XLPE90", 3): "b.52.5"}
_FREE_AIR = {
    ("PVC70", "Cu"): "b.52.10",
    ("PVC70", "Al"): "b.52.11",
    ("XLPE90", "Cu"): "b.52.12",
    ("XLPE90", "Al"): "b.52.13",
}
_FREE_AIR_METHODS = ("E", "F", "G")
_THREE_PHASE = ("L1L2L3", "L1L2L3N")

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


def operating_current_table(device: str) -> str:
    """The table of the conventional operating current of a kind of overload device."""
    if device not in OPERATING_CURRENT:
        hint = nearest(device, OPERATING_CURRENT)
        raise LookUpFault("conventional operating currents", f'"{device}" does not protect against overload; {hint}')
    return OPERATING_CURRENT[device]
