"""The published JSON Schema of a trace is the one the code makes, and it tells a trace from what is none."""

from __future__ import annotations

import copy
import json
from importlib.resources import files
from typing import Any

import jsonschema
import pytest
from sample_trace import TRACE

from calcbook.records.trace import canonical_json, trace_schema, trace_to_json

FILE = files("calcbook.records").joinpath("trace.schema.json")
REGENERATE = (
    "calcbook/records/trace.schema.json is not what the code makes; regenerate it with\n"
    "python -c \"from calcbook.records.trace import *; print(canonical_json(trace_schema()), end='')\" "
    "> calcbook/records/trace.schema.json\nand raise SCHEMA_VERSION where old traces no longer fit"
)


def validator() -> Any:
    schema = json.loads(FILE.read_text("utf-8"))
    jsonschema.Draft202012Validator.check_schema(schema)
    return jsonschema.Draft202012Validator(schema)


def test_the_published_schema_is_current() -> None:
    assert FILE.read_text("utf-8") == canonical_json(trace_schema()), REGENERATE


def test_a_trace_with_every_form_of_line_is_valid() -> None:
    validator().validate(json.loads(trace_to_json(TRACE)))


def _without_sheet(trace: Any) -> None:
    del trace["lines"][0]["sheet"]


def _unknown_form(trace: Any) -> None:
    trace["lines"][0]["form"] = "guess"


def _unknown_verdict(trace: Any) -> None:
    trace["lines"][5]["verdict"] = "nearly"


def _number_as_text(trace: Any) -> None:
    trace["lines"][0]["si"] = "45000"


def _no_lines(trace: Any) -> None:
    del trace["lines"]


@pytest.mark.parametrize("spoil", [_without_sheet, _unknown_form, _unknown_verdict, _number_as_text, _no_lines])
def test_what_is_no_trace_is_not_valid(spoil: Any) -> None:
    trace = copy.deepcopy(json.loads(trace_to_json(TRACE)))
    spoil(trace)
    with pytest.raises(jsonschema.ValidationError):
        validator().validate(trace)
