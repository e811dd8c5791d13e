"""The one door of this stage: a project's folder in, a Project out, or every fault of its inputs."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

from calcbook.inputs import adopted, circuits, notes, settings
from calcbook.inputs.circuits import Circuits, Surroundings, read_circuits
from calcbook.inputs.faults import FaultList
from calcbook.inputs.fields import fields_of
from calcbook.inputs.notes import Notes, read_notes
from calcbook.inputs.refusals import REFUSED_FILES, refused_basis
from calcbook.inputs.settings import TAGGED, Settings, read_settings
from calcbook.inputs.source import read_source
from calcbook.inputs.text import nearest_name, shown
from calcbook.inputs.value import Value
from calcbook.records.project import Board, Datum, Project


def read_project(folder: Path) -> Project:
    """Read and validate the inputs of a project.

    Parameters: `folder` with inputs.toml, circuits.csv and, where wanted, notes.csv and adopted.csv.
    Result: the Project. Raises InputFaults with every fault found; nothing is written.
    """
    faults = FaultList()
    for name, sentence in REFUSED_FILES.items():
        if (folder / name).exists():
            faults.add(name, "", sentence)
    toml = read_source(folder, settings.FILE, faults, needed=True)
    said = (read_settings(toml, faults) if toml is not None else None) or Settings(readable=False)
    _report_basis(said, faults)
    texts = {
        name: read_source(folder, name, faults, needed=name == circuits.FILE)
        for name in (circuits.FILE, notes.FILE, adopted.FILE)
    }
    noted = read_notes(texts[notes.FILE], said.decimal(notes.FILE), faults)
    taken = adopted.read_adopted(texts[adopted.FILE], said.decimal(adopted.FILE), faults)
    data = {tag: _data(tag, values, noted) for tag, values in said.values.items()}
    found = Circuits()
    table = texts[circuits.FILE]
    if table is not None:
        names = {kind: said.names_of(kind) for kind in TAGGED}
        around = Surroundings(data.get("basis", {}), names, noted, said.readable)
        found = read_circuits(table, said.decimal(circuits.FILE), around, faults)
        taken.report_unknown(found.columns)
        if said.readable:
            sound = not faults.any_in(settings.FILE)
            noted.report_unknown(found.columns | {tag: values.keys() if sound else None for tag, values in data.items()})
    _report_references(said, found, faults)
    faults.raise_if_any()
    return Project(
        folder=str(folder),
        title=said.title,
        basis=data["basis"],
        editions=said.editions,
        boards=tuple(Board(name, data[f"boards.{name}"]) for name in said.names_of("boards")),
        circuits=tuple(replace(circuit, adopted=taken.of(circuit.tag)) for circuit in found.found),
        signed_off=said.signed_off,
        unused=_unused(folder, said, found),
    )


def _data(tag: str, values: dict[str, Value], noted: Notes) -> dict[str, Datum]:
    return {
        key: Datum(value.text, value.quantity, noted.origin(settings.FILE, tag, key)) for key, value in values.items()
    }


def _report_basis(said: Settings, faults: FaultList) -> None:
    for key, sentence in refused_basis(said.values.get("basis", {})).items():
        faults.add(settings.FILE, f"[basis], {key}", sentence)


def _report_references(said: Settings, found: Circuits, faults: FaultList) -> None:
    """Report names in inputs.toml that stand for nothing; circuits are known by now."""
    known = {kind: said.names_of(kind) for kind in TAGGED} | {"circuits": tuple(found.columns)}
    for tag, values in said.values.items():
        for key, value in values.items():
            field = fields_of(tag.split(".")[0])[key]
            if not field.holds.startswith("reference"):
                continue
            valid = [name for kind in field.choices for name in known[kind]]
            for name in value.text.split(", "):
                if name not in valid:
                    wrong = f"{shown(name)} is not one of the {' or '.join(field.choices)}; {nearest_name(name, valid)}"
                    faults.add(settings.FILE, f"[{tag}], {key}", wrong)


def _unused(folder: Path, said: Settings, found: Circuits) -> tuple[str, ...]:
    """Accepted keys and columns that hold something and that no subject uses yet."""
    keys = {
        f"{settings.FILE}: {tag.split('.')[0]}{'.*' if '.' in tag else ''}.{key}"
        for tag, values in said.values.items()
        for key in values
        if not fields_of(tag.split(".")[0])[key].used
    }
    columns = {f"{circuits.FILE}: {column}" for column in found.unused}
    files = {"devices.csv"} if (folder / "devices.csv").exists() else set()
    return tuple(sorted(keys | columns | files))
