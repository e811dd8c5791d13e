"""Templates under papermill's own command: they list their parameters and run, with and without our engine."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import nbformat
import pytest
from small_templates import save_load_and_cable, save_with

pytestmark = pytest.mark.slow


def papermill(*arguments: str | Path) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "papermill", *map(str, arguments)]
    return subprocess.run(command, capture_output=True, text=True, check=False)


def test_help_lists_the_parameters_with_their_descriptions(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    shown = papermill("--help-notebook", tmp_path / "templates" / "small-cable.ipynb").stdout
    assert 'design_current: str (default "81 A")' in shown
    assert 'length: str (default "85 m")' in shown
    assert "route length, source end to load end" in shown
    assert "given: dict (default {})" in shown


@pytest.mark.parametrize("engine", [["--engine", "calcbook"], []], ids=["our engine", "papermill's engine"])
def test_a_template_runs_alone_with_a_parameter(engine: list[str], tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    target = tmp_path / "out.ipynb"
    run = papermill(tmp_path / "templates" / "small-cable.ipynb", target, *engine, "-p", "length", "7 m")
    assert run.returncode == 0, run.stderr
    outputs = [output for cell in nbformat.read(target, as_version=4).cells for output in cell.get("outputs", ())]
    texts = [output.data["text/plain"] for output in outputs if output.output_type == "display_data"]
    assert texts[0].replace("\N{NO-BREAK SPACE}", " ") == "I_B = 81 A"
    assert texts[1] == "route length: 7 m"


def test_a_template_that_fails_ends_the_command_with_its_error(tmp_path: Path) -> None:
    save_with(tmp_path, "fails", "raise ValueError('no such cable')")
    run = papermill(tmp_path / "templates" / "fails.ipynb", tmp_path / "out.ipynb", "--engine", "calcbook")
    assert run.returncode == 1
    assert "ValueError: no such cable" in run.stderr
