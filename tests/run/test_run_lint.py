"""The rules of templates: the shipped ones keep them, and each rule finds what it forbids."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from nbformat.v4 import new_markdown_cell, new_output, new_raw_cell
from small_templates import CABLE_PARAMETERS, LOAD_PARAMETERS, code, save, save_load_and_cable, template

from calcbook.run.lint import complaints
from calcbook.run.templates import find_template, template_names

TAKES = code('sheet.taken("design_current")')


@pytest.mark.parametrize("name", template_names())
def test_the_shipped_templates_keep_the_rules(name: str) -> None:
    assert complaints(find_template(name)) == ()


def test_templates_of_the_right_form_have_no_complaints(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    assert [complaints(find_template(name, tmp_path)) for name in ("small-load", "small-cable")] == [(), ()]


def complaints_about(made: Any, folder: Path) -> tuple[str, ...]:
    save(folder, "bad", made)
    return complaints(find_template("bad", folder))


@pytest.mark.parametrize(
    ("source", "complaint"),
    [
        ("import math", "imports stand in the set-up cell"),
        ("print(1)", "calls print(): the trace is the only way out of a sheet, its inputs the only way in"),
        ("open('x')", "calls open(): the trace is the only way out of a sheet, its inputs the only way in"),
        ("globals()", "calls globals(): the trace is the only way out of a sheet, its inputs the only way in"),
        ("1\n%time x", "line 2 is not Python"),
    ],
)
def test_code_that_no_template_may_hold(source: str, complaint: str, tmp_path: Path) -> None:
    assert complaints_about(template("bad", "", code(source)), tmp_path) == (f"cell 5: {complaint}",)


@pytest.mark.parametrize(
    "imports", ["import random", "from numpy import random", "import os.path as p", "from time import sleep"]
)
def test_imports_that_no_template_may_hold(imports: str, tmp_path: Path) -> None:
    made = template("bad", "", imports=imports.replace("from numpy import", "from numpy.random import") + "\n")
    (complaint,) = complaints_about(made, tmp_path)
    assert complaint.startswith("cell 3: imports ")
    assert complaint.endswith("a sheet depends on nothing but its inputs")


@pytest.mark.parametrize(
    "text",
    [
        "- a list",
        "1. a list",
        "a *word*",
        "`code`",
        "<b>",
        "a | b",
        "$x$",
        "[a](b)",
        "    code",
        "#no space",
        "> quote",
    ],
)
def test_text_is_headings_and_plain_paragraphs(text: str, tmp_path: Path) -> None:
    made = template("bad", "", new_markdown_cell(f"## Right\n\nThe load I_B, at 400 V.\n{text}"))
    assert complaints_about(made, tmp_path) == (f'cell 5: "{text}" is neither a heading nor plain text',)


def test_what_a_template_says_it_takes_and_gives_is_what_its_code_does(tmp_path: Path) -> None:
    made = template("bad", LOAD_PARAMETERS, TAKES, gives=["length", "design_current"])
    assert complaints_about(made, tmp_path) == (
        "takes [] in its metadata, but ['design_current'] in its cells",
        'gives "length" in its metadata, but makes no such line',
        'gives "design_current" in its metadata, but makes no such line',
    )
    made = template("bad", LOAD_PARAMETERS, code('sheet.step("I_B", design_current)'), gives=["design_current"])
    assert complaints_about(made, tmp_path) == ()


def test_a_parameter_that_is_not_read_is_found(tmp_path: Path) -> None:
    made = template("bad", CABLE_PARAMETERS, TAKES, takes=["design_current"])
    assert complaints_about(made, tmp_path) == ('declares parameter "length", but does not read it',)


def test_the_structure_of_the_cells(tmp_path: Path) -> None:
    executed, unknown = code("1"), code("1", "hidden")
    executed.execution_count, executed.outputs = 1, [new_output("stream", name="stdout", text="1")]
    made = template("bad", "", executed, unknown, new_raw_cell("x"))
    made.cells[2].source = made.cells[2].source.replace("from calcbook.sheet import", "from elsewhere import")
    made.cells[-1].source = "sheet.conclude(1)"
    made.cells.insert(0, code("1"))
    assert complaints_about(made, tmp_path) == (
        "the set-up cell lacks: from calcbook.sheet import open_sheet",
        "the first code cells are parameters and set-up",
        "the conclusion is the last cell: sheet.conclude()",
        "cell 6: outputs or an execution count are kept in the file",
        'cell 7: unknown tag "hidden"',
        "cell 8: neither code nor text",
    )


def test_a_set_up_cell_of_another_form(tmp_path: Path) -> None:
    made = template("bad", "")
    made.cells[2].source = "x = 1\n" + made.cells[2].source
    assert complaints_about(made, tmp_path) == ('set-up cell, line 1: "x = 1" is not an import of one line',)
