"""One item of a TOML table: from what TOML makes of it to a Value by the rules of its field."""

from __future__ import annotations

import datetime
import math

from calcbook.inputs.fields import Field
from calcbook.inputs.text import shown
from calcbook.inputs.value import Value, read_date, read_value

_LARGEST = 10**30


def read_item(field: Field, item: object) -> Value | str:
    """A value from a TOML item, or what is wrong with it; an empty text is an empty value."""
    if field.holds in {"texts", "words", "references"}:
        return _read_list(field, item)
    if field.holds == "flag":
        return (
            Value("yes" if item else "no") if isinstance(item, bool) else f"{item_in_words(item)}; write true or false"
        )
    if field.holds == "date" and isinstance(item, datetime.date):
        return read_date(str(item))
    if isinstance(item, int | float) and not isinstance(item, bool):
        return _read_bare_number(field, item)
    if not isinstance(item, str):
        return f"{item_in_words(item)} is not text; write the value in quotation marks"
    return read_value(field, item) if item.strip() else Value("")


def item_in_words(item: object) -> str:
    """A TOML item as a message shows it."""
    if isinstance(item, str):
        return shown(item)
    if isinstance(item, bool):
        return '"true"' if item else '"false"'
    if isinstance(item, int) and abs(item) > _LARGEST:
        return "a number far too large"
    if isinstance(item, list | dict):
        return "a list" if isinstance(item, list) else "a table"
    return shown(str(item))


def _read_bare_number(field: Field, number: float) -> Value | str:
    found = item_in_words(number)
    if isinstance(number, float) and not math.isfinite(number):
        return f"{found} is not a number"
    if field.holds != "quantity":
        return f"{found} is a number; write it as text, in quotation marks"
    if not set(field.kinds) & {"ratio", "count"}:
        return f'{found} has no unit; write it as text with its unit, such as "{found.strip(chr(34))} {field.unit}"'
    if isinstance(number, int) and abs(number) > _LARGEST:
        return f"{found} is not allowed"
    return read_value(field, str(number))


def _read_list(field: Field, item: object) -> Value | str:
    if not isinstance(item, list) or not all(isinstance(part, str) for part in item):
        return f'{item_in_words(item)} is not a list of texts, such as ["A", "B"]'
    parts = [read_value(field, part) for part in item if part.strip()]
    wrong = next((part for part in parts if isinstance(part, str)), "")
    return wrong or Value(", ".join(part.text for part in parts if isinstance(part, Value)))
