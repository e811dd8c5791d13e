"""A workbook before it is executed: its templates' cells in order, with one parameters cell and one set-up cell."""

from __future__ import annotations

import copy
from collections.abc import Iterator, Sequence

from nbformat.notebooknode import NotebookNode
from nbformat.v4 import new_code_cell, new_notebook

from calcbook import __version__
from calcbook.errors import TemplateFault
from calcbook.records.project import SheetPlan
from calcbook.records.trace import SCHEMA_VERSION
from calcbook.run.cells import CONCLUSION, DERIVATION, PARAMETERS, SETUP, tags_of
from calcbook.run.parameters import merge_parameters
from calcbook.run.setup import merge_setups
from calcbook.run.templates import Template, taken_from

_KERNELSPEC = {"display_name": "Python 3 (ipykernel)", "language": "python", "name": "python3"}
_LEFT_OUT = {PARAMETERS, SETUP, DERIVATION, CONCLUSION}


def assemble(plan: SheetPlan, templates: Sequence[Template]) -> NotebookNode:
    """The workbook of one sheet, with the templates' defaults as its parameters.

    Parameters: `plan` names the sheet; `templates` are those of the plan, in order. Raises TemplateFault where two
    templates declare one parameter differently, or a template is not of the form.
    """
    if not templates:
        raise TemplateFault("", f"sheet {plan.number} names no template")
    taken = taken_from(templates)
    merged = merge_parameters(
        (template.name, tuple(item for item in template.parameters if item.name not in taken)) for template in templates
    )
    parameters = "\n".join(parameter.line for parameter in merged)
    cells = [_code(PARAMETERS, parameters, PARAMETERS), _code(SETUP, merge_setups(templates), SETUP)]
    for position, template in enumerate(templates):
        if position:
            cells.append(_code(f"{template.name}-begin", f'sheet.begin("{template.name}")'))
        cells.extend(_own_cells(template))
    conclusions = [template.conclusion for template in templates if template.conclusion]
    if conclusions:
        cells.append(_code(CONCLUSION, conclusions[-1], CONCLUSION))
    about = {
        "schema": SCHEMA_VERSION,
        "sheet": plan.number,
        "title": plan.title,
        "templates": [template.name for template in templates],
        "version": __version__,
    }
    return new_notebook(cells=cells, metadata={"calcbook": about, "kernelspec": dict(_KERNELSPEC)})


def _code(identity: str, source: str, *tags: str) -> NotebookNode:
    return new_code_cell(id=identity, source=source, metadata={"tags": list(tags)} if tags else {})


def _own_cells(template: Template) -> Iterator[NotebookNode]:
    """The cells that only this template has, each with an id made of the template's name and its position there."""
    for position, cell in enumerate(template.notebook.cells, start=1):
        if _LEFT_OUT.isdisjoint(tags_of(cell)):
            own = copy.deepcopy(cell)
            own["id"] = f"{template.name}-{position}"
            if own["cell_type"] == "code":
                own["outputs"], own["execution_count"] = [], None
            yield own
