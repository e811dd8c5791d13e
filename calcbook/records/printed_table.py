"""A published table as it is printed on the tables page."""

from __future__ import annotations

from dataclasses import dataclass

from calcbook.records.project import SignOff


@dataclass(frozen=True, kw_only=True)
class PrintedTable:
    """One reference table, whole.

    `key` is its name in the reference folder, the `table` of a TableLine; `obtained` says how the stored values were
    obtained; `rows` maps column heads to cells, every row with the same heads in the same order.
    """

    key: str
    standard: str
    edition: str
    table: str
    title: str
    obtained: str
    rows: tuple[dict[str, str], ...]
    signed_off: SignOff | None = None
