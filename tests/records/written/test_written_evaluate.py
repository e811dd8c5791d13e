"""The number of a written form: by floats, by 30 digits and by the algebra's function alike."""

from __future__ import annotations

import math
from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st
from written_trees import NAMES, tame_forms

from calcbook.errors import EvaluationFault, WrittenFormFault
from calcbook.records.written.algebra import expression, number_function
from calcbook.records.written.evaluate import Values, evaluate, evaluate_with, mpmath_arithmetic, rounding_scale
from calcbook.records.written.tree import Node, parse, symbols_of, write

PRECISE = mpmath_arithmetic(30)


def precise(node: Node, values: dict[str, float]) -> float:
    exact = {name: PRECISE.number(str(Decimal(value))) for name, value in values.items()}
    return float(evaluate_with(PRECISE, node, exact))


def by_algebra(form: str, values: dict[str, float]) -> float:
    return number_function(form)(*(values[write(symbol)] for symbol in symbols_of(parse(form))))


@given(tame_forms(), st.lists(st.floats(0.5, 2), min_size=len(NAMES), max_size=len(NAMES)))
def test_three_evaluations_of_one_form_agree(node: Node, numbers: list[float]) -> None:
    values = dict(zip(NAMES, numbers, strict=True))
    found = evaluate(node, values)
    assert found == pytest.approx(precise(node, values), rel=1e-13)
    assert by_algebra(write(node), values) == pytest.approx(found, rel=1e-13)


@pytest.mark.parametrize(
    ("form", "values", "number"),
    [
        ("a - b - c", {"a": 9, "b": 3, "c": 2}, 4),
        ("a/b/c", {"a": 12, "b": 3, "c": 2}, 2),
        ("-a^2", {"a": 3}, -9),
        ("a^-2", {"a": 2}, 0.25),
        ("2*pi*a", {"a": 50}, 100 * math.pi),
        ("abs(-a)", {"a": 3}, 3),
        ("hypot(a, b, c)", {"a": 2, "b": 3, "c": 6}, 7),
        ("exp(ln(a))", {"a": 3}, 3),
        ("log10(a)", {"a": 1000}, 3),
        ("sin(a)^2 + cos(a)^2", {"a": 0.7}, 1),
        ("tan(atan(a))", {"a": 0.75}, 0.75),
        ("asin(sin(a))", {"a": 0.4}, 0.4),
        ("acos(cos(a))", {"a": 0.4}, 0.4),
        ("atan2(a, b)", {"a": -1, "b": -1}, -0.75 * math.pi),
        ("min(a, b) + max(a, b, 7)", {"a": 1, "b": 2}, 8),
        ("choose(a <= b, a, b)", {"a": 2, "b": 2}, 2),
        ("choose(a > b, a, 10*b)", {"a": 2, "b": 3}, 30),
    ],
)
def test_functions_and_signs(form: str, values: dict[str, float], number: float) -> None:
    assert evaluate(parse(form), values) == pytest.approx(number, rel=1e-15)
    assert precise(parse(form), values) == pytest.approx(number, rel=1e-15)
    assert by_algebra(form, values) == pytest.approx(number, rel=1e-15)


def test_a_sum_runs_over_the_lines_its_symbols_stand_for() -> None:
    values: Values = {"P": (1.0, 2.0, 3.0), "k": (1.0, 0.5, 0.0), "c": 2.0}
    assert evaluate(parse("sum(P*k*c) + c"), values) == 6
    assert evaluate(parse("sqrt(sum(P^2))"), values) == pytest.approx(math.sqrt(14), rel=1e-15)


@pytest.mark.parametrize(
    ("form", "values", "message"),
    [
        ("a/b", {"a": 1, "b": 0}, "a/b: no finite real value"),
        ("sqrt(a)", {"a": -1}, "sqrt(a): no finite real value"),
        ("acos(a)", {"a": 1.01}, "acos(a): no finite real value"),
        ("ln(a)", {"a": 0}, "ln(a): no finite real value"),
        ("a^0.5", {"a": -1}, "a^0.5: no finite real value"),
        ("exp(a)", {"a": 1e6}, "exp(a): no finite real value"),
        ("a*a", {"a": 1e300}, "a*a: no finite real value"),
        ("a + 1", {"a": math.nan}, "a + 1: no finite real value"),
        ("a^b", {"a": 9, "b": 1e6}, "exponent 1000000.0; allowed is 12"),
        ("a + b", {"a": 1}, "b has no value"),
        ("a + 1", {"a": (1.0, 2.0)}, "a stands for several lines, outside of sum( )"),
        ("sum(a)", {"a": 1}, "sum( ) needs symbols that stand for the same lines"),
        ("sum(a*b)", {"a": (1.0, 2.0), "b": (1.0,)}, "sum( ) needs symbols that stand for the same lines"),
        ("integral(a, t, 0, 1)", {"a": 1, "t": 1}, "an integral stands in derivations only"),
    ],
)
def test_what_has_no_finite_real_value_is_said(form: str, values: Values, message: str) -> None:
    with pytest.raises(EvaluationFault) as caught:
        evaluate(parse(form), values)
    assert message in str(caught.value)
    assert str(caught.value).startswith(f"{form}: ")


def test_thirty_digits_refuse_the_same() -> None:
    for form in ("sqrt(0 - a)", "1/(a - a)", "acos(2*a)"):
        with pytest.raises(EvaluationFault, match="no finite real value"):
            evaluate_with(PRECISE, parse(form), {"a": PRECISE.number("1")})


def test_the_scale_of_rounding_is_that_of_the_terms_and_not_of_their_difference() -> None:
    node = parse("a - b")
    assert rounding_scale(node, {"a": 1e6, "b": 1e6 - 1}) == pytest.approx(2e6, rel=1e-3)
    assert rounding_scale(parse("a*b"), {"a": 3, "b": 4}) == pytest.approx(36, rel=1e-6)
    assert rounding_scale(parse("sum(a)"), {"a": (3.0, 4.0)}) == pytest.approx(14, rel=1e-6)
    assert math.isfinite(rounding_scale(parse("acos(a)"), {"a": 1.0}))


def test_the_algebra_knows_which_symbols_are_positive() -> None:
    assert expression("sqrt(I_B^2)") == expression("I_B")
    assert expression("sqrt(theta_a^2)") == expression("abs(theta_a)")
    assert expression("1.45") * 100 == 145  # an exact fraction, no float


def test_a_sum_over_lines_has_no_algebra() -> None:
    with pytest.raises(WrittenFormFault, match="a sum over lines has no algebra"):
        expression("sum(P_1)")
