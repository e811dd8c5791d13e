"""Everything that is published of a project, written into one folder."""

from __future__ import annotations

import json
import re
from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import Any

from calcbook.publish.anchors import BOUND, BOUND_PDF, INDEX, INPUTS, TABLES
from calcbook.publish.bound import attached, bound
from calcbook.publish.front.material import Material
from calcbook.publish.grouping import grouped, joined
from calcbook.publish.pages import inputs_page, register_page, tables_page
from calcbook.publish.results import results as results_data
from calcbook.publish.sheet_html import sheet_html
from calcbook.publish.sheet_pdf import sheet_pdf
from calcbook.publish.sheet_view import Context, sheet_view
from calcbook.publish.view import SheetView
from calcbook.records.files import remove, write_atomically
from calcbook.records.line import DerivationLine
from calcbook.records.printed_table import PrintedTable
from calcbook.records.project import Plan, Project
from calcbook.records.result import SheetResult
from calcbook.records.trace import LINE_MIME, canonical_json, line_to_json

RESULTS = "results.json"
_NUMBER = re.compile(r"[A-Za-z0-9][A-Za-z0-9._~-]*")
_ENDINGS = ("html", "pdf", "ipynb")


def publish(
    project: Project, plan: Plan, results: Sequence[SheetResult], tables: Sequence[PrintedTable], out: Path
) -> tuple[Path, ...]:
    """Write sheets, workbooks, pages, results.json and the bound package into `out`; hand back the files written.

    Sheets come in the order of the plan; results of one number are workbooks of one sheet, in their order. Files of
    sheets that are no longer in the plan are removed, and the PDF of a sheet that failed. Raises WorkspaceFault where
    the disk refuses.
    """
    groups = grouped(results)
    parts = {sheet.number: groups[sheet.number] for sheet in plan.sheets if sheet.number in groups}
    sheets = tuple(joined(group) for group in parts.values())
    derivations = _derivations(sheets)
    context = Context(project.title, in_package=True, derivations=derivations)
    views = [sheet_view(_notebook(sheet), context, sheet.failure) for sheet in sheets]
    files: dict[str, str | bytes] = {}
    for group, view in zip(parts.values(), views, strict=True):
        files.update(_sheet_files(group, view))
    files[INPUTS] = inputs_page(project, sheets)
    files[TABLES] = tables_page(project, sheets, tables)
    files[INDEX] = register_page(project, views, parts)
    files[RESULTS] = data = canonical_json(results_data(project.title.title, sheets))
    material = Material(project, sheets, tuple(tables), derivations)
    pdfs = {view.number: made for view in views if isinstance(made := files.get(f"{view.number}.pdf"), bytes)}
    files[BOUND_PDF], files[BOUND] = bound(material, pdfs, tuple(attached(Path(project.folder), parts, data)))
    _remove_stale(out, files)
    for name, content in files.items():
        write_atomically(out / name, content)
    return tuple(out / name for name in files)


def _derivations(results: Sequence[SheetResult]) -> dict[str, tuple[str, str]]:
    """Formula name -> sheet and line where it is first derived."""
    found: dict[str, tuple[str, str]] = {}
    for result in results:
        for line in result.trace.lines:
            if isinstance(line, DerivationLine) and line.formula:
                found.setdefault(line.formula, (line.sheet, line.label))
    return found


def _notebook(result: SheetResult) -> Mapping[str, Any]:
    """The workbook of a result, or, where it failed before there was one, its lines alone."""
    if result.workbook:
        notebook: Mapping[str, Any] = json.loads(result.workbook)
        return notebook
    outputs = [{"output_type": "display_data", "data": {LINE_MIME: line_to_json(line)}} for line in result.trace.lines]
    about = {"sheet": result.number, "title": result.title}
    return {"metadata": {"calcbook": about}, "cells": [{"cell_type": "code", "source": "", "outputs": outputs}]}


def _sheet_files(parts: Sequence[SheetResult], view: SheetView) -> dict[str, str | bytes]:
    files: dict[str, str | bytes] = {f"{view.number}.html": sheet_html(view, in_package=True)}
    if view.failure is None:
        files[f"{view.number}.pdf"] = sheet_pdf(view)
    files.update({f"{part.name}.ipynb": part.workbook for part in parts if part.workbook})
    return files


def _remove_stale(out: Path, files: Mapping[str, object]) -> None:
    """Remove what an earlier run wrote, as its results.json tells, and this one does not write again."""
    for number in _sheets_before(out / RESULTS):
        stale = [out / f"{number}.{ending}" for ending in _ENDINGS]
        for path in (*stale, *out.glob(f"{number}~*.ipynb")):
            if path.name not in files:
                remove(path)


def _sheets_before(path: Path) -> list[str]:
    try:
        sheets = json.loads(path.read_text("utf-8"))["sheets"]
    except (OSError, ValueError, KeyError, TypeError):
        return []
    return [number for number in sheets if _NUMBER.fullmatch(number)] if isinstance(sheets, dict) else []
