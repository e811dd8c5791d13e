"""Inputs for formulas: drawn inside the ranges of the notation list, or given as texts."""

from __future__ import annotations

import math
from decimal import Decimal
from typing import Any

from hypothesis import strategies as st

from calcbook.formulas.formula import Formula
from calcbook.records.dimension import coherent_number
from calcbook.records.notation import Name, named
from calcbook.records.quantity import Quantity, read_quantity
from calcbook.records.written.evaluate import Arithmetic, evaluate_with, mpmath_arithmetic
from calcbook.records.written.tree import Call, symbols_of, walk

PRECISE = mpmath_arithmetic(30)
Drawn = dict[str, Quantity | list[Quantity]]


def numbers(entry: Name) -> st.SearchStrategy[float]:
    """Numbers inside the range of an entry, in its own unit, of a size that occurs in the trade."""
    if entry.kind == "count":
        return st.integers(1, 20).map(float)
    if not entry.range:
        return st.floats(-1e4, 1e4).filter(lambda number: number == 0 or abs(number) > 1e-6)
    if entry.range.startswith(">"):
        return st.floats(max(1e-3, float(entry.range.lstrip(">="))), 1e4)
    low, high = (float(part) for part in entry.range[1:-1].split(","))
    return st.floats(low, high, exclude_min=entry.range[0] == "(", exclude_max=entry.range[-1] == ")").filter(
        lambda number: number == 0 or abs(number) > 1e-6
    )


def summed(formula: Formula) -> set[str]:
    """The symbols of a formula that stand for several lines: those inside sum( )."""
    sums = (node for node in walk(formula.tree) if isinstance(node, Call) and node.function == "sum")
    return {symbol.name for node in sums for symbol in symbols_of(node)}


def inputs(formula: Formula) -> st.SearchStrategy[Drawn]:
    """Quantities for every symbol of a formula, one to four in a sum, each physical together with the others."""
    drawn: dict[str, st.SearchStrategy[Any]] = {}
    for entry in formula.symbols:
        one = numbers(entry).map(_quantity(entry))
        drawn[entry.name] = st.lists(one, min_size=1, max_size=4) if entry.name in summed(formula) else one
    return st.fixed_dictionaries(drawn).map(_bearable).filter(_is_physical)


def _quantity(entry: Name) -> Any:
    return lambda number: Quantity(number, entry.unit, entry.kind)


def _bearable(drawn: Drawn) -> Drawn:
    """A current through an impedance is lowered until the source can feed it: a fifth at most."""
    source = drawn.get("U_s", drawn.get("U_sN"))
    values = [source, *(drawn.get(name) for name in ("I_B", "R", "X"))]
    if not all(isinstance(value, Quantity) for value in values):
        return drawn
    voltage, current, resistance, reactance = (value.number for value in values if isinstance(value, Quantity))
    number = min(current, 0.2 * voltage / math.hypot(resistance, reactance))
    return {**drawn, "I_B": Quantity(number, "A", "line_current")}


def _is_physical(drawn: Drawn) -> bool:
    ambient, greatest = drawn.get("theta_a"), drawn.get("theta_max")
    if not (isinstance(ambient, Quantity) and isinstance(greatest, Quantity)):
        return True
    return ambient.number < greatest.number - 0.1


def result(formula: Formula, **texts: str) -> float:
    """A formula's result in the unit of the notation list, from texts such as "45 kW"."""
    return formula.evaluate({name: read_quantity(text, named(name).kind) for name, text in texts.items()})[0].number


def coherent(formula: Formula, drawn: Drawn) -> dict[str, float | list[float]]:
    """The numbers a formula is evaluated with."""
    return {
        name: coherent_number(bound) if isinstance(bound, Quantity) else [coherent_number(one) for one in bound]
        for name, bound in drawn.items()
    }


def precise_result(formula: Formula, drawn: Drawn, arithmetic: Arithmetic = PRECISE) -> float:
    """The written form at 30 digits, in coherent units."""
    values = {
        name: _exact(arithmetic, bound) if isinstance(bound, float) else [_exact(arithmetic, one) for one in bound]
        for name, bound in coherent(formula, drawn).items()
    }
    return float(evaluate_with(arithmetic, formula.tree, values))


def _exact(arithmetic: Arithmetic, number: float) -> Any:
    return arithmetic.number(str(Decimal(number)))
