"""The two workbooks of a board's sheet: its demand, worked from the inputs, and its supply, worked from above."""

from __future__ import annotations

from dataclasses import replace

from calcbook.plan.circuits import voltages_of
from calcbook.plan.given import given_of, texts_of
from calcbook.plan.network import Network, is_feeder
from calcbook.plan.parameters import LOAD, parameters_of
from calcbook.records.project import Adopted, Circuit, Datum, Project, SheetPlan, workbook_name

#: lines of a circuit's sheet that its board repeats, each under the circuit's tag
_REPEATED = ("I_L", "I_B", "phi")


def board_sheets(tag: str, project: Project, network: Network) -> tuple[SheetPlan, SheetPlan]:
    """Demand and supply half of a board."""
    board = next(board for board in project.boards if board.tag == tag)
    title = board.data["description"].text if "description" in board.data else f"Board {tag}"
    basis = project.basis
    common: dict[str, Datum | None] = {
        "phases": _phases(tag, project, network),
        "nominal_voltage": basis["nominal_voltage"],
    }
    demand = {**common, "line_to_earth_voltage": basis["line_to_earth_voltage"], "diversity": board.data["diversity"]}
    return _demand(tag, title, demand, project, network), _supply(tag, title, common, project, network)


def _phases(tag: str, project: Project, network: Network) -> Datum:
    """The phases of a board: those of its feed; at the origin three lines and neutral."""
    if tag in network.feed:
        return network.feed[tag].data["phases"]
    named = project.basis["drop_origin"]
    remark = "The origin has three lines and neutral."
    return replace(named, text=network.phases(tag), origin=replace(named.origin, remark=remark))


def _demand(tag: str, title: str, data: dict[str, Datum | None], project: Project, network: Network) -> SheetPlan:
    ways = network.ways[tag]
    feeders = [circuit for circuit in ways if is_feeder(circuit)]
    of_ways = {circuit.tag: _load(circuit, project) for circuit in ways}
    rests_on = {name: source for circuit in feeders for name, source in _asked_by(circuit).items()}
    loads = {key: {n: datum.text for n, datum in found.items()} for key, found in of_ways.items()}
    fed = {circuit.tag for circuit in feeders}
    places = [f"{circuit.tag}:{line}" for circuit in feeders for line in _lines(circuit)]
    keyed = {f"{name}[{key}]": datum for key, found in of_ways.items() for name, datum in found.items()}
    parameters: dict[str, str | dict[str, dict[str, str]]] = {
        **texts_of(data),
        "loads": {key: texts for key, texts in loads.items() if key not in fed},
        "feeders": {key: texts for key, texts in loads.items() if key in fed},
        "sub_boards": {place: {} for place in places},
    }
    given = given_of(project, tag, title, {**data, **keyed}, _adopted(ways))
    return SheetPlan(tag, title, ("board-demand",), parameters, given, "demand", rests_on)


def _supply(tag: str, title: str, data: dict[str, Datum | None], project: Project, network: Network) -> SheetPlan:
    fed = tag in network.feed
    lines = _lines(network.feed[tag]) if fed else []
    empty: dict[str, dict[str, str]] = {line: {} for line in lines}
    parameters: dict[str, str | dict[str, dict[str, str]]] = {**texts_of(data), "line_voltages": empty}
    rests_on = voltages_of(network.feed[tag].tag, lines) if fed else {}
    given = given_of(project, tag, title, data, {})
    return SheetPlan(tag, title, ("board-supply",), parameters, given, "supply", rests_on)


def _load(circuit: Circuit, project: Project) -> dict[str, Datum]:
    """What a circuit asks: phases, load and demand factor; of a feeder phases and demand factor alone."""
    names = ("phases", "demand_factor") if is_feeder(circuit) else (*LOAD, "demand_factor")
    return {name: datum for name, datum in parameters_of(circuit, project.basis, names).items() if datum}


def _asked_by(circuit: Circuit) -> dict[str, tuple[str, str]]:
    """What a feeder's board brings forward to the board above: the parts of the current in each line."""
    demand = workbook_name(circuit.data["to"].text, "demand")
    parts = {"active_current": "I_P", "reactive_current": "I_Q"}
    if circuit.data["phases"].text.endswith("N"):
        parts["third_harmonic_current"] = "I_3"
    return {
        f"{name}[{circuit.tag}:{line}]": (demand, f"{label}[{line}]")
        for line in _lines(circuit)
        for name, label in parts.items()
    }


def _lines(circuit: Circuit) -> list[str]:
    return [line for line in ("L1", "L2", "L3") if line in circuit.data["phases"].text]


def _adopted(ways: tuple[Circuit, ...]) -> dict[str, Adopted]:
    """What the engineer adopted on the sheet of a circuit holds on its board's as well."""
    return {
        f"{adopted.line}[{circuit.tag}]": adopted
        for circuit in ways
        for adopted in circuit.adopted
        if adopted.line in _REPEATED and not is_feeder(circuit)
    }
