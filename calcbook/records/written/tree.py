"""The grammar of written forms, read into a tree of frozen nodes.

    form     = sum
    sum      = product { ("+" | "-") product }
    product  = signed { ("*" | "/") signed }
    signed   = [ "-" ] power
    power    = atom [ "^" exponent ]
    exponent = [ "-" ] number | symbol | "(" form ")"
    atom     = number | symbol | function "(" form { "," form } ")" | "(" form ")"
    symbol   = letter { letter | digit | "_" } [ "[" key "]" ]

Functions are listed in FUNCTIONS. `choose(a <= b, p, q)` is p where the comparison holds, else q. `sum(x)` adds x
over the lines that its keyed symbols stand for; `min(x)` and `max(x)` are written out over them.
`integral(x, t, a, b)` is for derivations and has no number.
Everything is bounded: length, depth, number of nodes, size of numbers and exponents; only ASCII is read.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace

from calcbook.errors import WrittenFormFault, nearest

LONGEST_TEXT = 2000
DEEPEST = 40
MOST_NODES = 600
LARGEST_NUMBER = 1e30
LARGEST_EXPONENT = 12

# name -> least and greatest count of arguments
FUNCTIONS: dict[str, tuple[int, int]] = {
    "sqrt": (1, 1), "abs": (1, 1), "exp": (1, 1), "ln": (1, 1), "log10": (1, 1),
    "sin": (1, 1), "cos": (1, 1), "tan": (1, 1), "asin": (1, 1), "acos": (1, 1), "atan": (1, 1), "atan2": (2, 2),
    "hypot": (2, 8), "min": (1, 16), "max": (1, 16), "choose": (3, 3), "sum": (1, 1), "integral": (4, 4),
}  # fmt: skip
CONSTANTS = {"pi": math.pi}
COMPARISONS = ("<=", ">=", "<", ">")


@dataclass(frozen=True)
class Number:
    """A number as written; `text` keeps its digits for print."""

    text: str

    @property
    def value(self) -> float:
        """The number as a float."""
        return float(self.text)


@dataclass(frozen=True)
class Symbol:
    """A symbol of the notation list, with the key of a repeated line where it has one: P[C-014]."""

    name: str
    key: str = ""


@dataclass(frozen=True)
class Negative:
    """Minus something."""

    body: Node


@dataclass(frozen=True)
class Binary:
    """Two operands joined by + - * / or ^."""

    operator: str
    left: Node
    right: Node


@dataclass(frozen=True)
class Bracket:
    """Brackets that the author wrote; kept, because they are part of how the trade writes the formula."""

    body: Node


@dataclass(frozen=True)
class Comparison:
    """The condition of `choose`."""

    operator: str
    left: Node
    right: Node


@dataclass(frozen=True)
class Call:
    """A function of FUNCTIONS with its arguments."""

    function: str
    arguments: tuple[Node, ...]


Node = Number | Symbol | Negative | Binary | Bracket | Comparison | Call

_TOKEN = re.compile(
    r"\s*(?:(?P<number>\d+(?:\.\d+)?(?:[eE][+-]?\d+)?)|(?P<name>[A-Za-z][A-Za-z0-9_]*)"
    r"|(?P<key>\[[^\[\]\s]{1,64}\])|(?P<sign><=|>=|[-+*/^(),<>]))",
    re.ASCII,
)

_SPACES = " \t\n\r\f\v"  # what the token pattern skips: no other kind of space is part of the grammar


@dataclass(frozen=True)
class _Token:
    sort: str
    text: str
    position: int


def parse(text: str) -> Node:
    """Read a written form into its tree.

    Raises WrittenFormFault, with the place, for anything outside the grammar or its bounds.
    Example: parse("P_2 / (sqrt(3)*U_rM*eta*cos_phi)").
    """
    if len(text) > LONGEST_TEXT:
        raise WrittenFormFault(text, f"{len(text)} characters; allowed are {LONGEST_TEXT}")
    parser = _Parser(text)
    node = parser.sum_()
    parser.expect_end()
    return node


class _Parser:
    """Recursive descent with a bounded depth."""

    def __init__(self, text: str) -> None:
        self.text = text
        self.tokens = list(_tokens(text))
        self.at = 0
        self.depth = 0
        self.nodes = 0

    def fault(self, message: str) -> WrittenFormFault:
        return WrittenFormFault(self.text, message, self.tokens[self.at].position)

    def peek(self) -> str:
        return self.tokens[self.at].text

    def take(self) -> _Token:
        token = self.tokens[self.at]
        self.at += 1
        self.nodes += 1
        if self.nodes > MOST_NODES:
            raise self.fault(f"more than {MOST_NODES} parts")
        return token

    def expect(self, sign: str) -> None:
        if self.peek() != sign:
            raise self.fault(f'"{sign}" is missing')
        self.take()

    def expect_end(self) -> None:
        if self.tokens[self.at].sort != "end":
            raise self.fault(f'"{_short(self.peek())}" does not belong here')

    def sum_(self) -> Node:
        self.depth += 1
        if self.depth > DEEPEST:
            raise self.fault(f"brackets deeper than {DEEPEST}")
        node = self.product()
        while self.peek() in ("+", "-"):
            node = Binary(self.take().text, node, self.product())
        self.depth -= 1
        return node

    def product(self) -> Node:
        node = self.signed()
        while self.peek() in ("*", "/"):
            node = Binary(self.take().text, node, self.signed())
        return node

    def signed(self) -> Node:
        if self.peek() == "-":
            self.take()
            return Negative(self.power())
        return self.power()

    def power(self) -> Node:
        base = self.atom()
        if self.peek() != "^":
            return base
        self.take()
        node = Binary("^", base, self.exponent())
        if self.peek() == "^":
            raise self.fault("a power of a power needs brackets")
        return node

    def exponent(self) -> Node:
        if self.peek() == "-":
            self.take()
            return Negative(self.bounded(self.atom()))
        return self.bounded(self.atom())

    def bounded(self, node: Node) -> Node:
        inner = node.body if isinstance(node, Bracket) else node
        if isinstance(inner, Number) and inner.value > LARGEST_EXPONENT:
            raise self.fault(f"exponent {_short(inner.text)}; allowed is {LARGEST_EXPONENT}")
        if any(isinstance(part, Binary) and part.operator == "^" for part in walk(inner)):
            raise self.fault("a power within an exponent")
        return node

    def atom(self) -> Node:
        token = self.take()
        if token.sort == "number":
            if not float(token.text) <= LARGEST_NUMBER:
                raise WrittenFormFault(self.text, f"number {_short(token.text)} is too large", token.position)
            return Number(token.text)
        if token.sort == "name":
            return self.call(token) if self.peek() == "(" else self.symbol(token)
        if token.text == "(":
            node = self.sum_()
            self.expect(")")
            return Bracket(node)
        found = f'"{_short(token.text)}"' if token.text else "the end"
        raise WrittenFormFault(self.text, f"{found} found where a value belongs", token.position)

    def symbol(self, token: _Token) -> Node:
        if token.text in FUNCTIONS:
            raise WrittenFormFault(self.text, f'function "{token.text}" needs brackets', token.position)
        if self.tokens[self.at].sort == "key":
            return Symbol(token.text, self.take().text[1:-1])
        return Symbol(token.text)

    def call(self, token: _Token) -> Node:
        if token.text not in FUNCTIONS:
            message = f'"{_short(token.text)}" is not a function; {nearest(token.text, FUNCTIONS)}'
            raise WrittenFormFault(self.text, message, token.position)
        self.expect("(")
        first = self.comparison() if token.text == "choose" else self.sum_()
        arguments = [first]
        while self.peek() == ",":
            self.take()
            arguments.append(self.sum_())
        self.expect(")")
        least, most = FUNCTIONS[token.text]
        if not least <= len(arguments) <= most:
            allowed = str(least) if least == most else f"{least} to {most}"
            message = f"{token.text} takes {allowed} values, got {len(arguments)}"
            raise WrittenFormFault(self.text, message, token.position)
        return Call(token.text, tuple(arguments))

    def comparison(self) -> Node:
        left = self.sum_()
        if self.peek() not in COMPARISONS:
            raise self.fault("choose needs a comparison first: choose(a <= b, p, q)")
        return Comparison(self.take().text, left, self.sum_())


def _short(text: str) -> str:
    """A part of a written form as a message quotes it."""
    return text if len(text) <= 24 else text[:21] + "..."


def _tokens(text: str) -> Iterator[_Token]:
    position = 0
    end = len(text.rstrip(_SPACES))
    while position < end:
        match = _TOKEN.match(text, position)
        if match is None:
            start = position + len(text[position:]) - len(text[position:].lstrip(_SPACES))
            raise WrittenFormFault(text, f"character {text[start]!r} is not part of the grammar", start)
        sort = match.lastgroup or "sign"
        yield _Token(sort, match[sort], match.start(sort))
        position = match.end()
    yield _Token("end", "", position)


def walk(node: Node) -> Iterator[Node]:
    """The node and everything below it, from left to right."""
    yield node
    match node:
        case Negative(body) | Bracket(body):
            yield from walk(body)
        case Binary(_, left, right) | Comparison(_, left, right):
            yield from walk(left)
            yield from walk(right)
        case Call(_, arguments):
            for argument in arguments:
                yield from walk(argument)


def symbols_of(node: Node) -> tuple[Symbol, ...]:
    """The symbols of a tree, each once, in the order in which they are written; pi is not one of them."""
    found = (part for part in walk(node) if isinstance(part, Symbol) and part.name not in CONSTANTS)
    return tuple(dict.fromkeys(found))


def rename(node: Node, names: dict[str, Symbol]) -> Node:
    """The same tree with symbols replaced: a formula's own symbols by those of the lines bound to them."""
    match node:
        case Symbol():
            return names.get(write(node), node)
        case Negative(body) | Bracket(body):
            return replace(node, body=rename(body, names))
        case Binary(_, left, right) | Comparison(_, left, right):
            return replace(node, left=rename(left, names), right=rename(right, names))
        case Call(_, arguments):
            return replace(node, arguments=tuple(rename(argument, names) for argument in arguments))
    return node


def expand_sums(node: Node, counts: dict[str, int]) -> Node:
    """The same tree with each sum( ) written out: its terms have the symbols P[0], P[1], ... for P of two lines.

    Parameters: `counts` by name of the symbols that stand for several lines, at least one line each.
    """
    match node:
        case Call("sum", (body,)):
            keyed = [symbol.name for symbol in symbols_of(body) if symbol.name in counts]
            terms = [
                Bracket(rename(body, {name: Symbol(name, str(index)) for name in keyed}))
                for index in range(counts[keyed[0]])
            ]
            total: Node = terms[0]
            for term in terms[1:]:
                total = Binary("+", total, term)
            return Bracket(total)
        case Negative(body) | Bracket(body):
            return replace(node, body=expand_sums(body, counts))
        case Binary(_, left, right) | Comparison(_, left, right):
            return replace(node, left=expand_sums(left, counts), right=expand_sums(right, counts))
        case Call(_, arguments):
            return replace(node, arguments=tuple(expand_sums(argument, counts) for argument in arguments))
    return node


def spread(node: Node, keyed: Mapping[str, Sequence[Symbol]]) -> Node:
    """The same tree with `min(x)` and `max(x)` written out over the lines that x stands for: min(x[P1], x[P2])."""
    match node:
        case Call("min" | "max", (Symbol(name, ""),)) if name in keyed:
            return replace(node, arguments=tuple(keyed[name]))
        case Negative(body) | Bracket(body):
            return replace(node, body=spread(body, keyed))
        case Binary(_, left, right) | Comparison(_, left, right):
            return replace(node, left=spread(left, keyed), right=spread(right, keyed))
        case Call(_, arguments):
            return replace(node, arguments=tuple(spread(argument, keyed) for argument in arguments))
    return node


_LEVEL = {"+": 1, "-": 1, "*": 2, "/": 2, "^": 4}


def write(node: Node) -> str:
    """The written form of a tree; parse(write(node)) gives the same tree for every parsed node."""
    match node:
        case Number(text):
            return text
        case Symbol(name, key):
            return f"{name}[{key}]" if key else name
        case Negative(body):
            return "-" + write(body)
        case Bracket(body):
            return f"({write(body)})"
        case Binary(operator, left, right):
            space = " " if _LEVEL[operator] == 1 else ""
            return f"{write(left)}{space}{operator}{space}{write(right)}"
        case Comparison(operator, left, right):
            return f"{write(left)} {operator} {write(right)}"
        case Call(function, arguments):
            return f"{function}({', '.join(write(argument) for argument in arguments)})"
