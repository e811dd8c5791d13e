"""Formulas in Typst's mathematics; texts go in as string literals, so that nothing in them is markup."""

from __future__ import annotations

from collections.abc import Sequence

from calcbook.records.notation import notation
from calcbook.records.written.layout import Layout, Texts
from calcbook.records.written.tree import Node


def symbols(node: Node) -> str:
    """A formula with its symbols: Typst math source, to stand between dollars."""
    return Layout(_Typst()).of(node)


def values(node: Node, texts: Texts) -> str:
    """A formula with printed values by label."""
    return Layout(_Typst(), texts).of(node)


def symbol(label: str) -> str:
    """One symbol of the notation list, with its key as a further subscript."""
    name, _, key = label.partition("[")
    entry = notation().get(name)
    if entry is None:
        return string(label)
    letter = f"italic({string(entry.letter)})"
    subscript = ",".join(part for part in (entry.subscript, key.rstrip("]")) if part)
    if subscript:
        letter = f"{letter}_({string(subscript)})"
    return f"{string(entry.function)} thin {letter}" if entry.function else letter


def string(text: str) -> str:
    """A Typst string literal of any text: upright in mathematics, never read as markup."""
    return '"' + text.replace("\\", "\\\\").replace('"', '\\"') + '"'


class _Typst:
    def row(self, parts: Sequence[str]) -> str:
        spaced: list[str] = []
        for part in parts:
            if spaced and not part.startswith("class(") and not spaced[-1].startswith("class("):
                spaced.append("thin")
            spaced.append(part)
        return " ".join(spaced)

    def symbol(self, label: str) -> str:
        return symbol(label)

    def value(self, text: str, label: str) -> str:
        return string(text)

    def number(self, text: str) -> str:
        return string(text)

    def sign(self, sign: str) -> str:
        if sign == "π":
            return "pi"
        sort = {",": "punctuation", "…": "normal", "≤": "relation", "≥": "relation", "<": "relation", ">": "relation"}
        return f'class("{sort.get(sign, "binary")}", {string(sign)})'

    def upright(self, text: str) -> str:
        return string(text)

    def fraction(self, above: str, below: str) -> str:
        return f"frac({above}, {below})"

    def root(self, body: str) -> str:
        return f"sqrt({body})"

    def power(self, base: str, exponent: str) -> str:
        return f"attach({base}, t: {exponent})"

    def fence(self, left: str, body: str, right: str) -> str:
        return f"lr({string(left)} {body} {string(right)})" if left == "|" else f"lr(({body}))"

    def below(self, operator: str, under: str, over: str) -> str:
        name = {"∑": "sum", "∫": "integral"}[operator]
        return f"attach({name}, b: {under}, t: {over})" if under else name

    def cases(self, first: str, condition: str, second: str) -> str:
        return f'cases({first} & "if" thin {condition}, {second} & "else")'
