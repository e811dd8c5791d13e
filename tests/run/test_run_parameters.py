"""The parameters cell: what it declares, and every departure from its form by line."""

from __future__ import annotations

import json
import keyword
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from papermill.parameterize import parameterize_notebook
from papermill.translators import PythonTranslator
from small_templates import GIVEN_LINE, code, notebook

from calcbook.errors import TemplateFault
from calcbook.run.parameters import Parameter, merge_parameters, read_parameters
from calcbook.run.shell import run_notebook

LENGTH = Parameter("length", "str", '"85 m"', "route length, source end to load end")
GIVEN = Parameter("given", "dict", "{}", "filled by calcbook")
FORM = 'name: str = "value"  # description'


def test_parameters_are_read_in_order() -> None:
    source = f'{LENGTH.line}\n\nmethod: str = "E"  # method of installation; table B.52.1\n{GIVEN_LINE}'
    method = Parameter("method", "str", '"E"', "method of installation; table B.52.1")
    assert read_parameters("drop", source) == (LENGTH, method, GIVEN)


@pytest.mark.parametrize(
    ("source", "message"),
    [
        ("length: str = '85 m'", 'line 1: "length" has no description: ' + FORM),
        ('length = "85 m"  # route', f"line 1: each line of the parameters cell is: {FORM}"),
        ('length: "str" = "85 m"  # route', f"line 1: each line of the parameters cell is: {FORM}"),
        ("length: str  # route", f"line 1: each line of the parameters cell is: {FORM}"),
        ("import os", f"line 1: each line of the parameters cell is: {FORM}"),
        ('length: str = (\n    "85 m"\n)  # route', f"line 1: each line of the parameters cell is: {FORM}"),
        ('if 1: length: str = "85 m"  # route', f"line 1: each line of the parameters cell is: {FORM}"),
        ("\nruns: int = 2  # parallel runs", f'line 2: "runs" must be a text with its unit in it: {FORM}'),
        ("runs: str = 2  # parallel runs", f'line 1: "runs" must be a text with its unit in it: {FORM}'),
        ("runs: str = str(2)  # parallel runs", f'line 1: "runs" must be a text with its unit in it: {FORM}'),
        ('# data\nlength: str = "1 m"  # l', f"line 1: a comment stands by itself; each line is: {FORM}"),
        (f"{LENGTH.line}\n{LENGTH.line}", 'line 2: "length" is declared twice'),
        ('a: str = "1"; b: str = "2"  # both', 'line 1: a line holds one "=" and one "#", or papermill misreads it'),
        ('a: str = "1"  # a = one', 'line 1: a line holds one "=" and one "#", or papermill misreads it'),
        ('a: str = "#1"  # one', 'line 1: a line holds one "=" and one "#", or papermill misreads it'),
        ('given: dict = {"a": 1}  # x', 'line 1: "given" is reserved: given: dict = {}  # description'),
        ("a: str = = 1", "line 1: not Python (invalid syntax)"),
    ],
)
def test_a_departure_from_the_form_is_named_with_its_line(source: str, message: str) -> None:
    with pytest.raises(TemplateFault) as raised:
        read_parameters("drop", f"{source}\n{GIVEN_LINE}")
    assert str(raised.value) == f"template drop: parameters cell, {message}"


@pytest.mark.parametrize("source", ["", LENGTH.line, f"{GIVEN_LINE}\n{LENGTH.line}"])
def test_given_is_the_last_parameter(source: str) -> None:
    with pytest.raises(TemplateFault, match=r"last line of the parameters cell must be: given: dict = \{\}"):
        read_parameters("drop", source)


NAMES = st.from_regex(r"[a-z][a-z_0-9]{0,8}", fullmatch=True).filter(
    lambda name: not keyword.iskeyword(name) and name not in ("given",)
)
WORDS = st.text(st.characters(exclude_characters='=#"\\', exclude_categories=["C", "Zl", "Zp"]), max_size=20)
PARAMETERS = st.builds(
    Parameter, NAMES, st.just("str"), WORDS.map(lambda text: f'"{text}"'), WORDS.map(str.strip).filter(bool)
)


@given(st.lists(PARAMETERS, max_size=5, unique_by=lambda parameter: parameter.name))
def test_what_is_written_is_read_by_calcbook_and_by_papermill_alike(parameters: list[Parameter]) -> None:
    source = "\n".join(parameter.line for parameter in [*parameters, GIVEN])
    assert read_parameters("drop", source) == (*parameters, GIVEN)
    seen = PythonTranslator.inspect({"source": source})
    assert [(one.name, one.inferred_type_name, one.default) for one in seen] == [
        (one.name, one.type, one.default) for one in [*parameters, GIVEN]
    ]


def test_one_name_has_one_meaning_in_a_sheet() -> None:
    other = Parameter("length", "str", '"1 m"', "cable length")
    with pytest.raises(TemplateFault) as raised:
        merge_parameters([("drop", (LENGTH, GIVEN)), ("fault", (other, GIVEN))])
    assert str(raised.value) == (
        'template fault: parameter "length" is "cable length", but in template drop it is '
        '"route length, source end to load end"; one name has one meaning'
    )


def test_the_union_keeps_the_order_and_the_first_default() -> None:
    again = Parameter(LENGTH.name, LENGTH.type, '"1 m"', LENGTH.description)
    size = Parameter("size", "str", '"25 mm2"', "cross-section")
    assert merge_parameters([("a", (LENGTH, GIVEN)), ("b", (size, again, GIVEN))]) == (LENGTH, size, GIVEN)


TEXTS = st.text(st.characters(exclude_categories=["Cs"]), max_size=30)
DATA: st.SearchStrategy[Any] = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats(allow_nan=False, allow_infinity=False) | TEXTS,
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(TEXTS, inner, max_size=3),
    max_leaves=8,
)


@settings(max_examples=25, deadline=None)
@given(TEXTS, st.dictionaries(TEXTS, DATA, max_size=4))
def test_what_is_injected_arrives_as_it_was_and_is_never_executed(text: str, data: dict[str, Any]) -> None:
    made = notebook(
        code(f'length: str = "85 m"  # route\n{GIVEN_LINE}', "parameters"),
        code("display({'application/json': [length, given]}, raw=True)"),
    )
    for cell in made.cells:
        cell.metadata.setdefault("tags", [])
    made.metadata.papermill = {}
    injected = parameterize_notebook(made, {"length": text, "given": data})
    arrived = run_notebook(injected).cells[-1].outputs[0]["data"]["application/json"]
    assert json.dumps(arrived) == json.dumps([text, data])
