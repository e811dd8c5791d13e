"""Cells evaluated in this process: the outputs of the notebook format, and nothing left behind."""

from __future__ import annotations

import builtins
import gc
import sys
import threading
from pathlib import Path
from typing import Any

import pytest
from IPython.core.getipython import get_ipython
from small_templates import code, notebook

from calcbook.run.shell import run_notebook


def outputs(*sources: str) -> list[list[Any]]:
    executed = run_notebook(notebook(*(code(source) for source in sources)))
    return [cell["outputs"] for cell in executed.cells]


def test_displayed_data_keep_their_types_and_order() -> None:
    bundle = {"text/plain": "a", "application/x+json": {"pair": (1, 2.5), "none": None}, "image/png": b"\x00"}
    source = f"from IPython.display import display\nprint('p')\ndisplay({bundle!r}, raw=True)\n1 + 1"
    ((stream, shown, result),) = outputs(source)
    assert stream == {"output_type": "stream", "name": "stdout", "text": "p\n"}
    plain = {"text/plain": "a", "application/x+json": {"pair": [1, 2.5], "none": None}, "image/png": "AA=="}
    assert shown == {"output_type": "display_data", "data": plain, "metadata": {}}
    assert result["data"] == {"text/plain": "2"}


def test_the_value_of_the_last_expression_is_a_result_with_its_count() -> None:
    _, result = outputs("x = 20", "x * 2 + 2")
    assert result == [
        {"output_type": "execute_result", "execution_count": 2, "data": {"text/plain": "42"}, "metadata": {}}
    ]
    assert outputs("1;") == [[]]


def test_the_first_error_ends_the_execution() -> None:
    executed = run_notebook(notebook(code("1"), code(" "), code("raise ValueError('no such cable')"), code("2")))
    assert [cell.execution_count for cell in executed.cells] == [1, None, 2, None]
    (error,) = executed.cells[2].outputs
    assert (error["output_type"], error["ename"], error["evalue"]) == ("error", "ValueError", "no such cable")
    assert executed.cells[3].outputs == []


def test_a_cell_that_may_fail_does_not_end_the_execution() -> None:
    executed = run_notebook(notebook(code("1 / 0", "raises-exception"), code("2")))
    assert executed.cells[0].outputs[0]["ename"] == "ZeroDivisionError"
    assert executed.cells[1].outputs[0]["data"] == {"text/plain": "2"}


def test_a_display_is_updated_by_its_id_and_outputs_are_cleared() -> None:
    shown = outputs(
        "from IPython.display import clear_output",
        "handle = display({'text/plain': 'old'}, raw=True, display_id='d')",
        "handle.update({'text/plain': 'new'}, raw=True)",
        "print('gone')\nclear_output()\nprint('kept')",
        "print('gone')\nclear_output(wait=True)\nprint('kept')",
        "print('kept')\nclear_output(wait=True)",
    )
    assert [[output.get("text", output.get("data")) for output in cell] for cell in shown] == [
        [],
        [{"text/plain": "new"}],
        [],
        ["kept\n"],
        ["kept\n"],
        ["kept\n"],
    ]


def test_every_call_has_a_fresh_namespace() -> None:
    outputs("left_over = 1")
    assert outputs("'left_over' in globals()")[0][0]["data"] == {"text/plain": "False"}


def test_cells_find_their_globals_in_the_main_module() -> None:
    source = "import sys\nx = 3\nsys.modules['__main__'].x == globals()['x'] and __name__ == '__main__'"
    assert outputs(source)[0][0]["data"] == {"text/plain": "True"}


def test_the_process_is_left_as_it_was(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("IPYTHONDIR", str(tmp_path / "ipython"))
    before = (sys.modules["__main__"], sys.stdout, sys.stderr, sys.displayhook, sys.excepthook, set(vars(builtins)))
    outputs("import sys\nsys.ps1", "1 / 0")
    after = (sys.modules["__main__"], sys.stdout, sys.stderr, sys.displayhook, sys.excepthook, set(vars(builtins)))
    assert after == before
    assert get_ipython() is None
    assert not hasattr(sys, "ps1")
    assert not isinstance(getattr(sys, "last_value", None), ZeroDivisionError)
    assert not (tmp_path / "ipython").exists()
    assert "IPythonHistorySavingThread" not in [thread.name for thread in threading.enumerate()]


def test_shells_do_not_pile_up() -> None:
    for _ in range(5):
        outputs("1")
    gc.collect()
    assert len([kept for kept in gc.get_objects() if type(kept).__name__ == "_NotebookShell"]) < 3


def test_the_notebook_that_was_handed_in_is_not_touched() -> None:
    given = notebook(code("1"))
    run_notebook(given)
    assert given.cells[0].outputs == []


def test_data_that_no_notebook_can_hold_are_an_error_in_the_cell() -> None:
    source = "from IPython.display import display\ndisplay({'application/x+json': {'I': float('nan')}}, raw=True)"
    assert outputs(source)[0][0]["ename"] == "ValueError"
    source = "from IPython.display import display\ndisplay({'application/x+json': {'I': object}}, raw=True)"
    assert outputs(source)[0][0]["evalue"] == "<class 'object'> is not JSON serializable"
