"""The one door of this stage: a project's folder in, a Project out, or every fault of its inputs."""

from __future__ import annotations

from contextlib import suppress
from dataclasses import replace
from pathlib import Path

from calcbook.errors import Fault, InputFaults
from calcbook.inputs import adopted, circuits, notes, routes, settings
from calcbook.inputs.adopted import read_adopted
from calcbook.inputs.circuits import Circuits, Surroundings, read_circuits
from calcbook.inputs.faults import FaultList
from calcbook.inputs.fields import fields_of
from calcbook.inputs.fill import fill_basis, fill_board
from calcbook.inputs.notes import Notes, read_notes
from calcbook.inputs.own_tables import read_own_tables
from calcbook.inputs.refusals import report_refused_basis, report_refused_boards
from calcbook.inputs.routes import read_routes
from calcbook.inputs.settings import TAGGED, Settings, read_settings
from calcbook.inputs.source import read_source
from calcbook.inputs.text import LONGEST_TEXT, nearest_name, shown
from calcbook.records.project import Board, Datum, Project, Source


def read_project(folder: Path) -> Project:
    """Read and validate the inputs of a project.

    Parameters: `folder` with inputs.toml, circuits.csv and, where wanted, routes.csv, notes.csv, adopted.csv and
    tables/*.csv.
    Result: the Project. Raises InputFaults with every fault found; nothing is written.
    """
    names = _names_in(folder)
    faults = FaultList()
    _report_capitals(names, faults)
    own = read_own_tables(folder, faults)
    toml = read_source(folder, settings.FILE, faults, needed=True)
    said = (read_settings(toml, faults, own.titles) if toml is not None else None) or Settings(readable=False)
    report_refused_basis(said.values.get("basis", {}), faults)
    report_refused_boards({tag: said.values[tag] for tag in said.values if tag.startswith("boards.")}, faults)
    noted = read_notes(read_source(folder, notes.FILE, faults, needed=False), said.decimal(notes.FILE), faults)
    taken = read_adopted(read_source(folder, adopted.FILE, faults, needed=False), said.decimal(adopted.FILE), faults)
    data = _data(said, noted)
    _fill(data, noted)
    found = _circuits(folder, said, data, noted, faults)
    # where a file could not be read at all, what refers to it is not judged
    if found.columns and said.readable and not faults.stopped(circuits.FILE):
        taken.report_unknown(found.columns)
        _report_notes_on_nothing(data, found, noted, faults)
        _report_unknown_references(said, found, faults)
    faults.raise_if_any()
    return Project(
        folder=str(folder),
        title=said.title,
        basis=data["basis"],
        editions=said.editions,
        boards=tuple(Board(name, data[f"boards.{name}"]) for name in said.names_of("boards")),
        circuits=tuple(replace(circuit, adopted=taken.of(circuit.tag)) for circuit in found.found),
        sources=tuple(Source(name, data[f"sources.{name}"]) for name in said.names_of("sources")),
        signed_off=said.signed_off,
        unused=_unused(folder, said, found),
        tables=own.texts,
    )


def _names_in(folder: Path) -> list[str]:
    """The names of the files in the project's folder, which is there and can be read."""
    try:
        names = sorted(path.name for path in folder.iterdir())
        with suppress(FileNotFoundError):
            (folder / settings.FILE).lstat()  # a folder may be listed and yet not be entered
        return names
    except (FileNotFoundError, NotADirectoryError):
        wrong = "is not a folder; a project is a folder with inputs.toml in it"
    except OSError as error:
        wrong = f"cannot be read ({error.strerror})"
    raise InputFaults((Fault("", shown(str(folder), LONGEST_TEXT)[1:-1], wrong),))


def _report_capitals(names: list[str], faults: FaultList) -> None:
    """Report files that would be passed over silently on one machine and read on another."""
    for name in names:
        if name != name.lower() and name.lower() in {settings.FILE, circuits.FILE, notes.FILE, adopted.FILE}:
            faults.add(name, "", f"is not read; its name is written {name.lower()}, in small letters")


def _data(said: Settings, noted: Notes) -> dict[str, dict[str, Datum]]:
    return {
        tag: {
            key: Datum(value.text, value.quantity, noted.origin(settings.FILE, tag, key))
            for key, value in values.items()
        }
        for tag, values in said.values.items()
    }


def _fill(data: dict[str, dict[str, Datum]], noted: Notes) -> None:
    """Add what the basis and the boards do not state and what has a safe value."""
    for tag, values in data.items():
        if tag == "basis":
            fill_basis(values, noted)
        elif tag.startswith("boards."):
            fill_board(tag, values, noted)


def _circuits(
    folder: Path, said: Settings, data: dict[str, dict[str, Datum]], noted: Notes, faults: FaultList
) -> Circuits:
    text = read_source(folder, circuits.FILE, faults, needed=True)
    if text is None:
        return Circuits()
    names = {kind: said.names_of(kind) for kind in TAGGED}
    parts = read_routes(read_source(folder, routes.FILE, faults, needed=False), said.decimal(routes.FILE), faults)
    around = Surroundings(data.get("basis", {}), names, noted, said.readable, parts)
    found = read_circuits(text, said.decimal(circuits.FILE), around, faults)
    if found.columns:
        parts.report_unknown(found.columns)
    return found


def _report_notes_on_nothing(
    data: dict[str, dict[str, Datum]], found: Circuits, noted: Notes, faults: FaultList
) -> None:
    """Report notes on what the inputs do not hold and calcbook does not fill in."""
    sound = not faults.any_in(settings.FILE)
    noted.report_unknown(found.columns | {tag: values.keys() if sound else None for tag, values in data.items()})


def _report_unknown_references(said: Settings, found: Circuits, faults: FaultList) -> None:
    """Report names in inputs.toml that nothing has."""
    known = {kind: said.names_of(kind) for kind in TAGGED} | {"circuits": tuple(found.columns)}
    for tag, values in said.values.items():
        for key, value in values.items():
            field = fields_of(tag.split(".")[0])[key]
            valid = [name for kind in field.choices for name in known.get(kind, ())]
            for name in value.text.split(", ") if field.holds.startswith("reference") else ():
                if name not in valid:
                    wrong = f"{shown(name)} is not one of the {' or '.join(field.choices)}; {nearest_name(name, valid)}"
                    faults.add(settings.FILE, f"[{tag}], {key}", wrong)


def _unused(folder: Path, said: Settings, found: Circuits) -> tuple[str, ...]:
    """Accepted keys, columns and files that hold something and that no subject uses yet."""
    keys = {
        f"{settings.FILE}: {tag.split('.')[0]}{'.*' if '.' in tag else ''}.{key}"
        for tag, values in said.values.items()
        for key in values
        if not fields_of(tag.split(".")[0])[key].used
    }
    columns = {f"{circuits.FILE}: {column}" for column in found.unused}
    files = {"devices.csv"} if (folder / "devices.csv").exists() else set()
    return tuple(sorted(keys | columns | files))
