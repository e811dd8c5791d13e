"""One sheet may be made from several workbooks, as a board's from its demand and its supply half."""

from __future__ import annotations

import json
from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import Any

from calcbook.records.conclude import severity, verdict_of
from calcbook.records.line import ConclusionLine, InequalityLine, Line, RuleLine, Valued
from calcbook.records.result import Failure, SheetResult
from calcbook.records.trace import LINE_MIME, canonical_json, line_from_json, line_to_json


def grouped(results: Sequence[SheetResult]) -> dict[str, tuple[SheetResult, ...]]:
    """The results by sheet number, workbooks of one sheet in their order."""
    found: dict[str, tuple[SheetResult, ...]] = {}
    for result in results:
        found[result.number] = (*found.get(result.number, ()), result)
    return found


def joined(parts: Sequence[SheetResult]) -> SheetResult:
    """The result of one sheet from those of its workbooks, in order.

    Lines that an earlier workbook of the sheet has already, with the same value, are left out; the conclusions become
    one. A sheet fails with its first workbook that fails, and where two workbooks disagree on a line.
    """
    if len(parts) == 1:
        return parts[0]
    kept, dispute = _once(parts)
    ends = [line for line in kept if isinstance(line, ConclusionLine)]
    lines = tuple(line for line in kept if not isinstance(line, ConclusionLine))
    end = (_one_conclusion(lines, ends),) if ends else ()
    failure = next((part.failure for part in parts if part.failure is not None), dispute)
    trace = replace(
        parts[0].trace,
        templates=tuple(dict.fromkeys(name for part in parts for name in part.trace.templates)),
        lines=lines + end,
    )
    return SheetResult(
        number=parts[0].number,
        title=parts[0].title,
        outcome="failed" if failure else "executed",
        workbook=_one_workbook(parts, {line.id for line in lines}, end),
        trace=trace,
        failure=failure,
    )


def _once(parts: Sequence[SheetResult]) -> tuple[list[Line], Failure | None]:
    """The lines of all parts, each label once, and the failure where two of one label disagree."""
    kept: list[Line] = []
    by_label: dict[str, Line] = {}
    for part in parts:
        for line in part.trace.lines:
            before = None if isinstance(line, ConclusionLine) else by_label.get(line.label)
            if before is None:
                kept.append(line)
                by_label[line.label] = line
            elif not _agree(before, line):
                said = f"sheet {line.sheet}, {line.label}: {before.template} and {line.template} have different lines"
                return kept, Failure("SheetFault", f"{said}; a name means the same on one sheet", 0, "")
    return kept, None


def _agree(one: Line, other: Line) -> bool:
    if isinstance(one, Valued) and isinstance(other, Valued):
        return one.si == other.si
    return replace(one, template="") == replace(other, template="")


def _one_conclusion(lines: Sequence[Line], ends: Sequence[ConclusionLine]) -> ConclusionLine:
    """The criteria of all conclusions in one order; open items and cautions each once."""
    labels = {label for end in ends for label in end.order}
    criteria = [line for line in lines if isinstance(line, InequalityLine | RuleLine) and line.label in labels]
    order = tuple(line.label for line in sorted(criteria, key=severity, reverse=True))
    rooms = [room for end in ends for room in end.headrooms if room.criterion in labels]
    return replace(
        ends[-1],
        verdict=verdict_of(criteria),
        governing=order[0] if order else "",
        order=order,
        headrooms=tuple(sorted(rooms, key=lambda room: order.index(room.criterion))[:2]),
        open_items=tuple(dict.fromkeys(item for end in ends for item in end.open_items)),
        cautions=tuple(dict.fromkeys(caution for end in ends for caution in end.cautions)),
    )


def _one_workbook(parts: Sequence[SheetResult], kept: set[str], end: Sequence[ConclusionLine]) -> str:
    """The cells of all workbooks with the lines that are kept, then the one conclusion; "" where a part has none."""
    if not all(part.workbook for part in parts):
        return ""
    books = [json.loads(part.workbook) for part in parts]
    cells = [_cell_with(cell, kept) for book in books for cell in book["cells"]]
    outputs = [{"output_type": "display_data", "metadata": {}, "data": {LINE_MIME: line_to_json(line)}} for line in end]
    cells.append({"cell_type": "code", "metadata": {}, "source": "", "execution_count": None, "outputs": outputs})
    return canonical_json({**books[0], "cells": cells})


def _cell_with(cell: Mapping[str, Any], kept: set[str]) -> dict[str, Any]:
    """A cell without the lines that are not kept; what is no line stays."""
    outputs = [output for output in cell.get("outputs", ()) if _line_id(output) in {"", *kept}]
    return {**cell, "outputs": outputs} if cell["cell_type"] == "code" else dict(cell)


def _line_id(output: Mapping[str, Any]) -> str:
    record = output.get("data", {}).get(LINE_MIME)
    return "" if record is None else line_from_json(record).id
