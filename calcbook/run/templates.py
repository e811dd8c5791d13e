"""Templates: ordinary notebooks, found by name in the project and among those that come with calcbook."""

from __future__ import annotations

import json
import re
import warnings
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import nbformat

import calcbook
from calcbook.errors import TemplateFault, WorkspaceFault, nearest
from calcbook.records.notation import names_of_parameter
from calcbook.run.cells import CONCLUSION, PARAMETERS, SETUP, Cell, tags_of, text_of
from calcbook.run.parameters import GIVEN, Parameter, read_parameters

_NAME = re.compile(r"[a-z][a-z0-9]*(-[a-z0-9]+)*")
_LONGEST_NAME = 48


@dataclass(frozen=True)
class Template:
    """A template: its notebook, the parameters it declares, what it gives to later templates and takes from earlier.

    `gives` are names of lines or parameters; `takes` are parameters that an earlier template's `gives` replaces.
    """

    name: str
    notebook: nbformat.NotebookNode
    parameters: tuple[Parameter, ...]
    gives: tuple[str, ...]
    takes: tuple[str, ...]

    def cell(self, tag: str) -> Cell:
        """The one code cell with this tag; raises TemplateFault where there are none or several."""
        return _only_cell(self.name, self.notebook.cells, tag)

    @property
    def conclusion(self) -> str:
        """The code of the conclusion; "" in a template that has none, such as one that only derives."""
        tagged = any(CONCLUSION in tags_of(cell) for cell in self.notebook.cells)
        return text_of(self.cell(CONCLUSION)) if tagged else ""


def folders(project_folder: Path | None = None) -> tuple[Path, ...]:
    """Where templates are looked for, in order: the project's own, then those of the wheel or of the checkout."""
    package = Path(calcbook.__file__).parent
    inside = package / "templates"
    own = inside if inside.is_dir() else package.parent / "templates"
    return (project_folder / "templates", own) if project_folder else (own,)


def template_names(project_folder: Path | None = None) -> tuple[str, ...]:
    """The names of all templates that can be found, in alphabetical order."""
    try:
        found = {path.stem for folder in folders(project_folder) for path in folder.glob("*.ipynb")}
    except OSError as error:
        raise WorkspaceFault(f"{error.filename}: cannot be read ({error.strerror})") from None
    return tuple(sorted(found))


def find_template(name: str, project_folder: Path | None = None) -> Template:
    """The template of this name, the project's own before calcbook's; raises TemplateFault where there is none."""
    names = template_names(project_folder)
    if name not in names:
        raise TemplateFault(name, f"there is no such template; {nearest(name, names)}")
    paths = (folder / f"{name}.ipynb" for folder in folders(project_folder))
    try:
        return read_template(next(path for path in paths if path.exists() or path.is_symlink()))
    except OSError as error:
        raise TemplateFault(name, f"{error.filename} cannot be read ({error.strerror})") from None


def read_template(path: Path) -> Template:
    """The template in a notebook file; raises TemplateFault where it breaks the form that assembly rests on."""
    name = path.stem
    if not _NAME.fullmatch(name) or len(name) > _LONGEST_NAME:
        raise TemplateFault(name, "a name has small letters, digits and single hyphens, and at most 48 characters")
    notebook = _read_notebook(name, path)
    gives, takes = (_names(name, notebook, key) for key in ("gives", "takes"))
    parameters = read_parameters(name, text_of(_only_cell(name, notebook.cells, PARAMETERS)))
    declared = {parameter.name for parameter in parameters if parameter.name != GIVEN}
    for taken in takes:
        if taken not in declared:
            raise TemplateFault(name, f'takes "{taken}", which is none of its parameters; {nearest(taken, declared)}')
    _only_cell(name, notebook.cells, SETUP)
    return Template(name, notebook, parameters, gives, takes)


def _read_notebook(name: str, path: Path) -> nbformat.NotebookNode:
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore")  # a workbook has ids of its own: those of the template do not matter
            return nbformat.reads(path.read_text(encoding="utf-8"), as_version=4)
    except (OSError, UnicodeDecodeError, json.JSONDecodeError, nbformat.reader.NotJSONError) as error:
        raise TemplateFault(name, f"{path.name} cannot be read as a notebook ({error})") from None
    except (nbformat.ValidationError, AttributeError, KeyError, TypeError) as error:
        first = str(error).split("\n", maxsplit=1)[0]
        raise TemplateFault(name, f"{path.name} is not a notebook of format 4 ({first})") from None


def _only_cell(name: str, cells: Sequence[Cell], tag: str) -> Cell:
    found = [cell for cell in cells if cell["cell_type"] == "code" and tag in tags_of(cell)]
    if len(found) != 1:
        raise TemplateFault(name, f'exactly one code cell is tagged "{tag}", found {len(found)}')
    return found[0]


def _names(name: str, notebook: nbformat.NotebookNode, key: str) -> tuple[str, ...]:
    about: Any = notebook.metadata.get("calcbook", {})
    names = about.get(key) if isinstance(about, Mapping) else None
    if not isinstance(names, list) or not all(isinstance(item, str) for item in names):
        raise TemplateFault(name, f'notebook metadata "calcbook" has no list of names "{key}"')
    return tuple(names)


def check_parameters(templates: Sequence[Template], parameters: Mapping[str, object]) -> None:
    """Refuse a parameter that no template of a sheet takes from outside; raises TemplateFault with the nearest name."""
    label = ", ".join(template.name for template in templates)
    open_names = {parameter.name for template in templates for parameter in template.parameters} - {GIVEN}
    given_by = taken_from(templates)
    for name in parameters:
        if name in given_by:
            message = f'parameter "{name}" is worked out by template {given_by[name]} of this sheet, and cannot be set'
            raise TemplateFault(label, message)
        if name not in open_names:
            choices = open_names - set(given_by)
            raise TemplateFault(label, f'"{name}" is not a parameter; {nearest(name, choices)}')


def taken_from(templates: Sequence[Template]) -> dict[str, str]:
    """The parameters of a sheet that are no parameters of its workbook, with the template that gives them instead.

    What is given may go by the parameter's name or by a name of the notation list that stands for it. A template that
    declares a parameter without finding it given keeps it a parameter of the workbook.
    """
    given: dict[str, str] = {}
    taken: dict[str, str] = {}
    asked: set[str] = set()
    for template in templates:
        for name in (parameter.name for parameter in template.parameters):
            sources = [given[known] for known in known_as(name) if known in given]
            if name in template.takes and sources:
                taken[name] = sources[0]
            else:
                asked.add(name)
        given = dict.fromkeys(template.gives, template.name) | given
    return {name: template for name, template in taken.items() if name not in asked}


def known_as(parameter: str) -> tuple[str, ...]:
    """The names under which a template may give a parameter: its own, and those of the notation list."""
    return (parameter, *(entry.name for entry in names_of_parameter(parameter)))
