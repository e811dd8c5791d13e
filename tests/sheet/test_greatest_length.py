"""The greatest length is worked out on every sheet that has a voltage drop, also where the drop does not govern."""

from __future__ import annotations

from pathlib import Path

import nbformat
import pytest

from calcbook.records.line import ConclusionLine, InequalityLine
from calcbook.records.project import SheetPlan
from calcbook.records.trace import trace_of_notebook
from calcbook.run.execute import execute_sheet


@pytest.mark.parametrize("length", ["40 m", "10 m"])
def test_greatest_length(length: str, tmp_path: Path) -> None:
    templates = ("three-phase-power", "cable-current", "voltage-drop")
    result = execute_sheet(
        SheetPlan("C-001", "Hoist", templates, {"length": length, "length_basis": "measured"}, {}), tmp_path
    )
    trace = trace_of_notebook(nbformat.reads(result.workbook, as_version=4))
    conclusion = trace.lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    assert conclusion.order.index("voltage drop") >= 2  # others govern
    room = next(room for room in conclusion.headrooms if room.criterion == "voltage drop")
    assert room.limit is not None
    at_limit = {"length": f"{room.limit.number * (1 + 1e-9)!r} m", "length_basis": "measured"}
    beyond = execute_sheet(SheetPlan("C-001", "Hoist", templates, at_limit, {}), tmp_path)
    verdict = next(line for line in beyond.trace.lines if line.label == "voltage drop")
    assert isinstance(verdict, InequalityLine)
    assert verdict.verdict == "not met"
