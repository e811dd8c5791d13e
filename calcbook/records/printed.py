"""How numbers and quantities stand on paper: one rule for HTML, PDF, schedules and results.json."""

from __future__ import annotations

import math

from calcbook.records.quantity import Quantity
from calcbook.records.units import UNITS

MINUS = "\N{MINUS SIGN}"
NARROW_SPACE = "\N{NARROW NO-BREAK SPACE}"
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
    """A calculated quantity as it stands on paper: "80.7 A"."""
    return with_unit(print_number(quantity.number, figures), quantity.unit)


def print_given(quantity: Quantity) -> str:
    """A given quantity as it stands on paper, with every digit that was given: "45 kW"."""
    return with_unit(print_plain(quantity.number), quantity.unit)


def tell_apart(left: Quantity, right: Quantity) -> tuple[str, str]:
    """Two sides of an inequality, with as many figures as it takes for unequal numbers to look unequal."""
    sides = (print_calculated(left), print_calculated(right))
    figures = 4
    while sides[0] == sides[1] and not math.isclose(left.number, right.number, rel_tol=1e-12) and figures <= 14:
        figures += 1
        sides = (print_calculated(left, figures), print_calculated(right, figures))
    return sides
