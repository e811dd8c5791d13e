"""What the cells of a notebook are: their text, their tags, and whether they are executed."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

PARAMETERS = "parameters"
SETUP = "setup"
DERIVATION = "derivation"
CONCLUSION = "conclusion"
INJECTED = "injected-parameters"
MAY_FAIL = "raises-exception"

Cell = Mapping[str, Any]


def text_of(cell: Cell) -> str:
    """The source of a cell, which the notebook format allows to be a list of lines."""
    return "".join(cell["source"])


def tags_of(cell: Cell) -> tuple[str, ...]:
    """The tags of a cell."""
    return tuple(cell["metadata"].get("tags", ()))


def is_executable(cell: Cell) -> bool:
    """Whether a cell is code, and not blank."""
    return cell["cell_type"] == "code" and bool(text_of(cell).strip())


def stops_at_error(cell: Cell) -> bool:
    """Whether an error in this cell ends the execution, as it does unless the cell's tag says that it may fail."""
    return MAY_FAIL not in tags_of(cell)
