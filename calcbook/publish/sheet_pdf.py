"""A sheet as PDF/A-3b: Typst source from the view, set by the compiler and the fonts inside the typst wheel."""

from __future__ import annotations

import re
from dataclasses import replace
from datetime import date
from functools import cache
from importlib.resources import files
from itertools import groupby
from typing import Any

import typst

from calcbook.errors import SheetFault
from calcbook.publish import cautions
from calcbook.publish.typst_source import Literal, Mathematics, literal
from calcbook.publish.view import (
    DataRow,
    DataTable,
    Equation,
    Formula,
    Heading,
    Item,
    Paragraph,
    Section,
    SheetView,
    Span,
    Summary,
    Text,
    WorkRow,
    WorkTable,
)
from calcbook.records.written import typst as print_typst

#: PDF/A asks for a date; a sheet without one says so in its title block and carries this one in its metadata.
_UNDATED = date(1970, 1, 1)


def sheet_pdf(view: SheetView) -> bytes:
    """The bytes of the sheet's PDF: the same for the same view.

    Raises SheetFault for a sheet that failed: such a sheet has no paper form.
    """
    if view.failure is not None:
        raise SheetFault(view.number, "", "", f"{cautions.NOT_FOR_ISSUE}: {view.failure.message}")
    pdf: bytes = _compiler().compile(
        input=typst_source(view).encode(), format="pdf", pdf_standards="a-3b", pdf_tags=False
    )
    return pdf


@cache
def _compiler() -> Any:  # typst is compiled code without types of its own here
    fonts = typst.Fonts(include_system_fonts=False, include_embedded_fonts=True)
    return typst.Compiler(font_paths=fonts, ignore_system_fonts=True)


@cache
def _layout() -> str:
    return files("calcbook.publish").joinpath("sheet.typ").read_text("utf-8")


def typst_source(view: SheetView) -> str:
    """The layout followed by the sheet's data as one literal."""
    return f"{_layout()}\n#sheet({literal(_sheet(view))})\n"


def _sheet(view: SheetView) -> dict[str, Literal]:
    block = view.block
    return {
        "number": view.number,
        "title": view.title,
        "day": _day(block.date).timetuple()[:3],
        "version": f"calcbook {view.version}".strip(),
        "block": {
            "project": " ".join(text for text in (block.number, block.title) if text),
            "client": block.client,
            "revision": block.revision,
            "state": block.state,
            "date": block.date,
            "prepared": block.prepared,
            "checked": block.checked,
            "approved": block.approved,
        },
        "cautions": cautions.GENERAL,
        "caution": view.caution,
        "summary": _summary(view.summary) if view.summary else None,
        "sections": [_section(section) for section in view.sections],
    }


def _day(text: str) -> date:
    return date.fromisoformat(text) if re.fullmatch(r"\d{4}-\d\d-\d\d", text) else _UNDATED


def _summary(summary: Summary) -> Literal:
    return {
        "verdict": summary.verdict,
        "governing": summary.governing,
        "criteria": [
            {
                "description": row.description.text,
                "sides": "".join(span.text for span in row.sides),
                "utilisation": row.utilisation,
                "verdict": row.verdict,
                "governs": "governs" if row.governs else "does not govern",
            }
            for row in summary.criteria
        ],
        "headrooms": [
            {
                "criterion": row.criterion.text,
                "datum": row.datum.text,
                "symbol": _symbol(row.symbol),
                "present": row.present,
                "limit": row.limit,
                "remark": row.remark,
            }
            for row in summary.headrooms
        ],
        "open-items": summary.open_items,
        "cautions": summary.cautions,
    }


def _section(section: Section) -> Literal:
    parts: list[Literal] = []
    for is_working, group in groupby(section.items, lambda item: not isinstance(item, DataTable)):
        items = list(group)
        if is_working:
            parts.extend(_work_parts(items))
        else:
            parts.extend(
                {"data": [_data_row(row) for row in item.rows]} for item in items if isinstance(item, DataTable)
            )
    return {"title": section.title, "parts": parts}


def _work_parts(items: list[Item]) -> list[Literal]:
    """Text among lines of working stands in the working column; text on its own runs over the whole width."""
    rows = [row for item in items for row in _work_rows(item)]
    return [{"work": rows}] if any(isinstance(item, WorkTable) for item in items) else [{"words": rows}]


def _data_row(row: DataRow) -> Literal:
    return {
        "symbol": _symbol(row.label) if row.label else "",
        "description": row.description,
        "value": row.value.text,
        "place": row.place,
        "document": row.document,
        "status": row.status,
        "remark": row.remark,
    }


def _work_rows(item: Item) -> list[dict[str, Literal]]:
    match item:
        case Text(spans):
            return [{"text": _paragraph(spans)}]
        case Heading(title):
            return [{"heading": title}]
        case DataTable():
            return []
    return [_work_row(row) for row in item.rows]


def _work_row(row: WorkRow) -> dict[str, Literal]:
    return {
        "reference": [_paragraph(line) for line in row.reference],
        "description": row.description,
        "aligned": Mathematics(" \\ ".join(map(_aligned, row.equations))) if row.equations else None,
        "lines": [Mathematics(_unaligned(equation)) for equation in row.equations],
        "notes": [_paragraph(line) for line in row.notes],
        "result": [_paragraph(line) for line in row.result],
    }


def _paragraph(paragraph: Paragraph) -> Literal:
    return [_span(span) for span in paragraph]


def _span(span: Span) -> Literal:
    if span.symbol:
        return _symbol(span.text)
    return {"strong": span.text} if span.strong else span.text


def _symbol(label: str) -> Mathematics:
    return Mathematics(print_typst.symbol(label))


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
