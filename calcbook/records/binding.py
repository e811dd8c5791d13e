"""From the values a template binds to what a line records: labels, symbols, texts."""

from __future__ import annotations

from collections.abc import Sequence

from calcbook.errors import DimensionFault
from calcbook.records.dimension import coherent_number, in_unit
from calcbook.records.line import Argument, Binding
from calcbook.records.notation import Name, out_of_range
from calcbook.records.quantity import Quantity
from calcbook.records.value import Choice, Value
from calcbook.records.written.tree import Symbol

#: what a symbol of a formula is bound to: a line, or several keyed lines in a sum, min or max
Bound = Value | Sequence[Value]


def keyed(name: str, key: str) -> str:
    """The label of a line: its name, with its key where it has one."""
    return f"{name}[{key}]" if key else name


def argument(name: str, value: Value | Choice | str) -> Argument:
    """One key of a look-up, bound to a line or to a fixed word."""
    if isinstance(value, str):
        return Argument(name=name, rests_on="", text=value)
    quantity = value.quantity if isinstance(value, Value) else None
    return Argument(name=name, rests_on=value.label, text=value.text, quantity=quantity)


def quantities(bound: Bound) -> Quantity | list[Quantity]:
    """The quantity of what is bound, or those of several lines."""
    return bound.quantity if isinstance(bound, Value) else [value.quantity for value in bound]


def symbol_of(bound: Bound) -> Symbol:
    """The symbol printed for what is bound: the line's own, or the name that several keyed lines share."""
    if isinstance(bound, Value):
        name, _, key = bound.label.partition("[")
        return Symbol(name, key.rstrip("]"))
    return Symbol(bound[0].label.partition("[")[0])


def binding(label: str, bound: Bound) -> Binding:
    """The record of one symbol of a written form: the lines it rests on and their values as printed."""
    values = (bound,) if isinstance(bound, Value) else tuple(bound)
    return Binding(
        symbol=label, rests_on=tuple(value.label for value in values), texts=tuple(value.text for value in values)
    )


def check_range(entry: Name, quantity: Quantity) -> None:
    """Raise DimensionFault where a quantity lies outside the range of its name."""
    fault = out_of_range(entry, in_unit(coherent_number(quantity), entry.unit, entry.kind))
    if fault:
        raise DimensionFault(fault)
