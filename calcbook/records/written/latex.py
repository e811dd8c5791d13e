r"""Formulas in LaTeX, for JupyterLab: the text/markdown beside each record."""

from __future__ import annotations

import re
from collections.abc import Sequence

from calcbook.records.notation import notation
from calcbook.records.written.layout import Layout, Texts
from calcbook.records.written.tree import Node

_GREEK = {
    "α": r"\alpha", "δ": r"\delta", "η": r"\eta", "θ": r"\theta", "κ": r"\kappa", "φ": r"\varphi", "ω": r"\omega",
    "ΔU": r"\Delta U", "Δu": r"\Delta u", "û": r"\hat u", "î": r"\hat\imath",
}  # fmt: skip
_SIGNS = {"≤": r"\le", "≥": r"\ge", "·": r"\cdot", "−": "-", "π": r"\pi", "…": r"\dots"}
_SPECIAL = re.compile(r"[\\{}$&#^_~%]")
_ESCAPED = {"\\": r"\backslash{}", "~": r"\sim{}", "^": r"\char94{}"}


def symbols(node: Node) -> str:
    """A formula with its symbols: LaTeX math source, to stand between dollars."""
    return Layout(_LaTeX()).of(node)


def values(node: Node, texts: Texts) -> str:
    """A formula with printed values by label."""
    return Layout(_LaTeX(), texts).of(node)


def symbol(label: str) -> str:
    """One symbol of the notation list, with its key as a further subscript."""
    name, _, key = label.partition("[")
    entry = notation().get(name)
    if entry is None:
        return text(label)
    letter = _GREEK.get(entry.letter, entry.letter)
    subscript = ",".join(part for part in (entry.subscript, key.rstrip("]")) if part)
    if subscript:
        letter = f"{letter}_{{\\mathrm{{{_escape(subscript)}}}}}"
    return f"\\{entry.function}\\,{letter}" if entry.function else letter


def text(plain: str) -> str:
    """Any text, upright, with everything special to LaTeX escaped."""
    return f"\\text{{{_escape(plain)}}}"


def _escape(plain: str) -> str:
    return _SPECIAL.sub(lambda match: _ESCAPED.get(match[0], "\\" + match[0]), plain)


class _LaTeX:
    def row(self, parts: Sequence[str]) -> str:
        signs = set(_SIGNS.values()) | {"+", ","}
        spaced: list[str] = []
        for part in parts:
            if spaced and part not in signs and spaced[-1] not in signs:
                spaced.append(r"\,")
            spaced.append(part)
        return " ".join(spaced)

    def symbol(self, label: str) -> str:
        return symbol(label)

    def value(self, plain: str, label: str) -> str:
        return text(plain)

    def number(self, plain: str) -> str:
        return plain

    def sign(self, sign: str) -> str:
        return _SIGNS.get(sign, sign)

    def upright(self, plain: str) -> str:
        return f"\\mathrm{{{plain}}}"

    def fraction(self, above: str, below: str) -> str:
        return f"\\frac{{{above}}}{{{below}}}"

    def root(self, body: str) -> str:
        return f"\\sqrt{{{body}}}"

    def power(self, base: str, exponent: str) -> str:
        return f"{{{base}}}^{{{exponent}}}"

    def fence(self, left: str, body: str, right: str) -> str:
        return f"\\left{left} {body} \\right{right}"

    def below(self, operator: str, under: str, over: str) -> str:
        name = {"∑": r"\sum", "∫": r"\int"}[operator]
        return f"{name}_{{{under}}}^{{{over}}}" if under else name

    def cases(self, first: str, condition: str, second: str) -> str:
        return f"\\begin{{cases}} {first} & \\text{{if }} {condition} \\\\ {second} & \\text{{else}} \\end{{cases}}"
