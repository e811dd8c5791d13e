"""Takes from an executed notebook what differs from run to run: times, paths, versions, random ids, engine marks.

What is left depends on nothing but the notebook's inputs, and is the same under every engine.
"""

from __future__ import annotations

import copy
import re
from collections.abc import Iterable
from typing import Any

import nbformat

from calcbook.run.cells import INJECTED, tags_of

_ERROR_MARK = "papermill-error-cell-tag"
_NOTEBOOK_NOISE = ("papermill", "language_info", "widgets")
_CELL_NOISE = ("papermill", "execution")
_CELL_FILE = re.compile(r"\S*ipykernel_\d+[\\/]\d+\.py|<ipython-input-[\w-]+>")
_PLACE_OF_SYNTAX_ERROR = re.compile(r"\((?:\d+\.py|<ipython-input-[\w-]+>), (line \d+)\)$")


def clean(notebook: nbformat.NotebookNode) -> nbformat.NotebookNode:
    """A copy of an executed notebook without anything that differs from run to run.

    Errors keep name and message; their tracebacks, which hold paths, are reduced to the two.
    """
    cleaned = copy.deepcopy(notebook)
    for name in _NOTEBOOK_NOISE:
        cleaned.metadata.pop(name, None)
    cleaned.cells = [cell for cell in cleaned.cells if _ERROR_MARK not in tags_of(cell)]
    for cell in cleaned.cells:
        _clean_cell(cell)
    return cleaned


def canonical_text(notebook: nbformat.NotebookNode) -> str:
    """A notebook as the text of its file: keys sorted, one newline at the end."""
    return str(nbformat.writes(nbformat.from_dict(notebook))).rstrip("\n") + "\n"


def _clean_cell(cell: nbformat.NotebookNode) -> None:
    for name in _CELL_NOISE:
        cell.metadata.pop(name, None)
    if not cell.metadata.get("tags", True):
        del cell.metadata["tags"]
    if INJECTED in tags_of(cell):
        cell["id"] = INJECTED
    if cell["cell_type"] == "code":
        cell.outputs = _join_streams(cell.outputs)
        for output in cell.outputs:
            if output["output_type"] == "error":
                output["evalue"] = _PLACE_OF_SYNTAX_ERROR.sub(r"(\1)", output["evalue"])
                output["traceback"] = [f"{output['ename']}: {output['evalue']}"]
            elif output["output_type"] == "stream":
                output["text"] = _CELL_FILE.sub("<cell>", output["text"])


def _join_streams(outputs: Iterable[Any]) -> list[Any]:
    """Outputs with neighbouring streams joined, standard output first: a kernel sends them in chunks, in any order."""
    joined: list[Any] = []
    streams: dict[str, Any] = {}
    for output in outputs:
        if output["output_type"] != "stream":
            joined += [streams[name] for name in sorted(streams, reverse=True)]
            joined.append(output)
            streams = {}
        elif output["name"] in streams:
            streams[output["name"]]["text"] += output["text"]
        else:
            streams[output["name"]] = output
    return joined + [streams[name] for name in sorted(streams, reverse=True)]
