"""The rules a template must keep, as a list of complaints: what a test asks of every template."""

from __future__ import annotations

import ast
import re
from collections.abc import Iterator

from calcbook.errors import TemplateFault
from calcbook.run.cells import CONCLUSION, DERIVATION, PARAMETERS, SETUP, Cell, tags_of, text_of
from calcbook.run.parameters import GIVEN
from calcbook.run.setup import read_imports
from calcbook.run.templates import Template, known_as

_KNOWN_TAGS = {PARAMETERS, SETUP, DERIVATION, CONCLUSION}
_OPEN_SHEET = "from calcbook.sheet import open_sheet"
_FORBIDDEN_MODULES = {"asyncio", "builtins", "datetime", "glob", "importlib", "io", "logging", "matplotlib", "os"}
_FORBIDDEN_MODULES |= {"multiprocessing", "pathlib", "random", "requests", "secrets", "shutil", "socket", "subprocess"}
_FORBIDDEN_MODULES |= {"sys", "tempfile", "threading", "time", "urllib", "uuid"}
_FORBIDDEN_CALLS = {"breakpoint", "compile", "display", "eval", "exec", "exit", "globals", "input", "open", "print"}
_HEADING = re.compile(r"#{1,6} \S.*")
_NOT_PLAIN = re.compile(r"^\s|^#|^[-+>=]|^\d+[.)]\s|[*`<>|$\\]|\]\(|!\[|\bhttps?:")


def complaints(template: Template) -> tuple[str, ...]:
    """Everything in which a template departs from the rules, each naming the cell (counted from 1)."""
    found = [*_in_structure(template)]
    for number, cell in enumerate(template.notebook.cells, start=1):
        found += [f"cell {number}: {message}" for message in _in_cell(cell)]
    return tuple(found)


def _in_structure(template: Template) -> Iterator[str]:
    try:
        if _OPEN_SHEET not in read_imports(template):
            yield f"the set-up cell lacks: {_OPEN_SHEET}"
    except TemplateFault as fault:
        yield fault.message
    tags = [tags_of(cell) for cell in template.notebook.cells if cell["cell_type"] == "code"]
    if tags[:2] != [(PARAMETERS,), (SETUP,)]:
        yield "the first code cells are parameters and set-up"
    if template.conclusion and (tags[-1] != (CONCLUSION,) or template.conclusion.strip() != "sheet.conclude()"):
        yield "the conclusion is the last cell: sheet.conclude()"
    calls = list(_sheet_calls(template))
    taken = {name for method, name in calls if method == "taken"}
    if taken != set(template.takes):
        yield f"takes {sorted(template.takes)} in its metadata, but {sorted(taken)} in its cells"
    made = {name for method, name in calls if method not in ("taken", "begin")}
    for name in template.gives:
        if made.isdisjoint(known_as(name)):
            yield f'gives "{name}" in its metadata, but makes no such line'
    read = set(_words(template))
    for parameter in template.parameters:
        if parameter.name != GIVEN and parameter.name not in read:
            yield f'declares parameter "{parameter.name}", but does not read it'


def _words(template: Template) -> Iterator[str]:
    """Every name and every text in the code of a template, without its parameters cell."""
    for cell in template.notebook.cells:
        if cell["cell_type"] == "code" and PARAMETERS not in tags_of(cell):
            for node in _nodes(text_of(cell)):
                if isinstance(node, ast.Name):
                    yield node.id
                elif isinstance(node, ast.Constant):
                    yield str(node.value)


def _sheet_calls(template: Template) -> Iterator[tuple[str, str]]:
    """Method and first argument of every call `sheet.method("name", ...)` outside derivations."""
    for cell in template.notebook.cells:
        if cell["cell_type"] != "code" or DERIVATION in tags_of(cell):
            continue
        for node in _nodes(text_of(cell)):
            if (
                isinstance(node, ast.Call)
                and isinstance(node.func, ast.Attribute)
                and isinstance(node.func.value, ast.Name)
                and node.func.value.id == "sheet"
                and node.args
                and isinstance(node.args[0], ast.Constant)
            ):
                yield node.func.attr, str(node.args[0].value)


def _nodes(source: str) -> list[ast.AST]:
    try:
        return list(ast.walk(ast.parse(source)))
    except SyntaxError:
        return []


def _in_cell(cell: Cell) -> Iterator[str]:
    if cell["cell_type"] == "markdown":
        yield from _in_text(text_of(cell))
    elif cell["cell_type"] == "code":
        if cell["outputs"] or cell["execution_count"] is not None:
            yield "outputs or an execution count are kept in the file"
        for tag in set(tags_of(cell)) - _KNOWN_TAGS:
            yield f'unknown tag "{tag}"'
        yield from _in_code(text_of(cell), is_setup=SETUP in tags_of(cell))
    else:
        yield "neither code nor text"


def _in_text(text: str) -> Iterator[str]:
    for line in text.split("\n"):
        if not _HEADING.fullmatch(line) and _NOT_PLAIN.search(line):
            yield f'"{line}" is neither a heading nor plain text'


def _in_code(source: str, *, is_setup: bool) -> Iterator[str]:
    try:
        ast.parse(source)
    except SyntaxError as error:
        yield f"line {error.lineno} is not Python"
    for node in _nodes(source):
        if isinstance(node, ast.Import | ast.ImportFrom):
            if not is_setup:
                yield "imports stand in the set-up cell"
            names = [node.module or ""] if isinstance(node, ast.ImportFrom) else [alias.name for alias in node.names]
            for name in names:
                if _FORBIDDEN_MODULES & set(name.split(".")):
                    yield f"imports {name}: a sheet depends on nothing but its inputs"
        elif isinstance(node, ast.Call) and isinstance(node.func, ast.Name):
            name = node.func.id
            if name in _FORBIDDEN_CALLS and not (is_setup and name == "globals"):
                yield f"calls {name}(): the trace is the only way out of a sheet, its inputs the only way in"
