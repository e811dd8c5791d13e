"""A papermill engine that executes each notebook in a fork of the warm helper; import it through `engine`."""

from __future__ import annotations

import os
from contextlib import closing
from typing import Any

from nbformat import NotebookNode, from_dict
from nbformat.v4 import new_output
from papermill.engines import Engine, NBClientEngine, NotebookExecutionManager

from calcbook.errors import UsageFault
from calcbook.run.helper import SheetProcessEnded, warm_helper
from calcbook.run.messages import CellRun
from calcbook.run.cells import is_executable, stops_at_error

_UNSUPPORTED = ("execution_timeout", "stdout_file", "stderr_file")


def process_ended(detail: str) -> NotebookNode:
    """The error output of a cell in which the process of the sheet ended; only `detail` may differ between engines."""
    name, message = SheetProcessEnded.__name__, SheetProcessEnded.MESSAGE
    return new_output("error", ename=name, evalue=message, traceback=[f"{name}: {detail}"])


class WarmEngine(Engine):  # type: ignore[misc]
    """Executes Python notebooks without starting a kernel; outputs, counts and errors equal the kernel's.

    Where the machine has no fork, the notebook is handed to papermill's own engine.
    """

    @classmethod
    def execute_managed_notebook(cls, nb_man: NotebookExecutionManager, kernel_name: str, **options: Any) -> None:
        """Execute the notebook that `nb_man` manages; raises UsageFault for an option this engine cannot honour."""
        if not hasattr(os, "fork"):
            NBClientEngine.execute_managed_notebook(nb_man, kernel_name, **options)
            return
        for name in _UNSUPPORTED:
            if options.get(name) is not None:
                raise UsageFault(f"engine calcbook: {name} is not available; use papermill's own engine")
        with closing(warm_helper().run(nb_man.nb.cells)) as runs:
            for index, cell in enumerate(nb_man.nb.cells):
                nb_man.cell_start(cell, index)
                try:
                    carries_on = not is_executable(cell) or _take(nb_man, index, runs)
                finally:
                    nb_man.cell_complete(cell, cell_index=index)
                if not carries_on:
                    break
            for _ in runs:  # the end message: the helper is ready for the next sheet
                pass


def _take(nb_man: NotebookExecutionManager, index: int, runs: Any) -> bool:
    """Put what came of a cell into the notebook; False where the execution ends here."""
    cell = nb_man.nb.cells[index]
    try:
        run: CellRun = next(runs)
    except SheetProcessEnded as ended:
        cell.outputs = [process_ended(str(ended))]
        nb_man.cell_exception(cell, cell_index=index)
        return False
    for changed, outputs in [*run.updated, (index, run.outputs)]:
        nb_man.nb.cells[changed].outputs = [from_dict(output) for output in outputs]
    cell.execution_count = run.execution_count
    if run.succeeded or not stops_at_error(cell):
        return True
    nb_man.cell_exception(cell, cell_index=index)
    return False
