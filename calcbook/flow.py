"""The conductor: the only file that sees several stages. inputs -> plan -> run -> publish."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Callable
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Literal

from calcbook.inputs.project import read_project
from calcbook.plan.sheets import make_plan
from calcbook.publish.package import publish
from calcbook.records.files import make_folder
from calcbook.records.line import DatumLine, InequalityLine, RuleLine
from calcbook.records.printed_table import PrintedTable
from calcbook.records.project import Datum, Plan, Project
from calcbook.records.result import SheetResult
from calcbook.reference.table import table
from calcbook.run.choose_size import CHOSEN
from calcbook.run.execute import execute_all

Engine = Literal["warm", "kernel"]


@dataclass(frozen=True)
class Run:
    """What a run did: the project as read, the sheets' results in the order of the register, the folder written."""

    project: Project
    results: tuple[SheetResult, ...]
    written: Path

    @property
    def exit_code(self) -> int:
        """0 all criteria met; 1 some criterion not met or not shown; 3 a sheet could not be executed."""
        if any(result.outcome == "failed" for result in self.results):
            return 3
        verdicts = {
            line.verdict
            for result in self.results
            for line in result.trace.lines
            if isinstance(line, InequalityLine | RuleLine)
        }
        return 1 if verdicts - {"met"} else 0


def run_project(
    folder: Path,
    engine: Engine = "warm",
    on_plan: Callable[[Plan], None] = lambda plan: None,
    on_done: Callable[[SheetResult], None] = lambda result: None,
) -> Run:
    """Read a project, execute its sheets and publish them into `sheets/`.

    Parameters: `folder` of the project; `engine` "warm" (a forked helper) or "kernel" (an ordinary Jupyter kernel a
    sheet); `on_plan` is called once with the plan, `on_done` with each result as it is there. Raises InputFaults
    before anything is written.
    """
    project = read_project(folder)
    plan = make_plan(project)
    on_plan(plan)
    out = folder / "sheets"
    make_folder(out)
    results = execute_all(plan, folder, engine, on_done)
    project = _with_chosen_sizes(project, results)
    publish(project, plan, results, _tables_used(project, results), out)
    return Run(project, results, out)


def _with_chosen_sizes(project: Project, results: tuple[SheetResult, ...]) -> Project:
    """The project with the sizes that the run chose beside the given ones, each with its reason as origin."""
    chosen: dict[str, dict[str, Datum]] = defaultdict(dict)
    for result in results:
        for line in result.trace.lines:
            if isinstance(line, DatumLine) and line.origin.file == CHOSEN:
                chosen[line.sheet][line.parameter] = Datum(line.text, line.value, line.origin)
    circuits = (replace(circuit, data={**circuit.data, **chosen[circuit.tag]}) for circuit in project.circuits)
    return replace(project, circuits=tuple(circuits))


def _tables_used(project: Project, results: tuple[SheetResult, ...]) -> tuple[PrintedTable, ...]:
    """The tables that sheets cite, whole, each with its sign-off."""
    keys = dict.fromkeys(line.table for result in results for line in result.trace.lines if line.form == "table value")
    used = (table(key, project.tables) for key in keys)
    return tuple(table.printed(project.signed_off.get(table.title)) for table in used)
