"""The warm helper: a process that has the calculation libraries loaded and forks a child for each sheet.

Run as `python -P -m calcbook.run.warm` by `calcbook.run.helper`, with a pipe on standard input and output that carry
the messages of `calcbook.run.messages`; ends when its standard input closes. It stays fit for forking: one thread, no
event loop, no messaging library, and nothing in it but what a sheet needs.
"""

from __future__ import annotations

import gc
import os
import select
import signal
import threading
from dataclasses import asdict
from pathlib import Path
from typing import Any

from calcbook import sheet
from calcbook.run.messages import DONE, receive, send
from calcbook.run.shell import run_cells

_FIRST_CELL = "from IPython.display import display\ndisplay({'text/plain': ''}, raw=True)\n1"
_STDIN, _STDOUT, _STDERR = 0, 1, 2


def main() -> None:
    """Serve requests from standard input until it closes."""
    answers = os.dup(_STDOUT)
    os.dup2(_STDERR, _STDOUT)
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    warm_up()
    require_one_thread()
    gc.collect()
    gc.freeze()
    while (request := receive(_STDIN)) is not None:
        serve(request["cells"], answers)


def warm_up() -> None:
    """Fill the caches of what sheets import, and execute a first cell, so that no child has to."""
    sheet.prime()
    run_cells([{"cell_type": "code", "metadata": {}, "source": _FIRST_CELL}], lambda run: None)


def require_one_thread() -> None:
    """Raise RuntimeError where this process has a second thread: a fork loses it, and with it any lock it holds."""
    tasks = Path("/proc/self/task")
    count = len(list(tasks.iterdir())) if tasks.is_dir() else threading.active_count()
    if count != 1:
        raise RuntimeError(f"the warm helper has {count} threads, and must have one to fork")


def serve(cells: list[dict[str, Any]], answers: int) -> None:
    """Execute the cells in a child, pass on its messages, then say how it ended."""
    reading, writing = os.pipe()
    child = os.fork()
    if child == 0:
        os.close(reading)
        os.close(answers)
        _be_the_child(cells, writing)
    os.close(writing)
    finished = _pass_on(reading, answers, child)
    os.close(reading)
    _, status = os.waitpid(child, 0)
    send(answers, {"end": DONE if finished else _how_it_ended(status)})


def _be_the_child(cells: list[dict[str, Any]], writing: int) -> None:
    """Execute the cells and leave the process without its exit handlers, whatever happens."""
    code = 1
    try:
        nothing = os.open(os.devnull, os.O_RDWR)
        for descriptor in (_STDIN, _STDOUT, _STDERR):
            os.dup2(nothing, descriptor)
        run_cells(cells, lambda run: send(writing, asdict(run)))
        send(writing, {"end": DONE})
        code = 0
    finally:
        os._exit(code)


def _pass_on(reading: int, answers: int, child: int) -> bool:
    """Pass on whole messages of the child until its last; False where it ended without one.

    The driver is silent while it waits: input that becomes readable means that it is gone, and the child goes too.
    """
    while True:
        ready, _, _ = select.select([reading, _STDIN], [], [])
        if reading not in ready:
            os.kill(child, signal.SIGKILL)
            os._exit(1)
        message = receive(reading)
        if message is None or "end" in message:
            return message is not None
        send(answers, message)


def _how_it_ended(status: int) -> str:
    code = os.waitstatus_to_exitcode(status)
    return f"signal {signal.Signals(-code).name}" if code < 0 else f"exit code {code}"


if __name__ == "__main__":
    main()
