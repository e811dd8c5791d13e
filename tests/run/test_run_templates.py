"""Templates: where they are found, and what is refused in them."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from small_templates import CABLE_PARAMETERS, GIVEN_LINE, LOAD_PARAMETERS, code, save, save_load_and_cable, template

import calcbook
from calcbook.errors import TemplateFault
from calcbook.run.templates import check_parameters, find_template, folders, template_names


def fault(folder: Path, name: str) -> str:
    with pytest.raises(TemplateFault) as raised:
        find_template(name, folder)
    return str(raised.value)


def test_a_template_says_what_it_declares_gives_and_takes(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    found = find_template("small-cable", tmp_path)
    assert [parameter.name for parameter in found.parameters] == ["design_current", "length", "given"]
    assert (found.gives, found.takes) == ((), ("design_current",))
    assert found.conclusion == "sheet.conclude()"


def test_those_of_the_project_come_first(tmp_path: Path) -> None:
    (shipped, *_) = template_names()
    assert find_template(shipped, tmp_path).parameters == find_template(shipped).parameters
    save(tmp_path, shipped, template(shipped, CABLE_PARAMETERS))
    assert [parameter.name for parameter in find_template(shipped, tmp_path).parameters][1] == "length"
    assert template_names(tmp_path) == template_names()


def test_the_wheel_carries_templates_inside_the_package(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    package = tmp_path / "site" / "calcbook"
    package.mkdir(parents=True)
    monkeypatch.setattr(calcbook, "__file__", str(package / "__init__.py"))
    assert folders() == (tmp_path / "site" / "templates",)
    save(package, "in-the-wheel", template("in-the-wheel", ""))
    assert folders(tmp_path) == (tmp_path / "templates", package / "templates")
    assert template_names() == ("in-the-wheel",)


def test_an_unknown_template_is_answered_with_the_nearest(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    expected = 'template small-cabel: there is no such template; did you mean "small-cable"?'
    assert fault(tmp_path, "small-cabel") == expected


@pytest.mark.parametrize("name", ["../small-load", "small-load.ipynb", ""])
def test_a_name_is_not_a_path(name: str, tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    assert "there is no such template" in fault(tmp_path, name)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("{", "bad.ipynb cannot be read as a notebook"),
        ("[]", "bad.ipynb is not a notebook of format 4"),
        ("{}", "bad.ipynb is not a notebook of format 4"),
        (
            '{"nbformat": 4, "nbformat_minor": 5, "metadata": {}, "cells": [{}]}',
            "bad.ipynb is not a notebook of format 4",
        ),
    ],
)
def test_a_file_that_is_no_notebook_is_refused(text: str, message: str, tmp_path: Path) -> None:
    path = tmp_path / "templates" / "bad.ipynb"
    path.parent.mkdir()
    path.write_text(text)
    assert fault(tmp_path, "bad").startswith(f"template bad: {message}")


def twice(cells: list[Any]) -> list[Any]:
    return [*cells[:2], code(GIVEN_LINE, "parameters"), *cells[2:]]


def broken(**changes: Any) -> Any:
    made = template("bad", LOAD_PARAMETERS, code('sheet.taken("design_current")'))
    for key, value in changes.items():
        if key == "metadata":
            made.metadata.calcbook = value
        else:
            made.cells = value(made.cells)
    return made


@pytest.mark.parametrize(
    ("made", "message"),
    [
        (broken(cells=lambda cells: cells[:1] + cells[2:]), 'exactly one code cell is tagged "parameters", found 0'),
        (
            broken(cells=twice),
            'exactly one code cell is tagged "parameters", found 2',
        ),
        (broken(cells=lambda cells: cells[:2] + cells[3:]), 'exactly one code cell is tagged "setup", found 0'),
        (broken(metadata={"gives": []}), 'notebook metadata "calcbook" has no list of names "takes"'),
        (broken(metadata={"gives": [1], "takes": []}), 'notebook metadata "calcbook" has no list of names "gives"'),
        (broken(metadata=[]), 'notebook metadata "calcbook" has no list of names "gives"'),
        (
            broken(metadata={"gives": [], "takes": ["design_curent"]}),
            'takes "design_curent", which is none of its parameters; did you mean "design_current"?',
        ),
    ],
)
def test_a_template_that_cannot_be_assembled_is_refused(made: Any, message: str, tmp_path: Path) -> None:
    save(tmp_path, "bad", made)
    assert fault(tmp_path, "bad") == f"template bad: {message}"


@pytest.mark.parametrize("name", ["Bad", "bad_name", "bad--name", "a" * 49])
def test_names_are_small_letters_and_hyphens(name: str, tmp_path: Path) -> None:
    save(tmp_path, name, template(name, ""))
    assert "a name has small letters, digits and single hyphens" in fault(tmp_path, name)


def test_an_unknown_parameter_is_refused_with_the_nearest(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    load, cable = (find_template(name, tmp_path) for name in ("small-load", "small-cable"))
    check_parameters([load, cable], {"design_current": "7 A", "length": "9 m"})
    with pytest.raises(TemplateFault) as raised:
        check_parameters([load, cable], {"lenght": "9 m"})
    expected = 'template small-load, small-cable: "lenght" is not a parameter; did you mean "length"?'
    assert str(raised.value) == expected
    with pytest.raises(TemplateFault, match='"given" is not a parameter'):
        check_parameters([load], {"given": "x"})


def test_a_parameter_that_an_earlier_template_works_out_cannot_be_set(tmp_path: Path) -> None:
    save(tmp_path, "works-out", template("works-out", "", gives=["I_B"]))
    save_load_and_cable(tmp_path)
    works_out, cable = (find_template(name, tmp_path) for name in ("works-out", "small-cable"))
    check_parameters([cable], {"design_current": "7 A"})
    with pytest.raises(TemplateFault) as raised:
        check_parameters([works_out, cable], {"design_current": "7 A"})
    assert str(raised.value) == (
        'template works-out, small-cable: parameter "design_current" is worked out by template works-out of this '
        "sheet, and cannot be set"
    )


def test_a_template_that_cannot_be_looked_at_is_refused(tmp_path: Path) -> None:
    """It is never replaced in silence by the one of the same name that comes with calcbook."""
    save_load_and_cable(tmp_path)
    path = tmp_path / "templates" / "small-cable.ipynb"
    path.unlink()
    path.symlink_to(path.name)
    assert "cannot be read" in fault(tmp_path, "small-cable")
    path.unlink()
    path.symlink_to("nowhere.ipynb")
    assert "cannot be read" in fault(tmp_path, "small-cable")
    path.unlink()
    path.mkdir()
    assert "cannot be read as a notebook" in fault(tmp_path, "small-cable")
