"""A quantity: number, unit and kind; and our own reader for quantities in text."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass

from calcbook.errors import QuantityFault, nearest
from calcbook.records.units import AMBIGUOUS, UNITS, kind_in_words, units_of

_NUMBER = re.compile(r"[+-]?(\d+(\.\d+)?|\.\d+)([eE][+-]?\d{1,3})?", re.ASCII)
_LONGEST_NUMBER = 30


@dataclass(frozen=True)
class Quantity:
    """A number with its unit (a spelling of `units.UNITS`) and its kind (a key of `units.KINDS`)."""

    number: float
    unit: str
    kind: str


def read_number(text: str) -> float:
    """A finite number written with ASCII digits and a decimal point.

    Raises QuantityFault for anything else: decimal commas, products, fractions, `nan`, `inf`, letters among digits.
    """
    stripped = text.strip()
    if len(stripped) > _LONGEST_NUMBER:
        raise QuantityFault(f"a number of {len(stripped)} characters; allowed are {_LONGEST_NUMBER}")
    if re.fullmatch(r"[+-]?\d+,\d+", stripped, re.ASCII):
        thousands = (
            f' or "{stripped.replace(",", "")}"' if re.fullmatch(r"[+-]?[1-9]\d{0,2},\d{3}", stripped, re.ASCII) else ""
        )
        raise QuantityFault(f'"{stripped}" has a decimal comma; write "{stripped.replace(",", ".")}"{thousands}')
    if not _NUMBER.fullmatch(stripped):
        raise QuantityFault(f'"{stripped}" is not a number')
    number = float(stripped)
    if not math.isfinite(number):
        raise QuantityFault(f'"{stripped}" is too large')
    return number


def read_quantity(text: str, kind: str, default_unit: str | None = None) -> Quantity:
    """Read "45 kW": a number, a space, a unit of the closed list that may carry `kind`.

    Parameters: `text` as entered; `kind` of quantity wanted; `default_unit` taken when the text has no unit of its own
    (a ratio or a count needs none). Raises QuantityFault with what was found and what is allowed.
    """
    parts = text.split()
    allowed = units_of(kind)
    if len(parts) == 1:
        number = read_number(_without_glued_unit(parts[0], kind))
        unit = default_unit or ("1" if "1" in allowed else None)
        if unit is None:
            raise QuantityFault(f'"{text.strip()}" has no unit; {kind_in_words(kind)} takes {_or_list(allowed)}')
        return Quantity(number, unit, kind)
    if len(parts) != 2:
        raise QuantityFault(f'"{text.strip()}" is not a number, a space and a unit')
    number = read_number(parts[0])
    return Quantity(number, check_unit(parts[1], kind), kind)


def check_unit(unit: str, kind: str) -> str:
    """The unit, when it is in the list and may carry the kind; else QuantityFault with the remedy."""
    allowed = units_of(kind)
    if unit in AMBIGUOUS:
        raise QuantityFault(f'"{unit}" names two units; write {_or_list(AMBIGUOUS[unit])}')
    if unit not in UNITS:
        hint = nearest(unit, allowed) if len(allowed) > 1 else f"allowed: {_or_list(allowed)}"
        raise QuantityFault(f'"{unit}" is not a unit calcbook knows; {hint}')
    if unit not in allowed:
        found = kind_in_words(UNITS[unit].kinds[0])
        raise QuantityFault(f'"{unit}" is a unit of {found}; {kind_in_words(kind)} takes {_or_list(allowed)}')
    return unit


def _without_glued_unit(text: str, kind: str) -> str:
    """The text itself, unless a known unit is glued to a number: then the fault that teaches the space."""
    match = re.fullmatch(r"([+-]?[\d.]+)([A-Za-z%].*)", text, re.ASCII)
    if match and match[2] in UNITS:
        raise QuantityFault(f'"{text}": write a space between number and unit, "{match[1]} {match[2]}"')
    return text


def _or_list(names: tuple[str, ...]) -> str:
    quoted = [f'"{name}"' if name != "1" else "a plain number" for name in names]
    return quoted[0] if len(quoted) == 1 else ", ".join(quoted[:-1]) + " or " + quoted[-1]
