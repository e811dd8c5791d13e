"""What a run says on the terminal: progress, the closing table, and the templates."""

from __future__ import annotations

from pathlib import Path
from types import TracebackType

from rich.console import Console
from rich.progress import BarColumn, MofNCompleteColumn, TextColumn, TimeElapsedColumn
from rich.progress import Progress as Bar
from rich.table import Table
from rich.text import Text

from calcbook.flow import Run
from calcbook.records.line import ConclusionLine, InequalityLine, RuleLine
from calcbook.records.project import Plan
from calcbook.records.result import SheetResult
from calcbook.run.templates import find_template, template_names


class Progress:
    """A bar of sheets done; silent where the output is not a terminal."""

    def __init__(self, console: Console) -> None:
        columns = (TextColumn("{task.description}"), BarColumn(), MofNCompleteColumn(), TimeElapsedColumn())
        self.bar = Bar(*columns, console=console, transient=True, disable=not console.is_terminal)
        self.task = self.bar.add_task("sheets", total=None)

    def __enter__(self) -> Progress:
        self.bar.start()
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self.bar.stop()

    def on_plan(self, plan: Plan) -> None:
        """The number of sheets is known."""
        self.bar.update(self.task, total=len(plan.sheets))

    def on_done(self, result: SheetResult) -> None:
        """One more sheet is there."""
        self.bar.advance(self.task)


def print_run(console: Console, run: Run) -> None:
    """The closing table, each criterion not met or not shown, and where to look."""
    table = Table(box=None, pad_edge=False, header_style="bold")
    for head in ("sheet", "title", "verdict", "governing criterion", "utilisation"):
        table.add_column(head, justify="right" if head == "utilisation" else "left", overflow="fold")
    for result in run.results:
        table.add_row(*(Text(cell) for cell in _row(result)))
    console.print(table)
    for result in run.results:
        for text in _shortcomings(result):
            console.print(Text(text))
    open_items = sum(len(line.open_items) for result in run.results for line in _conclusions(result))
    console.print(Text(f"{len(run.results)} sheets executed, {open_items} data not confirmed"))
    if run.project.unused:
        console.print(Text(f"accepted, but no subject uses them yet: {', '.join(run.project.unused)}"))
    console.print(Text(f"open {run.written / 'index.html'}"), soft_wrap=True)


def _conclusions(result: SheetResult) -> list[ConclusionLine]:
    return [line for line in result.trace.lines if isinstance(line, ConclusionLine)]


def _name(result: SheetResult) -> str:
    return f"{result.number}, {result.part}" if result.part else result.number


def _row(result: SheetResult) -> tuple[str, str, str, str, str]:
    if result.outcome == "failed":
        return _name(result), result.title, "failed", "", ""
    conclusions = _conclusions(result)
    if not conclusions or not conclusions[0].governing:
        return _name(result), result.title, "", "", ""
    conclusion = conclusions[0]
    line = next(line for line in result.trace.lines if line.label == conclusion.governing)
    utilisation = line.utilisation_text if isinstance(line, InequalityLine) else ""
    return _name(result), result.title, conclusion.verdict, conclusion.governing, utilisation


def _shortcomings(result: SheetResult) -> list[str]:
    if result.failure:
        return [f"{_name(result)}: could not be executed: {result.failure.message}"]
    found = []
    for line in result.trace.lines:
        if isinstance(line, InequalityLine) and line.verdict != "met":
            sides = f"{line.left} {line.operator} {line.right}: {line.left_text} {line.operator} {line.right_text}"
            found.append(f"{result.number}: {line.name}, {sides}: {line.verdict} ({line.reference})")
        if isinstance(line, RuleLine) and line.verdict != "met":
            stated = line.found or "nothing stated"
            found.append(f"{result.number}: {line.requirement}; found {stated}: {line.verdict} ({line.reference})")
    return found


def print_templates(console: Console, project: Path | None) -> None:
    """Each template with its parameters, defaults and descriptions."""
    for name in template_names(project):
        template = find_template(name, project)
        console.print(Text(name, style="bold"))
        table = Table(box=None, show_header=False, padding=(0, 2, 0, 2))
        for parameter in template.parameters:
            table.add_row(*(Text(cell) for cell in (parameter.name, parameter.default, parameter.description)))
        console.print(table)
