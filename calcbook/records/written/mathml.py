"""Formulas in MathML, read by every browser without a script."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from html import escape

from calcbook.records.notation import notation
from calcbook.records.written.layout import Layout, Texts
from calcbook.records.written.tree import Node


def symbols(node: Node) -> str:
    """A formula with its symbols: inner MathML, to stand between <math> tags."""
    return Layout(_MathML({})).of(node)


def values(node: Node, texts: Texts, links: Mapping[str, str] | None = None) -> str:
    """A formula with printed values by label; a value whose label is in `links` is a link to that address."""
    return Layout(_MathML(links or {}), texts).of(node)


def symbol(label: str) -> str:
    """One symbol of the notation list, with its key as a further subscript."""
    name, _, key = label.partition("[")
    entry = notation().get(name)
    if entry is None:
        return f"<mtext>{escape(label)}</mtext>"
    letter = f"<mi>{escape(entry.letter)}</mi>"
    subscript = ",".join(part for part in (entry.subscript, key.rstrip("]")) if part)
    if subscript:
        letter = f"<msub>{letter}<mtext>{escape(subscript)}</mtext></msub>"
    if entry.function:
        letter = f'<mrow><mi>{escape(entry.function)}</mi><mspace width="0.17em"/>{letter}</mrow>'
    return letter


class _MathML:
    def __init__(self, links: Mapping[str, str]) -> None:
        self.links = links

    def row(self, parts: Sequence[str]) -> str:
        spaced: list[str] = []
        for part in parts:
            if spaced and not part.startswith("<mo") and not spaced[-1].startswith("<mo"):
                spaced.append('<mspace width="0.17em"/>')
            spaced.append(part)
        return f"<mrow>{''.join(spaced)}</mrow>"

    def symbol(self, label: str) -> str:
        return symbol(label)

    def value(self, text: str, label: str) -> str:
        link = self.links.get(label)
        shown = escape(text)
        return f'<mn><a href="{escape(link)}">{shown}</a></mn>' if link else f"<mn>{shown}</mn>"

    def number(self, text: str) -> str:
        return f"<mn>{escape(text)}</mn>"

    def sign(self, sign: str) -> str:
        return "<mi>π</mi>" if sign == "π" else f"<mo>{escape(sign)}</mo>"

    def upright(self, text: str) -> str:
        return f'<mi mathvariant="normal">{escape(text)}</mi>'

    def fraction(self, above: str, below: str) -> str:
        return f"<mfrac>{above}{below}</mfrac>"

    def root(self, body: str) -> str:
        return f"<msqrt>{body}</msqrt>"

    def power(self, base: str, exponent: str) -> str:
        return f"<msup>{base}{exponent}</msup>"

    def fence(self, left: str, body: str, right: str) -> str:
        return f'<mrow><mo fence="true">{left}</mo>{body}<mo fence="true">{right}</mo></mrow>'

    def below(self, operator: str, under: str, over: str) -> str:
        if not under:
            return f"<mo>{operator}</mo>"
        return f"<mrow><msubsup><mo>{operator}</mo>{under}{over}</msubsup></mrow>"

    def cases(self, first: str, condition: str, second: str) -> str:
        rows = f"<mtr><mtd>{first}</mtd><mtd><mtext>if </mtext>{condition}</mtd></mtr>"
        rows += f"<mtr><mtd>{second}</mtd><mtd><mtext>else</mtext></mtd></mtr>"
        return f'<mrow><mo fence="true">{{</mo><mtable columnalign="left">{rows}</mtable></mrow>'
