"""The trace as text: it comes back as it was, and what is no trace is refused."""

from __future__ import annotations

import json
from dataclasses import replace
from typing import Any, get_args

import pytest
from hypothesis import given
from hypothesis import strategies as st
from pydantic import ValidationError
from sample_trace import CHOICE, DATUM, STEP, TABLE, TRACE

from calcbook.records.line import Line
from calcbook.records.quantity import Quantity
from calcbook.records.trace import (
    LINE_MIME,
    canonical_json,
    line_from_json,
    line_to_json,
    lines_of_outputs,
    trace_from_json,
    trace_of_notebook,
    trace_to_json,
)


def test_the_sample_has_a_line_of_every_form() -> None:
    assert {type(line) for line in TRACE.lines} == set(get_args(Line))


def test_a_trace_comes_back_from_its_text_as_it_was() -> None:
    text = trace_to_json(TRACE)
    assert trace_from_json(text) == TRACE
    assert trace_to_json(trace_from_json(text)) == text


@pytest.mark.parametrize("line", TRACE.lines, ids=lambda line: line.form)
def test_a_line_comes_back_from_plain_data_as_it_was(line: Line) -> None:
    data = json.loads(json.dumps(line_to_json(line)))
    assert line_from_json(data) == line


@given(st.floats(allow_nan=False, allow_infinity=False))
def test_numbers_keep_every_bit(number: float) -> None:
    line = replace(DATUM, si=number, value=Quantity(number, "W", "active_power"))
    trace = replace(TRACE, lines=(line,))
    assert trace_from_json(trace_to_json(trace)) == trace


@given(st.text(st.characters(exclude_categories=["Cs"])))
def test_texts_keep_every_character(text: str) -> None:
    trace = replace(TRACE, title=text, lines=(replace(CHOICE, text=text),))
    assert trace_from_json(trace_to_json(trace)) == trace


@pytest.mark.parametrize("number", [float("nan"), float("inf"), float("-inf")])
def test_numbers_that_are_not_finite_are_refused(number: float) -> None:
    with pytest.raises(ValueError, match="Out of range float values are not JSON compliant"):
        trace_to_json(replace(TRACE, lines=(replace(DATUM, si=number),)))


def test_equal_data_give_equal_bytes() -> None:
    assert canonical_json({"b": 1, "a": [1.5, "é"]}) == '{\n "a": [\n  1.5,\n  "é"\n ],\n "b": 1\n}\n'
    assert canonical_json({"a": 1, "b": 2}) == canonical_json({"b": 2, "a": 1})


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"form": "guess"}, "does not match any of the expected tags"),
        ({"si": "many"}, "valid number"),
        ({"value": None}, "value"),
        ({"origin": {"file": "circuits.csv"}}, "tag"),
        ({"origin": {"file": "f", "tag": "t", "column": "c", "status": "hoped"}}, "'confirmed', 'assumed' or"),
    ],
)
def test_a_record_that_breaks_the_schema_is_refused(change: dict[str, object], message: str) -> None:
    with pytest.raises(ValidationError, match=message):
        line_from_json({**line_to_json(DATUM), **change})


def test_a_line_is_known_by_sheet_template_name_and_key() -> None:
    assert DATUM.id == "C-001/three-phase-power/P_2"
    assert (TABLE.label, TABLE.id) == ("I_t[run-1]", "C-001/cable-current/I_t[run-1]")
    assert TRACE.by_id()[STEP.id] is STEP
    assert len(TRACE.by_id()) == len(TRACE.lines)


def test_the_lines_of_a_workbook_are_read_from_its_outputs_in_order() -> None:
    cells: list[dict[str, Any]] = [
        {"cell_type": "markdown", "source": "# heading"},
        {"cell_type": "code", "outputs": [{"data": {LINE_MIME: line_to_json(DATUM), "text/plain": "P_2 = 45 kW"}}]},
        {"cell_type": "code", "outputs": [{"output_type": "stream", "text": "nothing"}]},
        {"cell_type": "code", "outputs": [{"data": {LINE_MIME: line_to_json(line)}} for line in (TABLE, STEP)]},
    ]
    assert lines_of_outputs(cells) == (DATUM, TABLE, STEP)
    about = {"sheet": "C-001", "title": "Travelling hoist"}
    trace = trace_of_notebook({"metadata": {"calcbook": about}, "cells": cells})
    assert (trace.sheet, trace.title) == ("C-001", "Travelling hoist")
    assert trace.templates == ("three-phase-power", "cable-current")
    assert trace_of_notebook({"metadata": {}, "cells": cells}).sheet == "C-001"
    assert trace_of_notebook({"metadata": {}, "cells": []}).lines == ()
