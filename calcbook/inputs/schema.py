"""The JSON Schema of the inputs, made from `fields.csv`: inputs.toml and, under `$defs`, the rows of the CSV files.

It tells an editor names, kinds, units, words and what is needed always. What hangs on other data (conditions, ranges
of numbers that carry a unit) only `calcbook run` can judge.
"""

from __future__ import annotations

import re
from typing import Any

from calcbook.inputs.fields import Field, fields_of
from calcbook.inputs.settings import CITED, CSV_FILES, TAGGED
from calcbook.inputs.text import LONGEST_DESCRIPTION, LONGEST_TAG, LONGEST_TEXT
from calcbook.records.notation import range_in_words
from calcbook.records.units import kind_in_words, units_of

Schema = dict[str, Any]

_TAG = "[A-Za-z0-9][A-Za-z0-9._-]*"
_NUMBER = r"[+-]?([0-9]+(\.[0-9]+)?|\.[0-9]+)([eE][+-]?[0-9]{1,3})?"
_DATE = "[0-9]{4}-[0-9]{2}-[0-9]{2}"
_LISTS = ("texts", "words", "references")
_BOUNDS = {">=": "minimum", ">": "exclusiveMinimum", "[": "minimum", "(": "exclusiveMinimum"}


def inputs_schema() -> Schema:
    """The schema of inputs.toml, dates as ISO text, as published in `inputs.schema.json`."""
    tagged = {kind: _tables(_table(kind), {"pattern": f"^{_TAG}$", "maxLength": LONGEST_TAG}) for kind in TAGGED}
    tagged["boards"]["minProperties"] = 1
    files = {"type": "object", "additionalProperties": False, "properties": {f: _table("files") for f in CSV_FILES}}
    basis = _table("basis")
    basis["properties"]["editions"] |= _editions()
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "title": "inputs.toml of a calcbook project",
        "description": "Its tables and keys; $defs holds the rows of the CSV files. What hangs on other data only "
        "calcbook run judges.",
        "type": "object",
        "additionalProperties": False,
        "required": ["project", "basis", "boards"],
        "properties": {
            "project": _table("project"),
            "basis": basis,
            "signed_off": _tables(_table("signed_off"), {"maxLength": LONGEST_TEXT}),
            "files": files,
            **tagged,
        },
        "$defs": {file.removesuffix(".csv"): _row(file) for file in CSV_FILES},
    }


def _tables(table: Schema, names: Schema) -> Schema:
    return {"type": "object", "propertyNames": names, "additionalProperties": table}


def _table(place: str) -> Schema:
    """One table of inputs.toml; "drop_limits.motor" stands in a table of its own."""
    schema = _object([field.name for field in fields_of(place).values() if field.needed])
    for name, field in fields_of(place).items():
        outer, _, inner = name.rpartition(".")
        within = schema["properties"].setdefault(outer, _object([])) if outer else schema
        within["properties"][inner] = _described(field, _item(field))
    return schema


def _row(file: str) -> Schema:
    fields = fields_of(file.removesuffix(".csv"))
    schema = _object([name for name, field in fields.items() if field.needed])
    schema["properties"] = {name: _described(field, _cell(field)) for name, field in fields.items()}
    said = f"A row of {file} by the names of its columns, without the units of their heads; an empty cell is no text."
    return {**schema, "description": said}


def _object(needed: list[str]) -> Schema:
    return {"type": "object", "additionalProperties": False, "required": sorted(needed), "properties": {}}


def _editions() -> Schema:
    edition = {"type": "string", "minLength": 1, "maxLength": LONGEST_TEXT}
    return {"required": list(CITED), "additionalProperties": edition}


def _item(field: Field) -> Schema:
    """A key of inputs.toml: lists and flags have forms of their own there, ratios and counts may be bare numbers."""
    if field.holds in _LISTS:
        return {"type": "array", "items": _enum(field) if field.holds == "words" else _text(LONGEST_TEXT)}
    if field.holds in {"flag", "table"}:
        return {"type": "boolean" if field.holds == "flag" else "object"}
    if field.holds == "quantity" and set(field.kinds) & {"ratio", "count"}:
        return {"anyOf": [_cell(field), _bare_number(field)]}
    return _cell(field, with_unit=True)


def _cell(field: Field, with_unit: bool = False) -> Schema:
    """A value as text; one that is not needed may be empty."""
    match field.holds:
        case "word":
            return _enum(field)
        case "tag":
            return {**_matching(_TAG, field.needed), "maxLength": LONGEST_TAG}
        case "date":
            return _matching(_DATE, field.needed)
        case "quantity":
            units = [re.escape(unit) for kind in field.kinds for unit in units_of(kind)]
            return _matching(f"{_NUMBER}(\\s+({'|'.join(units)})){'' if with_unit else '?'}", field.needed)
        case _:
            longest = LONGEST_DESCRIPTION if field.name == "description" else LONGEST_TEXT
            return {**_text(longest), **({"minLength": 1} if field.needed else {})}


def _text(longest: int) -> Schema:
    return {"type": "string", "maxLength": longest}


def _enum(field: Field) -> Schema:
    return {"type": "string", "enum": [*field.choices, *([] if field.needed else [""])]}


def _matching(pattern: str, needed: bool) -> Schema:
    return {"type": "string", "pattern": f"^({pattern}){'' if needed else '?'}$"}


def _bare_number(field: Field) -> Schema:
    if field.choices:
        return {"enum": [float(choice) for choice in field.choices]}
    schema: Schema = {"type": "integer" if field.kinds == ("count",) else "number"}
    sign = next((sign for sign in _BOUNDS if field.range.startswith(sign)), "")
    if sign:
        low, _, high = field.range.removeprefix(sign).partition(",")
        schema[_BOUNDS[sign]] = float(low)
        if high:
            schema["maximum" if high.endswith("]") else "exclusiveMaximum"] = float(high[:-1])
    return schema


def _described(field: Field, schema: Schema) -> Schema:
    """The schema of a value with what its field says: kind, range and choices with their unit, need, use."""
    said = []
    unit = "" if field.unit == "1" else f" {field.unit}"
    if field.kinds:
        units = dict.fromkeys(unit for kind in field.kinds for unit in units_of(kind) if unit != "1")
        said.append(" or ".join(map(kind_in_words, field.kinds)) + (f" in {', '.join(units)}" if units else ""))
    if field.range:
        said.append(f"allowed is {range_in_words(field.range)}" + (unit if field.range not in {">0", ">=0"} else ""))
    if field.holds.startswith("reference"):
        said.append(f"{field.holds}: {' or '.join(field.choices)}")
    elif field.choices:
        said.append(f"one of {', '.join(field.choices)}{unit}")
    if field.only_for:
        said.append(f"only for kind {', '.join(field.only_for)}")
    said += [field.hint] if field.hint else []
    said += ["needed always" if field.needed else "may be left out", "used" if field.used else "not used yet"]
    text = "; ".join(said)
    return {**schema, "description": f"{text[0].upper()}{text[1:]}."}
