"""The notation of the package: the symbols that its sheets use."""

from __future__ import annotations

from collections.abc import Iterator

from calcbook.publish.front.listing import Listing, Part, columns, words
from calcbook.publish.front.material import Material
from calcbook.publish.rows import prose
from calcbook.publish.view import Span
from calcbook.records.line import DerivationLine, Line, StepLine, Valued
from calcbook.records.notation import notation
from calcbook.records.units import UNITS
from calcbook.records.written.tree import parse, symbols_of


def symbols(material: Material) -> Part:
    """Every symbol used: its print, its name in results.json, what it means, its unit."""
    used = {name for line in material.lines() for name in _names(line)}
    rows = tuple(
        ((Span(name, symbol=True),), words(name), prose(entry.description), words(UNITS[entry.unit].printed or "1"))
        for name, entry in notation().items()
        if name in used
    )
    heads = columns(Symbol="auto", Name="auto", Meaning="1fr", Unit="auto")
    opening = ("The name is that of the symbol in results.json and in the workbooks.",)
    return Part("notation", "Notation", opening, (Listing("Symbols used", heads, rows),))


def _names(line: Line) -> Iterator[str]:
    if isinstance(line, Valued):
        yield line.name
    if isinstance(line, StepLine):
        yield from _in(line.written)
    if isinstance(line, DerivationLine):
        yield from _in(line.left)
        yield from _in(line.right)


def _in(written: str) -> Iterator[str]:
    yield from (symbol.name for symbol in symbols_of(parse(written)))
