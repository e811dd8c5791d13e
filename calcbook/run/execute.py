"""Executes planned sheets: template notebooks in, cleaned workbooks with their traces out."""

from __future__ import annotations

import json
import logging
import tempfile
from collections.abc import Callable, Iterator, Mapping
from contextlib import contextmanager
from dataclasses import replace
from pathlib import Path
from typing import Any, Literal

import nbformat
import papermill
from nbclient.exceptions import DeadKernelError
from nbformat import NotebookNode, from_dict
from papermill.engines import papermill_engines
from papermill.exceptions import PapermillExecutionError

from calcbook.errors import CalcbookError, SheetFault, TemplateFault, WorkspaceFault
from calcbook.records.line import Valued
from calcbook.records.project import Plan, SheetPlan
from calcbook.records.result import Failure, SheetResult
from calcbook.records.trace import SCHEMA_VERSION, Trace, canonical_json, trace_of_notebook
from calcbook.run.assemble import assemble
from calcbook.run.cells import text_of
from calcbook.run.choose_size import lacks_size, with_chosen_size
from calcbook.run.clean import canonical_text, clean
from calcbook.run.engine import WarmEngine
from calcbook.run.helper import can_fork
from calcbook.run.kernel import kernel_options
from calcbook.run.messages import process_ended
from calcbook.run.parameters import GIVEN
from calcbook.run.templates import check_parameters, find_template

EngineName = Literal["warm", "kernel"]

_WARM = {"engine_name": "calcbook", "request_save_on_cell_execute": False}

papermill_engines.register("calcbook", WarmEngine)


def execute_all(
    plan: Plan,
    project_folder: Path,
    engine: EngineName = "warm",
    on_done: Callable[[SheetResult], None] = lambda result: None,
) -> tuple[SheetResult, ...]:
    """Execute every sheet of a plan, each as soon as what it rests on is done; one that fails stops none but those.

    Parameters: as for `execute_sheet`; `on_done` is called with each result as soon as it is there.
    """
    done: dict[str, SheetResult] = {}
    waiting = list(plan.sheets)
    while waiting:
        sheet = next((sheet for sheet in waiting if _sources(sheet) <= done.keys()), None)
        if sheet is None:
            raise WorkspaceFault(f"the sheets {', '.join(sheet.name for sheet in waiting)} rest on each other")
        waiting.remove(sheet)
        done[sheet.name] = _execute_with(done, sheet, project_folder, engine)
        on_done(done[sheet.name])
    return tuple(done[sheet.name] for sheet in plan.sheets)


def _sources(sheet: SheetPlan) -> set[str]:
    return {workbook for workbook, _ in sheet.rests_on.values()}


def _execute_with(
    done: Mapping[str, SheetResult], sheet: SheetPlan, project_folder: Path, engine: EngineName
) -> SheetResult:
    """Execute a sheet with what it brings forward from sheets that are done; fail it where one of them failed."""
    brought = {}
    for parameter, (workbook, label) in sheet.rests_on.items():
        line = next((line for line in done[workbook].trace.lines if line.label == label), None)
        if done[workbook].outcome == "failed" or not isinstance(line, Valued):
            why = "failed" if done[workbook].outcome == "failed" else f"has no value {label}"
            return _failed(sheet, SheetFault(sheet.number, "", parameter, f"rests on {workbook}, which {why}"))
        value = line.value
        brought[parameter] = {"number": value.number, "unit": value.unit, "kind": value.kind, "si": line.si,
                              "text": line.text, "source": line.id}  # fmt: skip
    ready = replace(sheet, given={**sheet.given, "brought_forward": brought})
    if lacks_size(ready):
        ready = with_chosen_size(ready, lambda plan: execute_sheet(plan, project_folder, engine))
    return execute_sheet(ready, project_folder, engine)


def execute_sheet(plan: SheetPlan, project_folder: Path, engine: EngineName = "warm") -> SheetResult:
    """Assemble and execute one sheet.

    Parameters: `plan` the sheet; `project_folder` is where the project's own templates may stand; `engine` is "warm"
    (a fork of the warm helper, where the machine can) or "kernel" (the ordinary kernel): the results are the same.
    Result: the workbook and its trace; where the sheet fails, why, and the lines made until then. Raises WorkspaceFault
    where the machine does not let it run.
    """
    try:
        templates = [find_template(name, project_folder) for name in plan.templates]
        check_parameters(templates, plan.parameters)
        assembled, parameters = assemble(plan, templates), _parameters(plan)
        with _machine_faults():
            notebook, failed = _execute(assembled, parameters, engine)
        workbook = clean(notebook)
        return _result(plan, workbook, failed)
    except WorkspaceFault:
        raise
    except CalcbookError as error:
        return _failed(plan, error)


def _parameters(plan: SheetPlan) -> dict[str, Any]:
    """What papermill injects: plain data, since papermill turns whatever else it finds into text."""
    given = {"sheet": plan.number, "title": plan.title, **plan.given}
    return {**plan.parameters, GIVEN: json.loads(canonical_json(given))}


def _execute(
    notebook: NotebookNode, parameters: dict[str, Any], engine: EngineName
) -> tuple[NotebookNode, PapermillExecutionError | None]:
    """Run a notebook through papermill: the executed notebook, and the error that stopped it."""
    with tempfile.TemporaryDirectory(prefix="calcbook-") as name, _quiet():
        folder = Path(name)
        source, target = folder / "sheet.ipynb", folder / "executed.ipynb"
        nbformat.write(notebook, source)
        options = _WARM if engine == "warm" and can_fork() else kernel_options(folder)
        try:
            return papermill.execute_notebook(source, target, parameters, progress_bar=False, **options), None
        except PapermillExecutionError as error:
            return nbformat.read(target, as_version=4), error
        except DeadKernelError as error:
            return _marked_dead(nbformat.read(target, as_version=4), str(error)), None


def _marked_dead(notebook: NotebookNode, detail: str) -> NotebookNode:
    """The notebook of a kernel that died, with the error in the cell where it did: the last that was started."""
    started = [cell for cell in notebook.cells if cell.metadata.papermill.get("start_time")]
    started[-1].outputs = [from_dict(process_ended(detail))]
    started[-1].execution_count = None
    return notebook


@contextmanager
def _machine_faults() -> Iterator[None]:
    """Report what the machine refuses, such as a full disk; what a cell raises is in the notebook, and not met here."""
    try:
        yield
    except OSError as error:
        place = error.filename or "the folder for temporary files"
        raise WorkspaceFault(f"a sheet cannot be executed; {place}: {error.strerror or error}") from error


@contextmanager
def _quiet() -> Iterator[None]:
    """Keep papermill's log to itself: what it has to say stands in the result."""
    logger = logging.getLogger("papermill")
    level = logger.level
    logger.setLevel(logging.CRITICAL + 1)
    try:
        yield
    finally:
        logger.setLevel(level)


def _result(plan: SheetPlan, workbook: NotebookNode, failed: PapermillExecutionError | None) -> SheetResult:
    failure = _failure(workbook, failed)
    try:
        trace = trace_of_notebook(workbook)
    except ValueError as error:
        first = " ".join(str(error).split("\n")[:3])
        raise TemplateFault(
            ", ".join(plan.templates), f"displays a record that is no line of a sheet: {first}"
        ) from None
    outcome: Literal["executed", "failed"] = "failed" if failure else "executed"
    return SheetResult(plan.number, plan.title, outcome, canonical_text(workbook), trace, failure, plan.part)


def _failure(workbook: NotebookNode, failed: PapermillExecutionError | None) -> Failure | None:
    """The first error in a workbook; its cell is counted from 1, text and code alike.

    The outputs are looked at even where papermill is content: it takes `exit()` in a cell for a good end.
    """
    for number, cell in enumerate(workbook.cells, start=1):
        for output in cell.get("outputs", ()):
            if output["output_type"] == "error":
                return Failure(output["ename"], output["evalue"], number, text_of(cell))
    if failed is None:
        return None
    return Failure(
        failed.ename, failed.evalue or "the cell could not be executed", failed.cell_index + 1, failed.source
    )


def _failed(plan: SheetPlan, error: CalcbookError) -> SheetResult:
    """The result of a sheet that could not even be started: no lines."""
    failure = Failure(type(error).__name__, str(error), 0, "")
    trace = Trace(SCHEMA_VERSION, plan.number, plan.title, plan.templates, ())
    return SheetResult(plan.number, plan.title, "failed", "", trace, failure, plan.part)
