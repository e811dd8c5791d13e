"""The front matter as PDF/A-3b, set anew at each run with the look of the sheets."""

from __future__ import annotations

from functools import cache
from importlib.resources import files

from calcbook.publish import cautions
from calcbook.publish.front.listing import Cell, Cover, Front, Listing, Pages, Part
from calcbook.publish.sheet_pdf import compiled, day_of, fields_of, layout, paragraph
from calcbook.publish.typst_source import Literal, literal


def front_pdf(front: Front) -> bytes:
    """The bytes of the front matter's PDF: the same for the same front matter."""
    return compiled(front_source(front))


@cache
def _front_layout() -> str:
    return layout() + files("calcbook.publish.front").joinpath("front.typ").read_text("utf-8")


def front_source(front: Front) -> str:
    """The layouts followed by the data of the front matter as one literal."""
    return f"{_front_layout()}\n#front({literal(_front(front))})\n"


def _front(front: Front) -> dict[str, Literal]:
    block = front.cover.block
    return {
        "title": " ".join(text for text in (block.number, block.title) if text),
        "day": day_of(block).timetuple()[:3],
        "block": {**fields_of(block), "number": block.number, "title": block.title},
        "sheet-pages": front.sheet_pages,
        "general": cautions.GENERAL,
        "cover": _cover(front.cover),
        "parts": [_part(part) for part in front.parts],
    }


def _cover(cover: Cover) -> Literal:
    return {
        "flag": cover.flag,
        "extent": cover.extent,
        "cautions": cover.cautions,
        "versions": cover.versions,
    }


def _part(part: Part) -> Literal:
    return {
        "title": part.title,
        "wide": part.wide,
        "opening": part.opening,
        "listings": [_listing(listing) for listing in part.listings],
    }


def _listing(listing: Listing) -> Literal:
    return {
        "caption": listing.caption,
        "empty": listing.empty,
        "widths": [column.width for column in listing.columns],
        "heads": [paragraph(column.head) for column in listing.columns],
        "rows": [[_cell(cell) for cell in row] for row in listing.rows],
    }


def _cell(cell: Cell) -> Literal:
    return {"first": cell.first, "last": cell.last} if isinstance(cell, Pages) else paragraph(cell)
