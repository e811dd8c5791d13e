"""results.json: by sheet and line, every value and every criterion of a package as data."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from calcbook.records.line import ChoiceLine, ConclusionLine, InequalityLine, Line, RuleLine, StepLine, Valued
from calcbook.records.result import SheetResult

SCHEMA = 1


def results(project_title: str, sheets: Sequence[SheetResult]) -> dict[str, Any]:
    """The results of a package, fit for canonical JSON.

    Result: `sheets` by number, each with `outcome`, `failure`, `verdict`, `governing`; `values` and `criteria` by the
    label of their line. A value has its number and unit as printed, the number in the coherent unit, and its text.
    """
    return {"schema": SCHEMA, "project": project_title, "sheets": {sheet.number: _sheet(sheet) for sheet in sheets}}


def _sheet(sheet: SheetResult) -> dict[str, Any]:
    lines = sheet.trace.lines
    conclusion = next((line for line in lines if isinstance(line, ConclusionLine)), None)
    by_label = {line.label: line for line in lines}
    failure = sheet.failure
    return {
        "title": sheet.title,
        "outcome": sheet.outcome,
        "failure": {"error": failure.error, "message": failure.message} if failure else None,
        "verdict": conclusion.verdict if conclusion and conclusion.order else None,
        "governing": conclusion.governing if conclusion else None,
        "open_items": list(conclusion.open_items) if conclusion else [],
        "values": {line.label: _value(line) for line in lines if isinstance(line, Valued)},
        "choices": {line.label: line.text for line in lines if isinstance(line, ChoiceLine)},
        "criteria": {
            line.label: _criterion(line, by_label) for line in lines if isinstance(line, InequalityLine | RuleLine)
        },
    }


def _value(line: Valued) -> dict[str, Any]:
    value = {
        "number": line.value.number,
        "unit": line.value.unit,
        "kind": line.value.kind,
        "si": line.si,
        "text": line.text,
    }
    if isinstance(line, StepLine):
        value["calculated"] = {
            "number": line.calculated.number,
            "unit": line.calculated.unit,
            "text": line.calculated_text,
        }
        value["adopted"] = line.adopted is not None
    return value


def _criterion(line: InequalityLine | RuleLine, by_label: Mapping[str, Line]) -> dict[str, Any]:
    if isinstance(line, RuleLine):
        return {"found": line.found, "allowed": list(line.allowed), "verdict": line.verdict}
    return {
        "left": _side(by_label, line.left, line.left_text),
        "operator": line.operator,
        "right": _side(by_label, line.right, line.right_text),
        "utilisation": line.utilisation,
        "utilisation_text": line.utilisation_text,
        "verdict": line.verdict,
    }


def _side(by_label: Mapping[str, Line], label: str, text: str) -> dict[str, Any]:
    line = by_label[label]
    si = line.si if isinstance(line, Valued) else None
    return {"line": label, "si": si, "text": text}
