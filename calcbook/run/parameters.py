"""The parameters a template declares: one typed, described parameter a line of its parameters cell.

    length: str = "85 m"  # route length, source end to load end
    loads: dict = {"C-001": {"load_current": "20 A"}}  # a repeated group: texts by name, by key
    given: dict = {}  # origin and status of data, adopted values, values brought forward

A line that papermill would read otherwise than Python does is refused, so that `papermill --help-notebook` and
calcbook never differ.
"""

from __future__ import annotations

import ast
import io
import tokenize
from collections.abc import Iterable
from dataclasses import dataclass

from calcbook.errors import TemplateFault

GIVEN = "given"
_FORM = 'name: str = "value"  # description'
_GIVEN_FORM = "given: dict = {}  # description"


@dataclass(frozen=True)
class Parameter:
    """One parameter: name, type, default value as written, description."""

    name: str
    type: str
    default: str
    description: str

    @property
    def line(self) -> str:
        """The line that declares it."""
        return f"{self.name}: {self.type} = {self.default}  # {self.description}"


def read_parameters(template: str, source: str) -> tuple[Parameter, ...]:
    """The parameters declared in the source of a parameters cell, `given` last.

    Raises TemplateFault, with the line, for every departure from the form.
    """
    try:
        statements = ast.parse(source).body
        comments = _comments(source)
    except SyntaxError as error:
        raise _fault(template, error.lineno or 1, f"not Python ({error.msg})") from None
    lines = source.split("\n")
    found: dict[str, Parameter] = {}
    for statement in statements:
        parameter = _read_one(template, statement, lines, comments.pop(statement.lineno, ""))
        if parameter.name in found:
            raise _fault(template, statement.lineno, f'"{parameter.name}" is declared twice')
        found[parameter.name] = parameter
    for number in comments:
        raise _fault(template, number, f"a comment stands by itself; each line is: {_FORM}")
    if list(found)[-1:] != [GIVEN]:
        raise TemplateFault(template, f"the last line of the parameters cell must be: {_GIVEN_FORM}")
    return tuple(found.values())


def _comments(source: str) -> dict[int, str]:
    """The comments by line number."""
    tokens = tokenize.generate_tokens(io.StringIO(source).readline)
    return {token.start[0]: token.string[1:].strip() for token in tokens if token.type == tokenize.COMMENT}


def _read_one(template: str, statement: ast.stmt, lines: list[str], description: str) -> Parameter:
    number = statement.lineno
    line = lines[number - 1]
    if (
        not isinstance(statement, ast.AnnAssign)
        or not isinstance(statement.target, ast.Name)
        or not isinstance(statement.annotation, ast.Name)
        or statement.value is None
        or statement.end_lineno != number
        or line != line.lstrip()
    ):
        raise _fault(template, number, f"each line of the parameters cell is: {_FORM}")
    name, kind = statement.target.id, statement.annotation.id
    default = str(ast.get_source_segment("\n".join(lines), statement.value))
    if name == GIVEN and (kind, default) != ("dict", "{}"):
        raise _fault(template, number, f'"{GIVEN}" is reserved: {_GIVEN_FORM}')
    is_text = isinstance(statement.value, ast.Constant) and isinstance(statement.value.value, str)
    is_repeated = kind == "dict" and isinstance(statement.value, ast.Dict)
    if name != GIVEN and not is_repeated and (kind != "str" or not is_text):
        raise _fault(template, number, f'"{name}" must be a text with its unit in it: {_FORM}')
    if not description:
        raise _fault(template, number, f'"{name}" has no description: {_FORM}')
    if line.count("=") != 1 or line.count("#") != 1:
        raise _fault(template, number, 'a line holds one "=" and one "#", or papermill misreads it')
    return Parameter(name, kind, default, description)


def _fault(template: str, line: int, message: str) -> TemplateFault:
    return TemplateFault(template, f"parameters cell, line {line}: {message}")


def merge_parameters(declared: Iterable[tuple[str, tuple[Parameter, ...]]]) -> tuple[Parameter, ...]:
    """The union of several templates' parameters, in order, `given` last; the first default counts.

    Parameters: pairs of a template's name and those of its parameters that are not taken from an earlier template.
    Raises TemplateFault where a name has another type or description than in an earlier template.
    """
    merged: dict[str, Parameter] = {}
    first: dict[str, str] = {}
    for template, parameters in declared:
        for parameter in parameters:
            known = merged.setdefault(parameter.name, parameter)
            origin = first.setdefault(parameter.name, template)
            if (known.type, known.description) != (parameter.type, parameter.description):
                message = f'parameter "{parameter.name}" is "{parameter.description}", but in template {origin} it is '
                raise TemplateFault(template, message + f'"{known.description}"; one name has one meaning')
    given = merged.pop(GIVEN, None)
    return (*merged.values(), given) if given else tuple(merged.values())
