"""What is handed to a workbook beside its parameters: origins, adopted values, sign-offs, editions, tables."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import asdict

from calcbook.records.project import Adopted, Datum, Project
from calcbook.records.quantity import Quantity


def given_of(
    project: Project, number: str, title: str, data: Mapping[str, Datum | None], adopted: Mapping[str, Adopted]
) -> dict[str, object]:
    """The reserved parameter `given` of a workbook.

    Parameters: `data` by parameter, those of repeated ones as "name[key]"; `adopted` by label of the line.
    """
    return {
        "sheet": number,
        "title": title,
        "origins": {name: asdict(datum.origin) for name, datum in data.items() if datum},
        "adopted": {label: _adopted(value) for label, value in adopted.items()},
        "signed_off": {table: asdict(sign_off) for table, sign_off in project.signed_off.items()},
        "editions": dict(project.editions),
        "tables": dict(project.tables),
    }


def by_line(adopted: Sequence[Adopted]) -> dict[str, Adopted]:
    """Adopted values by the line they stand for."""
    return {value.line: value for value in adopted}


def spelled(quantity: Quantity) -> str:
    """A quantity as the inputs would write it, with every digit of its number: "82 A", "0.91"."""
    number = repr(quantity.number).removesuffix(".0")
    return number if quantity.unit == "1" else f"{number} {quantity.unit}"


def texts_of(data: Mapping[str, Datum | None]) -> dict[str, str]:
    """The texts of data as entered, empty where there is none."""
    return {name: datum.text if datum else "" for name, datum in data.items()}


def _adopted(adopted: Adopted) -> dict[str, str]:
    return {"value": spelled(adopted.value), "reason": adopted.reason, "by": adopted.by, "date": adopted.date}
