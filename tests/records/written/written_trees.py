"""Random written forms, as trees that the grammar can produce."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache

from hypothesis import strategies as st

from calcbook.records.written.tree import FUNCTIONS, Binary, Bracket, Call, Comparison, Negative, Node, Number, Symbol

NAMES = ("P_1", "U_r", "I_L", "eta", "cos_phi", "theta_a", "n", "R")
KEYS = ("", "", "", "C-014", "MB/1", "L1")

_NUMBERS = st.sampled_from(["0", "1", "2", "3", "1.45", "0.001", "12", "3e2", "2.5E-3"]).map(Number)
_SMALL = st.sampled_from(["1", "2", "3", "0.5", "12"]).map(Number)
_SYMBOLS = st.builds(Symbol, st.sampled_from(NAMES), st.sampled_from(KEYS)) | st.just(Symbol("pi"))


@cache
def forms(depth: int = 3) -> st.SearchStrategy[Node]:
    """Any form of the grammar, nested up to `depth`."""
    if depth == 0:
        return _NUMBERS | _SYMBOLS
    product = _products(depth)
    return product | st.builds(Binary, st.sampled_from("+-"), product, product)


def _products(depth: int) -> st.SearchStrategy[Node]:
    signed = _powers(depth) | st.builds(Negative, _powers(depth))
    return signed | st.builds(Binary, st.sampled_from("*/"), signed, signed)


def _powers(depth: int) -> st.SearchStrategy[Node]:
    atom = _atoms(depth)
    exponent = _SMALL | st.builds(Negative, _SMALL) | _SYMBOLS | st.builds(Bracket, _without_powers())
    return atom | st.builds(lambda base, power: Binary("^", base, power), atom, exponent)


def _without_powers() -> st.SearchStrategy[Node]:
    return st.builds(Binary, st.sampled_from("+-*/"), _SYMBOLS, _SMALL)


def _atoms(depth: int) -> st.SearchStrategy[Node]:
    inner = forms(depth - 1)
    return _NUMBERS | _SYMBOLS | st.builds(Bracket, inner) | st.sampled_from(sorted(FUNCTIONS)).flatmap(_call(inner))


def _call(inner: st.SearchStrategy[Node]) -> Callable[[str], st.SearchStrategy[Node]]:
    def of(function: str) -> st.SearchStrategy[Node]:
        least, most = FUNCTIONS[function]
        arguments = st.lists(inner, min_size=least, max_size=min(most, max(least, 3))).map(tuple)
        if function == "choose":
            condition = st.builds(Comparison, st.sampled_from(["<=", ">=", "<", ">"]), inner, inner)
            arguments = st.tuples(condition, inner, inner)
        return arguments.map(lambda parts: Call(function, parts))

    return of


def tame_forms(depth: int = 3) -> st.SearchStrategy[Node]:
    """Forms of positive parts without differences: every rounding error stays in proportion to the result."""
    leaf: st.SearchStrategy[Node] = st.sampled_from([Number("2"), Number("1.45"), Number("0.3"), *map(Symbol, NAMES)])
    if depth == 0:
        return leaf
    part = tame_forms(depth - 1)
    grouped = part.map(_grouped)
    either: st.SearchStrategy[Node] = st.one_of(
        leaf,
        st.builds(Binary, st.sampled_from("+*/"), grouped, grouped),
        st.builds(lambda base, power: Binary("^", base, power), grouped, st.sampled_from([Number("2"), Number("0.5")])),
        st.builds(lambda function, body: Call(function, (body,)), st.sampled_from(["sqrt", "abs", "atan"]), part),
        st.builds(lambda first, second: Call("hypot", (first, second)), part, part),
        st.builds(Call, st.sampled_from(["min", "max"]), st.tuples(leaf, leaf)),
    )
    return either


def _grouped(node: Node) -> Node:
    return node if isinstance(node, Number | Symbol | Call | Bracket) else Bracket(node)
