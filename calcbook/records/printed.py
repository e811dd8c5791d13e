"""How numbers and quantities stand on paper: one rule for HTML, PDF, schedules and results.json."""

from __future__ import annotations

from decimal import ROUND_CEILING, ROUND_FLOOR, Decimal

from calcbook.records.quantity import Quantity
from calcbook.records.units import UNITS

MINUS = "\N{MINUS SIGN}"
_DIGITS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789-")
_SUPERSCRIPTS = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")


def print_number(number: float, figures: int | None = None) -> str:
    """A calculated number with 3 significant figures, 4 where it starts with the digit 1.

    `figures` sets another count. Numbers from 100000 and under 0.001 are printed with a power of ten.
    """
    if number == 0:
        return "0"
    if figures is None:
        figures = 4 if f"{abs(number):.2e}".startswith("1") else 3
    mantissa, exponent = f"{abs(number):.{figures - 1}e}".split("e")
    sign = MINUS if number < 0 else ""
    power = int(exponent)
    if -3 <= power < 5:
        return sign + f"{float(f'{mantissa}e{exponent}'):.{max(figures - 1 - power, 0)}f}"
    return f"{sign}{mantissa}×10{str(power).translate(_SUPERSCRIPTS)}"


def print_plain(number: float) -> str:
    """A given number with all its digits and no others: 0.86, 45, 12.1."""
    text = repr(number)
    if text.endswith(".0"):
        text = text[:-2]
    if "e" in text:
        mantissa, exponent = text.split("e")
        text = f"{mantissa}×10{str(int(exponent)).translate(_SUPERSCRIPTS)}"
    return text.replace("-", MINUS)


def with_unit(number: str, unit: str) -> str:
    """A printed number followed by its printed unit; nothing follows a pure number."""
    printed = UNITS[unit].printed
    if not printed:
        return number
    return number + ("" if printed == "°" else "\N{NO-BREAK SPACE}") + printed


def print_calculated(quantity: Quantity, figures: int | None = None) -> str:
    """A calculated quantity as it stands on paper: "80.7 A"; a count is a whole number."""
    if quantity.kind == "count" and quantity.number == round(quantity.number):
        return print_given(quantity)
    return with_unit(print_number(quantity.number, figures), quantity.unit)


def print_rounded(quantity: Quantity, *, up: bool) -> str:
    """A limit with 4 significant figures, rounded up or down so that the printed number is on the safe side."""
    number = Decimal(repr(quantity.number))
    step = Decimal(1).scaleb(number.adjusted() - 3)
    rounded = (number / step).to_integral_value(ROUND_CEILING if up else ROUND_FLOOR) * step
    nearest = (number / step).to_integral_value() * step
    if abs(nearest - number) <= abs(number) * Decimal("1e-11"):
        rounded = nearest  # a limit that is a round number, but for the last bits of its search
    return print_calculated(Quantity(float(rounded), quantity.unit, quantity.kind), 4)


def print_given(quantity: Quantity) -> str:
    """A given quantity as it stands on paper, with every digit that was given: "45 kW"."""
    return with_unit(print_plain(quantity.number), quantity.unit)


def tell_apart(left: Quantity, left_text: str, right: Quantity, right_text: str) -> tuple[str, str]:
    """The two sides of an inequality as printed, with as many figures as it takes to show which is larger.

    Both quantities have one unit; the texts are the sides as they stand elsewhere on the sheet.
    """
    sides = (left_text, right_text)
    figures = 3
    while not _in_order(sides, left.number - right.number) and figures < 17:  # 17 figures tell any two floats apart
        figures += 1
        sides = (print_calculated(left, figures), print_calculated(right, figures))
    return sides


def _in_order(sides: tuple[str, str], difference: float) -> bool:
    left, right = (_read_back(side) for side in sides)
    return (left > right) == (difference > 0) and (left < right) == (difference < 0)


def _read_back(text: str) -> float:
    number = text.split("\N{NO-BREAK SPACE}", maxsplit=1)[0].replace(MINUS, "-").rstrip("°")
    mantissa, _, power = number.partition("×10")
    return float(mantissa) * 10.0 ** int(power.translate(_DIGITS) or "0")
