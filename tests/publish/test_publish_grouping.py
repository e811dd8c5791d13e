from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path

import pikepdf
from publish_sample import code, criterion, datum, hoist, hoist_lines, markdown, notebook, result_of
from publish_tools import Page, flat, pdf_text
from test_publish_package import project

from calcbook.publish.grouping import grouped, joined
from calcbook.publish.package import publish
from calcbook.records.line import BroughtForwardLine, ConclusionLine, Line
from calcbook.records.project import Plan, SheetPlan
from calcbook.records.result import Failure, SheetResult
from calcbook.records.trace import trace_of_notebook

_PARTS = ("demand", "supply")


def conclusion(template: str, *criteria: str, open_items: tuple[str, ...] = ()) -> Line:
    last = hoist_lines("MB")[-1]
    assert isinstance(last, ConclusionLine)
    return replace(last, template=template, order=criteria, governing=criteria[0], headrooms=(), open_items=open_items)


def demand(utilisation: float = 0.5) -> SheetResult:
    load = replace(datum("MB", "P", 30.0), template="demand")
    held = replace(criterion("MB", "spare", ("P", "P"), ("30 kW", "30 kW"), utilisation), template="demand")
    cells = [markdown("# Demand"), code(load, held, conclusion("demand", "spare", open_items=("a load is assumed",)))]
    return replace(result_of(notebook("MB", "Main board", cells)), part="demand")


def supply(load: float = 30.0) -> SheetResult:
    first = replace(datum("MB", "P", load), template="demand")
    again = BroughtForwardLine(
        sheet="MB", template="supply", name="P", description=first.description, value=first.value, si=first.si,
        text=first.text, source=first.id,
    )  # fmt: skip
    own = replace(datum("MB", "n_g", 3.0), template="supply")
    held = replace(criterion("MB", "drop", ("n_g", "n_g"), ("3", "3"), 0.9), template="supply")
    end = conclusion("supply", "drop", open_items=("a load is assumed", "a length is estimated"))
    cells = [markdown("# Supply"), code(again, own), code(held, end)]
    return replace(result_of(notebook("MB", "Main board", cells)), part="supply")


def test_one_workbook_is_its_own_sheet() -> None:
    only = result_of(hoist())
    assert joined((only,)) is only


def test_two_workbooks_become_one_sheet_with_one_conclusion() -> None:
    sheet = joined((demand(), supply()))
    assert [line.label for line in sheet.trace.lines] == ["P", "spare", "n_g", "drop", "conclusion"]
    end = sheet.trace.lines[-1]
    assert isinstance(end, ConclusionLine)
    assert (end.order, end.governing, end.verdict) == (("drop", "spare"), "drop", "met")
    assert end.open_items == ("a load is assumed", "a length is estimated")
    assert sheet.trace.templates == _PARTS
    assert (sheet.number, sheet.name, sheet.outcome) == ("MB", "MB", "executed")


def test_the_joined_workbook_prints_what_the_joined_trace_holds() -> None:
    sheet = joined((demand(), supply()))
    assert trace_of_notebook(json.loads(sheet.workbook)).lines == sheet.trace.lines


def test_the_worst_of_all_workbooks_is_the_verdict_of_the_sheet() -> None:
    end = joined((demand(1.2), supply())).trace.lines[-1]
    assert isinstance(end, ConclusionLine)
    assert (end.verdict, end.governing) == ("not met", "spare")


def test_workbooks_that_disagree_on_a_line_make_the_sheet_fail() -> None:
    sheet = joined((demand(), supply(31.0)))
    assert sheet.outcome == "failed"
    assert sheet.failure is not None
    assert sheet.failure.message == (
        "sheet MB, P: demand and supply have different lines; a name means the same on one sheet"
    )


def test_a_sheet_fails_with_any_of_its_workbooks() -> None:
    failure = Failure("SheetFault", "no value", 1, "")
    broken = replace(supply(), outcome="failed", failure=failure, workbook="")
    sheet = joined((demand(), broken))
    assert (sheet.outcome, sheet.failure, sheet.workbook) == ("failed", failure, "")


def test_a_board_of_two_workbooks_is_published_as_one_sheet(tmp_path: Path) -> None:
    results = [demand(), result_of(hoist()), supply()]
    assert [len(parts) for parts in grouped(results).values()] == [2, 1]
    entries = tuple(
        SheetPlan(number, "", (), {}, {}, part) for number, part in (("MB", "demand"), ("C-014", ""), ("MB", "supply"))
    )
    publish(project(), Plan(entries), results, [], tmp_path)
    names = {path.name for path in tmp_path.iterdir()}
    assert {"MB.html", "MB.pdf", "MB~demand.ipynb", "MB~supply.ipynb"} <= names
    assert "MB.ipynb" not in names
    assert (tmp_path / "MB~supply.ipynb").read_text("utf-8") == results[2].workbook
    page = Page((tmp_path / "MB.html").read_text("utf-8"))
    assert len(page.ids) == len(set(page.ids))
    text = flat(page.text)
    assert text.index("Demand") < text.index("Supply") < text.index("Criteria, the most utilised first")
    assert "Supply" in pdf_text((tmp_path / "MB.pdf").read_bytes(), tmp_path)
    index = Page((tmp_path / "index.html").read_text("utf-8"))
    assert ("MB~demand.ipynb", "workbook demand") in index.links
    assert [text for href, text in index.links if href == "MB.html"].count("MB") == 1
    sheets = json.loads((tmp_path / "results.json").read_text("utf-8"))["sheets"]
    assert list(sheets["MB"]["criteria"]) == ["drop", "spare"]
    with pikepdf.open(tmp_path / "package.pdf") as document:
        assert {"MB~demand.ipynb", "MB~supply.ipynb", "MB~demand.trace.json"} <= set(document.attachments)


def test_workbooks_of_a_sheet_that_is_gone_are_removed(tmp_path: Path) -> None:
    entries = tuple(SheetPlan("MB", "", (), {}, {}, part) for part in _PARTS)
    publish(project(), Plan(entries), [demand(), supply()], [], tmp_path)
    (tmp_path / "MB~notes.txt").write_text("the engineer's own")
    publish(project(), Plan(entries[:1]), [replace(demand(), part="")], [], tmp_path)
    names = {path.name for path in tmp_path.iterdir()}
    assert {"MB.ipynb", "MB~notes.txt"} <= names
    assert names.isdisjoint({"MB~demand.ipynb", "MB~supply.ipynb"})
