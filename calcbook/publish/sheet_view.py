"""From an executed workbook to a sheet ready for print."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from itertools import takewhile
from typing import Any

from calcbook.publish import anchors, cautions
from calcbook.publish.rows import Setting, data_row, found, in_words, sides, utilisation, work_row
from calcbook.publish.view import CriterionRow, HeadroomRow, Paragraph, Section, SheetView, Span, Summary
from calcbook.records.line import (
    ChoiceLine,
    ConclusionLine,
    CriterionLine,
    DatumLine,
    Headroom,
    InequalityLine,
    Line,
    RuleLine,
    StepLine,
    Valued,
)
from calcbook.records.notation import notation
from calcbook.records.project import TitleBlock
from calcbook.records.result import Failure
from calcbook.records.trace import lines_of_outputs, trace_of_notebook

_VERDICTS = {
    "met": "all criteria met",
    "not met": "at least one criterion is not met",
    "not shown": "at least one criterion is not shown: a datum that would prove it is missing",
}


@dataclass(frozen=True)
class Context:
    """What a sheet prints that does not stand in its workbook: the title block and what lies beside it.

    `in_package` and `derivations` as in `rows.Setting`; a workbook exported on its own is a draft without either.
    """

    block: TitleBlock = field(default_factory=lambda: TitleBlock(number="", title=""))
    in_package: bool = False
    derivations: Mapping[str, tuple[str, str]] = field(default_factory=dict)


def sheet_view(notebook: Mapping[str, Any], context: Context, failure: Failure | None = None) -> SheetView:
    """The sheet of a workbook.

    Parameters: `notebook` in nbformat's structure; `failure` where it is known, else it is read from the workbook.
    """
    trace = trace_of_notebook(notebook)
    conclusion = next((line for line in trace.lines if isinstance(line, ConclusionLine)), None)
    setting = Setting(context.in_package, context.derivations, conclusion.governing if conclusion else "")
    return SheetView(
        number=trace.sheet,
        title=trace.title,
        block=context.block,
        version=_version(notebook),
        sections=tuple(_sections(notebook["cells"], setting)),
        summary=_summary(conclusion, trace.lines, _subjects(notebook["cells"])) if conclusion else None,
        caution=cautions.of_tables(trace.lines),
        failure=failure or _failure(notebook["cells"]),
    )


def _version(notebook: Mapping[str, Any]) -> str:
    """The version of calcbook that computed the workbook, as it is printed."""
    version = notebook["metadata"].get("calcbook", {}).get("version", "")
    return f"calcbook {version}" if version else "calcbook, version not recorded"


def _failure(cells: Sequence[Mapping[str, Any]]) -> Failure | None:
    for index, cell in enumerate(cells):
        for output in cell.get("outputs", ()):
            if output.get("output_type") == "error":
                return Failure(str(output["ename"]), str(output["evalue"]), index, _text(cell["source"]))
    return None


def _text(source: str | list[str]) -> str:
    """A cell's source: one text, or, as it stands in files, a list of lines."""
    return source if isinstance(source, str) else "".join(source)


@dataclass(frozen=True)
class _Heading:
    title: Paragraph
    level: int


_Part = Paragraph | Line


def _sections(cells: Sequence[Mapping[str, Any]], setting: Setting) -> Iterator[Section]:
    heading = _Heading((), 1)
    parts: list[_Part] = []
    for part in _parts(cells):
        if isinstance(part, _Heading):
            if parts or heading.title:
                yield _section(heading, parts, setting)
            heading, parts = part, []
        else:
            parts.append(part)
    if parts or heading.title:
        yield _section(heading, parts, setting)


def _parts(cells: Sequence[Mapping[str, Any]]) -> Iterator[_Heading | _Part]:
    for cell in cells:
        if cell["cell_type"] == "markdown":
            yield from _markdown(_text(cell["source"]))
        elif cell["cell_type"] == "code":
            yield from (line for line in lines_of_outputs([cell]) if not isinstance(line, ConclusionLine))


def _markdown(source: str) -> Iterator[_Heading | Paragraph]:
    paragraph: list[str] = []
    for line in [*source.splitlines(), ""]:
        heading = re.fullmatch(r"(#+)\s+(.*)", line)
        if not heading and line.strip():
            paragraph.append(line.strip())
            continue
        if paragraph:
            yield tuple(_spans(" ".join(paragraph)))
            paragraph = []
        if heading:
            yield _Heading(tuple(_spans(heading[2].strip())), len(heading[1]))


def _spans(text: str) -> Iterator[Span]:
    for index, part in enumerate(text.split("`")):
        if part:
            yield Span(part, symbol=index % 2 == 1 and part.partition("[")[0] in notation())


def _section(heading: _Heading, parts: Sequence[_Part], setting: Setting) -> Section:
    opening = tuple(takewhile(lambda part: isinstance(part, tuple), parts))
    rest = parts[len(opening) :]
    return Section(
        title=heading.title,
        level=heading.level,
        opening=tuple(part for part in opening if isinstance(part, tuple)),
        data=tuple(data_row(part, setting) for part in rest if isinstance(part, DatumLine | ChoiceLine)),
        work=tuple(
            part if isinstance(part, tuple) else work_row(part, setting)
            for part in rest
            if not isinstance(part, DatumLine | ChoiceLine)
        ),
    )


def _subjects(cells: Sequence[Mapping[str, Any]]) -> str:
    """The headings of the first level, which name what a sheet examines."""
    headings = (part for part in _parts(cells) if isinstance(part, _Heading) and part.level == 1)
    return "; ".join("".join(span.text for span in heading.title).lower() for heading in headings)


def _summary(conclusion: ConclusionLine, lines: Sequence[Line], subjects: str) -> Summary:
    by_label = {line.label: line for line in lines}
    criteria = [by_label[label] for label in conclusion.order]
    governing = by_label.get(conclusion.governing)
    return Summary(
        verdict=_VERDICTS[conclusion.verdict] if conclusion.order else "this sheet has no criteria",
        examined=f"{subjects}; nothing else is judged here" if subjects and conclusion.order else "",
        adopted=tuple(_adopted(line) for line in lines if isinstance(line, StepLine) and line.adopted),
        governing=_in_short(governing) if isinstance(governing, InequalityLine | RuleLine) else (),
        criteria=tuple(
            _criterion_row(line, "governs" if line.label == conclusion.governing else "does not govern")
            for line in criteria
            if isinstance(line, InequalityLine | RuleLine)
        ),
        headrooms=tuple(_headroom_row(headroom, by_label) for headroom in conclusion.headrooms),
        open_items=conclusion.open_items,
        cautions=conclusion.cautions,
    )


def _adopted(line: StepLine) -> Paragraph:
    own = anchors.to_line(line.label)
    calculated = (Span(" in place of "), Span(line.calculated_text, own))
    return (Span(line.label, symbol=True), Span(" = "), Span(line.text, own), *calculated)


def _in_short(line: CriterionLine) -> Paragraph:
    if isinstance(line, RuleLine):
        return (Span(f"{in_words(line)}: "), found(line), Span(f", {line.verdict}"))
    return (Span(f"{in_words(line)}: "), *sides(line), Span(", utilisation "), utilisation(line))


def _criterion_row(line: CriterionLine, governs: str) -> CriterionRow:
    name = Span(in_words(line), anchors.to_line(line.label))
    if isinstance(line, RuleLine):
        return CriterionRow(name, (found(line),), Span(""), line.verdict, governs)
    return CriterionRow(name, sides(line), utilisation(line), line.verdict, governs)


def _headroom_row(headroom: Headroom, by_label: Mapping[str, Line]) -> HeadroomRow:
    datum = by_label[headroom.datum]
    criterion = by_label[headroom.criterion]
    to_criterion, to_datum = anchors.to_line(headroom.criterion), anchors.to_line(headroom.datum)
    name = in_words(criterion) if isinstance(criterion, InequalityLine | RuleLine) else headroom.criterion
    return HeadroomRow(
        criterion=Span(name, to_criterion),
        datum=Span(datum.description if isinstance(datum, Valued) else "", to_datum),
        symbol=headroom.datum,
        present=Span(headroom.present_text, to_datum),
        limit=Span(headroom.limit_text, to_criterion),
        remark=headroom.remark,
    )
