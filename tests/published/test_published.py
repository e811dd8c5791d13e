"""The package against values that others have published, each within the digits its source prints."""

from __future__ import annotations

from collections.abc import Callable
from decimal import Decimal

import pytest
from published_rows import COMMON_PRACTICE, LOOK_UP, Row, rows

from calcbook.formulas.register import formulas
from calcbook.reference.table import tables

FEWEST_ROWS = 300


@pytest.mark.parametrize("row", rows(), ids=lambda row: row.name)
def test_a_published_value_is_reproduced_within_its_printed_digits(row: Row) -> None:
    assert abs(row.difference) <= row.allowed, (
        f"{row.source}, {row.place}: printed {row.printed} {row.unit}, "
        f"ours differs by {float(row.difference):.3g}, allowed {row.allowed}"
    )


def test_there_are_enough_rows_and_the_worst_is_reported(record_property: Callable[[str, str], None]) -> None:
    worst = sorted(rows(), key=lambda row: row.used, reverse=True)[:10]
    report = "\n".join(f"{row.used:6.1%} of the tolerance: {row.name}, {row.source}, {row.place}" for row in worst)
    record_property("worst published rows", report)
    assert len(rows()) >= FEWEST_ROWS
    assert worst[0].used <= 1, report


def test_every_row_says_where_its_value_comes_from() -> None:
    for row in rows():
        assert row.formula in formulas() or row.formula.removeprefix(LOOK_UP) in tables(), row.name
        assert row.source, row.name
        assert row.place, row.name
        assert row.obtained.startswith(("read", "memory", "inputs read", COMMON_PRACTICE)), row.name
        assert bool(row.reason) == bool(row.tolerance), f"{row.name}: a looser tolerance needs its reason"


@pytest.mark.parametrize("row", [row for row in rows() if row.tolerance], ids=lambda row: row.name)
def test_a_stated_tolerance_is_needed_and_not_far_beyond_the_need(row: Row) -> None:
    half_a_digit = Row(**{**vars(row), "tolerance": ""}).allowed
    assert abs(row.difference) > half_a_digit, "the printed digits alone would do"
    assert row.allowed <= 4 * abs(row.difference)


@pytest.mark.parametrize("name", formulas())
def test_a_formulas_page_names_exactly_the_sources_of_its_published_rows(name: str) -> None:
    sources = {row.source for row in rows() if row.formula == name and row.source != COMMON_PRACTICE}
    wanted = tuple(sorted(sources, key=str.casefold))
    assert formulas()[name].published == wanted, f"{name}: published should read {wanted!r}"


def test_ambient_factors_lie_within_rounding_of_the_heat_balance() -> None:
    differences = {row.place: row.difference for row in rows() if row.file == "ambient_factors"}
    assert len(differences) == 26
    place, greatest = max(differences.items(), key=lambda item: abs(item[1]))
    # half a unit of the second decimal is 0.005: the table is the formula, rounded
    assert (place, greatest.quantize(Decimal("0.0001"))) == ("PVC, 10 degC", Decimal("0.0047"))


def test_ambient_factors_of_the_package_are_the_published_ones() -> None:
    table = tables()["iec-60364-5-52-b.52.14"]
    ours = {f"{row['insulation'][:-2]}, {row['ambient [degC]']} degC": row["value"] for row in table.rows}
    published = {row.place: row.printed for row in rows() if row.file == "ambient_factors"}
    assert {place: value for place, value in ours.items() if not place.startswith("MI")} == published


def test_derated_currents_are_spread_over_methods_and_insulations() -> None:
    derated = [row for row in rows() if row.file == "derated_currents"]
    kinds = {row.place.partition(",")[0] for row in derated}
    assert kinds == {"table of PVC B2", "table of PVC C", "table of PVC F trefoil", "table of XLPE F trefoil"}
    assert len(derated) == 156
    assert sum(bool(row.reason) for row in derated) == 4
