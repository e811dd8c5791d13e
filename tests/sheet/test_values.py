"""Values without arithmetic or truth value: each refusal says what to write instead."""

from __future__ import annotations

import operator
from collections.abc import Callable
from typing import Any

import pytest

from calcbook.errors import DimensionFault
from calcbook.records.quantity import Quantity
from calcbook.records.value import Choice, Comparison, Value

I_B = Value("I_B", Quantity(80.0, "A", "line_current"), 80.0, "80 A")
I_Z = Value("I_Z", Quantity(95.0, "A", "line_current"), 95.0, "95 A")
ETA = Value("eta", Quantity(0.9, "1", "ratio"), 0.9, "0.9")

BINARY: list[Callable[[Any, Any], Any]] = [
    operator.add, operator.sub, operator.mul, operator.truediv, operator.floordiv, operator.mod, operator.pow,
]  # fmt: skip
UNARY: list[Callable[[Any], Any]] = [
    operator.neg, operator.pos, abs, float, int, complex, round, operator.index,
]  # fmt: skip


@pytest.mark.parametrize("act", BINARY)
def test_no_arithmetic(act: Callable[[Any, Any], Any]) -> None:
    for pair in ((I_B, I_Z), (I_B, 2), (2.0, I_B), (Choice("method", "E"), 1)):
        with pytest.raises(DimensionFault, match="has no arithmetic: write a formula in calcbook/formulas and a step"):
            act(*pair)


@pytest.mark.parametrize("act", UNARY)
def test_no_number(act: Callable[[Any], Any]) -> None:
    with pytest.raises(DimensionFault, match="line I_B has no arithmetic"):
        act(I_B)


@pytest.mark.parametrize("thing", [I_B, Choice("method", "E"), I_B <= I_Z])
def test_no_truth_value(thing: object) -> None:
    with pytest.raises(DimensionFault, match="has no truth value: branch on the template's parameters"):
        bool(thing)


def test_equality_and_strict_comparison_are_refused() -> None:
    with pytest.raises(DimensionFault, match="has no truth value"):
        _ = I_B == I_Z
    with pytest.raises(DimensionFault, match="has no truth value"):
        _ = I_B != 3
    with pytest.raises(DimensionFault, match="a criterion is <= or >=, so that the limit itself is allowed"):
        _ = I_B < I_Z
    with pytest.raises(DimensionFault, match="a criterion is <= or >="):
        _ = I_B > I_Z


def test_chained_comparison_is_refused() -> None:
    with pytest.raises(DimensionFault, match="I_B <= I_Z has no truth value"):
        _ = I_B <= I_Z <= I_B


def test_values_cannot_be_keys() -> None:
    with pytest.raises(TypeError, match="unhashable"):
        _ = {I_B: 1}


def test_comparison_needs_lines_of_one_kind() -> None:
    assert isinstance(I_B >= I_Z, Comparison)
    with pytest.raises(DimensionFault, match="I_B <= eta: line_current cannot be compared with ratio"):
        _ = I_B <= ETA
    with pytest.raises(DimensionFault, match="I_B <= 81: both sides must be lines of the sheet"):
        _ = I_B <= 81  # type: ignore[operator]  # what a template's author may write by mistake
