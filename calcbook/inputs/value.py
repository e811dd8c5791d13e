"""One value: from text to a Value by the rules of its field, or the sentence that says what is wrong with it."""

from __future__ import annotations

import datetime
import re
from dataclasses import dataclass

from calcbook.errors import QuantityFault, nearest
from calcbook.inputs.fields import Field
from calcbook.inputs.text import LONGEST_DESCRIPTION, shown, wrong_tag, wrong_text
from calcbook.records.notation import range_in_words, within
from calcbook.records.quantity import Quantity, read_quantity

_DECIMAL_COMMA = re.compile(r"[+-]?\d*,\d+(?=[eE\s]|$)", re.ASCII)
_ISO_DATE = re.compile(r"\d{4}-\d\d-\d\d", re.ASCII)
# wider than any value of an installation, narrower than what products and powers of floats bear
_LEAST, _GREATEST = 1e-9, 1e12


@dataclass(frozen=True)
class Value:
    """A valid value: its text (decimal point, unit in calcbook's spelling) and its quantity, where it has one."""

    text: str
    quantity: Quantity | None = None


def read_value(field: Field, text: str, unit: str | None = None, decimal: str = ".") -> Value | str:
    """Read one value, not empty, by the rules of its field.

    Parameters: `unit` of the column's head, taken when the text has none of its own; `decimal` mark of the file.
    Result: the value, or a sentence with what was found and what is allowed.
    """
    longest = {"longest": LONGEST_DESCRIPTION} if field.name == "description" else {}
    wrong = wrong_tag(text.strip(" ")) if field.holds == "tag" else wrong_text(text, **longest)
    if wrong:
        return wrong
    text = text.strip()
    match field.holds:
        case "quantity":
            return _read_quantity(field, text, unit, decimal)
        case "word":
            return _read_words(field, (text,))
        case "words":
            return _read_words(field, tuple(text.split()))
        case "date":
            return read_date(text)
        case _:
            return Value(text)


def read_date(text: str) -> Value | str:
    """A date as ISO 8601 writes it."""
    try:
        if _ISO_DATE.fullmatch(text):
            return Value(datetime.date.fromisoformat(text).isoformat())
    except ValueError:
        pass
    return f"{shown(text)} is not a date; write year-month-day, such as 2026-03-31"


def number_in(quantity: Quantity, unit: str) -> float:
    """The number of a quantity in another unit of the same dimension."""
    if quantity.unit == unit:
        return quantity.number
    # imported here: it loads the unit library, which takes a third of a second and is seldom needed
    from calcbook.records.dimension import factor

    return quantity.number * factor(quantity.unit) / factor(unit)


def has_decimal_comma(text: str) -> bool:
    """Whether the text of a quantity begins with a number that has a decimal comma."""
    return bool(_DECIMAL_COMMA.match(text.strip()))


def decimal_point(text: str, decimal: str) -> str:
    """The text of a quantity with a decimal point, from a file whose decimal mark is `decimal`."""
    return _DECIMAL_COMMA.sub(lambda match: match[0].replace(",", "."), text, count=1) if decimal == "," else text


def _read_quantity(field: Field, text: str, unit: str | None, decimal: str) -> Value | str:
    if decimal == "," and "." in text.split(maxsplit=1)[0]:
        return f"{shown(text)} has a decimal point, but inputs.toml says that this file has decimal commas"
    text = decimal_point(text, decimal)
    quantity = _quantity_of_kinds(field.kinds, text, unit)
    wrong = quantity if isinstance(quantity, str) else _wrong_number(field, text, number_in(quantity, field.unit))
    if wrong or isinstance(quantity, str):
        return f"{wrong} ({field.hint})" if field.hint else wrong
    number = text.split(maxsplit=1)[0]
    return Value(number if quantity.unit == "1" else f"{number} {quantity.unit}", quantity)


def _quantity_of_kinds(kinds: tuple[str, ...], text: str, unit: str | None) -> Quantity | str:
    """A quantity of the first of `kinds` that its unit can carry, else what is wrong with it as one of the last."""
    wrong = ""
    for kind in kinds:
        try:
            return read_quantity(text, kind, unit)
        except QuantityFault as fault:
            wrong = fault.message
    return wrong


def _wrong_number(field: Field, text: str, number: float) -> str:
    if field.choices and not any(_same(number, float(choice)) for choice in field.choices):
        return f"{shown(text)} is not a standard value; allowed: {', '.join(field.choices)} {field.unit}".removesuffix(
            " 1"
        )
    if field.kinds == ("count",) and not field.choices and not number.is_integer():
        return f"{shown(text)} is not a whole number"
    if number and not _LEAST <= abs(number) <= _GREATEST:
        return f"{shown(text)} is far from any value of an installation"
    if not within(field.range, number):
        unit = "" if field.unit == "1" or field.range in {">0", ">=0"} else f" {field.unit}"
        return f"{shown(text)} is out of range; allowed is {range_in_words(field.range)}{unit}"
    return ""


def _read_words(field: Field, words: tuple[str, ...]) -> Value | str:
    for word in words:
        if word not in field.choices:
            question = nearest(word, field.choices)
            listed = ", ".join(choice if choice.strip(".,") else f'"{choice}"' for choice in field.choices)
            found = f"{shown(word)} is not allowed; "
            return found + (f"{question} Allowed: {listed}" if question.startswith("did") else f"allowed: {listed}")
    return Value(" ".join(words))


def _same(number: float, other: float) -> bool:
    return abs(number - other) <= 1e-9 * other
