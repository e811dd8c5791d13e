"""From an executed workbook to a sheet ready for print."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from itertools import groupby, takewhile
from typing import Any

from calcbook.publish import anchors, cautions
from calcbook.publish.rows import Setting, data_row, found, in_words, sides, work_row
from calcbook.publish.view import (
    CriterionRow,
    DataTable,
    Heading,
    HeadroomRow,
    Item,
    Section,
    SheetView,
    Span,
    Summary,
    Text,
    WorkTable,
)
from calcbook.records.line import (
    ChoiceLine,
    ConclusionLine,
    CriterionLine,
    DatumLine,
    Headroom,
    InequalityLine,
    Line,
    RuleLine,
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
        version=str(notebook["metadata"].get("calcbook", {}).get("version", "")),
        sections=tuple(_sections(notebook["cells"], setting)),
        summary=_summary(conclusion, trace.lines) if conclusion else None,
        caution=cautions.of_tables(trace.lines),
        failure=failure or _failure(notebook["cells"]),
    )


def _failure(cells: Sequence[Mapping[str, Any]]) -> Failure | None:
    for index, cell in enumerate(cells):
        for output in cell.get("outputs", ()):
            if output.get("output_type") == "error":
                return Failure(str(output["ename"]), str(output["evalue"]), index, _text(cell["source"]))
    return None


def _text(source: str | list[str]) -> str:
    """A cell's source: one text, or, as it stands in files, a list of lines."""
    return source if isinstance(source, str) else "".join(source)


def _sections(cells: Sequence[Mapping[str, Any]], setting: Setting) -> Iterator[Section]:
    title, parts = "", []
    for part in _parts(cells):
        if isinstance(part, _Title):
            if parts:
                yield Section(title, _items(parts, setting))
            title, parts = part.text, []
        else:
            parts.append(part)
    if parts:
        yield Section(title, _items(parts, setting))


@dataclass(frozen=True)
class _Title:
    text: str


def _parts(cells: Sequence[Mapping[str, Any]]) -> Iterator[_Title | Heading | Text | Line]:
    for cell in cells:
        if cell["cell_type"] == "markdown":
            yield from _markdown(_text(cell["source"]))
        elif cell["cell_type"] == "code":
            yield from (line for line in lines_of_outputs([cell]) if not isinstance(line, ConclusionLine))


def _markdown(source: str) -> Iterator[_Title | Heading | Text]:
    paragraph: list[str] = []
    for line in [*source.splitlines(), ""]:
        heading = re.fullmatch(r"(#+)\s+(.*)", line)
        if not heading and line.strip():
            paragraph.append(line.strip())
            continue
        if paragraph:
            yield Text(tuple(_spans(" ".join(paragraph))))
            paragraph = []
        if heading:
            title = heading[2].strip()
            yield _Title(title) if len(heading[1]) == 1 else Heading(title)


def _spans(text: str) -> Iterator[Span]:
    for index, part in enumerate(text.split("`")):
        if part:
            yield Span(part, symbol=index % 2 == 1 and part.partition("[")[0] in notation())


def _items(parts: Sequence[Heading | Text | Line], setting: Setting) -> tuple[Item, ...]:
    """The parts of a section: opening text, then its data in one table, then text and working as they come."""
    opening = list(takewhile(lambda part: isinstance(part, Text), parts))
    data = [data_row(part, setting) for part in parts if isinstance(part, DatumLine | ChoiceLine)]
    rest = [part for part in parts[len(opening) :] if not isinstance(part, DatumLine | ChoiceLine)]
    items: list[Item] = [part for part in opening if isinstance(part, Text)]
    if data:
        items.append(DataTable(tuple(data)))
    for is_text, group in groupby(rest, lambda part: isinstance(part, Heading | Text)):
        if is_text:
            items.extend(part for part in group if isinstance(part, Heading | Text))
        else:
            items.append(
                WorkTable(tuple(work_row(part, setting) for part in group if not isinstance(part, Heading | Text)))
            )
    return tuple(items)


def _summary(conclusion: ConclusionLine, lines: Sequence[Line]) -> Summary:
    by_label = {line.label: line for line in lines}
    criteria = [by_label[label] for label in conclusion.order]
    governing = by_label.get(conclusion.governing)
    return Summary(
        verdict=_VERDICTS[conclusion.verdict] if conclusion.order else "this sheet has no criteria",
        governing=_in_short(governing) if isinstance(governing, InequalityLine | RuleLine) else "",
        criteria=tuple(
            _criterion_row(line, line.label == conclusion.governing)
            for line in criteria
            if isinstance(line, InequalityLine | RuleLine)
        ),
        headrooms=tuple(_headroom_row(headroom, by_label) for headroom in conclusion.headrooms),
        open_items=conclusion.open_items,
        cautions=conclusion.cautions,
    )


def _in_short(line: CriterionLine) -> str:
    if isinstance(line, RuleLine):
        return f"{in_words(line)}: {line.verdict}"
    shown = "".join(span.text for span in sides(line))
    return f"{in_words(line)}: {shown}, utilisation {line.utilisation_text}"


def _criterion_row(line: CriterionLine, governs: bool) -> CriterionRow:
    link = anchors.to_line(line.label)
    if isinstance(line, RuleLine):
        return CriterionRow(Span(in_words(line), link), (found(line),), "", line.verdict, governs)
    return CriterionRow(Span(in_words(line), link), sides(line), line.utilisation_text, line.verdict, governs)


def _headroom_row(headroom: Headroom, by_label: Mapping[str, Line]) -> HeadroomRow:
    datum = by_label[headroom.datum]
    criterion = by_label[headroom.criterion]
    words = datum.description if isinstance(datum, Valued) else ""
    name = in_words(criterion) if isinstance(criterion, InequalityLine | RuleLine) else headroom.criterion
    return HeadroomRow(
        criterion=Span(name, anchors.to_line(headroom.criterion)),
        datum=Span(words, anchors.to_line(headroom.datum)),
        symbol=headroom.datum,
        present=headroom.present_text,
        limit=headroom.limit_text,
        remark=headroom.remark,
    )
