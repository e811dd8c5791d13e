"""How the trade sets a formula, decided once for every language of print.

The layout walks the tree and asks a `Setter` (MathML, Typst, LaTeX) for fractions, roots, powers. With `texts` it
sets printed values in place of symbols: "45 kW" for P_2.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Protocol

from calcbook.records.notation import notation
from calcbook.records.printed import MINUS
from calcbook.records.written.tree import (
    CONSTANTS,
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

#: label of a line -> its value as printed, or the values of the keyed lines it stands for
Texts = Mapping[str, str | Sequence[str]]

_ARROWS = {"<=": "≤", ">=": "≥", "<": "<", ">": ">"}
_UPRIGHT = {
    "ln": "ln", "log10": "lg", "sin": "sin", "cos": "cos", "tan": "tan", "asin": "arcsin", "acos": "arccos",
    "atan": "arctan", "atan2": "arctan2", "min": "min", "max": "max",
}  # fmt: skip
_MOST_TERMS = 6


class Setter(Protocol):
    """The primitives of one language of print; every argument but `text`, `label`, `sign` is already set."""

    def row(self, parts: Sequence[str]) -> str: ...  # noqa: D102 - primitives are named for what they set
    def symbol(self, label: str) -> str: ...  # noqa: D102
    def value(self, text: str, label: str) -> str: ...  # noqa: D102
    def number(self, text: str) -> str: ...  # noqa: D102
    def sign(self, sign: str) -> str: ...  # noqa: D102
    def upright(self, text: str) -> str: ...  # noqa: D102
    def fraction(self, above: str, below: str) -> str: ...  # noqa: D102
    def root(self, body: str) -> str: ...  # noqa: D102
    def power(self, base: str, exponent: str) -> str: ...  # noqa: D102
    def fence(self, left: str, body: str, right: str) -> str: ...  # noqa: D102
    def below(self, operator: str, under: str, over: str) -> str: ...  # noqa: D102
    def cases(self, first: str, condition: str, second: str) -> str: ...  # noqa: D102


class Layout:
    """Sets one tree with one setter, with symbols or with values."""

    def __init__(self, setter: Setter, texts: Texts | None = None) -> None:
        self.setter = setter
        self.texts = texts

    def of(self, node: Node) -> str:
        """A node as it stands in a formula."""
        setter = self.setter
        match node:
            case Number(text):
                return setter.number(text)
            case Symbol():
                return self.symbol(node)
            case Bracket(body):
                return setter.fence("(", self.of(body), ")")
            case Negative(body):
                return setter.row([setter.sign(MINUS), self.operand(body)])
            case Binary("/", above, below):
                return setter.fraction(self.bare(above), self.bare(below))
            case Binary("^", base, exponent):
                return setter.power(self.base(base), self.bare(exponent))
            case Binary("*", left, right):
                return setter.row([self.of(left), *self.times(right), self.operand(right)])
            case Binary(operator, left, right):
                sign = MINUS if operator == "-" else operator
                return setter.row([self.of(left), setter.sign(sign), self.operand(right)])
            case Comparison(operator, left, right):
                return setter.row([self.of(left), setter.sign(_ARROWS[operator]), self.of(right)])
            case Call(function, arguments):
                return self.call(function, arguments)

    def symbol(self, symbol: Symbol) -> str:
        """A symbol, or the value that stands for it."""
        label = write(symbol)
        if self.texts is None or label not in self.texts:
            return self.setter.sign("π") if symbol.name in CONSTANTS else self.setter.symbol(label)
        text = self.texts[label]
        return self.setter.value(text if isinstance(text, str) else ", ".join(text), label)

    def bare(self, node: Node) -> str:
        """A node where a fraction bar, root or exponent already groups it: outer brackets go."""
        return self.of(node.body if isinstance(node, Bracket) else node)

    def operand(self, node: Node) -> str:
        """A right-hand operand: a negative value and the terms of a sum get brackets."""
        set_ = self.of(node)
        if isinstance(node, Negative) or self.is_negative_value(node) or self.is_several_terms(node):
            return self.setter.fence("(", set_, ")")
        return set_

    def base(self, node: Node) -> str:
        """What stands under a power: values with units, named functions and fractions get brackets."""
        is_value = isinstance(node, Symbol) and self.texts is not None and write(node) in self.texts
        is_function = isinstance(node, Symbol) and node.name in notation() and bool(notation()[node.name].function)
        if is_value or is_function or isinstance(node, Call):
            return self.setter.fence("(", self.of(node), ")")
        return self.of(node)

    def is_several_terms(self, node: Node) -> bool:
        """Whether a sum is set as the values of several lines."""
        if not (isinstance(node, Call) and node.function == "sum" and self.texts is not None):
            return False
        found = (self.texts.get(write(symbol), "") for symbol in symbols_of(node))
        return any(not isinstance(texts, str) and len(texts) > 1 for texts in found)

    def is_negative_value(self, node: Node) -> bool:
        """Whether a symbol stands for a value printed with a minus sign."""
        text = self.texts.get(write(node)) if self.texts is not None and isinstance(node, Symbol) else None
        return isinstance(text, str) and text.startswith(MINUS)

    def times(self, right: Node) -> list[str]:
        """Symbols stand side by side as factors; a dot parts values, and numbers that would run together."""
        first = right
        while isinstance(first, Binary) and first.operator in ("*", "^"):
            first = first.left
        needs_dot = self.texts is not None or isinstance(first, Number)
        return [self.setter.sign("·")] if needs_dot else []

    def call(self, function: str, arguments: tuple[Node, ...]) -> str:
        """A function as it stands on paper."""
        setter = self.setter
        match function:
            case "sqrt":
                return setter.root(self.bare(arguments[0]))
            case "hypot":
                squares = [setter.power(self.grouped(part), setter.number("2")) for part in arguments]
                return setter.root(setter.row(_joined(squares, setter.sign("+"))))
            case "abs":
                return setter.fence("|", self.bare(arguments[0]), "|")
            case "exp":
                return setter.power(setter.upright("e"), self.bare(arguments[0]))
            case "choose":
                condition, first, second = (self.of(part) for part in arguments)
                return setter.cases(first, condition, second)
            case "sum":
                return self.sum(arguments[0])
            case "integral":
                body, variable, low, high = (self.of(part) for part in arguments)
                whole = setter.below("∫", low, high)
                return setter.row([whole, body, setter.upright("d"), variable])
        inner = setter.row(_joined([self.bare(part) for part in arguments], setter.sign(",")))
        return setter.row([setter.upright(_UPRIGHT[function]), setter.fence("(", inner, ")")])

    def grouped(self, node: Node) -> str:
        """An argument that goes under a power."""
        set_ = self.base(node)
        return self.setter.fence("(", set_, ")") if isinstance(node, Binary | Negative) else set_

    def sum(self, body: Node) -> str:
        """A sum over keyed lines: the sign with the general term, or the terms themselves."""
        setter = self.setter
        texts_of = self.texts or {}
        found = {label: texts_of.get(label, "") for label in map(write, symbols_of(body))}
        keyed = {label: texts for label, texts in found.items() if not isinstance(texts, str)}
        if not keyed or not all(keyed.values()):
            return setter.row([setter.below("∑", "", ""), self.of(body)])
        count = min(len(texts) for texts in keyed.values())
        shown = range(count) if count <= _MOST_TERMS else [0, 1, count - 1]
        terms = []
        for index in shown:
            texts = {**texts_of, **{label: values[index] for label, values in keyed.items()}}
            terms.append(Layout(setter, texts).operand(body))
        if count > _MOST_TERMS:
            terms.insert(2, setter.sign("…"))
        return setter.row(_joined(terms, setter.sign("+")))


def _joined(parts: Sequence[str], sign: str) -> list[str]:
    joined = [parts[0]]
    for part in parts[1:]:
        joined += [sign, part]
    return joined
