"""The float path of every formula against 30 digits, and against a change of the base units."""

from __future__ import annotations

import math
from typing import Any

import pytest
from formula_inputs import coherent, inputs, precise_result
from hypothesis import given, settings
from hypothesis import strategies as st

from calcbook.formulas.register import formulas
from calcbook.records.dimension import coherent_number, dimension
from calcbook.records.written.evaluate import evaluate, rounding_scale

ALL = pytest.mark.parametrize("name", formulas())
FEW = settings(max_examples=20, deadline=None)


@ALL
@FEW
@given(data=st.data())
def test_floats_agree_with_thirty_digits(name: str, data: st.DataObject) -> None:
    formula = formulas()[name]
    drawn = data.draw(inputs(formula))
    found, second = formula.evaluate(drawn)
    oracle = precise_result(formula, drawn)
    allowed = 1e-14 * rounding_scale(formula.tree, coherent(formula, drawn))  # some fifty roundings of the scale
    assert abs(coherent_number(found) - oracle) <= allowed
    assert abs(second - oracle) <= allowed


_SIZES = st.floats(0.1, 10)
_BASES = ("[length]", "[mass]", "[time]", "[current]", "[temperature]")


def _scale(container: Any, sizes: dict[str, float]) -> float:
    return float(math.prod(sizes[base] ** float(power) for base, power in container.items()))


@ALL
@FEW
@given(data=st.data())
def test_a_change_of_base_units_changes_the_result_by_its_dimension(name: str, data: st.DataObject) -> None:
    """A formula of one dimension holds in any units: with metre, kilogram, second, ampere, kelvin each resized."""
    formula = formulas()[name]
    values = coherent(formula, data.draw(inputs(formula)))
    sizes = {base: data.draw(_SIZES) for base in _BASES}
    scales = {entry.name: _scale(dimension(entry.unit), sizes) for entry in formula.symbols}
    resized = {
        name: value * scales[name] if isinstance(value, float) else [one * scales[name] for one in value]
        for name, value in values.items()
    }
    expected = evaluate(formula.tree, values) * _scale(dimension(formula.result_name.unit), sizes)
    allowed = 1e-12 * rounding_scale(formula.tree, resized)
    assert abs(evaluate(formula.tree, resized) - expected) <= allowed
