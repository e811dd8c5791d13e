"""Seconds a sheet: warm engine, ordinary kernel, and the floor of the same cells in one process.

    python tests/benchmarks/sheets.py [--sheets N]

Prints one JSON object on its last line; ratios within one run are what can be compared between machines.
"""

from __future__ import annotations

import argparse
import json
import os
import resource
import sys
import time
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import nbformat

from calcbook.inputs.project import read_project
from calcbook.plan.sheets import make_plan
from calcbook.publish.html import SheetHTMLExporter
from calcbook.publish.pdf import SheetPDFExporter
from calcbook.records.project import SheetPlan
from calcbook.run.assemble import assemble
from calcbook.run.execute import execute_sheet
from calcbook.run.shell import run_notebook
from calcbook.run.templates import find_template

EXAMPLE = Path(__file__).resolve().parents[2] / "examples" / "tern_quay"


def sheet_plans(count: int) -> list[SheetPlan]:
    """The example's final circuits, repeated under other numbers; alone they take the board's voltage as nominal."""
    plans_of_example = make_plan(read_project(EXAMPLE)).sheets
    circuits = [replace(plan, rests_on={}) for plan in plans_of_example if plan.templates[0] == "three-phase-power"]
    plans = []
    for index in range(count):
        plan = circuits[index % len(circuits)]
        number = f"C-{index:04d}"
        plans.append(replace(plan, number=number, given={**plan.given, "sheet": number}))
    return plans


def seconds_each(work: Callable[[SheetPlan], object], plans: list[SheetPlan]) -> float:
    """Mean seconds a sheet; one sheet is made first, so that start-up is not counted."""
    work(plans[0])
    start = time.perf_counter()
    for plan in plans:
        work(plan)
    return (time.perf_counter() - start) / len(plans)


def main() -> None:
    """Measure and print."""
    parser = argparse.ArgumentParser()
    parser.add_argument("--sheets", type=int, default=12)
    plans = sheet_plans(parser.parse_args().sheets)
    templates = [find_template(name) for name in plans[0].templates]
    workbooks = [nbformat.reads(execute_sheet(plan, EXAMPLE, "warm").workbook, as_version=4) for plan in plans]
    html, pdf = SheetHTMLExporter(), SheetPDFExporter()

    def floor(plan: SheetPlan) -> object:
        return run_notebook(assemble(plan, templates))

    def mean(export: Callable[[nbformat.NotebookNode], object]) -> float:
        export(workbooks[0])
        start = time.perf_counter()
        for workbook in workbooks:
            export(workbook)
        return (time.perf_counter() - start) / len(workbooks)

    figures: dict[str, float] = {
        "sheets": len(plans),
        "cores": os.cpu_count() or 1,
        "cells_in_one_process_s": seconds_each(floor, plans),
        "warm_engine_s": seconds_each(lambda plan: execute_sheet(plan, EXAMPLE, "warm"), plans),
        "kernel_s": seconds_each(lambda plan: execute_sheet(plan, EXAMPLE, "kernel"), plans[:3]),
        "html_s": mean(html.from_notebook_node),
        "pdf_s": mean(pdf.from_notebook_node),
        "peak_rss_mb": resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024,
    }
    figures["kernel_over_warm"] = figures["kernel_s"] / figures["warm_engine_s"]
    sys.stdout.write(json.dumps({name: round(value, 4) for name, value in figures.items()}) + "\n")


if __name__ == "__main__":
    main()
