"""Plans executed in this process, without a kernel, and small networks of random loads."""

from __future__ import annotations

import csv
import io
from collections.abc import Callable, Mapping
from dataclasses import replace
from pathlib import Path
from typing import Any

from nbformat.v4 import new_code_cell

from calcbook.inputs.project import read_project
from calcbook.plan.sheets import make_plan
from calcbook.records.line import Line, Valued
from calcbook.records.project import Plan, Project, SheetPlan
from calcbook.records.trace import trace_of_notebook
from calcbook.run.assemble import assemble
from calcbook.run.shell import run_notebook
from calcbook.run.templates import find_template

EXAMPLE = Path(__file__).resolve().parents[2] / "examples" / "tern_quay"
Lines = Mapping[str, Line]
OF_NETWORK = ("board-demand", "board-supply", "feeder-current", "conductor-impedance", "feeder-voltage")


def network_only(plan: Plan) -> Plan:
    """Boards and feeders, these without their cables' capacity: what voltages and currents of boards rest on."""
    kept = (
        replace(sheet, templates=tuple(name for name in sheet.templates if name in OF_NETWORK)) for sheet in plan.sheets
    )
    return Plan(tuple(sheet for sheet in kept if sheet.templates))


def executed(plan: Plan) -> dict[str, dict[str, Line]]:
    """The lines of every workbook of a plan by workbook and label, each executed after what it rests on."""
    done: dict[str, dict[str, Line]] = {}
    waiting = list(plan.sheets)
    while waiting:
        sheet = next(one for one in waiting if {workbook for workbook, _ in one.rests_on.values()} <= done.keys())
        waiting.remove(sheet)
        done[sheet.name] = _executed(sheet, done)
    return done


def _executed(sheet: SheetPlan, done: Mapping[str, Lines]) -> dict[str, Line]:
    notebook = assemble(sheet, [find_template(name) for name in sheet.templates])
    brought = {name: _brought(done[workbook][label]) for name, (workbook, label) in sheet.rests_on.items()}
    size = (
        {"size": sheet.parameters["size"] or "4 mm2"} if "size" in sheet.parameters else {}
    )  # any: not what is tested
    stated = {**sheet.parameters, **size, "given": {**sheet.given, "brought_forward": brought}}
    source = "\n".join(f"{name} = {value!r}" for name, value in stated.items())
    notebook.cells.insert(1, new_code_cell(source))
    run = run_notebook(notebook)
    outputs: list[Any] = [output for cell in run.cells for output in cell.get("outputs", ())]
    wrong = [output["evalue"] for output in outputs if output["output_type"] == "error"]
    assert not wrong, (sheet.name, wrong)
    return {line.label: line for line in trace_of_notebook(run).lines}


def _brought(line: Line) -> dict[str, object]:
    assert isinstance(line, Valued)
    value = line.value
    return {"number": value.number, "unit": value.unit, "kind": value.kind, "si": line.si, "text": line.text,
            "source": line.id}  # fmt: skip


def si(lines: Lines, label: str) -> float:
    """The number of a line in its coherent unit."""
    line = lines[label]
    assert isinstance(line, Valued), label
    return line.si


def phasor(lines: Lines, line: str, active: str, reactive: str, sign: int) -> complex:
    """A phasor of a line from its two parts, turned to the line's place: L2 a third of a period behind L1."""
    turn = complex(-0.5, -(3**0.5) / 2) ** (int(line[1]) - 1)
    return complex(si(lines, f"{active}[{line}]"), sign * si(lines, f"{reactive}[{line}]")) * turn


def current_of(lines: Lines, line: str) -> complex:
    """The current of a board in a line."""
    return phasor(lines, line, "I_P", "I_Q", -1)


def voltage_of(lines: Lines, line: str) -> complex:
    """The voltage of a board's line to neutral."""
    return phasor(lines, line, "U_re", "U_im", 1)


def with_text(project: Project, tag: str, column: str, change: Callable[[str], str]) -> Project:
    """A project in which one cell of circuits.csv has another text."""
    circuits = []
    for circuit in project.circuits:
        data = dict(circuit.data)
        if circuit.tag == tag:
            data[column] = replace(data[column], text=change(data[column].text))
        circuits.append(replace(circuit, data=data))
    return replace(project, circuits=tuple(circuits))


TOML = """
[project]
number = "TQ-1"
title = "Tern Quay boatyard"
[basis]
practice = "iec"
frequency = "50 Hz"
nominal_voltage = "400 V"
line_to_earth_voltage = "230 V"
ambient_air = "35 degC"
drop_origin = "MB"
supply_is = "private"
[basis.editions]
"IEC 60364-4-43" = "2008"
"IEC 60364-5-52" = "2009"
[boards.MB]
diversity = "0.9"
[boards.SB]
diversity = "{diversity}"
"""
_CABLE = {
    "conductor": "Cu", "insulation": "XLPE90", "construction": "multicore", "cores": "5", "method": "E",
    "grouping": "none", "circuits_in_group": "1", "length_basis": "measured", "device": "mcb60898",
}  # fmt: skip
FEEDER = {
    **_CABLE, "tag": "F-1", "description": "Feeder", "from": "MB", "to": "SB", "kind": "feeder", "phases": "L1L2L3N",
    "size [mm2]": "25", "length [m]": "60", "rating [A]": "63",
}  # fmt: skip


def small_project(folder: Path, loads: list[dict[str, str]], diversity: float) -> Project:
    """A main board that feeds one sub-board with these loads: phases, current, power factor, demand, third harmonic."""
    rows = [FEEDER]
    for number, load in enumerate(loads, start=1):
        named = {"tag": f"C-{number}", "description": "Load", "from": "SB", "kind": "other"}
        rows.append({**_CABLE, **named, "size [mm2]": "10", "length [m]": "20", "rating [A]": "40", **load})
    heads = list(dict.fromkeys(head for row in rows for head in row))
    text = io.StringIO()
    writer = csv.DictWriter(text, heads, restval="", lineterminator="\n")
    writer.writeheader()
    writer.writerows(rows)
    folder.mkdir(exist_ok=True)
    (folder / "inputs.toml").write_text(TOML.format(diversity=diversity), "utf-8")
    (folder / "circuits.csv").write_text(text.getvalue(), "utf-8")
    return read_project(folder)


def run_network(project: Project) -> dict[str, dict[str, Line]]:
    """The boards and feeders of a project, executed."""
    return executed(network_only(make_plan(project)))
