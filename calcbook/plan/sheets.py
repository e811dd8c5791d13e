"""The plan of a project: boards with their circuits from the origin downwards, then the sheets of derivations."""

from __future__ import annotations

from calcbook.plan.boards import board_sheets
from calcbook.plan.circuits import circuit_sheet
from calcbook.plan.network import read_network
from calcbook.records.project import Plan, Project, SheetPlan

#: subject of a derivation -> title of its sheet
SUBJECTS = {
    "three-phase-power": "Derivation of three-phase power",
    "cable-current": "Derivation of cable current",
    "demand": "Derivation of the currents and voltages of a board",
    "voltage-drop": "Derivation of voltage drop",
}


def make_plan(project: Project) -> Plan:
    """Which sheets exist and what is handed to their templates.

    Parameters: `project` as read. Result: the sheets in the order of the register. Raises InputFaults where boards
    and circuits make no network.
    """
    network = read_network(project)
    sheets: list[SheetPlan] = []
    for tag in dict.fromkeys((network.origin, *network.boards)):
        if tag in network.boards:
            sheets += board_sheets(tag, project, network)
        sheets += [circuit_sheet(circuit, project, network) for circuit in network.ways[tag]]
    return Plan(tuple(sheets) + tuple(_derivation_sheet(subject, title) for subject, title in SUBJECTS.items()))


def _derivation_sheet(subject: str, title: str) -> SheetPlan:
    number = f"D-{subject}"
    given: dict[str, object] = {"sheet": number, "title": title}
    return SheetPlan(number, title, ("derivations",), {"subject": subject}, given)
