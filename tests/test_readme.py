"""README, gate and CI say the same commands; the wheel carries what the commands need."""

from __future__ import annotations

import os
import re
import subprocess
import sys
import zipfile
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent


def blocks() -> list[str]:
    text = (ROOT / "README.md").read_text("utf-8")
    return re.findall(r"^```\w*\n(.*?)^```$", text, re.MULTILINE | re.DOTALL)


def test_first_two_blocks_are_one_command_each() -> None:
    example, gate = (block.strip() for block in blocks()[:2])
    assert "\n" not in example
    assert "\n" not in gate
    assert example.endswith(".venv/bin/calcbook run examples/tern_quay")
    assert gate.endswith(".venv/bin/python tests/gate.py")


def test_ci_runs_the_readme_s_test_command() -> None:
    assert blocks()[1].strip() in (ROOT / ".ci" / "run").read_text("utf-8").splitlines()


def test_every_dependency_has_an_upper_bound() -> None:
    text = (ROOT / "pyproject.toml").read_text("utf-8")
    runtime = re.search(r"^dependencies = \[(.*?)^\]", text, re.MULTILINE | re.DOTALL)
    assert runtime is not None
    for line in runtime[1].strip().splitlines():
        assert "<" in line, line


def test_readme_cautions() -> None:
    text = " ".join((ROOT / "README.md").read_text("utf-8").split())
    for phrase in (
        "review by a competent, where required licensed, person",
        "current editions govern",
        "licensed text",
    ):
        assert phrase in text


def test_wheel_carries_templates_and_tables(tmp_path: Path) -> None:
    """The wheel alone, away from the checkout, lists the templates and finds every table."""
    command = [
        sys.executable,
        "-m",
        "pip",
        "wheel",
        "-q",
        "--no-deps",
        "--no-build-isolation",
        "-w",
        str(tmp_path),
        str(ROOT),
    ]
    subprocess.run(command, check=True, capture_output=True)
    (wheel,) = tmp_path.glob("*.whl")
    unpacked = tmp_path / "site"
    with zipfile.ZipFile(wheel) as archive:
        archive.extractall(unpacked)
    code = (
        "import calcbook.cli, calcbook, sys; sys.argv = ['calcbook', 'templates']\n"
        "from calcbook.reference.table import tables; assert len(tables()) > 15, tables()\n"
        f"assert calcbook.__file__.startswith({str(unpacked)!r}), calcbook.__file__\n"
        "calcbook.cli.main()"
    )
    environment = {**os.environ, "PYTHONPATH": str(unpacked)}
    done = subprocess.run(
        [sys.executable, "-P", "-c", code], cwd=tmp_path, env=environment, capture_output=True, text=True, check=False
    )
    assert done.returncode == 0, done.stderr
    for name in ("cable-current", "derivations", "three-phase-power"):
        assert name in done.stdout
