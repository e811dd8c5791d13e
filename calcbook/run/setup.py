"""The set-up cell of a template: import lines, and one line that opens the sheet.

from calcbook.formulas import three_phase
from calcbook.sheet import open_sheet
sheet = open_sheet("three-phase-power", globals())
"""

from __future__ import annotations

import ast
from collections.abc import Sequence

from calcbook.errors import TemplateFault
from calcbook.run.cells import SETUP, text_of
from calcbook.run.templates import Template


def opening_line(template: str) -> str:
    """The line that opens the sheet of a template."""
    return f'sheet = open_sheet("{template}", globals())'


def read_imports(template: Template) -> tuple[str, ...]:
    """The import lines of a template's set-up cell; raises TemplateFault where anything else stands there."""
    source = text_of(template.cell(SETUP))
    opening = opening_line(template.name)
    lines = [line for line in source.split("\n") if line.strip()]
    if lines[-1:] != [opening]:
        raise TemplateFault(template.name, f"the last line of the set-up cell must be: {opening}")
    for line in lines[:-1]:
        if not _is_import(line):
            message = (
                f'set-up cell, line {source.split(chr(10)).index(line) + 1}: "{line}" is not an import of one line'
            )
            raise TemplateFault(template.name, message)
    return tuple(lines[:-1])


def _is_import(line: str) -> bool:
    try:
        statements = ast.parse(line).body
    except SyntaxError:
        return False
    return len(statements) == 1 and isinstance(statements[0], ast.Import | ast.ImportFrom)


def merge_setups(templates: Sequence[Template]) -> str:
    """The set-up of a workbook: every import line of its templates once, then the sheet of the first opened."""
    imports = {line for template in templates for line in read_imports(template)}
    return "\n".join([*sorted(imports), "", opening_line(templates[0].name)])
