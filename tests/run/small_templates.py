"""Small notebooks of the form of templates, for the tests of run."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from typing import Any

import nbformat
from nbformat.v4 import new_code_cell, new_markdown_cell, new_notebook

from calcbook.records.project import SheetPlan

KERNELSPEC = {"display_name": "Python 3", "language": "python", "name": "python3"}
GIVEN_LINE = "given: dict = {}  # filled by calcbook"

LOAD_PARAMETERS = 'design_current: str = "81 A"  # design current of the circuit'
CABLE_PARAMETERS = LOAD_PARAMETERS + '\nlength: str = "85 m"  # route length, source end to load end'


def code(source: str, *tags: str) -> Any:
    return new_code_cell(source, metadata={"tags": list(tags)} if tags else {})


def notebook(*cells: Any, **metadata: object) -> Any:
    return new_notebook(cells=list(cells), metadata={"kernelspec": KERNELSPEC, **metadata})


def template(
    name: str,
    parameters: str,
    *cells: Any,
    gives: Sequence[str] = (),
    takes: Sequence[str] = (),
    imports: str = "",
) -> Any:
    """A template notebook: parameters (without `given`), set-up, a derivation, the cells given, a conclusion."""
    setup = f'{imports}from calcbook.sheet import open_sheet\n\nsheet = open_sheet("{name}", globals())'
    return notebook(
        new_markdown_cell(f"# {name}"),
        code("\n".join(filter(None, [parameters, GIVEN_LINE])), "parameters"),
        code(setup, "setup"),
        code("left_out = 1", "derivation"),
        *cells,
        code("sheet.conclude()", "conclusion"),
        calcbook={"gives": list(gives), "takes": list(takes)},
    )


def save(folder: Path, name: str, made: Any) -> Path:
    """Write a notebook as a template of the project in `folder`."""
    path = folder / "templates" / f"{name}.ipynb"
    path.parent.mkdir(parents=True, exist_ok=True)
    nbformat.write(made, path)
    return path


def save_load_and_cable(folder: Path) -> None:
    """Two templates: `small-load` gives the design current, `small-cable` takes it and has a length."""
    load = template(
        "small-load",
        LOAD_PARAMETERS,
        new_markdown_cell("## Load"),
        code('sheet.datum("design_current")'),
        gives=["design_current"],
        imports="import sympy\n",
    )
    cable = template(
        "small-cable",
        CABLE_PARAMETERS,
        new_markdown_cell("## Cable"),
        code('I_B = sheet.taken("design_current")\nroute = sheet.choice("length", "route length")'),
        takes=["design_current"],
        imports="import mpmath\n",
    )
    save(folder, "small-load", load)
    save(folder, "small-cable", cable)


def save_with(folder: Path, name: str, *sources: str) -> None:
    """A template without parameters whose own cells are `sources`."""
    save(folder, name, template(name, "", *(code(source) for source in sources)))


def plan(*templates: str, **parameters: str) -> SheetPlan:
    """The plan of sheet C-014."""
    return SheetPlan("C-014", "Travelling hoist", templates, parameters, {})
