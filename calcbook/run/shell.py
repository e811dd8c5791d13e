"""Evaluates the cells of a notebook in this process, with the outputs an ordinary kernel would give.

No kernel, no thread, no history file, no user start-up files. Each call has a fresh shell and namespace, and leaves
the process as it found it.
"""

from __future__ import annotations

import atexit
import builtins
import copy
import io
import json
import sys
from binascii import b2a_base64
from collections.abc import Callable, Iterator, Mapping, MutableMapping, Sequence
from contextlib import contextmanager, redirect_stderr, redirect_stdout
from typing import Any, TypeVar

from IPython.core.displayhook import DisplayHook
from IPython.core.displaypub import DisplayPublisher
from IPython.core.interactiveshell import InteractiveShell
from traitlets import Type
from traitlets.config import Config

from calcbook.run.cells import Cell, is_executable, stops_at_error, text_of
from calcbook.run.messages import CellRun, Output

Notebook = TypeVar("Notebook", bound=MutableMapping[str, Any])

_CONFIG = Config({"HistoryManager": {"enabled": False, "hist_file": ":memory:"}})
_MISSING = object()
_BUILTINS = ("__IPYTHON__", "display", "get_ipython", "_")
_SYSTEM = ("excepthook", "last_traceback", "last_type", "last_value", "ps1", "ps2", "ps3")


class Outputs:
    """The outputs of the cells so far: those of the last one grow, earlier ones may be updated by display id."""

    def __init__(self) -> None:
        """Start with no cell."""
        self.by_cell: dict[int, list[Output]] = {}
        self.current: list[Output] = []
        self.updated: set[int] = set()
        self._clear_first = False
        self._displayed: dict[str, list[tuple[int, Output]]] = {}

    def start_cell(self, index: int) -> None:
        """From now on outputs belong to a new cell."""
        self.current = self.by_cell[index] = []
        self.updated = set()
        self._clear_first = False

    def add(self, output: Output, display_id: str = "") -> None:
        """Append an output; text of a stream joins the stream before it."""
        if self._clear_first:
            self.current.clear()
            self._clear_first = False
        last = self.current[-1] if self.current else {}
        if output["output_type"] == "stream" and last.get("name") == output["name"]:
            last["text"] += output["text"]
            return
        self.current.append(output)
        if display_id:
            self._displayed.setdefault(display_id, []).append((max(self.by_cell), output))

    def update(self, display_id: str, data: object, metadata: object) -> None:
        """Replace what was displayed under a display id."""
        for index, output in self._displayed.get(display_id, ()):
            output.update(data=data, metadata=metadata)
            self.updated.add(index)

    def clear(self, wait: bool) -> None:
        """Forget the outputs of the cell, now or when the next one comes."""
        if wait:
            self._clear_first = True
        else:
            self.current.clear()


class _Stream(io.TextIOBase):
    """Text written by a cell to a standard stream."""

    def __init__(self, name: str, outputs: Outputs) -> None:
        self.name = name
        self._outputs = outputs

    def writable(self) -> bool:
        return True

    def write(self, text: str) -> int:
        if text:
            self._outputs.add({"output_type": "stream", "name": self.name, "text": text})
        return len(text)


def _plain_default(value: object) -> object:
    if isinstance(value, bytes):
        return b2a_base64(value, newline=False).decode("ascii")
    raise TypeError(f"{value!r} is not JSON serializable")


def _plain(data: object) -> object:
    """Data as they arrive in a notebook after their way through JSON."""
    return json.loads(json.dumps(data, default=_plain_default, allow_nan=False))


class _ResultHook(DisplayHook):  # type: ignore[misc]
    """Takes the value of a cell's last expression."""

    def write_output_prompt(self) -> None:
        pass

    def write_format_data(self, format_dict: Mapping[str, object], md_dict: Mapping[str, object] | None = None) -> None:
        output = {
            "output_type": "execute_result",
            "execution_count": self.prompt_count,
            "data": _plain(format_dict),
            "metadata": _plain(md_dict or {}),
        }
        self.shell.outputs.add(output)

    def finish_displayhook(self) -> None:
        self._is_active = False


class _DisplayPublisher(DisplayPublisher):  # type: ignore[misc]
    """Takes what a cell displays."""

    def publish(
        self,
        data: Mapping[str, object],
        metadata: Mapping[str, object] | None = None,
        *,
        transient: Mapping[str, str] | None = None,
        update: bool = False,
        **_unused: object,
    ) -> None:
        self._validate_data(data, metadata)
        display_id = (transient or {}).get("display_id", "")
        plain, about = _plain(data), _plain(metadata or {})
        if update:
            self.shell.outputs.update(display_id, plain, about)
        else:
            self.shell.outputs.add({"output_type": "display_data", "data": plain, "metadata": about}, display_id)

    def clear_output(self, wait: bool = False) -> None:
        self.shell.outputs.clear(wait)


class _NotebookShell(InteractiveShell):  # type: ignore[misc]
    """IPython's shell without a terminal, a profile folder or history."""

    displayhook_class = Type(_ResultHook)
    display_pub_class = Type(_DisplayPublisher)

    def __init__(self, outputs: Outputs) -> None:
        self.outputs = outputs
        self.result_failed = False
        super().__init__(config=_CONFIG)
        atexit.unregister(self.atexit_operations)

    def init_ipython_dir(self, ipython_dir: object) -> None:
        pass

    def init_profile_dir(self, profile_dir: object) -> None:
        pass

    def init_virtualenv(self) -> None:
        pass

    def _showtraceback(self, etype: type[BaseException], evalue: BaseException, stb: list[str]) -> None:
        self.result_failed |= self.displayhook.is_active
        self.outputs.add(
            {"output_type": "error", "ename": str(etype.__name__), "evalue": str(evalue), "traceback": list(stb)}
        )


@contextmanager
def _shell() -> Iterator[_NotebookShell]:
    """A fresh shell, known to IPython as the only one; afterwards modules, built-ins and hooks are as before."""
    main, previous = sys.modules["__main__"], InteractiveShell._instance
    names = {name: getattr(builtins, name, _MISSING) for name in _BUILTINS}
    system = {name: getattr(sys, name, _MISSING) for name in _SYSTEM}
    try:
        shell = _NotebookShell(Outputs())
        InteractiveShell._instance = shell
        yield shell
    finally:
        InteractiveShell._instance = previous
        sys.modules["__main__"] = main
        _put_back(builtins, names)
        _put_back(sys, system)


def _put_back(module: object, attributes: Mapping[str, object]) -> None:
    for name, value in attributes.items():
        if value is not _MISSING:
            setattr(module, name, value)
        elif hasattr(module, name):
            delattr(module, name)


def run_cells(cells: Sequence[Cell], report: Callable[[CellRun], None]) -> None:
    """Execute the code cells in order, up to the first error, and report each one when it is done.

    Parameters: `cells` of a notebook, markdown included; `report` is called with a CellRun for every executed cell.
    """
    with _shell() as shell:
        for index, cell in enumerate(cells):
            if not is_executable(cell):
                continue
            run = _run_cell(shell, index, text_of(cell))
            report(run)
            if not run.succeeded and stops_at_error(cell):
                return


def _run_cell(shell: _NotebookShell, index: int, source: str) -> CellRun:
    outputs = shell.outputs
    outputs.start_cell(index)
    shell.result_failed = False
    count = shell.execution_count
    with redirect_stdout(_Stream("stdout", outputs)), redirect_stderr(_Stream("stderr", outputs)):
        result = shell.run_cell(source, store_history=True)
    updated = [(earlier, outputs.by_cell[earlier]) for earlier in sorted(outputs.updated - {index})]
    succeeded = bool(result.success) and not shell.result_failed
    return CellRun(index, count, outputs.current, succeeded, updated)


def run_notebook(notebook: Notebook) -> Notebook:
    """A copy of a notebook with its cells evaluated in this process, up to the first error.

    The entry for property tests and benchmarks: outputs and execution counts equal those of the ordinary kernel.
    """
    executed = copy.deepcopy(notebook)
    for cell in executed["cells"]:
        if cell["cell_type"] == "code":
            cell["outputs"], cell["execution_count"] = [], None

    def keep(run: CellRun) -> None:
        executed["cells"][run.index]["outputs"] = run.outputs
        executed["cells"][run.index]["execution_count"] = run.execution_count

    run_cells(executed["cells"], keep)
    return executed
