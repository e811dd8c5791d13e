"""A sheet as PDF/A-3b: Typst source from the view, set by the compiler and the fonts inside the typst wheel."""

from __future__ import annotations

import re
from dataclasses import replace
from datetime import date
from functools import cache
from importlib.resources import files

import typst

from calcbook.errors import SheetFault
from calcbook.publish import cautions
from calcbook.publish.typst_source import Literal, Mathematics, literal
from calcbook.publish.view import (
    DataRow,
    Equation,
    Formula,
    Paragraph,
    Section,
    SheetView,
    Span,
    Summary,
    WorkRow,
    signature,
)
from calcbook.records.project import TitleBlock
from calcbook.records.written import typst as print_typst

#: PDF/A asks for a date; a sheet without one says so in its title block and carries this one in its metadata.
_UNDATED = date(1970, 1, 1)


def sheet_pdf(view: SheetView) -> bytes:
    """The bytes of the sheet's PDF: the same for the same view.

    Raises SheetFault for a sheet that failed: such a sheet has no paper form.
    """
    if view.failure is not None:
        raise SheetFault(view.number, "", "", f"{cautions.NOT_FOR_ISSUE}: {view.failure.message}")
    return compiled(typst_source(view))


def compiled(source: str) -> bytes:
    """Typst source set as an untagged PDF/A-3b."""
    pdf = _compiler().compile(input=source.encode(), format="pdf", pdf_standards="a-3b", pdf_tags=False)
    assert isinstance(pdf, bytes)  # noqa: S101 - without an output path the compiler hands back one file
    return pdf


@cache
def _compiler() -> typst.Compiler:
    fonts = typst.Fonts(include_system_fonts=False, include_embedded_fonts=True)
    return typst.Compiler(font_paths=fonts, ignore_system_fonts=True)


@cache
def layout() -> str:
    """The layout that sheets and front matter share."""
    return files("calcbook.publish").joinpath("sheet.typ").read_text("utf-8")


def typst_source(view: SheetView) -> str:
    """The layout followed by the sheet's data as one literal."""
    return f"{layout()}\n#sheet({literal(_sheet(view))})\n"


def _sheet(view: SheetView) -> dict[str, Literal]:
    block = view.block
    return {
        "number": view.number,
        "title": view.title,
        "day": day_of(block).timetuple()[:3],
        "version": view.version,
        "block": fields_of(block),
        "cautions": cautions.GENERAL,
        "caution": view.caution,
        "summary": _summary(view.summary) if view.summary else None,
        "sections": [_section(section) for section in view.sections],
    }


def fields_of(block: TitleBlock) -> dict[str, Literal]:
    """The title block's fields as the layouts name them."""
    return {
        "project": " ".join(text for text in (block.number, block.title) if text),
        "client": block.client,
        "revision": block.revision,
        "state": block.state,
        "date": block.date,
        "prepared": block.prepared,
        "checked": signature(block, block.checked),
        "approved": signature(block, block.approved),
    }


def day_of(block: TitleBlock) -> date:
    """The date that the metadata carries."""
    return date.fromisoformat(block.date) if re.fullmatch(r"\d{4}-\d\d-\d\d", block.date) else _UNDATED


def _summary(summary: Summary) -> Literal:
    return {
        "verdict": summary.verdict,
        "examined": summary.examined,
        "adopted": [paragraph(line) for line in summary.adopted],
        "governing": paragraph(summary.governing),
        "criteria": [
            {
                "description": row.description.text,
                "sides": paragraph(row.sides),
                "utilisation": row.utilisation.text,
                "verdict": row.verdict,
                "governs": row.governs,
            }
            for row in summary.criteria
        ],
        "headrooms": [
            {
                "criterion": row.criterion.text,
                "datum": row.datum.text,
                "symbol": _symbol(row.symbol),
                "present": row.present.text,
                "limit": row.limit.text,
                "remark": row.remark,
            }
            for row in summary.headrooms
        ],
        "open-items": summary.open_items,
        "cautions": summary.cautions,
    }


def _section(section: Section) -> Literal:
    return {
        "title": paragraph(section.title),
        "level": section.level,
        "opening": [paragraph(text) for text in section.opening],
        "data": [_data_row(row) for row in section.data],
        "work": [{"text": paragraph(row)} if isinstance(row, tuple) else _work_row(row) for row in section.work],
    }


def _data_row(row: DataRow) -> Literal:
    return {
        "symbol": _symbol(row.label) if row.label else "",
        "description": paragraph(row.description),
        "value": row.value.text,
        "place": row.place,
        "document": row.document,
        "status": row.status,
        "remark": row.remark,
    }


def _work_row(row: WorkRow) -> dict[str, Literal]:
    return {
        "reference": [paragraph(line) for line in row.reference],
        "description": paragraph(row.description),
        "chain": Mathematics(_chain(row.equations)) if row.equations else None,
        "aligned": Mathematics(" \\ ".join(map(_aligned, row.equations))) if row.equations else None,
        "lines": [Mathematics(_unaligned(equation)) for equation in row.equations],
        "notes": [paragraph(line) for line in row.notes],
        "result": [paragraph(line) for line in row.result],
    }


def paragraph(spans: Paragraph) -> Literal:
    """Running text as the layouts take it: texts, symbols and what is set in bold."""
    return [_span(span) for span in spans]


def _span(span: Span) -> Literal:
    if span.symbol:
        return _symbol(span.text)
    return {"strong": span.text} if span.strong else span.text


def _symbol(label: str) -> Mathematics:
    return Mathematics(print_typst.symbol(label))


def _chain(equations: tuple[Equation, ...]) -> str:
    """All equations in one line; one with a left side of its own stands apart."""
    first, *others = equations
    parts = [_unaligned(first)]
    for equation in others:
        parts += ["quad", _unaligned(equation)] if equation.left is not None else [_unaligned(equation)]
    return " ".join(parts)


def _aligned(equation: Equation) -> str:
    left = _side(equation.left) if equation.left is not None else ""
    return f"{left} & {_unaligned(replace(equation, left=None))}"


def _unaligned(equation: Equation) -> str:
    left = _side(equation.left) if equation.left is not None else ""
    return f'{left} class("relation", "{equation.sign}") {_side(equation.right)}'


def _side(side: Formula | Span) -> str:
    if isinstance(side, Span):
        return print_typst.symbol(side.text) if side.symbol else literal(side.text)
    if side.texts is None:
        return print_typst.symbols(side.node)
    return print_typst.values(side.node, side.texts)
