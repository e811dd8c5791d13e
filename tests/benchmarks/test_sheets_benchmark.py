"""The benchmark still runs, on a small size; its figures are read by people, not asserted."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest


@pytest.mark.slow
def test_benchmark_prints_its_figures() -> None:
    command = [sys.executable, str(Path(__file__).with_name("sheets.py")), "--sheets", "1"]
    done = subprocess.run(command, capture_output=True, text=True, check=True)
    figures = json.loads(done.stdout.splitlines()[-1])
    assert figures["sheets"] == 1
    for name in ("cells_in_one_process_s", "warm_engine_s", "kernel_s", "html_s", "pdf_s", "kernel_over_warm"):
        assert figures[name] > 0
