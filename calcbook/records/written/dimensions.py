"""The dimension of a written form: sums of like with like, pure numbers in functions, temperatures only differenced."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from calcbook.errors import DimensionFault
from calcbook.records.dimension import dimension
from calcbook.records.units import UNITS
from calcbook.records.written.tree import Binary, Bracket, Call, Comparison, Negative, Node, Number, Symbol, write


@dataclass(frozen=True)
class _Sort:
    """A dimension; `point` marks a temperature on its scale, which only differences make a plain quantity."""

    dimension: Any
    point: bool = False


def check_dimensions(node: Node, units: Mapping[str, str], result_unit: str) -> None:
    """Check a tree against the units of its symbols (by name) and of its result.

    Raises DimensionFault naming the part whose units do not fit.
    """
    if isinstance(node, Number) and node.value == 0:
        return  # nothing is nothing in every unit
    found = _Checker(units).of(node)
    wanted = _sort(result_unit)
    if found != wanted:
        raise DimensionFault(
            f"{write(node)}: the result has dimension {found.dimension}, "
            f"its unit {UNITS[result_unit].printed or '1'} has {wanted.dimension}"
        )


def _sort(unit: str) -> _Sort:
    return _Sort(dimension(unit), unit == "degC")


class _Checker:
    def __init__(self, units: Mapping[str, str]) -> None:
        self.units = units
        self.pure = _Sort(dimension("1"))

    def of(self, node: Node) -> _Sort:
        match node:
            case Number() | Symbol("pi", ""):
                return self.pure
            case Symbol(name):
                return _sort(self.units[name])
            case Bracket(body) | Negative(body):
                return self.of(body)
            case Binary("+" | "-" as operator, left, right):
                return self.sum(node, operator, self.of(left), self.of(right))
            case Binary("*" | "/" as operator, left, right):
                first, second = self.plain(left), self.plain(right)
                return _Sort(first * second if operator == "*" else first / second)
            case Binary(_, base, exponent):
                return self.power(node, base, exponent)
            case Comparison(_, left, right):
                return self.alike(node, (left, right))
            case Call(function, arguments):
                return self.call(node, function, arguments)

    def plain(self, node: Node) -> Any:
        sort = self.of(node)
        if sort.point:
            raise DimensionFault(f"{write(node)}: a temperature on its scale stands in differences only")
        return sort.dimension

    def sum(self, node: Node, operator: str, left: _Sort, right: _Sort) -> _Sort:
        if left.dimension != right.dimension:
            raise DimensionFault(f"{write(node)}: {left.dimension} and {right.dimension} cannot be added")
        if left.point and right.point:
            if operator == "-":
                return _Sort(left.dimension)
            raise DimensionFault(f"{write(node)}: two temperatures on their scale cannot be added")
        if right.point and operator == "-":
            raise DimensionFault(f"{write(node)}: a temperature cannot be taken from a difference")
        return _Sort(left.dimension, left.point or right.point)

    def power(self, node: Node, base: Node, exponent: Node) -> _Sort:
        sort = self.plain(base)
        inner = exponent.body if isinstance(exponent, Negative | Bracket) else exponent
        sign = -1 if isinstance(exponent, Negative) else 1
        if isinstance(inner, Number):
            return _Sort(sort ** (sign * inner.value))
        if sort != self.pure.dimension or self.plain(exponent) != self.pure.dimension:
            raise DimensionFault(f"{write(node)}: only a number may be raised to a power that is not written out")
        return self.pure

    def alike(self, node: Node, arguments: tuple[Node, ...]) -> _Sort:
        sorts = [self.of(argument) for argument in arguments]
        if any(sort != sorts[0] for sort in sorts):
            raise DimensionFault(f"{write(node)}: its parts have different dimensions")
        return sorts[0]

    def call(self, node: Node, function: str, arguments: tuple[Node, ...]) -> _Sort:
        match function:
            case "sqrt":
                return _Sort(self.plain(arguments[0]) ** 0.5)
            case "hypot" | "min" | "max":
                return self.alike(node, arguments)
            case "abs" | "sum":
                return self.of(arguments[0])
            case "choose":
                self.of(arguments[0])
                return self.alike(node, arguments[1:])
            case "integral":
                return _Sort(self.plain(arguments[0]) * self.plain(arguments[1]))
            case "atan2":
                self.alike(node, arguments)
                return self.pure
        if self.plain(arguments[0]) != self.pure.dimension:
            raise DimensionFault(f"{write(node)}: {function} takes a pure number")
        return self.pure
