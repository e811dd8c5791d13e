"""The sympy expression of a written form, and the function that its numbers come from."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from typing import Any

import sympy

from calcbook.errors import WrittenFormFault
from calcbook.records.notation import notation
from calcbook.records.written.tree import (
    Binary,
    Bracket,
    Call,
    Comparison,
    Negative,
    Node,
    Number,
    Symbol,
    parse,
    symbols_of,
    write,
)

_FUNCTIONS: dict[str, Callable[..., Any]] = {
    "sqrt": sympy.sqrt, "abs": sympy.Abs, "exp": sympy.exp, "ln": sympy.log,
    "log10": lambda x: sympy.log(x) / sympy.log(10),
    "sin": sympy.sin, "cos": sympy.cos, "tan": sympy.tan, "asin": sympy.asin, "acos": sympy.acos, "atan": sympy.atan,
    "atan2": sympy.atan2, "min": sympy.Min, "max": sympy.Max,
    "hypot": lambda *parts: sympy.sqrt(sum(part**2 for part in parts)),
    "choose": lambda condition, first, second: sympy.Piecewise((first, condition), (second, True)),
    "integral": lambda body, variable, low, high: sympy.Integral(body, (variable, low, high)),
}  # fmt: skip
_RELATIONS = {"<=": sympy.Le, ">=": sympy.Ge, "<": sympy.Lt, ">": sympy.Gt}


@cache
def symbol(label: str) -> Any:
    """The sympy symbol of a label, real, and positive where the notation's range says so."""
    entry = notation().get(label.partition("[")[0])
    positive = entry is not None and (entry.range in (">0", ">=1") or entry.range.startswith("(0"))
    return sympy.Symbol(label, real=True, positive=positive or None)


def expression(form: Node | str) -> Any:
    """The sympy expression of a tree or written form. `sum` has none: it runs over lines, not over algebra."""
    node = parse(form) if isinstance(form, str) else form
    match node:
        case Number(text):
            return sympy.Integer(text) if text.isdigit() else sympy.Rational(text)
        case Symbol("pi", ""):
            return sympy.pi
        case Symbol():
            return symbol(write(node))
        case Negative(body):
            return -expression(body)
        case Bracket(body):
            return expression(body)
        case Binary(operator, left, right):
            return _binary(operator, expression(left), expression(right))
        case Comparison(operator, left, right):
            return _RELATIONS[operator](expression(left), expression(right))
        case Call("sum", _):
            raise WrittenFormFault(write(node), "a sum over lines has no algebra; step by step it is added by floats")
        case Call(function, arguments):
            return _FUNCTIONS[function](*(expression(argument) for argument in arguments))


def _binary(operator: str, left: Any, right: Any) -> Any:
    match operator:
        case "+":
            return left + right
        case "-":
            return left - right
        case "*":
            return left * right
        case "/":
            return left / right
    return left**right


@cache
def number_function(form: Node | str) -> Callable[..., float]:
    """The expression as a function of floats, by Python's `math`, its arguments in the order of `symbols_of`.

    numpy would differ in the last bit between processors. The text that sympy compiles is made by sympy from the
    expression of a form that was parsed and bounded; no text of an inputs file reaches it.
    """
    node = parse(form) if isinstance(form, str) else form
    arguments = [symbol(write(part)) for part in symbols_of(node)]
    function: Callable[..., float] = sympy.lambdify(arguments, expression(node), modules="math")
    return function
