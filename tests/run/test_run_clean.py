"""Cleaning: nothing that differs from run to run stays, and nothing else goes."""

from __future__ import annotations

from typing import Any

from nbformat import from_dict
from small_templates import code, notebook

from calcbook.run.clean import canonical_text, clean


def stream(name: str, text: str) -> Any:
    return from_dict({"output_type": "stream", "name": name, "text": text})


def with_outputs(*outputs: Any) -> Any:
    cell = code("1", "own")
    cell.outputs = list(outputs)
    return clean(notebook(cell)).cells[0].outputs


def test_what_papermill_and_kernels_add_is_taken_away() -> None:
    own = code("1", "own")
    own.metadata.update(papermill={"start_time": "now"}, execution={"busy": "now"})
    injected, untagged = code("x = 1", "injected-parameters"), code("2")
    untagged.metadata.tags = []
    mark = code("An Exception was encountered", "papermill-error-cell-tag")
    made = notebook(mark, own, injected, untagged, calcbook={"sheet": "C-014"})
    made.metadata.update(papermill={"version": "1"}, language_info={"version": "3.11.7"}, widgets={})
    cleaned = clean(made)
    assert set(cleaned.metadata) == {"kernelspec", "calcbook"}
    assert [cell.metadata for cell in cleaned.cells] == [{"tags": ["own"]}, {"tags": ["injected-parameters"]}, {}]
    assert cleaned.cells[1].id == "injected-parameters"
    assert cleaned.cells[0].id == own.id
    assert made.metadata.papermill == {"version": "1"}


def test_an_error_keeps_name_and_message() -> None:
    error = {"output_type": "error", "ename": "ValueError", "evalue": "bad", "traceback": ["/home/x.py", "line 3"]}
    assert with_outputs(from_dict(error))[0] == {**error, "traceback": ["ValueError: bad"]}


def test_the_place_of_a_syntax_error_names_no_file() -> None:
    for file in ("123456.py", "<ipython-input-3-ab12>"):
        error = {"output_type": "error", "ename": "SyntaxError", "evalue": f"bad ({file}, line 3)", "traceback": []}
        assert with_outputs(from_dict(error))[0]["evalue"] == "bad (line 3)"


def test_streams_between_two_displays_are_joined_by_name() -> None:
    shown = from_dict({"output_type": "display_data", "data": {"text/plain": "x"}, "metadata": {}})
    outputs = with_outputs(
        stream("stderr", "e1 "),
        stream("stdout", "o1 "),
        stream("stdout", "o2 "),
        stream("stderr", "e2"),
        shown,
        stream("stdout", "o3"),
    )
    texts = [output.get("text") for output in outputs]
    assert texts == ["o1 o2 ", "e1 e2", None, "o3"]


def test_streams_name_no_temporary_file() -> None:
    texts = [
        with_outputs(stream("stderr", f"{file}:1: careful"))[0]["text"]
        for file in ("/somewhere/ipykernel_12/345.py", "<ipython-input-1-ab>")
    ]
    assert texts == ["<cell>:1: careful"] * 2


def test_text_is_the_same_for_the_same_notebook_however_it_was_made() -> None:
    made = notebook(code("é = '𝜑'"))
    turned = from_dict({key: made[key] for key in reversed(list(made))})
    assert canonical_text(made) == canonical_text(turned)
    assert canonical_text(made).endswith("}\n")
    assert "é = '𝜑'" in canonical_text(made)
