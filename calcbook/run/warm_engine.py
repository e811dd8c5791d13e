"""A papermill engine that executes each notebook in a fork of the warm helper; import it through `engine`."""

from __future__ import annotations

from contextlib import closing

from nbformat import from_dict
from papermill.engines import Engine, NBClientEngine, NotebookExecutionManager

from calcbook.errors import UsageFault
from calcbook.run.cells import is_executable, stops_at_error
from calcbook.run.helper import can_fork, warm_helper
from calcbook.run.messages import CellRun

_UNSUPPORTED = ("execution_timeout", "stdout_file", "stderr_file")


class WarmEngine(Engine):  # type: ignore[misc]
    """Executes Python notebooks without starting a kernel; outputs, counts and errors equal the kernel's.

    Where the machine has no fork, the notebook is handed to papermill's own engine.
    """

    @classmethod
    def execute_managed_notebook(cls, nb_man: NotebookExecutionManager, kernel_name: str, **options: object) -> None:
        """Execute the notebook that `nb_man` manages; raises UsageFault for an option this engine cannot honour."""
        if not can_fork():
            NBClientEngine.execute_managed_notebook(nb_man, kernel_name, **options)
            return
        for name in _UNSUPPORTED:
            if options.get(name) is not None:
                raise UsageFault(f"engine calcbook: {name} is not available; use papermill's own engine")
        with closing(warm_helper().run(nb_man.nb.cells)) as runs:
            for index, cell in enumerate(nb_man.nb.cells):
                nb_man.cell_start(cell, index)
                try:
                    carries_on = not is_executable(cell) or _take(nb_man, index, next(runs))
                finally:
                    nb_man.cell_complete(cell, cell_index=index)
                if not carries_on:
                    break
            for _ in runs:  # the end message: the helper is ready for the next sheet
                pass


def _take(nb_man: NotebookExecutionManager, index: int, run: CellRun) -> bool:
    """Put what came of a cell into the notebook; False where the execution ends here."""
    cells = nb_man.nb.cells
    for changed, outputs in [*run.updated, (index, run.outputs)]:
        cells[changed].outputs = [from_dict(output) for output in outputs]
    cells[index].execution_count = run.execution_count
    if run.succeeded or (run.execution_count is not None and not stops_at_error(cells[index])):
        return True
    nb_man.cell_exception(cells[index], cell_index=index)
    return False
