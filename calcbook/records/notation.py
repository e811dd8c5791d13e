"""The notation list: every symbol once, with its print, kind, unit, range, description and template parameter."""

from __future__ import annotations

import csv
from dataclasses import dataclass
from functools import cache
from importlib.resources import files

from calcbook.errors import DimensionFault, nearest
from calcbook.records.quantity import Quantity


@dataclass(frozen=True)
class Name:
    """One entry: `function` is printed before the letter (cos φ); `subscript` is set upright."""

    name: str
    function: str
    letter: str
    subscript: str
    kind: str
    unit: str
    range: str
    parameter: str
    description: str


@cache
def notation() -> dict[str, Name]:
    """The list by name, in the order of the file."""
    text = files("calcbook.records").joinpath("notation.csv").read_text("utf-8")
    return {row["name"]: Name(**row) for row in csv.DictReader(text.splitlines())}


def named(name: str) -> Name:
    """One entry; DimensionFault with the nearest name where there is none."""
    if name not in notation():
        raise DimensionFault(f'"{name}" is not in the notation list; {nearest(name, notation())}')
    return notation()[name]


@cache
def names_of_parameter(parameter: str) -> tuple[Name, ...]:
    """The entries a template parameter may stand for: rated_voltage is U_r or, line to neutral, U_rN."""
    return tuple(entry for entry in notation().values() if entry.parameter == parameter)


def out_of_range(entry: Name, quantity: Quantity) -> str:
    """What is wrong with a number outside the entry's range, in the entry's own unit; "" where it is inside."""
    if within(entry.range, quantity.number):
        return ""
    return f"{entry.name} is {quantity.number:g}; allowed is {range_in_words(entry.range)}"


def range_in_words(text: str) -> str:
    """A range as it reads in a sentence."""
    if text.startswith((">=", "<=")):
        return f"{text[2:]} or {'more' if text[0] == '>' else 'less'}"
    if text.startswith(">"):
        return f"more than {text[1:]}"
    low, high = text[1:-1].split(",")
    return f"{'from' if text[0] == '[' else 'above'} {low} {'to' if text[-1] == ']' else 'to below'} {high}"


def within(text: str, number: float) -> bool:
    """Whether a number is inside a range: ">0", ">=1", "(0,1]"; "" holds every number."""
    if not text:
        return True
    if text.startswith(">="):
        return number >= float(text[2:])
    if text.startswith(">"):
        return number > float(text[1:])
    low, high = (float(part) for part in text[1:-1].split(","))
    above = number >= low if text[0] == "[" else number > low
    below = number <= high if text[-1] == "]" else number < high
    return above and below
