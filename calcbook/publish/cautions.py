"""What every sheet says of its own limits."""

from __future__ import annotations

import re
from collections.abc import Iterable

from calcbook.records.line import Line, TableLine

GENERAL = (
    "Results need review by a competent and, where required, licensed person.",
    "Local codes and their current editions govern.",
    "Table values must be compared with the licensed text.",
)
NOT_COMPARED = "not compared with a licensed copy"
#: what a table's header says where its edition is not known
NO_EDITION = "not recorded"
NOT_FOR_ISSUE = "failed, not for issue"


def table_name(line: TableLine) -> str:
    """A table as it is cited: standard with edition, and its number."""
    citation = line.citation
    if citation.edition == NO_EDITION:
        return f"{citation.standard}, edition {NO_EDITION}, {numbered(citation.table)}"
    standard = f"{citation.standard}:{citation.edition}" if citation.edition else citation.standard
    return f"{standard}, {numbered(citation.table)}"


def numbered(table: str) -> str:
    """A table's number with the word before it; what is no number, as a clause in words, stands as it is."""
    return f"Table {table}" if re.fullmatch(r"([A-Z]+\.)?\d[A-Z0-9.]*", table) else table


def of_tables(lines: Iterable[Line]) -> str:
    """The caution on the tables of a sheet that nobody has signed off, "" where there is none."""
    tables = [table_name(line) for line in lines if isinstance(line, TableLine) and line.citation.signed_off is None]
    return f"Values {NOT_COMPARED}: {'; '.join(dict.fromkeys(tables))}." if tables else ""
