"""Choice of size: the smallest standard size that meets every criterion, with the sizes tried and why each failed."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from calcbook.records.line import DatumLine, InequalityLine, RuleLine
from calcbook.records.project import Plan, SheetPlan
from calcbook.records.result import SheetResult
from calcbook.run.choose_size import lacks_size, with_chosen_size
from calcbook.run.execute import execute_all, execute_sheet

CABLE = {
    "phases": "L1L2L3", "conductor": "Cu", "insulation": "XLPE90", "construction": "multicore", "method": "E",
    "ambient": "40 degC", "grouping": "single_layer_tray", "circuits_in_group": "3", "runs": "1", "device": "gG",
    "rating": "160 A", "overload_device": "relay60947", "overload_setting": "81 A", "design_current": "80 A",
}  # fmt: skip


def plan(**changes: str) -> SheetPlan:
    """A cable sheet of its own, the size left to choose."""
    return SheetPlan("C-001", "Hoist", ("cable-current",), {**CABLE, "size": "", **changes}, {})


def made(sheet: SheetPlan, folder: Path) -> SheetResult:
    (result,) = execute_all(Plan((sheet,)), folder)
    assert result.failure is None, result.failure
    return result


def verdicts(result: SheetResult) -> dict[str, str]:
    return {line.label: line.verdict for line in result.trace.lines if isinstance(line, InequalityLine | RuleLine)}


def size_of(result: SheetResult) -> DatumLine:
    return next(line for line in result.trace.lines if isinstance(line, DatumLine) and line.label == "size")


def test_the_smallest_size_that_meets_every_criterion(tmp_path: Path) -> None:
    result = made(plan(), tmp_path)
    size = size_of(result)
    assert set(verdicts(result).values()) == {"met"}
    assert size.value.number == 35  # 25 mm2 carries the setting, but is warmer than its terminals allow
    assert size.origin.file == "chosen by calcbook"
    assert size.origin.status == "to be confirmed"
    assert size.origin.remark.startswith("the smallest standard size that meets every criterion; tried: 1.5")
    assert size.origin.remark.endswith("25\N{NO-BREAK SPACE}mm² terminal temperature")


@pytest.mark.parametrize("smaller", ["25 mm2", "16 mm2", "1.5 mm2"])
def test_the_sizes_tried_fail_as_it_says(smaller: str, tmp_path: Path) -> None:
    given = made(plan(size=smaller), tmp_path)
    assert "not met" in verdicts(given).values()
    reasons = size_of(made(plan(), tmp_path)).origin.remark.split("tried: ")[1].split(", ")
    reason = next(text for text in reasons if text.replace("\N{NO-BREAK SPACE}mm²", " mm2").startswith(smaller + " "))
    assert verdicts(given)[reason.split("mm² ")[1]] == "not met"


def test_a_given_size_is_reported_and_never_changed(tmp_path: Path) -> None:
    result = made(plan(size="10 mm2"), tmp_path)
    assert size_of(result).value.number == 10
    assert "not met" in verdicts(result).values()
    assert not lacks_size(plan(size="10 mm2"))


def test_where_no_size_is_enough_the_largest_shows_what_it_does_not_meet(tmp_path: Path) -> None:
    result = made(plan(design_current="900 A", overload_setting="900 A", rating="1000 A"), tmp_path)
    size = size_of(result)
    assert size.value.number == 300
    assert size.origin.remark.startswith("no standard size meets every criterion; the largest is taken; tried: ")
    assert "not met" in verdicts(result).values()


def test_sizes_that_the_table_lacks_are_passed_over(tmp_path: Path) -> None:
    single = plan(method="F", construction="single_trefoil", grouping="none", circuits_in_group="1",
                  design_current="20 A", overload_setting="20 A", rating="25 A")  # fmt: skip
    size = size_of(made(single, tmp_path))
    assert size.value.number == 25  # Table B.52.12 begins there for method F
    assert size.origin.remark == "the smallest standard size that meets every criterion"


def test_more_runs_are_chosen_where_asked(tmp_path: Path) -> None:
    large = plan(design_current="500 A", overload_setting="500 A", rating="630 A", runs="1")
    assert "not met" in verdicts(made(large, tmp_path)).values()
    result = made(replace(large, runs_at_most=3), tmp_path)
    runs = next(line for line in result.trace.lines if isinstance(line, DatumLine) and line.label == "n")
    assert set(verdicts(result).values()) == {"met"}
    assert runs.value.number == 2  # the fewest that serve
    assert runs.origin.file == "chosen by calcbook"
    reasons = size_of(result).origin.remark
    assert "300\N{NO-BREAK SPACE}mm² " in reasons
    assert "2 × 185\N{NO-BREAK SPACE}mm² terminal temperature" in reasons
    smaller = made(replace(large, parameters={**large.parameters, "runs": "2", "size": "185 mm2"}), tmp_path)
    assert verdicts(smaller)["terminal temperature"] == "not met"


def test_one_execution_serves_all_sizes(tmp_path: Path) -> None:
    executed: list[str] = []

    def execute(sheet: SheetPlan) -> SheetResult:
        executed.append(str(sheet.parameters["size"]))
        return execute_sheet(sheet, tmp_path)

    chosen = with_chosen_size(plan(), execute)
    assert executed == ["300 mm2"]
    assert chosen.parameters["size"] == "35 mm2"
    assert replace(chosen, parameters={}, given={}) == replace(plan(), parameters={}, given={})
