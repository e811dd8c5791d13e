"""The capacity tables of Annex B as one flat list, for the tests that compare across tables."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from calcbook.reference.table import tables

STANDARD_SIZES = (1.5, 2.5, 4, 6, 10, 16, 25, 35, 50, 70, 95, 120, 150, 185, 240, 300)
METHODS_IN_USE = ("B1", "B2", "C", "E")


@dataclass(frozen=True)
class Cell:
    """One tabulated capacity with everything it depends on."""

    table: str
    insulation: str
    conductor: str
    loaded: int
    method: str
    size: float
    current: float
    status: str


def cells() -> Iterator[Cell]:
    """Every capacity of every table."""
    for table in tables().values():
        if table.header["value"] != "I_t":
            continue
        fixed = dict(pair.split("=") for pair in table.header["fixed"].split("; "))
        for row in table.rows:
            keys = {**fixed, **{head.partition(" [")[0]: text for head, text in row.items()}}
            yield Cell(
                table=table.key.removeprefix("iec-60364-5-52-"),
                insulation=keys["insulation"],
                conductor=keys["conductor"],
                loaded=int(keys["loaded"]),
                method=keys["method"],
                size=float(keys["size"]),
                current=float(keys["value"]),
                status=keys["status"],
            )
