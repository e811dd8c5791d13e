"""Messages between the driver and its helper process: JSON with its length before it, over a pipe.

A request, `{"cells": [...]}`, holds those of a notebook. The answers are a CellRun for each executed cell, when it is
done, and a last message, `{"end": ...}`, that says why there are no more: DONE, or how the process ended.
"""

from __future__ import annotations

import json
import os
import struct
from dataclasses import dataclass
from typing import Any

DONE = "done"
Output = dict[str, Any]

_LENGTH = struct.Struct(">I")


@dataclass(frozen=True)
class CellRun:
    """What one executed cell gave: its outputs in the form of the notebook format, and whether it went well.

    `execution_count` is None for a cell in which the process ended; there is no run after it. `updated` holds, by cell
    index, the outputs of earlier cells in which this one replaced a display by its id.
    """

    index: int
    execution_count: int | None
    outputs: list[Output]
    succeeded: bool
    updated: list[tuple[int, list[Output]]]


def process_ended(detail: str) -> Output:
    """The error of a cell in which the process of the sheet ended; `detail` (signal, exit code) is for its author."""
    name, message = "SheetProcessEnded", "the process of this sheet ended in this cell"
    return {"output_type": "error", "ename": name, "evalue": message, "traceback": [f"{name}: {message} ({detail})"]}


def send(descriptor: int, message: dict[str, Any]) -> None:
    """Write one message; raises BrokenPipeError where nobody reads any more."""
    body = json.dumps(message, ensure_ascii=True).encode("ascii")
    rest = memoryview(_LENGTH.pack(len(body)) + body)
    while rest:
        rest = rest[os.write(descriptor, rest) :]


def receive(descriptor: int) -> dict[str, Any] | None:
    """Read one message; None at the end of the pipe, also where it ends inside a message."""
    head = _read(descriptor, _LENGTH.size)
    if head is None:
        return None
    body = _read(descriptor, _LENGTH.unpack(head)[0])
    if body is None:
        return None
    message: dict[str, Any] = json.loads(body)
    return message


def _read(descriptor: int, size: int) -> bytes | None:
    parts = bytearray()
    while len(parts) < size:
        part = os.read(descriptor, min(size - len(parts), 1 << 20))
        if not part:
            return None
        parts += part
    return bytes(parts)
