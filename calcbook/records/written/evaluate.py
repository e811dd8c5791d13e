"""The number of a written form, by floats or by mpmath, and how far rounding may move it."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from calcbook.errors import EvaluationFault
from calcbook.records.written.tree import (
    CONSTANTS,
    LARGEST_EXPONENT,
    Binary,
    Bracket,
    Call,
    Comparison,
    Negative,
    Node,
    Number,
    Symbol,
    symbols_of,
    write,
)

#: name of a symbol -> its number, or the numbers of the keyed lines it stands for
Values = Mapping[str, float | Sequence[float]]


@dataclass(frozen=True)
class Arithmetic:
    """The functions a written form is evaluated with: Python floats, or another kind of number."""

    number: Callable[[str], Any]
    pi: Any
    functions: Mapping[str, Callable[..., Any]]


FLOATS = Arithmetic(
    number=float,
    pi=CONSTANTS["pi"],
    functions={
        "sqrt": math.sqrt, "abs": abs, "exp": math.exp, "ln": math.log, "log10": math.log10,
        "sin": math.sin, "cos": math.cos, "tan": math.tan, "asin": math.asin, "acos": math.acos, "atan": math.atan,
        "atan2": math.atan2, "hypot": math.hypot,
        "min": lambda *parts: min(parts), "max": lambda *parts: max(parts),
    },
)  # fmt: skip


def evaluate(node: Node, values: Values) -> float:
    """The number of a tree, in coherent units.

    Parameters: `values` by symbol name (keyed symbols by "P[C-014]"), in coherent units; a sequence where the symbol
    stands for several lines, which only `sum` may use. Raises EvaluationFault where there is no finite real number.
    """
    return float(evaluate_with(FLOATS, node, values))


def evaluate_with(arithmetic: Arithmetic, node: Node, values: Values) -> Any:
    """The same with another arithmetic, e.g. `mpmath_arithmetic()`."""
    try:
        result = _Evaluator(arithmetic, values).of(node)
        if isinstance(result, complex) or not math.isfinite(result):
            raise EvaluationFault(write(node), "no finite real value")
    except (ValueError, ZeroDivisionError, OverflowError, TypeError) as error:
        raise EvaluationFault(write(node), f"no finite real value ({error})") from error
    return result


def mpmath_arithmetic(digits: int = 30) -> Arithmetic:
    """Numbers of `digits` decimal digits."""
    import mpmath  # imported when asked for: reading and printing need no algebra

    context = mpmath.MPContext()
    context.dps = digits
    names = ("sqrt", "exp", "ln", "log10", "sin", "cos", "tan", "asin", "acos", "atan", "atan2")
    functions: dict[str, Callable[..., Any]] = {name: getattr(context, name) for name in names}
    functions |= {"abs": abs, "min": FLOATS.functions["min"], "max": FLOATS.functions["max"]}
    functions["hypot"] = lambda *parts: context.sqrt(sum(part * part for part in parts))
    return Arithmetic(number=context.mpf, pi=context.pi, functions=functions)


class _Evaluator:
    def __init__(self, arithmetic: Arithmetic, values: Values) -> None:
        self.arithmetic = arithmetic
        self.values = values

    def of(self, node: Node) -> Any:
        match node:
            case Number(text):
                return self.arithmetic.number(text)
            case Symbol():
                return self.symbol(node)
            case Negative(body):
                return -self.of(body)
            case Bracket(body):
                return self.of(body)
            case Binary(operator, left, right):
                return self.binary(operator, self.of(left), self.of(right))
            case Comparison(operator, left, right):
                return compare(operator, self.of(left), self.of(right))
            case Call("choose", (condition, first, second)):
                return self.of(first) if self.of(condition) else self.of(second)
            case Call("sum", (body,)):
                return self.sum(body)
            case Call("integral", _):
                raise ValueError("an integral stands in derivations only")
            case Call(function, arguments):
                return self.arithmetic.functions[function](*(self.of(argument) for argument in arguments))

    def symbol(self, symbol: Symbol) -> Any:
        if symbol.name in CONSTANTS:
            return self.arithmetic.pi
        name = write(symbol)
        if name not in self.values:
            raise ValueError(f"{name} has no value")
        value = self.values[name]
        if isinstance(value, Sequence):
            raise ValueError(f"{name} stands for several lines, outside of sum( )")
        return value

    def binary(self, operator: str, left: Any, right: Any) -> Any:
        match operator:
            case "+":
                return left + right
            case "-":
                return left - right
            case "*":
                return left * right
            case "/":
                return left / right
        if abs(right) > LARGEST_EXPONENT:
            raise ValueError(f"exponent {right}; allowed is {LARGEST_EXPONENT}")
        return left**right

    def sum(self, body: Node) -> Any:
        bound = ((write(symbol), self.values.get(write(symbol))) for symbol in symbols_of(body))
        keyed = {name: values for name, values in bound if isinstance(values, Sequence)}
        lengths = {len(values) for values in keyed.values()}
        if len(lengths) != 1:
            raise ValueError("sum( ) needs symbols that stand for the same lines")
        total = self.arithmetic.number("0")
        for index in range(lengths.pop()):
            single = {name: values[index] for name, values in keyed.items()}
            total = total + _Evaluator(self.arithmetic, {**self.values, **single}).of(body)
        return total


def compare(operator: str, left: float, right: float) -> bool:
    """Whether a comparison of the grammar holds."""
    return {"<=": left <= right, ">=": left >= right, "<": left < right, ">": left > right}[operator]


def rounding_scale(node: Node, values: Values) -> float:
    """How far the result moves when every number and operation in the form is off by one part in one.

    Two evaluations of one formula may differ by this times the float's rounding, and by no more: where terms nearly
    cancel, the scale is the size of the larger term and not of their difference. First-order error propagation by
    finite change of each input, summed.
    """
    result = evaluate(node, values)
    scale = abs(result)
    step = 1e-7
    for name in (write(symbol) for symbol in symbols_of(node)):
        value = values[name]
        moved = [part * (1 + step) for part in value] if isinstance(value, Sequence) else value * (1 + step)
        try:
            scale += abs(evaluate(node, {**values, name: moved}) - result) / step
        except EvaluationFault:  # at the edge of the domain, e.g. acos(1): there the other inputs set the scale
            continue
    return scale
