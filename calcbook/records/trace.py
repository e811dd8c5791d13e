"""The trace of a sheet: its lines as data, read from a workbook or from JSON, checked against one schema."""

from __future__ import annotations

import json
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cache
from typing import Annotated, Any, Literal

from pydantic import Field, TypeAdapter

from calcbook.records.line import Identity, Line

SCHEMA_VERSION: Literal[1] = 1
LINE_MIME = "application/vnd.calcbook.line.v1+json"

_Line = Annotated[Line, Field(discriminator="form")]


@dataclass(frozen=True)
class Trace:
    """Everything one sheet rests on and says; `templates` in order, `lines` in the order of the sheet."""

    schema: Literal[1]
    sheet: str
    title: str
    templates: tuple[str, ...]
    lines: tuple[_Line, ...]

    def by_id(self) -> dict[str, Line]:
        """The lines by identity."""
        return {identity(line).id: line for line in self.lines}


def identity(line: Line) -> Identity:
    """The identity of a line."""
    return line


@cache
def _lines() -> TypeAdapter[Any]:
    return TypeAdapter(_Line)


@cache
def _traces() -> TypeAdapter[Trace]:
    return TypeAdapter(Trace)


def line_to_json(line: Line) -> dict[str, Any]:
    """A line as plain JSON data; non-finite numbers are refused when it is written."""
    return dict(_lines().dump_python(line, mode="json"))


def line_from_json(data: Mapping[str, Any]) -> Line:
    """A line from JSON data; raises pydantic's ValidationError where it breaks the schema."""
    line: Line = _lines().validate_python(data)
    return line


def trace_to_json(trace: Trace) -> str:
    """The trace as text, keys sorted, NaN and infinity refused."""
    return canonical_json(_traces().dump_python(trace, mode="json"))


def trace_from_json(text: str) -> Trace:
    """The trace from its text."""
    return _traces().validate_json(text)


def trace_schema() -> dict[str, Any]:
    """The JSON Schema of a trace, as published in `trace.schema.json`."""
    return _traces().json_schema()


def canonical_json(data: object) -> str:
    """JSON with sorted keys and no non-finite number, so that equal data give equal bytes."""
    return json.dumps(data, sort_keys=True, ensure_ascii=False, allow_nan=False, indent=1) + "\n"


def lines_of_outputs(cells: Sequence[Mapping[str, Any]]) -> tuple[Line, ...]:
    """The records among the outputs of executed notebook cells, in order."""
    found = []
    for cell in cells:
        for output in cell.get("outputs", ()):
            record = output.get("data", {}).get(LINE_MIME)
            if record is not None:
                found.append(line_from_json(record))
    return tuple(found)


def trace_of_notebook(notebook: Mapping[str, Any]) -> Trace:
    """The trace of an executed workbook; its sheet and title stand in the workbook's metadata."""
    about = notebook["metadata"].get("calcbook", {})
    lines = lines_of_outputs(notebook["cells"])
    sheet = str(about.get("sheet", lines[0].sheet if lines else ""))
    templates = tuple(dict.fromkeys(line.template for line in lines))
    return Trace(SCHEMA_VERSION, sheet, str(about.get("title", "")), templates, lines)
