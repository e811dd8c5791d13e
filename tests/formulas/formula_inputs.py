"""Inputs for formulas: drawn inside the ranges of the notation list, or given as texts."""

from __future__ import annotations

from decimal import Decimal
from typing import Any

from hypothesis import strategies as st

from calcbook.formulas.formula import Formula
from calcbook.records.dimension import coherent_number
from calcbook.records.notation import Name, named
from calcbook.records.quantity import Quantity, read_quantity
from calcbook.records.written.evaluate import Arithmetic, evaluate_with, mpmath_arithmetic

PRECISE = mpmath_arithmetic(30)


def numbers(entry: Name) -> st.SearchStrategy[float]:
    """Numbers inside the range of an entry, in its own unit, of a size that occurs in the trade."""
    if entry.kind == "count":
        return st.integers(1, 20).map(float)
    if not entry.range:
        return st.floats(-1e4, 1e4)
    if entry.range.startswith(">"):
        return st.floats(max(1e-3, float(entry.range.lstrip(">="))), 1e4)
    low, high = (float(part) for part in entry.range[1:-1].split(","))
    return st.floats(low, high, exclude_min=entry.range[0] == "(", exclude_max=entry.range[-1] == ")").filter(
        lambda number: number == 0 or abs(number) > 1e-6
    )


def inputs(formula: Formula) -> st.SearchStrategy[dict[str, Quantity]]:
    """Quantities for every symbol of a formula, the conductor warmer than its surroundings."""
    drawn = {entry.name: numbers(entry).map(_quantity(entry)) for entry in formula.symbols}
    return st.fixed_dictionaries(drawn).filter(_is_physical)


def _quantity(entry: Name) -> Any:
    return lambda number: Quantity(number, entry.unit, entry.kind)


def _is_physical(drawn: dict[str, Quantity]) -> bool:
    if not {"theta_max", "theta_a"} <= set(drawn):
        return True
    return drawn["theta_a"].number < drawn["theta_max"].number - 0.1


def result(formula: Formula, **texts: str) -> float:
    """A formula's result in the unit of the notation list, from texts such as "45 kW"."""
    return formula.evaluate({name: read_quantity(text, named(name).kind) for name, text in texts.items()})[0].number


def coherent(formula: Formula, drawn: dict[str, Quantity]) -> dict[str, float]:
    """The numbers a formula is evaluated with."""
    return {entry.name: coherent_number(drawn[entry.name]) for entry in formula.symbols}


def precise_result(formula: Formula, drawn: dict[str, Quantity], arithmetic: Arithmetic = PRECISE) -> float:
    """The written form at 30 digits, in coherent units."""
    values = {name: arithmetic.number(str(Decimal(number))) for name, number in coherent(formula, drawn).items()}
    return float(evaluate_with(arithmetic, formula.tree, values))
