"""Sheets of circuits: a final one rests on its board's supply, a feeder also on the demand of the board it feeds."""

from __future__ import annotations

from calcbook.plan.given import by_line, given_of, texts_of
from calcbook.plan.network import Network, board_of, is_feeder
from calcbook.plan.parameters import OF_FEEDER, PARAMETERS, parameters_of, route_of
from calcbook.records.project import Circuit, Project, SheetPlan, workbook_name

FINAL = ("three-phase-power", "cable-current", "voltage-drop")
FEEDER = ("feeder-current", "cable-current", "conductor-impedance", "feeder-voltage")

_Repeated = dict[str, dict[str, str]]
_RestsOn = dict[str, tuple[str, str]]


def circuit_sheet(circuit: Circuit, project: Project, network: Network) -> SheetPlan:
    """The sheet of a circuit, final or feeder."""
    feeder = is_feeder(circuit)
    data = parameters_of(circuit, project.basis, OF_FEEDER if feeder else PARAMETERS)
    route = route_of(circuit)
    of_parts = {f"{name}[{part}]": datum for part, place in route.items() for name, datum in place.items()}
    parts = {part: {name: datum.text for name, datum in place.items()} for part, place in route.items()}
    lines, rests_on = _from_boards(circuit, network) if feeder else ({}, _from_board(circuit))
    return SheetPlan(
        circuit.tag,
        circuit.description,
        FEEDER if feeder else FINAL,
        {**texts_of(data), "route": parts, **lines},
        given_of(project, circuit.tag, circuit.description, {**data, **of_parts}, by_line(circuit.adopted)),
        rests_on=rests_on,
        runs_at_most=_runs_at_most(circuit),
    )


def _runs_at_most(circuit: Circuit) -> int:
    stated = circuit.data.get("runs_at_most")
    return int(stated.quantity.number) if stated and stated.quantity else 1


def _from_board(circuit: Circuit) -> _RestsOn:
    """What a final circuit brings forward: voltage and drop of its board, of its line, its pair or all lines."""
    supply, phases = workbook_name(board_of(circuit), "supply"), circuit.data["phases"].text
    if phases in ("L1N", "L2N", "L3N"):
        line = phases.removesuffix("N")
        return {"board_voltage": (supply, f"U_k[{line}]"), "board_drop": (supply, f"du_k[{line}]")}
    between = phases.removesuffix("N")
    return {"board_voltage": (supply, f"U_s[{between}]"), "board_drop": (supply, f"du_board[{between}]")}


def _from_boards(circuit: Circuit, network: Network) -> tuple[dict[str, _Repeated], _RestsOn]:
    """The repeated parameters of a feeder, and what it brings forward from the boards at its two ends."""
    phases = circuit.data["phases"].text
    lines = [line for line in ("L1", "L2", "L3") if line in phases]
    demand = workbook_name(circuit.data["to"].text, "demand")
    found: _RestsOn = {}
    for line in lines:
        found[f"active_current[{line}]"] = (demand, f"I_P[{line}]")
        found[f"reactive_current[{line}]"] = (demand, f"I_Q[{line}]")
        if phases == "L1L2L3N":
            found[f"third_harmonic_current[{line}]"] = (demand, f"I_3[{line}]")
    if phases == "L1L2L3N":
        found["neutral_fundamental"] = (demand, "I_N1")
    above = board_of(circuit)
    fed = above in network.boards
    if fed:
        found |= voltages_of(workbook_name(above, "supply"), lines)
    repeated: dict[str, _Repeated] = {
        "board_lines": {line: {} for line in lines},
        "line_voltages": {line: {} for line in lines if fed},
    }
    return repeated, found


def voltages_of(workbook: str, lines: list[str]) -> _RestsOn:
    """The voltage of each line that a workbook works out, by the parameter that takes it."""
    parts = ("voltage_re", "U_re"), ("voltage_im", "U_im")
    return {f"{name}[{line}]": (workbook, f"{label}[{line}]") for line in lines for name, label in parts}
