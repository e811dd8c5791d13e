"""The pages beside the sheets: the register, the inputs with every datum, the tables with every cell cited."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace

from calcbook.publish import anchors, cautions
from calcbook.publish.front.material import data_of
from calcbook.publish.html_page import page
from calcbook.publish.view import Paragraph, SheetView, Span
from calcbook.records.line import ChoiceLine, Citation, DatumLine, Line, TableLine
from calcbook.records.printed import print_given
from calcbook.records.printed_table import PrintedTable
from calcbook.records.project import Datum, Origin, Project
from calcbook.records.result import SheetResult


@dataclass(frozen=True)
class RegisterRow:
    """A sheet in the register; `files` are the links to what was made of it."""

    number: Span
    title: str
    state: str
    outcome: str
    governing: Paragraph
    files: tuple[Span, ...]
    notes: tuple[str, ...]
    open_items: tuple[str, ...]


def register_page(project: Project, views: Sequence[SheetView], workbooks: Mapping[str, Sequence[SheetResult]]) -> str:
    """index.html: every sheet with its state and outcome, open items, unused columns, cautions.

    `workbooks` holds by sheet number the results of its workbooks.
    """
    rows = [_register_row(view, workbooks[view.number]) for view in views]
    return page("index.html", title=project.title, rows=rows, unused=project.unused)


def _register_row(view: SheetView, workbooks: Sequence[SheetResult]) -> RegisterRow:
    home = anchors.to_sheet(view.number)
    files = [Span("HTML", home)]
    if view.failure is None:
        files.append(Span("PDF", home.removesuffix("html") + "pdf"))
    files += [Span(f"workbook {part.part}".rstrip(), f"{part.name}.ipynb") for part in workbooks if part.workbook]
    summary = view.summary if view.failure is None else None
    return RegisterRow(
        number=Span(view.number, home),
        title=view.title,
        state=view.block.state,
        outcome=_outcome(view),
        governing=tuple(_elsewhere(span, home) for span in summary.governing) if summary else (),
        files=tuple(files),
        notes=summary.cautions if summary else tuple(filter(None, [view.caution])),
        open_items=summary.open_items if summary else (),
    )


def _outcome(view: SheetView) -> str:
    if view.failure is not None:
        return f"{cautions.NOT_FOR_ISSUE}: {view.failure.message}"
    return view.summary.verdict if view.summary else "no criteria"


def _elsewhere(span: Span, home: str) -> Span:
    """A span of a sheet on another page: links within the sheet now lead to it."""
    return replace(span, link=home + span.link) if span.link.startswith("#") else span


@dataclass(frozen=True)
class InputRow:
    """A datum with its place, its source and the lines that use it."""

    anchor: str
    origin: Origin
    text: str
    used_by: tuple[Span, ...]


def inputs_page(project: Project, results: Sequence[SheetResult]) -> str:
    """inputs.html: every datum of the inputs, and those that sheets state without the inputs naming them."""
    uses: dict[str, list[Span]] = {}
    found = {anchors.datum_anchor(datum.origin): (datum.origin, _as_printed(datum)) for datum in data_of(project)}
    for line in _lines(results):
        if isinstance(line, DatumLine | ChoiceLine):
            key = anchors.datum_anchor(line.origin)
            uses.setdefault(key, []).append(Span(line.sheet, anchors.to_sheet(line.sheet, line.label)))
            found.setdefault(key, (line.origin, line.text))
    rows = [InputRow(key, origin, text, _once(uses.get(key, []))) for key, (origin, text) in found.items()]
    files = {row.origin.file: [other for other in rows if other.origin.file == row.origin.file] for row in rows}
    return page("inputs.html", title=project.title, files=files)


def _as_printed(datum: Datum) -> str:
    return print_given(datum.quantity) if datum.quantity is not None else datum.text


def _once(spans: Iterable[Span]) -> tuple[Span, ...]:
    """The first use in each sheet."""
    return tuple({span.text: span for span in reversed(list(spans))}.values())[::-1]


def _lines(results: Sequence[SheetResult]) -> Iterator[Line]:
    for result in results:
        yield from result.trace.lines


@dataclass(frozen=True)
class CellRow:
    """A cell that sheets cite."""

    anchor: str
    row: str
    column: str
    text: str
    used_by: tuple[Span, ...]


@dataclass(frozen=True)
class TableView:
    """A table with the cells cited from it, and whole where it was handed over."""

    anchor: str
    name: str
    title: str
    obtained: str
    compared: str
    cells: tuple[CellRow, ...]
    heads: tuple[str, ...]
    rows: tuple[dict[str, str], ...]


def tables_page(project: Project, results: Sequence[SheetResult], tables: Sequence[PrintedTable]) -> str:
    """tables.html: the cells that sheets cite, table by table, and the tables themselves."""
    cited: dict[str, list[TableLine]] = {}
    for line in _lines(results):
        if isinstance(line, TableLine):
            cited.setdefault(line.table, []).append(line)
    whole = {table.key: table for table in tables}
    keys = [key for key in whole if key in cited] + [key for key in cited if key not in whole]
    keys += [key for key in whole if key not in cited]
    views = [_table_view(key, whole.get(key), cited.get(key, [])) for key in keys]
    return page("tables.html", title=project.title, tables=views)


def _table_view(key: str, table: PrintedTable | None, cited: Sequence[TableLine]) -> TableView:
    source: PrintedTable | Citation = table or cited[0].citation
    signed = source.signed_off or next((line.citation.signed_off for line in cited), None)
    return TableView(
        anchor=anchors.anchor(key),
        name=f"{source.standard}:{source.edition}, {cautions.numbered(source.table)}",
        title=source.title,
        obtained=source.obtained if isinstance(source, PrintedTable) else source.status,
        compared=f"compared with {signed.document} by {signed.by}, {signed.date}" if signed else cautions.NOT_COMPARED,
        cells=tuple(_cells(cited)),
        heads=tuple(table.rows[0]) if table and table.rows else (),
        rows=table.rows if table else (),
    )


def _cells(cited: Sequence[TableLine]) -> Iterator[CellRow]:
    by_anchor: dict[str, list[TableLine]] = {}
    for line in cited:
        by_anchor.setdefault(anchors.cell_anchor(line), []).append(line)
    for key, lines in sorted(by_anchor.items()):
        first = lines[0]
        users = _once(Span(line.sheet, anchors.to_sheet(line.sheet, line.label)) for line in lines)
        yield CellRow(key, first.citation.row, first.citation.column, first.text, users)
