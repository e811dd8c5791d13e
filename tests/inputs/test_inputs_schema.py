"""The published JSON Schema of the inputs is the one the code makes, and it tells right names and values from wrong."""

from __future__ import annotations

import csv
import json
import tomllib
from collections.abc import Iterator
from importlib.resources import files
from pathlib import Path
from typing import Any

import jsonschema
import pytest

from calcbook.inputs.fields import fields_of
from calcbook.inputs.schema import inputs_schema
from calcbook.inputs.settings import CSV_FILES, TABLES
from calcbook.records.trace import canonical_json

EXAMPLES = Path(__file__).resolve().parents[2] / "examples"
PROJECTS = ("tern_quay", "tern_quay_failing")
FILE = files("calcbook.inputs").joinpath("inputs.schema.json")
RENEW = (
    "calcbook/inputs/inputs.schema.json is not what fields.csv makes; renew it with\n"
    'python -c "from pathlib import Path; from calcbook.inputs.schema import *; from calcbook.records.trace import *; '
    "Path('calcbook/inputs/inputs.schema.json').write_text(canonical_json(inputs_schema()), 'utf-8')\""
)


def published() -> Any:
    return json.loads(FILE.read_text("utf-8"))


def settings_of(project: str) -> Any:
    """inputs.toml of an example as JSON has it: dates as ISO text."""
    return json.loads(json.dumps(tomllib.loads((EXAMPLES / project / "inputs.toml").read_text("utf-8")), default=str))


def wrong_in(instance: Any, schema: Any) -> list[str]:
    found = jsonschema.Draft202012Validator(schema).iter_errors(instance)
    return [f"{error.json_path}: {error.message}" for error in found]


def rows_of(project: str, file: str) -> Iterator[dict[str, str]]:
    path = EXAMPLES / project / file
    lines = [line for line in path.read_text("utf-8").splitlines() if not line.startswith("#")] if path.exists() else []
    for row in csv.DictReader(lines):
        yield {head.partition("[")[0].strip(): cell for head, cell in row.items()}


def test_the_published_schema_is_current() -> None:
    jsonschema.Draft202012Validator.check_schema(published())
    assert FILE.read_text("utf-8") == canonical_json(inputs_schema()), RENEW


def test_every_key_and_column_has_its_description() -> None:
    schema = published()
    assert set(schema["properties"]) == set(TABLES)
    circuits = schema["$defs"]["circuits"]["properties"]
    assert set(circuits) == set(fields_of("circuits"))
    wanted = "One-way length in m, km; allowed is more than 0; needed always; used."
    assert circuits["length"]["description"] == wanted
    power_factor = schema["properties"]["sources"]["additionalProperties"]["properties"]["power_factor"]
    assert power_factor["description"] == (
        "Ratio; allowed is above 0 to 1; only for kind generator; 80 % is written 0.80; may be left out; not used yet."
    )


@pytest.mark.parametrize("project", PROJECTS)
def test_the_examples_are_valid(project: str) -> None:
    assert wrong_in(settings_of(project), published()) == []


@pytest.mark.parametrize("file", CSV_FILES)
@pytest.mark.parametrize("project", PROJECTS)
def test_the_rows_of_the_examples_are_valid(project: str, file: str) -> None:
    row_schema = published()["$defs"][file.removesuffix(".csv")]
    assert [wrong for row in rows_of(project, file) for wrong in wrong_in(row, row_schema)] == []


SPOILED: list[tuple[tuple[str, ...], object, str]] = [
    (("project", "clent"), "x", "$.project: Additional properties are not allowed ('clent' was unexpected)"),
    (("bords",), {}, "$: Additional properties are not allowed ('bords' was unexpected)"),
    (("boards", "MB", "diversty"), "1", "'diversty' was unexpected"),
    (("basis", "drop_limits", "motr"), "4 %", "'motr' was unexpected"),
    (("basis", "editions", "IEC 60364-5-52"), 2009, "2009 is not of type 'string'"),
    (("basis", "practice"), "bs", "'bs' is not one of ['iec', 'nec']"),
    (("basis", "frequency"), "50", "$.basis.frequency: '50' does not match"),
    (("basis", "frequency"), "50 kW", "$.basis.frequency: '50 kW' does not match"),
    (("basis", "drop_origin"), "", "$.basis.drop_origin: '' should be non-empty"),
    (("boards", "MB", "diversity"), 1.5, "$.boards.MB.diversity: 1.5 is not valid under any of the given schemas"),
    (("boards", "a/b"), {}, "'a/b' does not match"),
    (("boards",), {}, "$.boards: {} should be non-empty"),
    (("sources", "TX1"), {}, "$.sources.TX1: 'kind' is a required property"),
]


@pytest.mark.parametrize(("path", "item", "message"), SPOILED)
def test_what_is_misspelt_or_wrong_is_not_valid(path: tuple[str, ...], item: object, message: str) -> None:
    settings = settings_of("tern_quay")
    table = settings
    for key in path[:-1]:
        table = table[key]
    table[path[-1]] = item
    wrong = wrong_in(settings, published())
    assert len(wrong) == 1, wrong
    assert message in wrong[0]


@pytest.mark.parametrize("item", ["0.9", 0.9, 1, ""])
def test_a_ratio_is_text_or_a_bare_number(item: object) -> None:
    settings = settings_of("tern_quay")
    settings["boards"]["MB"]["diversity"] = item
    assert wrong_in(settings, published()) == []
