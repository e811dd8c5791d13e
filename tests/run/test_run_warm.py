"""The warm helper: one clean fork a sheet, and no way for a sheet to hurt it."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import threading
import time
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import nbformat
import papermill
import pytest
from papermill.exceptions import PapermillExecutionError
from small_templates import code, notebook

from calcbook.errors import UsageFault, WorkspaceFault
from calcbook.run.helper import WarmHelper, close_warm_helper, warm_helper
from calcbook.run.messages import CellRun
from calcbook.run.warm import require_one_thread


@pytest.fixture(scope="module")
def helper() -> Iterator[WarmHelper]:
    with WarmHelper() as started:
        yield started


def run(helper: WarmHelper, *sources: str) -> list[CellRun]:
    return list(helper.run([code(source) for source in sources]))


def value(helper: WarmHelper, source: str) -> str:
    (only,) = run(helper, source)
    return str(only.outputs[-1]["data"]["text/plain"])


def wait_until(condition: Any) -> None:
    for _ in range(200):
        if condition():
            return
        time.sleep(0.02)
    pytest.fail("not within four seconds")


def exists(pid: int) -> bool:
    """Whether a process is there and not only waiting to be collected."""
    status = Path(f"/proc/{pid}/stat")
    return status.exists() and status.read_text().rsplit(")", 1)[1].split()[0] != "Z"


def test_each_sheet_has_a_process_of_its_own(helper: WarmHelper) -> None:
    first = value(helper, "import sympy, os\nsympy.left_over = 1\nos.getpid()")
    second = value(helper, "import sympy, os\nassert not hasattr(sympy, 'left_over')\nos.getpid()")
    assert len({first, second, str(helper.pid), str(os.getpid())}) == 4


def test_the_conditions_of_calculation_are_fixed(helper: WarmHelper) -> None:
    names = "('OPENBLAS_NUM_THREADS', 'PYTHONHASHSEED')"
    assert value(helper, f"import os\n[os.environ[name] for name in {names}]") == "['1', '0']"
    assert value(helper, "import threading\nthreading.active_count()") == "1"


def test_children_do_not_share_a_random_state(helper: WarmHelper) -> None:
    source = "import random\nrandom.random()"
    assert value(helper, source) != value(helper, source)


def test_nothing_that_hinders_forking_is_loaded(helper: WarmHelper) -> None:
    unfit = "{'zmq', 'tornado', 'typst', 'papermill', 'nbconvert', 'nbclient', 'jupyter_client', 'ipykernel', 'pyplot'}"
    assert value(helper, f"import sys\n{unfit} & set(sys.modules)") == "set()"
    assert value(helper, "import sys\n{'sympy', 'calcbook.sheet'} <= set(sys.modules)") == "True"


def test_text_written_past_python_does_not_reach_the_driver(helper: WarmHelper) -> None:
    source = "import os, subprocess\nfor fd in (1, 2): os.write(fd, b'noise' * 9)\nsubprocess.run(['echo', 'noise'])\n7"
    assert value(helper, source) == "7"
    assert value(helper, "import sys\nsys.__stdout__.write('noise')\nsys.__stdout__.flush()\n8") == "8"


def test_a_sheet_cannot_read_the_next_request(helper: WarmHelper) -> None:
    assert value(helper, "import os\nos.read(0, 100)") == "b''"


@pytest.mark.parametrize(
    ("source", "detail"),
    [
        ("import os, signal\nos.kill(os.getpid(), signal.SIGKILL)", "signal SIGKILL"),
        ("import os\nos._exit(3)", "exit code 3"),
    ],
)
def test_a_sheet_that_dies_is_told_and_the_helper_lives(helper: WarmHelper, source: str, detail: str) -> None:
    first, died = run(helper, "1", source, "2")
    assert first.succeeded
    (error,) = died.outputs
    assert (error["ename"], error["evalue"]) == ("SheetProcessEnded", "the process of this sheet ended in this cell")
    assert detail in error["traceback"][0]
    assert value(helper, "3") == "3"


def test_an_interrupt_is_not_recorded_as_an_error(helper: WarmHelper) -> None:
    assert (
        value(helper, "import os, signal\nos.kill(os.getpid(), signal.SIGINT)\nos.kill(os.getppid(), signal.SIGINT)\n4")
        == "4"
    )


def test_a_large_output_passes_whole(helper: WarmHelper) -> None:
    (only,) = run(helper, "print('x' * 3_000_000)")
    assert only.outputs == [{"output_type": "stream", "name": "stdout", "text": "x" * 3_000_000 + "\n"}]


def test_the_helper_ends_when_its_input_closes() -> None:
    helper = WarmHelper()
    assert value(helper, "1") == "1"
    helper.close()
    assert not helper.alive


def test_a_run_that_is_given_up_ends_helper_and_sheet() -> None:
    helper = WarmHelper()
    runs = helper.run([code("import os\nos.getpid()"), code("import time\ntime.sleep(60)")])
    child = int(next(runs).outputs[0]["data"]["text/plain"])
    runs.close()
    assert not helper.alive
    wait_until(lambda: not exists(child))


def test_a_helper_that_was_killed_is_a_clear_error_and_is_replaced() -> None:
    close_warm_helper()
    first = warm_helper()
    assert warm_helper() is first
    os.kill(first.pid, signal.SIGKILL)
    with pytest.raises(WorkspaceFault, match=r"^the calculation process ended unexpectedly \(exit code -9\)"):
        run(first, "1")
    second = warm_helper()
    assert second is not first
    assert value(second, "2") == "2"


def test_helper_and_sheet_end_with_a_driver_that_is_killed(tmp_path: Path) -> None:
    note = tmp_path / "pids"
    sheet = f"import os, time\nopen({str(note)!r}, 'w').write(f'{{os.getppid()}} {{os.getpid()}} ')\ntime.sleep(60)"
    cell = {"cell_type": "code", "metadata": {}, "source": sheet}
    driver = f"from calcbook.run.helper import WarmHelper\nlist(WarmHelper().run([{cell!r}]))"
    process = subprocess.Popen([sys.executable, "-c", driver])
    wait_until(lambda: note.exists() and note.read_text().endswith(" "))
    process.kill()
    process.wait()
    pids = [int(pid) for pid in note.read_text().split()]
    assert len(pids) == 2
    wait_until(lambda: not any(exists(pid) for pid in pids))


def test_a_second_thread_is_refused() -> None:
    stop = threading.Event()
    thread = threading.Thread(target=stop.wait)
    thread.start()
    try:
        with pytest.raises(RuntimeError, match="must have one to fork"):
            require_one_thread()
    finally:
        stop.set()
        thread.join()


def test_papermill_marks_a_failed_notebook_as_it_does_with_its_own_engine(tmp_path: Path) -> None:
    source, target = tmp_path / "in.ipynb", tmp_path / "out.ipynb"
    nbformat.write(notebook(code("1"), code("1 / 0"), code("2")), source)
    with pytest.raises(PapermillExecutionError, match="ZeroDivisionError"):
        papermill.execute_notebook(source, target, engine_name="calcbook", progress_bar=False)
    saved = nbformat.read(target, as_version=4)
    assert "An Exception was encountered" in saved.cells[0].source
    statuses = [cell.metadata.papermill.status for cell in saved.cells if cell.cell_type == "code"]
    assert statuses == ["completed", "failed", "pending"]
    assert saved.metadata.papermill.exception is True
    assert saved.cells[3].outputs[0]["ename"] == "ZeroDivisionError"


def test_options_the_engine_cannot_honour_are_refused(tmp_path: Path) -> None:
    source = tmp_path / "in.ipynb"
    nbformat.write(notebook(code("1")), source)
    with pytest.raises(UsageFault, match=r"^engine calcbook: execution_timeout is not available"):
        papermill.execute_notebook(source, None, engine_name="calcbook", progress_bar=False, execution_timeout=5)


def test_a_machine_without_fork_uses_the_ordinary_kernel(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delattr(os, "fork")
    source, target = tmp_path / "in.ipynb", tmp_path / "out.ipynb"
    nbformat.write(notebook(code("import sys\n'ipykernel' in sys.modules")), source)
    papermill.execute_notebook(source, target, engine_name="calcbook", progress_bar=False)
    assert nbformat.read(target, as_version=4).cells[0].outputs[0]["data"] == {"text/plain": "True"}


def test_the_engine_can_be_imported_before_papermill() -> None:
    check = "from calcbook.run.engine import WarmEngine; import papermill.engines as p; "
    check += "assert p.papermill_engines.get_engine('calcbook') is WarmEngine"
    subprocess.run([sys.executable, "-c", check], check=True)
    with pytest.raises(ImportError, match="cannot import name 'ColdEngine'"):
        from calcbook.run.engine import ColdEngine  # noqa: F401
