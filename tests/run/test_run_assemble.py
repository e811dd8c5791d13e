"""Assembly: one parameters cell, one set-up, each template's own cells, one conclusion."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import nbformat
import pytest
from small_templates import (
    CABLE_PARAMETERS,
    GIVEN_LINE,
    LOAD_PARAMETERS,
    code,
    plan,
    save,
    save_load_and_cable,
    template,
)

import calcbook
from calcbook.errors import TemplateFault
from calcbook.run.assemble import assemble
from calcbook.run.templates import find_template


def assembled(folder: Path, *names: str) -> Any:
    return assemble(plan(*names), [find_template(name, folder) for name in names])


def test_two_templates_become_one_workbook(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    made = assembled(tmp_path, "small-load", "small-cable")
    assert [cell.id for cell in made.cells] == [
        "parameters",
        "setup",
        "small-load-1",
        "small-load-5",
        "small-load-6",
        "small-cable-begin",
        "small-cable-1",
        "small-cable-5",
        "small-cable-6",
        "conclusion",
    ]
    sources = {cell.id: cell.source for cell in made.cells}
    assert sources["parameters"] == f"{CABLE_PARAMETERS}\n{GIVEN_LINE}"
    assert sources["setup"].split("\n") == [
        "from calcbook.sheet import open_sheet",
        "import mpmath",
        "import sympy",
        "",
        'sheet = open_sheet("small-load", globals())',
    ]
    assert sources["small-cable-begin"] == 'sheet.begin("small-cable")'
    assert sources["conclusion"] == "sheet.conclude()"
    assert not any("left_out" in source for source in sources.values())
    nbformat.validate(made)


def test_the_workbook_says_what_it_is(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    made = assembled(tmp_path, "small-load")
    assert made.metadata.calcbook == {
        "schema": 1,
        "sheet": "C-014",
        "title": "Travelling hoist",
        "templates": ["small-load"],
        "version": calcbook.__version__,
    }
    assert set(made.metadata) == {"calcbook", "kernelspec"}
    assert made.metadata.kernelspec.name == "python3"


def test_a_parameter_that_an_earlier_template_works_out_is_left_out(tmp_path: Path) -> None:
    save(tmp_path, "works-out", template("works-out", "", gives=["I_B"]))
    save_load_and_cable(tmp_path)
    made = assembled(tmp_path, "works-out", "small-cable")
    assert made.cells[0].source == f"{CABLE_PARAMETERS.splitlines()[1]}\n{GIVEN_LINE}"
    alone = assembled(tmp_path, "small-cable")
    assert alone.cells[0].source == f"{CABLE_PARAMETERS}\n{GIVEN_LINE}"
    later = assembled(tmp_path, "small-cable", "works-out")
    assert later.cells[0].source == f"{CABLE_PARAMETERS}\n{GIVEN_LINE}"


def test_a_taken_parameter_stays_where_another_template_asks_for_it(tmp_path: Path) -> None:
    save(tmp_path, "works-out", template("works-out", "", gives=["design_current"]))
    save_load_and_cable(tmp_path)
    made = assembled(tmp_path, "works-out", "small-cable", "small-load")
    assert LOAD_PARAMETERS in made.cells[0].source


def test_the_templates_themselves_are_not_touched(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    found = find_template("small-load", tmp_path)
    before = nbformat.writes(found.notebook)
    assemble(plan("small-load"), [found]).cells[-2].source = "changed"
    assert nbformat.writes(found.notebook) == before


def test_outputs_kept_in_a_template_do_not_reach_the_workbook(tmp_path: Path) -> None:
    stale = code("1")
    stale.execution_count, stale.outputs = 9, [nbformat.v4.new_output("stream", name="stdout", text="old")]
    save(tmp_path, "stale", template("stale", "", stale))
    own = next(cell for cell in assembled(tmp_path, "stale").cells if cell.id == "stale-5")
    assert (own.outputs, own.execution_count) == ([], None)


def test_a_template_without_conclusion_has_none(tmp_path: Path) -> None:
    made = template("derives", "", code("1"))
    made.cells.pop()
    save(tmp_path, "derives", made)
    assert [cell.id for cell in assembled(tmp_path, "derives").cells][-1] == "derives-5"


@pytest.mark.parametrize(
    ("setup", "message"),
    [
        ("import sympy", 'the last line of the set-up cell must be: sheet = open_sheet("bad", globals())'),
        (
            'sheet = open_sheet("other", globals())',
            'the last line of the set-up cell must be: sheet = open_sheet("bad"',
        ),
        ('x = 1\nsheet = open_sheet("bad", globals())', 'set-up cell, line 1: "x = 1" is not an import of one line'),
        (
            '\nimport a; b()\nsheet = open_sheet("bad", globals())',
            'set-up cell, line 2: "import a; b()" is not an import',
        ),
        (
            'from a import (\n  b)\nsheet = open_sheet("bad", globals())',
            'set-up cell, line 1: "from a import (" is not',
        ),
    ],
)
def test_a_set_up_cell_holds_imports_and_opens_the_sheet(setup: str, message: str, tmp_path: Path) -> None:
    made = template("bad", "")
    made.cells[2].source = setup
    save(tmp_path, "bad", made)
    with pytest.raises(TemplateFault) as raised:
        assembled(tmp_path, "bad")
    assert str(raised.value).startswith(f"template bad: {message}")


def test_a_sheet_without_template_is_refused() -> None:
    with pytest.raises(TemplateFault, match=r"sheet C-014 names no template"):
        assemble(plan(), [])
