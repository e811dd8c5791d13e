"""Python data as Typst source: texts only ever as string literals, formulas as mathematics."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from calcbook.publish.paper_text import on_paper
from calcbook.records.written import typst


@dataclass(frozen=True)
class Mathematics:
    """Typst mathematics from our own printer, the only markup a record is turned into."""

    source: str


Literal = None | bool | int | str | Mathematics | Sequence["Literal"] | Mapping[str, "Literal"]


def literal(value: Literal) -> str:
    """The value as a Typst expression. Keys of mappings are our own names, values may be any text."""
    match value:
        case None | bool() | int():
            return str(value).lower()
        case str():
            return typst.string(on_paper(value))
        case Mathematics(source):
            return f"${source}$"
        case Mapping():
            return (
                "(" + ", ".join(f"{key}: {literal(part)}" for key, part in value.items()) + ("" if value else ":") + ")"
            )
    return "(" + "".join(f"{literal(part)}, " for part in value) + ")"
