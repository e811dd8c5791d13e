"""Planned sheets in, workbooks with traces out; a failing sheet is a result like any other."""

from __future__ import annotations

import os
import subprocess
import sys
import tempfile
from pathlib import Path
from types import MappingProxyType

import nbformat
import pytest
from small_templates import CABLE_PARAMETERS, code, plan, save, save_load_and_cable, save_with, template

from calcbook.errors import WorkspaceFault
from calcbook.records.project import Plan, SheetPlan
from calcbook.records.result import Failure, SheetResult
from calcbook.run.execute import EngineName, execute_all, execute_sheet

ENGINES: list[EngineName] = ["warm", "kernel"]


def test_a_sheet_is_executed_with_its_parameters(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    result = execute_sheet(plan("small-load", "small-cable", design_current="12 A", length="9 m"), tmp_path)
    assert (result.outcome, result.failure, result.number, result.title) == (
        "executed",
        None,
        "C-014",
        "Travelling hoist",
    )
    lines = [(line.id, getattr(line, "text", "")) for line in result.trace.lines]
    assert lines == [
        ("C-014/small-load/I_B", "12\N{NO-BREAK SPACE}A"),
        ("C-014/small-cable/length", "9 m"),
        ("C-014/small-cable/conclusion", ""),
    ]
    assert result.trace.templates == ("small-load", "small-cable")
    workbook = nbformat.reads(result.workbook, as_version=4)
    nbformat.validate(workbook)
    assert [cell.id for cell in workbook.cells[:3]] == ["parameters", "injected-parameters", "setup"]


def test_the_same_inputs_give_the_same_bytes_under_both_engines(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    sheet = plan("small-load", "small-cable")
    results = [execute_sheet(sheet, tmp_path, engine) for engine in ("warm", "warm", "kernel")]
    assert results[0] == results[1] == results[2]
    for trace_of_machine in (str(tmp_path), "papermill", "3.11."):
        assert trace_of_machine not in results[0].workbook


def test_given_is_handed_over_as_plain_data(tmp_path: Path) -> None:
    save_with(tmp_path, "shows-given", "given")
    given = {"origins": {"pair": (1, 0.1 + 0.2), "text": 'a"b\\c', "none": None}, "sheet": "C-1"}
    sheet = SheetPlan("C-014", "Hoist", ("shows-given",), MappingProxyType({}), MappingProxyType(given))
    workbook = nbformat.reads(execute_sheet(sheet, tmp_path).workbook, as_version=4)
    shown = next(cell for cell in workbook.cells if cell.source == "given").outputs[0].data["text/plain"]
    assert "'pair': [1, 0.30000000000000004]" in shown
    assert "'sheet': 'C-1'" in shown
    assert "'title': 'Hoist'" in shown


@pytest.mark.parametrize("engine", ENGINES)
def test_a_fault_of_the_sheet_is_its_failure_and_keeps_the_lines_before_it(engine: EngineName, tmp_path: Path) -> None:
    cells = (code('sheet.choice("length", "route length")'), code('sheet.choice("length", "route length")'), code("1"))
    save(tmp_path, "twice", template("twice", CABLE_PARAMETERS, *cells))
    result = execute_sheet(plan("twice"), tmp_path, engine)
    message = "sheet C-014, twice, length: stands on this sheet already; a name is given once"
    assert result.failure == Failure("SheetFault", message, 6, 'sheet.choice("length", "route length")')
    assert result.outcome == "failed"
    assert [line.id for line in result.trace.lines] == ["C-014/twice/length"]
    cells = nbformat.reads(result.workbook, as_version=4).cells
    assert cells[5].source == result.failure.source
    assert cells[5].outputs[0].traceback == [f"SheetFault: {message}"]
    assert cells[6].outputs == []


@pytest.mark.parametrize(
    ("source", "error", "message"),
    [
        ("%no_such_magic", "CellExecutionError", "the cell could not be executed"),
        ("exit()", "AttributeError", None),
        ("raise SystemExit(0)", "SystemExit", "0"),
        ("import os\nos._exit(0)", "SheetProcessEnded", "the process of this sheet ended in this cell"),
    ],
)
def test_no_way_out_of_a_cell_passes_for_success(source: str, error: str, message: str | None, tmp_path: Path) -> None:
    save_with(tmp_path, "leaves", source, "1")
    failure = execute_sheet(plan("leaves"), tmp_path).failure
    assert failure is not None
    assert (failure.error, failure.source, failure.cell) == (error, source, 5)
    assert message in (None, failure.message)


def test_a_process_that_dies_is_the_same_failure_under_both_engines(tmp_path: Path) -> None:
    save_with(tmp_path, "dies", "import os, signal\nos.kill(os.getpid(), signal.SIGKILL)")
    warm, kernel = (execute_sheet(plan("dies"), tmp_path, engine) for engine in ENGINES)
    assert warm == kernel
    assert warm.failure is not None
    assert warm.failure.message == "the process of this sheet ended in this cell"


def test_a_failing_sheet_does_not_stop_the_others(tmp_path: Path) -> None:
    save_load_and_cable(tmp_path)
    save_with(tmp_path, "fails", "1 / 0")
    done: list[SheetResult] = []
    names = ("fails", "small-load", "no-such-template", "small-load")
    sheets = tuple(SheetPlan(f"C-{n}", "", (name,), {}, {}) for n, name in enumerate(names))
    results = execute_all(Plan(sheets), tmp_path, "warm", done.append)
    assert [result.outcome for result in results] == ["failed", "executed", "failed", "executed"]
    assert tuple(done) == results
    assert results[0].failure == Failure("ZeroDivisionError", "division by zero", 5, "1 / 0")


@pytest.mark.parametrize(
    ("sheet", "error", "message"),
    [
        (
            plan("small-lod"),
            "TemplateFault",
            'template small-lod: there is no such template; did you mean "small-load"?',
        ),
        (
            plan("small-load", design_curent="7 A"),
            "TemplateFault",
            'template small-load: "design_curent" is not a parameter; did you mean "design_current"?',
        ),
    ],
)
def test_a_sheet_that_cannot_be_assembled_has_failed(
    sheet: SheetPlan, error: str, message: str, tmp_path: Path
) -> None:
    save_load_and_cable(tmp_path)
    result = execute_sheet(sheet, tmp_path)
    assert (result.outcome, result.workbook, result.trace.lines) == ("failed", "", ())
    assert result.failure == Failure(error, message, 0, "")


def test_a_record_that_is_no_line_has_failed(tmp_path: Path) -> None:
    save_with(tmp_path, "odd", "display({'application/vnd.calcbook.line.v1+json': {'form': 'step'}}, raw=True)")
    failure = execute_sheet(plan("odd"), tmp_path).failure
    assert failure is not None
    assert failure.message.startswith("template odd: displays a record that is no line of a sheet: ")


@pytest.mark.slow
@pytest.mark.parametrize("engine", ENGINES)
def test_nothing_is_said_and_no_file_is_left(
    engine: EngineName, tmp_path: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    project, home = tmp_path / "project", tmp_path / "home"
    home.mkdir()
    save_load_and_cable(project)
    save_with(project, "fails", "1 / 0")
    save_with(project, "dies", "import os\nos._exit(1)")
    before = {path: path.stat().st_mtime_ns for path in project.rglob("*")}
    script = (
        "import sys; sys.path.insert(0, sys.argv[1])\n"
        "from pathlib import Path; from small_templates import plan; from calcbook.run.execute import execute_sheet\n"
        "for name in ('small-load', 'fails', 'dies'): execute_sheet(plan(name), Path(sys.argv[2]), sys.argv[3])\n"
    )
    command = [sys.executable, "-c", script, str(Path(__file__).parent), str(project), engine]
    subprocess.run(command, env={**os.environ, "TMPDIR": str(home), "HOME": str(home)}, cwd=home, check=True)
    assert capfd.readouterr() == ("", "")
    assert {path: path.stat().st_mtime_ns for path in project.rglob("*")} == before
    left = {path.name for path in home.iterdir()}
    assert not any(name.startswith("calcbook-") for name in left)
    if engine == "warm":
        assert left <= {".cache"}


def test_a_machine_without_room_for_temporary_files(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    save_load_and_cable(tmp_path)
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path / "nowhere"))
    with pytest.raises(WorkspaceFault) as caught:
        execute_sheet(plan("small-load", "small-cable"), tmp_path)
    assert str(caught.value).startswith(f"a sheet cannot be executed; {tmp_path}/nowhere/calcbook-")
    assert str(caught.value).endswith(": No such file or directory")
