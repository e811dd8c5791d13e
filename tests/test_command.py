"""The command as a user runs it: exit codes, messages, nothing written on bad inputs, nothing heavy at start."""

from __future__ import annotations

import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent
EXAMPLES = ROOT / "examples"


def calcbook(*arguments: str, cwd: Path = ROOT, **variables: str) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-c", "from calcbook.cli import main; main()", *arguments]
    environment = {**os.environ, "COLUMNS": "160", "PYTHONWARNINGS": "error", **variables}
    return subprocess.run(command, cwd=cwd, env=environment, capture_output=True, text=True, check=False)


def copy_of(example: str, folder: Path) -> Path:
    target = folder / example
    shutil.copytree(EXAMPLES / example, target, ignore=shutil.ignore_patterns("sheets"))
    return target


@pytest.fixture(scope="module")
def good(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, subprocess.CompletedProcess[str]]:
    project = copy_of("tern_quay", tmp_path_factory.mktemp("good"))
    return project, calcbook("run", str(project))


def test_example_meets_every_criterion(good: tuple[Path, subprocess.CompletedProcess[str]]) -> None:
    project, done = good
    assert done.returncode == 0, done.stdout + done.stderr
    assert done.stderr == ""
    results = json.loads((project / "sheets" / "results.json").read_text("utf-8"))
    circuits = [number for number in results["sheets"] if number.startswith("C-")]
    assert len(circuits) == 24
    for number in results["sheets"]:
        halves = ("~demand", "~supply") if number in ("MB", "SW", "PS", "QB") else ("",)
        for ending in ("html", "pdf"):
            assert (project / "sheets" / f"{number}.{ending}").stat().st_size > 1000
        for half in halves:
            assert (project / "sheets" / f"{number}{half}.ipynb").stat().st_size > 1000
    for page in ("index.html", "inputs.html", "tables.html"):
        assert (project / "sheets" / page).stat().st_size > 1000


def test_same_inputs_same_bytes(good: tuple[Path, subprocess.CompletedProcess[str]], tmp_path: Path) -> None:
    project, _ = good
    again = copy_of("tern_quay", tmp_path)
    assert calcbook("run", str(again)).returncode == 0
    first, second = project / "sheets", again / "sheets"
    names = sorted(path.name for path in first.iterdir())
    assert names == sorted(path.name for path in second.iterdir())
    for name in names:
        assert (first / name).read_bytes() == (second / name).read_bytes(), name


def test_failing_example_says_which_criterion_and_why(tmp_path: Path) -> None:
    done = calcbook("run", str(copy_of("tern_quay_failing", tmp_path)))
    assert done.returncode == 1, done.stdout + done.stderr
    for sides in (
        "I_B <= I_",
        "I_r <= I_Z",
        "I_2 <= I_2_max",
        "a device protects the circuit against overload; found aM",
        "du_tot <= du_tab",
    ):
        assert sides in done.stdout


def test_bad_inputs_write_nothing(tmp_path: Path) -> None:
    project = copy_of("tern_quay", tmp_path)
    file = project / "circuits.csv"
    file.write_text(file.read_text("utf-8").replace("L1L2L3,", "L4,", 1), "utf-8")
    done = calcbook("run", str(project))
    assert done.returncode == 2
    assert "circuits.csv, row " in done.stderr
    assert "L4" in done.stderr
    assert "Traceback" not in done.stderr
    assert not (project / "sheets").exists()


def test_missing_project(tmp_path: Path) -> None:
    done = calcbook("run", str(tmp_path / "nowhere"))
    assert done.returncode == 2
    assert "nowhere" in done.stderr
    assert "Traceback" not in done.stderr


def test_a_sheet_that_fails_does_not_stop_the_others(tmp_path: Path) -> None:
    """A project's own template that divides by zero: its sheets and what rests on them fail, the others are made."""
    project = copy_of("tern_quay_failing", tmp_path)
    own = project / "templates"
    own.mkdir()
    notebook = json.loads((ROOT / "templates" / "cable-current.ipynb").read_text("utf-8"))
    source = notebook["cells"][-1]
    source["source"] = "1/0\n" + "".join(source["source"])
    source["metadata"]["tags"] = []
    (own / "cable-current.ipynb").write_text(json.dumps(notebook), "utf-8")
    done = calcbook("run", str(project))
    assert done.returncode == 3
    assert "F-001: could not be executed: sheet F-001, board_voltage: rests on OB~supply, which failed" in done.stdout
    assert "F-010: could not be executed: division by zero" in done.stdout
    assert "rests on F-010, which failed" in done.stdout
    sheets = project / "sheets"
    assert (sheets / "D-cable-current.pdf").exists()
    assert (sheets / "OB~demand.ipynb").exists()
    assert not (sheets / "F-001.pdf").exists()
    assert "not for issue" in (sheets / "F-001.html").read_text("utf-8")


def test_a_place_that_cannot_be_written(tmp_path: Path) -> None:
    project = copy_of("tern_quay", tmp_path)
    (project / "sheets").write_text("a file where the folder belongs", "utf-8")
    done = calcbook("run", str(project))
    assert done.returncode == 4
    assert "cannot be written" in done.stderr
    assert "Traceback" not in done.stderr


def test_an_output_that_knows_fewer_characters_than_the_inputs(tmp_path: Path) -> None:
    (tmp_path / "templates").mkdir()
    text = (ROOT / "templates" / "derivations.ipynb").read_text("utf-8")
    (tmp_path / "templates" / "own.ipynb").write_text(text.replace("subject of the", "Ω of the"), "utf-8")
    done = calcbook("templates", str(tmp_path), PYTHONIOENCODING="ascii", PYTHONUTF8="0")
    assert done.returncode == 0, done.stderr
    assert r"\u03a9 of the derivation" in done.stdout


def test_templates_are_listed_with_their_parameters() -> None:
    done = calcbook("templates")
    assert done.returncode == 0, done.stderr
    for text in ("three-phase-power", "cable-current", "derivations", "shaft_power", "45 kW", "cross-section"):
        assert text in done.stdout


def test_usage_errors_and_help() -> None:
    assert calcbook("rnu").returncode == 2
    assert calcbook("run").returncode == 2
    assert calcbook("-h").returncode == 0
    assert "nowhere is not a folder; a project is" in calcbook("templates", "nowhere").stderr
    shown = calcbook("--help")
    assert shown.returncode == 0
    for text in ("run", "templates", "inputs.toml", "Exit code", "competent"):
        assert text in shown.stdout
    assert calcbook("--version").stdout.startswith("calcbook ")


def test_start_imports_nothing_heavy() -> None:
    code = (
        "import sys, calcbook.cli\n"
        "heavy = {'sympy', 'pint', 'papermill', 'nbconvert', 'nbformat', 'matplotlib', 'IPython', 'typst', 'numpy'}\n"
        "print(sorted(heavy & set(sys.modules)))"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"
