"""What must fit together where a cable lies: method, construction, arrangement of the group, soil.

A place is a row of circuits.csv or, for a route in parts, a row of routes.csv; the cable is the row of the circuit.
"""

from __future__ import annotations

from dataclasses import dataclass

from calcbook.inputs.rows import Row
from calcbook.records.project import Datum

PLACE = ("method", "grouping", "circuits_in_group", "ambient", "soil_resistivity", "depth", "trays", "spacing")
IN_GROUND = ("D1", "D2")
_SINGLE_CORE = ("single_trefoil", "single_flat")
# IEC 60364-5-52 Table A.52.3: the construction of cable that goes with each method
_CONSTRUCTIONS = {
    "A1": ("insulated_in_conduit",),
    "A2": ("multicore",),
    "B1": ("insulated_in_conduit",),
    "B2": ("multicore",),
    "C": ("multicore", *_SINGLE_CORE),
    "D1": ("multicore", *_SINGLE_CORE),
    "D2": ("multicore", *_SINGLE_CORE),
    "E": ("multicore",),
    "F": _SINGLE_CORE,
    "G": ("single_spaced", "single_spaced_horizontal"),
}
# the first rows of IEC 60364-5-52 Tables B.52.2 to B.52.13 where they are not those of every method
_SMALLEST_SIZE = {("F", "Cu"): 25.0, ("F", "Al"): 25.0, ("G", "Cu"): 25.0, ("G", "Al"): 25.0, ("D2", "Al"): 16.0}
# the last rows of IEC 60364-5-52 Tables B.52.14 and B.52.15, and of B.52.16
_HOTTEST_AMBIENT = {"PVC70": 60.0, "XLPE90": 80.0}
_DRIEST_SOIL = 3.0
_TERMINALS = 70.0


@dataclass(frozen=True)
class Arrangement:
    """What an arrangement of a group goes with: its table, methods, constructions (none: any), greatest numbers."""

    table: str
    methods: tuple[str, ...]
    constructions: tuple[str, ...] = ()
    most_circuits: float = float("inf")
    most_trays: float = 0

    def fits(self, method: str, construction: str) -> bool:
        """Whether a cable of this method and construction can lie so."""
        return method in self.methods and (not self.constructions or construction in self.constructions)


_IN_AIR = ("A1", "A2", "B1", "B2", "C", "E", "F")
_MULTICORE, _FLAT, _TREFOIL = ("multicore",), ("single_flat",), ("single_trefoil",)
ARRANGEMENTS: dict[str, tuple[Arrangement, ...]] = {
    "bunched": (Arrangement("B.52.17", _IN_AIR, most_circuits=20),),
    "single_layer_wall": (Arrangement("B.52.17", ("C",)),),
    "single_layer_ceiling": (Arrangement("B.52.17", ("C",)),),
    "single_layer_tray": (Arrangement("B.52.17", ("E", "F")),),
    "single_layer_ladder": (Arrangement("B.52.17", ("E", "F")),),
    "buried": (Arrangement("B.52.18", ("D2",), most_circuits=20),),
    "buried_one_diameter": (Arrangement("B.52.18", ("D2",), most_circuits=20),),
    "ducts": (Arrangement("B.52.19", ("D1",), most_circuits=20),),
    "unperforated_tray": (Arrangement("B.52.20", ("E",), _MULTICORE, 9, 6),),
    "perforated_tray": (
        Arrangement("B.52.20", ("E",), _MULTICORE, 9, 6),
        Arrangement("B.52.21", ("F",), _FLAT, 3, 3),
    ),
    "perforated_tray_spaced": (
        Arrangement("B.52.20", ("E",), _MULTICORE, 6, 3),
        Arrangement("B.52.21", ("F",), _TREFOIL, 3, 3),
    ),
    "vertical_tray": (
        Arrangement("B.52.20", ("E",), _MULTICORE, 9, 2),
        Arrangement("B.52.21", ("F",), _FLAT, 2, 2),
    ),
    "vertical_tray_spaced": (
        Arrangement("B.52.20", ("E",), _MULTICORE, 6, 2),
        Arrangement("B.52.21", ("F",), _TREFOIL, 3, 2),
    ),
    "ladder": (
        Arrangement("B.52.20", ("E",), _MULTICORE, 9, 6),
        Arrangement("B.52.21", ("F",), _FLAT, 3, 3),
    ),
    "ladder_spaced": (
        Arrangement("B.52.20", ("E",), _MULTICORE, 6, 3),
        Arrangement("B.52.21", ("F",), _TREFOIL, 3, 3),
    ),
}


def report_installation(place: Row, cable: Row) -> None:
    """Report what a place lacks and what does not fit together in it; `place` and `cable` may be one row."""
    for check in (_method, _sizes, _ground, _ambient, _grouping, _trays_and_spacing):
        check(place, cable)


def report_place_needed(row: Row) -> None:
    """Report what a circuit without parts in routes.csv must say of the place it lies in."""
    for name in ("method", "grouping", "circuits_in_group"):
        if row.lacks(name):
            row.fault(name, "is empty; it is needed in every row of a circuit that has no parts in routes.csv")


def _method(place: Row, cable: Row) -> None:
    method, construction, phases = place.text("method"), cable.text("construction"), cable.text("phases")
    wanted = _CONSTRUCTIONS.get(method, ())
    if wanted and construction and construction not in wanted:
        column = "construction" if place is cable else "method"
        place.fault(column, f'"{construction}" does not go with method {method}; allowed: {", ".join(wanted)}')
    if method == "G" and phases and not phases.startswith("L1L2L3"):
        place.fault("method", f"G is for three spaced single-core cables (Tables B.52.10 to B.52.13); phases {phases}")


def _sizes(place: Row, cable: Row) -> None:
    method, metal = place.text("method"), cable.text("conductor")
    smallest = _SMALLEST_SIZE.get((method, metal), 0.0)
    for name in ("size", "neutral_size"):
        size = cable.number(name, "mm2")
        if size is not None and size < smallest:
            found = f'{name} "{cable.text(name)}" is not in the tables'
            where = (cable, name) if place is cable else (place, "method")
            where[0].fault(where[1], f"{found} for method {method}, {metal}; they begin at {smallest:g} mm2")


def _ground(place: Row, cable: Row) -> None:
    method = place.text("method")
    if method and method not in IN_GROUND:
        for name in ("soil_resistivity", "depth"):
            if place.text(name):
                place.fault(name, f"goes with methods D1 and D2 only; method {method} is not in the ground")
    resistivity = place.number("soil_resistivity", "K.m/W")
    if resistivity is not None and resistivity > _DRIEST_SOIL:
        found = f'"{place.text("soil_resistivity")}" is above the last row of Table B.52.16'
        place.fault("soil_resistivity", f"{found}, {_DRIEST_SOIL:g} K.m/W")


def report_ambient_of_basis(place: Row, insulation: str, key: str, ambient: Datum) -> None:
    """Report an ambient of the basis, taken where a place states none, that the insulation does not bear."""
    hottest = _HOTTEST_AMBIENT.get(insulation)
    if ambient.quantity is not None and hottest is not None and ambient.quantity.number > hottest:
        table = "B.52.15" if place.text("method") in IN_GROUND else "B.52.14"
        found = f"is empty, and {key} of [basis], {ambient.text}, is above the last row of Table {table}"
        place.fault("ambient", f"{found} for {insulation}, {hottest:g} degC")


def _ambient(place: Row, cable: Row) -> None:
    ambient, insulation = place.number("ambient", "degC"), cable.text("insulation")
    hottest = _HOTTEST_AMBIENT.get(insulation)
    if ambient is None:
        return
    if hottest is not None and ambient > hottest:
        table = "B.52.15" if place.text("method") in IN_GROUND else "B.52.14"
        found = place.text("ambient")
        place.fault("ambient", f'"{found}" is above the last row of Table {table} for {insulation}, {hottest:g} degC')
        return
    terminals = cable.number("terminal_temperature", "degC")
    if ambient >= (_TERMINALS if terminals is None else terminals):
        stated = cable.text("terminal_temperature") or f"{_TERMINALS:g} degC, as none is stated"
        place.fault("ambient", f'"{place.text("ambient")}" leaves no rise up to the terminal_temperature: {stated}')


def _grouping(place: Row, cable: Row) -> None:
    grouping, method, construction = place.text("grouping"), place.text("method"), cable.text("construction")
    circuits, runs = place.number("circuits_in_group", "1"), cable.number("runs", "1") or 1
    if grouping == "none":
        if circuits is not None and (circuits > 1 or runs > 1):
            many = f"circuits_in_group is {circuits:g} and runs is {runs:g}"
            place.fault("grouping", f'"none" goes with one circuit of one run only; {many}')
        return
    if not grouping or not method or not construction or place.wrong & {"construction", "method"}:
        return
    options = ARRANGEMENTS[grouping]
    own = next((option for option in options if option.fits(method, construction)), None)
    if own is None:
        not_this = _found(options, method, construction)
        place.fault("grouping", f'"{grouping}" goes with {_allowed(options)}, not {not_this}')
        return
    if circuits is not None and circuits + runs - 1 > own.most_circuits:
        many = f"circuits_in_group {circuits:g} and runs {runs:g} make {circuits + runs - 1:g} circuits"
        end = f"Table {own.table} ends at {own.most_circuits:g} {grouping} circuits"
        place.fault("circuits_in_group", f"{many}; {end}")
    if own.most_trays and (place.number("trays", "1") or 0) > own.most_trays:
        place.fault("trays", f'"{place.text("trays")}" is above the last row of Table {own.table}, {own.most_trays}')


def _allowed(options: tuple[Arrangement, ...]) -> str:
    texts = []
    for option in options:
        of = f", {' or '.join(option.constructions)}" if option.constructions else ""
        texts.append(f"method {' or '.join(option.methods)}{of} (Table {option.table})")
    return " and with ".join(texts)


def _found(options: tuple[Arrangement, ...], method: str, construction: str) -> str:
    return f"{method}, {construction}" if any(option.constructions for option in options) else method


def _trays_and_spacing(place: Row, cable: Row) -> None:
    grouping = place.text("grouping")
    if not grouping:
        return
    options = ARRANGEMENTS.get(grouping, ())
    stacked = any(option.most_trays for option in options)
    if stacked and place.lacks("trays"):
        place.fault("trays", f'is empty; grouping "{grouping}" needs it: write 1 for one tray or ladder')
    elif not stacked and (place.number("trays", "1") or 0) > 1:
        place.fault("trays", f'goes with the arrangements of Tables B.52.20 and B.52.21 only, not "{grouping}"')
    if place.text("spacing") and grouping not in ("buried", "ducts"):
        hint = "of cables on trays the arrangements that end in _spaced are clear of each other"
        place.fault("spacing", f'goes with buried and ducts only, not "{grouping}"; {hint}')
