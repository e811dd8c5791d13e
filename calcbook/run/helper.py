"""The driver's side of the warm helper: starts it when first needed, sends it sheets, ends it with the process."""

from __future__ import annotations

import atexit
import contextlib
import os
import signal
import subprocess
import sys
import threading
from collections.abc import Generator, Sequence
from typing import Self

from calcbook.errors import WorkspaceFault
from calcbook.run.cells import Cell
from calcbook.run.messages import DONE, CellRun, process_ended, receive, send

CALCULATION_ENVIRONMENT = {
    "OPENBLAS_NUM_THREADS": "1",
    "OMP_NUM_THREADS": "1",
    "MKL_NUM_THREADS": "1",
    "PYTHONHASHSEED": "0",
}


def can_fork() -> bool:
    """Whether this machine can fork a process that has libraries loaded; macOS has the call, but not the safety."""
    return hasattr(os, "fork") and sys.platform != "darwin"


class WarmHelper:
    """One helper process; a context manager that ends it. Sheets are executed one after the other."""

    def __init__(self) -> None:
        """Start the process: it loads the calculation libraries while the caller goes on."""
        self._lock = threading.Lock()
        self._process = subprocess.Popen(
            [sys.executable, "-P", "-m", "calcbook.run.warm"],
            stdin=subprocess.PIPE,
            stdout=subprocess.PIPE,
            env={**os.environ, **CALCULATION_ENVIRONMENT},
            start_new_session=True,
        )
        if self._process.stdin is None or self._process.stdout is None:
            raise WorkspaceFault("the calculation process has no pipes")
        self._requests, self._answers = self._process.stdin.fileno(), self._process.stdout.fileno()

    def __enter__(self) -> Self:
        """The helper itself."""
        return self

    def __exit__(self, *_error: object) -> None:
        """End the process."""
        self.close()

    @property
    def alive(self) -> bool:
        """Whether the process can take a sheet."""
        return self._process.poll() is None

    @property
    def pid(self) -> int:
        """The id of the helper process."""
        return self._process.pid

    def run(self, cells: Sequence[Cell]) -> Generator[CellRun, None, None]:
        """Execute cells in a fresh child of the helper; each executed cell is yielded as soon as it is done.

        Where the child ends inside a cell, the last run says so. Raises WorkspaceFault where the helper itself is gone.
        A caller that stops half-way (an interrupt, an error of its own) ends the helper with the child.
        """
        with self._lock:
            complete = False
            try:
                end = yield from self._conversation(cells)
                complete = True
            finally:
                if not complete:
                    self.kill()
        if end != DONE:
            yield CellRun(-1, None, [process_ended(end)], False, [])

    def _conversation(self, cells: Sequence[Cell]) -> Generator[CellRun, None, str]:
        request = [{key: cell[key] for key in ("cell_type", "metadata", "source")} for cell in cells]
        try:
            send(self._requests, {"cells": request})
        except BrokenPipeError:
            raise WorkspaceFault(self._gone()) from None
        while (message := receive(self._answers)) is not None:
            if "end" in message:
                return str(message["end"])
            yield CellRun(**message)
        raise WorkspaceFault(self._gone())

    def _gone(self) -> str:
        code = self._process.wait()
        return f"the calculation process ended unexpectedly (exit code {code}); use the ordinary kernel instead"

    def close(self) -> None:
        """Close its standard input, wait for its end, and end it by force where it does not come."""
        for pipe in (self._process.stdin, self._process.stdout):
            if pipe is not None:
                with contextlib.suppress(OSError):
                    pipe.close()
        try:
            self._process.wait(timeout=5)
        except subprocess.TimeoutExpired:
            self.kill()

    def kill(self) -> None:
        """End the process and its child at once."""
        with contextlib.suppress(ProcessLookupError):
            os.killpg(self._process.pid, signal.SIGKILL)
        self._process.wait()
        self.close()


_running: list[WarmHelper] = []


def warm_helper() -> WarmHelper:
    """The helper of this process: started at the first call, and again where it has gone."""
    if not (_running and _running[0].alive):
        close_warm_helper()
        _running.append(WarmHelper())
    return _running[0]


@atexit.register
def close_warm_helper() -> None:
    """End the helper of this process, if there is one."""
    while _running:
        _running.pop().close()
