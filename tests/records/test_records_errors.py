"""Errors keep their fields, build their sentence when asked, and survive pickling between processes."""

from __future__ import annotations

import pickle
from dataclasses import fields

import pytest

from calcbook import errors
from calcbook.errors import CalcbookError, Fault, InputFaults, SheetFault, WrittenFormFault, nearest

SAMPLES: list[CalcbookError] = [
    errors.UsageFault("no such command"),
    InputFaults(
        (Fault("circuits.csv", "row 9, length [m]", '"12O" is not a number'), Fault("inputs.toml", "", "empty"))
    ),
    errors.QuantityFault("no unit"),
    WrittenFormFault("a +", "the end found where a value belongs", 3),
    errors.DimensionFault("does not fit"),
    errors.EvaluationFault("a/b", "no finite real value"),
    errors.LookUpFault("B.52.4", "needs size"),
    errors.TemplateFault("cable-current", "has no parameters cell"),
    SheetFault("C-014", "cable-current", "I_Z", "stands twice"),
    errors.WorkspaceFault("disk full"),
]
ALL = pytest.mark.parametrize("error", SAMPLES, ids=lambda error: type(error).__name__)


def test_every_error_has_a_sample() -> None:
    assert {type(error) for error in SAMPLES} == set(CalcbookError.__subclasses__())


@ALL
def test_an_error_survives_pickling(error: CalcbookError) -> None:
    back = pickle.loads(pickle.dumps(error))  # noqa: S301 - our own bytes
    assert type(back) is type(error)
    assert str(back) == str(error)
    assert [getattr(back, field.name) for field in fields(back)] == [
        getattr(error, field.name) for field in fields(error)
    ]


@ALL
def test_an_error_has_the_exit_code_of_its_sort(error: CalcbookError) -> None:
    users = (errors.UsageFault, errors.InputFaults, errors.QuantityFault)
    expected = 2 if isinstance(error, users) else 4 if isinstance(error, errors.WorkspaceFault) else 3
    assert error.exit_code == expected


def test_the_sentences() -> None:
    assert [str(error) for error in SAMPLES] == [
        "no such command",
        'circuits.csv, row 9, length [m]: "12O" is not a number\ninputs.toml: empty',
        "no unit",
        "written form 'a +', character 4: the end found where a value belongs",
        "does not fit",
        "a/b: no finite real value",
        "table B.52.4: needs size",
        "template cable-current: has no parameters cell",
        "sheet C-014, cable-current, I_Z: stands twice",
        "disk full",
    ]
    assert str(CalcbookError()) == "CalcbookError"


def test_a_long_written_form_is_cut_in_its_message() -> None:
    assert str(WrittenFormFault("a" * 100, "too long")).startswith("written form '" + "a" * 77 + "...'")


def test_the_nearest_name_or_the_list() -> None:
    assert nearest("lenght", ["length", "size"]) == 'did you mean "length"?'
    assert nearest("LENGTH", ["length", "size"]) == 'did you mean "length"?'
    assert nearest("xyz", ["size", "length"]) == "allowed: length, size"
