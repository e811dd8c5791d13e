"""What became of one sheet: the record that run hands to publish."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from calcbook.records.project import workbook_name
from calcbook.records.trace import Trace


@dataclass(frozen=True)
class Failure:
    """Why a sheet could not be executed: name and message of the error, and the template cell it stands in."""

    error: str
    message: str
    cell: int
    source: str


@dataclass(frozen=True)
class SheetResult:
    """The outcome of one sheet; `trace` holds the lines made, up to the failing one where there is a failure.

    `workbook` is the text of the executed notebook, free of what differs from run to run.
    """

    number: str
    title: str
    outcome: Literal["executed", "failed"]
    workbook: str
    trace: Trace
    failure: Failure | None = None
    part: str = ""

    @property
    def name(self) -> str:
        """The name of the workbook: the sheet's number, with the part behind it where there is one."""
        return workbook_name(self.number, self.part)
