"""The front matter ready for print: parts with lists. PDF and HTML are made from this and from nothing else."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from calcbook.publish.view import Paragraph, Span
from calcbook.records.project import TitleBlock


@dataclass(frozen=True)
class Column:
    """A column: its head, and its width on paper, "auto" or a share such as "2fr"."""

    head: Paragraph
    width: str = "auto"


@dataclass(frozen=True)
class Pages:
    """The first and last page of a sheet, counted from the end of the front matter, whose length is known last."""

    first: int
    last: int

    def after(self, front: int) -> str:
        """The pages of the package behind so many pages of front matter."""
        first, last = front + self.first, front + self.last
        return f"{first}" if first == last else f"{first}–{last}"


Cell = Paragraph | Pages


@dataclass(frozen=True)
class Listing:
    """A table of a part; `empty` is the sentence in its place where it has no rows."""

    caption: str
    columns: tuple[Column, ...]
    rows: tuple[tuple[Cell, ...], ...]
    empty: str = "None."


@dataclass(frozen=True)
class Part:
    """A part of the front matter; `key` is its anchor, `wide` sets it on landscape pages."""

    key: str
    title: str
    opening: tuple[str, ...]
    listings: tuple[Listing, ...]
    wide: bool = False


@dataclass(frozen=True)
class Cover:
    """The first page: title block, what is open in words, number of sheets in words, cautions, versions."""

    block: TitleBlock
    flag: tuple[str, ...]
    extent: str
    cautions: tuple[str, ...]
    versions: tuple[str, ...]


@dataclass(frozen=True)
class Front:
    """The whole front matter; `sheet_pages` counts the pages of all sheets, which follow it."""

    cover: Cover
    parts: tuple[Part, ...]
    sheet_pages: int


def columns(**widths: str) -> tuple[Column, ...]:
    """Columns by their heads in words, spaces written as underscores."""
    return tuple(Column(words(head.replace("_", " ")), width) for head, width in widths.items())


def words(text: str, link: str = "") -> Paragraph:
    """A cell of plain text; "" is an empty cell."""
    return (Span(text, link),) if text else ()


def enumerated(spans: Sequence[Span]) -> Paragraph:
    """Several spans in one cell, commas between."""
    return tuple(part for index, span in enumerate(spans) for part in ((Span(", "), span) if index else (span,)))


def counted(count: int, one: str, many: str = "") -> str:
    """A count with its noun: "1 sheet", "3 sheets"."""
    return f"{count} {one if count == 1 else many or one + 's'}"
