"""Addresses within the published pages: which file, and which anchor in it, a line, datum or table cell has."""

from __future__ import annotations

import re

from calcbook.records.line import TableLine
from calcbook.records.project import Origin

INDEX, INPUTS, TABLES = "index.html", "inputs.html", "tables.html"
BOUND, BOUND_PDF = "package.html", "package.pdf"


def anchor(*parts: str) -> str:
    """An ASCII anchor, one for each distinct sequence of texts: other characters are written as ~ and their bytes."""
    return "/".join(re.sub(r"[^A-Za-z0-9._-]", _as_bytes, part) for part in parts)


def _as_bytes(match: re.Match[str]) -> str:
    return "".join(f"~{byte:02X}" for byte in match[0].encode("utf-8"))


def to_line(label: str) -> str:
    """A line of the same sheet."""
    return "#" + anchor(label)


def to_sheet(number: str, label: str = "") -> str:
    """Another sheet, or a line of it."""
    return anchor(number) + ".html" + (to_line(label) if label else "")


def to_source(line_id: str) -> str:
    """The line of another sheet by its id."""
    return to_sheet(*source_of(line_id))


def source_of(line_id: str) -> tuple[str, str]:
    """Sheet number and label in the id of a line, as "MB/demand/P[C-014]"."""
    sheet, _, label = line_id.split("/", 2)
    return sheet, label


def datum_anchor(origin: Origin) -> str:
    """The anchor of a datum on the inputs page."""
    return anchor(origin.file, origin.tag, origin.column)


def to_datum(origin: Origin) -> str:
    """A datum on the inputs page."""
    return f"{INPUTS}#{datum_anchor(origin)}"


def cell_anchor(line: TableLine) -> str:
    """The anchor of a table value on the tables page."""
    return anchor(line.table, line.citation.row, line.citation.column)


def to_cell(line: TableLine) -> str:
    """A table value on the tables page."""
    return f"{TABLES}#{cell_anchor(line)}"
