"""The warm engine and the ordinary kernel give the same notebook, cell by cell; so does evaluation in this process."""

from __future__ import annotations

import sys
import warnings
from pathlib import Path
from typing import Any

import nbformat
import papermill
import pytest
from papermill.exceptions import PapermillExecutionError
from small_templates import code, notebook, plan

from calcbook.records.trace import LINE_MIME
from calcbook.run.clean import canonical_text, clean
from calcbook.run.execute import EngineName, execute_sheet
from calcbook.run.kernel import kernel_options
from calcbook.run.shell import run_notebook
from calcbook.run.templates import template_names

EVERY_KIND_OF_OUTPUT = [
    "from IPython.display import HTML, Latex, clear_output, display\nimport sys, sympy",
    "from calcbook.records.trace import LINE_MIME",
    "display({'text/plain': 'l', 'text/markdown': '$x$', LINE_MIME: {'b': (1, 2.5)}}, raw=True)",
    "display({'text/plain': 'm'}, raw=True, metadata={'text/plain': {'isolated': True}})\nprint('after')",
    "sympy.sqrt(2) * sympy.Symbol('U_n')",
    "{'b': 1, 'a': [x for x in range(90)]}",
    "{chr(c) for c in range(97, 110)}",
    "_5, Out[6]",
    "5;",
    "None",
    "HTML('<b>x</b>')",
    "display(Latex('$x$'), 3, 'text')",
    "print('one')\nprint('two', end='')\ndisplay(1)\nprint('three')\n4",
    "print('to stderr', file=sys.stderr)\nprint('to stdout')",
    "handle = display({'text/plain': 'old'}, raw=True, display_id='d')",
    "handle.update({'text/plain': 'new'}, raw=True)",
    "print('gone')\nclear_output(wait=True)\nprint('kept')",
    "display({'image/png': bytes(range(40))}, raw=True)",
    "from dataclasses import dataclass\n@dataclass\nclass Point:\n    x: float\nPoint(0.1 + 0.2)",
    "import pickle\npickle.loads(pickle.dumps(Point(2)))",
    "import asyncio\nawait asyncio.sleep(0)\n'awaited'",
    "f'{1/3:.17g} {hash(\"calcbook\")}'",
    "from __future__ import annotations\ndef f(x: nowhere): return x\nf(2)",
    "import warnings\nwarnings.warn('careful')",
    "sys.stdout.isatty(), __name__, sorted(name for name in globals() if not name.startswith('_'))[:3]",
]
FAILURES = {
    "an exception": "1 / 0",
    "a quiet end": "import sys\nsys.exit()",
    "a result that cannot be shown": "class Bad:\n    def __repr__(self): raise ValueError('no text')\nBad()",
    "an unknown magic": "%no_such_magic",
}
EVERY_KIND_OF_FAILURE = [
    "raise KeyError('first\\nsecond')",
    "try:\n    1 / 0\nexcept ArithmeticError as e:\n    raise RuntimeError('outer') from e",
    "x = = 1",
    "raise SystemExit(3)",
    "import sys\nsys.exit()",
    "%no_such_magic",
    "raise KeyboardInterrupt",
    "from calcbook.errors import SheetFault\nraise SheetFault('C-014', 'cable-current', 'I_Z', 'is short')",
    "class Bad:\n    def __repr__(self): raise ValueError('no text')\nBad()",
    "display(Bad())",
]


def executed(made: Any, folder: Path, engine: str) -> tuple[Any, str]:
    """The cleaned notebook and the name of the error papermill raised."""
    source, target = folder / "in.ipynb", folder / f"{engine}.ipynb"
    nbformat.write(made, source)
    options = {"engine_name": "calcbook"} if engine == "warm" else kernel_options(folder)
    error = ""
    try:
        papermill.execute_notebook(source, target, progress_bar=False, **options)
    except PapermillExecutionError as raised:
        error = f"{raised.ename}: {raised.evalue} in cell {raised.cell_index} [{raised.exec_count}]"
    return clean(nbformat.read(target, as_version=4)), error


def write_warning(*parts: Any, **more: Any) -> None:
    sys.stderr.write(warnings.formatwarning(*parts[:4], **more))


def in_process(made: Any) -> str:
    """The cleaned text after evaluation in this process, where pytest would otherwise take the warnings."""
    with warnings.catch_warnings():
        warnings.simplefilter("default")
        warnings.showwarning = write_warning
        return canonical_text(clean(run_notebook(made)))


def test_every_kind_of_output_is_the_same(tmp_path: Path) -> None:
    made = notebook(*(code(source) for source in EVERY_KIND_OF_OUTPUT))
    warm, warm_error = executed(made, tmp_path, "warm")
    kernel, kernel_error = executed(made, tmp_path, "kernel")
    assert warm_error == kernel_error == ""
    for warm_cell, kernel_cell in zip(warm.cells, kernel.cells, strict=True):
        assert warm_cell == kernel_cell
    assert canonical_text(warm) == canonical_text(kernel)
    assert warm.cells[2].outputs[0]["data"][LINE_MIME] == {"b": [1, 2.5]}


@pytest.mark.parametrize("source", FAILURES.values(), ids=FAILURES.keys())
def test_failures_are_the_same(source: str, tmp_path: Path) -> None:
    made = notebook(code("print('before')"), code(source), code("'after'"))
    warm, warm_error = executed(made, tmp_path, "warm")
    kernel, kernel_error = executed(made, tmp_path, "kernel")
    assert canonical_text(warm) == canonical_text(kernel)
    assert warm_error == kernel_error
    assert warm.cells[1].execution_count == 2
    assert warm.cells[2].execution_count is None
    assert in_process(made) == canonical_text(warm)


def test_every_kind_of_failure_is_the_same_and_one_that_is_allowed_does_not_stop(tmp_path: Path) -> None:
    made = notebook(*(code(source, "raises-exception") for source in EVERY_KIND_OF_FAILURE), code("'end'"))
    warm, warm_error = executed(made, tmp_path, "warm")
    kernel, kernel_error = executed(made, tmp_path, "kernel")
    for warm_cell, kernel_cell in zip(warm.cells, kernel.cells, strict=True):
        assert warm_cell == kernel_cell
    assert warm_error == kernel_error != ""
    assert warm.cells[-1].outputs[0]["data"] == {"text/plain": "'end'"}
    assert in_process(made) == canonical_text(warm)


@pytest.mark.slow
@pytest.mark.parametrize("name", template_names())
def test_every_template_is_the_same_under_every_engine(name: str, tmp_path: Path) -> None:
    engines: tuple[EngineName, EngineName] = ("warm", "kernel")
    warm, kernel = (execute_sheet(plan(name), tmp_path, engine) for engine in engines)
    assert warm.failure is None
    cells = zip(*(nbformat.reads(result.workbook, as_version=4).cells for result in (warm, kernel)), strict=True)
    for warm_cell, kernel_cell in cells:
        assert warm_cell == kernel_cell
    assert warm == kernel
    assert warm.trace.lines
    assert in_process(nbformat.reads(warm.workbook, as_version=4)) == warm.workbook
