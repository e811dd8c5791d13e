from __future__ import annotations

import json
import subprocess
import sys
from importlib.metadata import entry_points
from pathlib import Path

import nbformat
import pytest
from publish_sample import CONTEXT, hoist
from traitlets.config import Config

from calcbook.publish.html import SheetHTMLExporter
from calcbook.publish.pdf import SheetPDFExporter
from calcbook.publish.sheet_html import sheet_html
from calcbook.publish.sheet_pdf import sheet_pdf
from calcbook.publish.sheet_view import Context, sheet_view


def test_the_exporters_are_registered() -> None:
    found = {entry.name: entry.value for entry in entry_points(group="nbconvert.exporters")}
    assert found["calcbook-html"] == "calcbook.publish.html:SheetHTMLExporter"
    assert found["calcbook-pdf"] == "calcbook.publish.pdf:SheetPDFExporter"


def test_exporters_and_package_print_the_same_bytes() -> None:
    node = nbformat.from_dict(hoist())
    view = sheet_view(hoist(), CONTEXT)
    html, _ = SheetHTMLExporter(context=CONTEXT).from_notebook_node(node)
    assert html == sheet_html(view, in_package=True)
    pdf, resources = SheetPDFExporter(context=CONTEXT).from_notebook_node(node)
    assert pdf == sheet_pdf(view)
    assert resources["output_extension"] == ".pdf"


def test_no_configuration_of_this_machine_changes_a_sheet() -> None:
    hostile = Config({"Exporter": {"preprocessors": ["nbconvert.preprocessors.ClearOutputPreprocessor"]}})
    hostile.ClearOutputPreprocessor.enabled = True
    node = nbformat.from_dict(hoist())
    html, _ = SheetHTMLExporter(config=hostile).from_notebook_node(node)
    assert html == sheet_html(sheet_view(hoist(), Context()), in_package=False)


@pytest.mark.slow
@pytest.mark.parametrize("kind", ["html", "pdf"])
def test_nbconvert_works_on_a_workbook_alone(kind: str, tmp_path: Path) -> None:
    (tmp_path / "C-014.ipynb").write_text(json.dumps(hoist()), encoding="utf-8")
    command = [sys.executable, "-m", "nbconvert", "--to", f"calcbook-{kind}", "C-014.ipynb"]
    done = subprocess.run(command, cwd=tmp_path, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    made = (tmp_path / f"C-014.{kind}").read_bytes()
    view = sheet_view(hoist(), Context())
    assert made == (sheet_pdf(view) if kind == "pdf" else sheet_html(view, in_package=False).encode())
