"""Numbers on paper: figures, powers of ten, units; and two sides of an inequality that always show their order."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcbook.records.printed import (
    MINUS,
    print_calculated,
    print_given,
    print_number,
    print_plain,
    tell_apart,
    with_unit,
)
from calcbook.records.quantity import Quantity

SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789-")
FINITE = st.floats(allow_nan=False, allow_infinity=False)


def read(text: str) -> float:
    """The number that a reader takes from paper."""
    number = text.split("\N{NO-BREAK SPACE}", maxsplit=1)[0].replace(MINUS, "-").rstrip("°")
    mantissa, _, power = number.partition("×10")
    return float(f"{mantissa}e{power.translate(SUPERSCRIPTS) or '0'}")


@pytest.mark.parametrize(
    ("number", "text"),
    [
        (0, "0"),
        (80.7123, "80.7"),
        (80, "80.0"),
        (12.345, "12.35"),
        (1, "1.000"),
        (9.999, "9.999"),
        (0.999, "0.999"),
        (0.9999, "0.9999"),
        (999.9, "999.9"),
        (99999, "1.000×10⁵"),
        (123456, "1.235×10⁵"),
        (99949, "99900"),
        (0.00123, "0.001230"),
        (0.00098, "9.80×10⁻⁴"),
        (-0.5, f"{MINUS}0.500"),
        (-1e-7, f"{MINUS}1.000×10⁻⁷"),
        (2.5e20, "2.50×10²⁰"),
    ],
)
def test_calculated_numbers_have_three_figures_and_four_where_three_would_start_with_a_one(
    number: float, text: str
) -> None:
    assert print_number(number) == text


@given(FINITE.filter(lambda number: number == 0 or 1e-300 < abs(number) < 1e300))
def test_a_calculated_number_is_printed_within_half_a_unit_of_its_third_figure(number: float) -> None:
    assert read(print_number(number)) == pytest.approx(number, rel=5.01e-3)
    assert read(print_number(number, 7)) == pytest.approx(number, rel=5.01e-7)


@pytest.mark.parametrize(
    ("number", "text"),
    [
        (45.0, "45"),
        (0.86, "0.86"),
        (12.1, "12.1"),
        (1e-7, "1×10⁻⁷"),
        (2.5e22, "2.5×10²²"),
        (-5.0, f"{MINUS}5"),
        (0.1, "0.1"),
    ],
)
def test_given_numbers_keep_their_digits(number: float, text: str) -> None:
    assert print_plain(number) == text


@given(FINITE)
def test_a_given_number_is_read_back_exactly(number: float) -> None:
    assert read(print_plain(number)) == number


def test_units_follow_after_a_space_that_does_not_break() -> None:
    assert with_unit("80.7", "A") == "80.7\N{NO-BREAK SPACE}A"
    assert with_unit("36.9", "deg") == "36.9°"
    assert with_unit("0.86", "1") == "0.86"
    assert print_given(Quantity(45, "kW", "active_power")) == "45\N{NO-BREAK SPACE}kW"
    assert print_calculated(Quantity(80.72, "A", "line_current")) == "80.7\N{NO-BREAK SPACE}A"
    assert print_calculated(Quantity(31.4, "degC", "temperature"), 4) == "31.40\N{NO-BREAK SPACE}°C"


def test_a_count_is_a_whole_number() -> None:
    assert print_calculated(Quantity(4, "1", "count")) == "4"
    assert print_calculated(Quantity(4.5, "1", "count")) == "4.50"


# --- two sides of an inequality ---


def sides(left: float, right: float, unit: str = "A", kind: str = "line_current") -> tuple[str, str]:
    one, other = Quantity(left, unit, kind), Quantity(right, unit, kind)
    return tell_apart(one, print_calculated(one), other, print_given(other))


def in_order(left: float, right: float, texts: tuple[str, str]) -> bool:
    shown = read(texts[0]), read(texts[1])
    return (shown[0] < shown[1]) == (left < right) and (shown[0] > shown[1]) == (left > right)


def test_sides_stay_as_printed_elsewhere_where_that_shows_their_order() -> None:
    assert sides(80.7, 81) == ("80.7\N{NO-BREAK SPACE}A", "81\N{NO-BREAK SPACE}A")
    assert sides(80, 80) == ("80.0\N{NO-BREAK SPACE}A", "80\N{NO-BREAK SPACE}A")


def test_more_figures_where_rounding_would_hide_or_turn_the_order() -> None:
    assert sides(80.96, 81) == ("80.96\N{NO-BREAK SPACE}A", "81.00\N{NO-BREAK SPACE}A")
    assert sides(63.0004, 63) == ("63.0004\N{NO-BREAK SPACE}A", "63.0000\N{NO-BREAK SPACE}A")
    assert in_order(32.04, 32.0, sides(32.04, 32.0))


@settings(max_examples=300)
@given(FINITE, FINITE)
def test_printed_order_is_true_order(left: float, right: float) -> None:
    assert in_order(left, right, sides(left, right))


@settings(max_examples=300)
@given(st.floats(1e-6, 1e9), st.integers(-30, 30))
def test_printed_order_is_true_order_for_numbers_close_together(number: float, steps: int) -> None:
    """Neighbouring floats, a few roundings apart: where verdicts turn."""
    other = number
    for _ in range(abs(steps)):
        other = math.nextafter(other, math.inf if steps > 0 else 0)
    assert in_order(number, other, sides(number, other))
    assert in_order(other, number, sides(other, number))


@given(st.floats(-50, 130), st.floats(-50, 130))
def test_printed_order_is_true_order_of_temperatures_and_angles(left: float, right: float) -> None:
    assert in_order(left, right, sides(left, right, "degC", "temperature"))
    assert in_order(left, right, sides(left, right, "deg", "angle"))
