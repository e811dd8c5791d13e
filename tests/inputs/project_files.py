"""Small project folders for tests of inputs: one sound circuit, of which a test changes what it is about."""

from __future__ import annotations

import csv
import io
from collections.abc import Mapping
from pathlib import Path

import pytest

from calcbook.errors import InputFaults
from calcbook.inputs.project import read_project
from calcbook.records.project import Project

TOML = """
[project]
number = "TQ-1"
title = "Tern Quay boatyard"
[basis]
practice = "iec"
frequency = "50 Hz"
nominal_voltage = "400 V"
line_to_earth_voltage = "230 V"
ambient_air = "35 degC"
drop_origin = "MB"
supply_is = "public"
[basis.editions]
"IEC 60364-4-43" = "2008"
"IEC 60364-5-52" = "2009"
[boards.MB]
"""

CIRCUIT = {
    "tag": "C-1",
    "description": "Travelling hoist",
    "from": "MB",
    "kind": "motor",
    "phases": "L1L2L3",
    "shaft_power [kW]": "45",
    "power_factor": "0.86",
    "efficiency": "0.94",
    "starter": "direct",
    "conductor": "Cu",
    "insulation": "XLPE90",
    "construction": "multicore",
    "cores": "4",
    "size [mm2]": "25",
    "method": "E",
    "grouping": "none",
    "circuits_in_group": "1",
    "length [m]": "62",
    "length_basis": "measured",
    "device": "gG",
    "rating [A]": "160",
    "overload_device": "relay60947",
    "overload_setting [A]": "82",
}


def as_csv(*rows: Mapping[str, str], separator: str = ",") -> str:
    """A CSV text with the heads of all rows, in their order."""
    heads = list(dict.fromkeys(head for row in rows for head in row))
    out = io.StringIO()
    writer = csv.DictWriter(out, heads, delimiter=separator, restval="", lineterminator="\n")
    writer.writeheader()
    writer.writerows(rows)
    return out.getvalue()


def circuit(**changes: str | None) -> dict[str, str]:
    """The sound circuit with changes by column name (the head's name without its unit); None takes a column away."""
    row = dict(CIRCUIT)
    for name, value in changes.items():
        head = next((head for head in row if head.partition(" [")[0] == name), name)
        if value is None:
            del row[head]
        else:
            row[head] = value
    return row


def write(folder: Path, *rows: Mapping[str, str], toml: str = TOML, **files: str) -> Path:
    """A project folder; `files` are further CSV texts by name: notes="tag,column..."."""
    folder.mkdir(exist_ok=True)
    (folder / "inputs.toml").write_text(toml, "utf-8")
    (folder / "circuits.csv").write_text(as_csv(*(rows or (CIRCUIT,))), "utf-8")
    for name, text in files.items():
        (folder / f"{name}.csv").write_text(text, "utf-8")
    return folder


def read(folder: Path, *rows: Mapping[str, str], toml: str = TOML, **files: str) -> Project:
    """The Project of such a folder."""
    return read_project(write(folder, *rows, toml=toml, **files))


def faults_of(folder: Path, *rows: Mapping[str, str], toml: str = TOML, **files: str) -> list[str]:
    """The faults of such a folder, one text each; fails where there is none."""
    return faults_in(write(folder, *rows, toml=toml, **files))


def faults_in(folder: Path) -> list[str]:
    """The faults of a folder as it is."""
    with pytest.raises(InputFaults) as caught:
        read_project(folder)
    return str(caught.value).splitlines()
