"""What the front matter is made from, and the few questions that several lists ask of it."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field

from calcbook.publish import anchors
from calcbook.publish.front.listing import enumerated
from calcbook.publish.view import Paragraph, Span
from calcbook.records.line import ConclusionLine, CriterionLine, InequalityLine, Line, RuleLine
from calcbook.records.printed_table import PrintedTable
from calcbook.records.project import Board, Circuit, Datum, Project, Source
from calcbook.records.result import SheetResult


@dataclass(frozen=True)
class Material:
    """A project with its results.

    `sheets` in the order of the register, one a number; `derivations` maps a formula to the sheet and line where it is
    derived; `page_counts` holds the number of pages of each sheet that has a PDF, in the same order.
    """

    project: Project
    sheets: tuple[SheetResult, ...]
    tables: tuple[PrintedTable, ...] = ()
    derivations: Mapping[str, tuple[str, str]] = field(default_factory=dict)
    page_counts: Mapping[str, int] = field(default_factory=dict)

    @property
    def failed(self) -> tuple[SheetResult, ...]:
        """The sheets that could not be executed."""
        return tuple(sheet for sheet in self.sheets if sheet.failure is not None)

    @property
    def made(self) -> tuple[SheetResult, ...]:
        """The sheets that were executed."""
        return tuple(sheet for sheet in self.sheets if sheet.failure is None)

    def lines(self) -> Iterator[Line]:
        """Every line of the package; those of failed sheets up to where they failed."""
        for sheet in self.sheets:
            yield from sheet.trace.lines


def conclusion(sheet: SheetResult) -> ConclusionLine | None:
    """The conclusion of a sheet, None where it has none."""
    return next((line for line in sheet.trace.lines if isinstance(line, ConclusionLine)), None)


def criteria(sheet: SheetResult) -> tuple[CriterionLine, ...]:
    """The criteria of a sheet; none of one that failed."""
    lines = sheet.trace.lines if sheet.failure is None else ()
    return tuple(line for line in lines if isinstance(line, InequalityLine | RuleLine))


def verdict(sheet: SheetResult) -> str:
    """The verdict over all criteria of a sheet; "" where it has none."""
    found = conclusion(sheet)
    return found.verdict if found and found.order and sheet.failure is None else ""


def to_sheet(number: str) -> Span:
    """The number of a sheet, which links to it."""
    return Span(number, anchors.to_sheet(number))


def to_line(line: Line, text: str) -> Span:
    """A text that links to a line of its sheet."""
    return Span(text, anchors.to_sheet(line.sheet, line.label))


def users(lines: Iterable[Line]) -> Paragraph:
    """The sheets of the lines, each once, linked to its first one."""
    first: dict[str, Line] = {}
    for line in lines:
        first.setdefault(line.sheet, line)
    return enumerated([to_line(line, sheet) for sheet, line in first.items()])


def data_of(project: Project) -> Iterator[Datum]:
    """Every datum of the inputs: basis, sources, boards, circuits."""
    yield from project.basis.values()
    parts: tuple[Source | Board | Circuit, ...] = (*project.sources, *project.boards, *project.circuits)
    for part in parts:
        yield from part.data.values()
