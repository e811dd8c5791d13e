"""Messages between the driver and its helper process: JSON with its length before it, over a pipe.

A request is the list of a notebook's cells. The answers are a CellRun for each executed cell, as it is done, and a last
message `{"end": ...}` that says why there are no more: DONE, or how the process of the sheet ended.
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

    `updated` holds, by cell index, the outputs of earlier cells in which this one replaced a display by its id.
    """

    index: int
    execution_count: int
    outputs: list[Output]
    succeeded: bool
    updated: list[tuple[int, list[Output]]]


def send(descriptor: int, message: object) -> None:
    """Write one message; raises BrokenPipeError where nobody reads any more."""
    body = json.dumps(message, ensure_ascii=True).encode("ascii")
    rest = memoryview(_LENGTH.pack(len(body)) + body)
    while rest:
        rest = rest[os.write(descriptor, rest) :]


def receive(descriptor: int) -> Any:
    """Read one message; None at the end of the pipe, also where it ends inside a message."""
    head = _read(descriptor, _LENGTH.size)
    if head is None:
        return None
    body = _read(descriptor, _LENGTH.unpack(head)[0])
    return None if body is None else json.loads(body)


def _read(descriptor: int, size: int) -> bytes | None:
    parts = bytearray()
    while len(parts) < size:
        part = os.read(descriptor, min(size - len(parts), 1 << 20))
        if not part:
            return None
        parts += part
    return bytes(parts)
