"""Current-carrying capacities: complete, in the order that physics gives, and equal to the power law of Annex D."""

from __future__ import annotations

import csv
import itertools
import math
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest
from capacity_cells import METHODS_IN_USE, STANDARD_SIZES, Cell, cells

from calcbook.errors import LookUpFault
from calcbook.records.quantity import Quantity
from calcbook.reference.choose import capacity_table
from calcbook.reference.table import table, tables

CELLS = {replace(cell, table="", current=0, status=""): cell for cell in cells()}


def beside(**change: object) -> list[tuple[Cell, Cell]]:
    """Pairs of cells that differ in one respect only."""
    pairs = ((cell, CELLS.get(replace(key, **change))) for key, cell in CELLS.items())  # type: ignore[arg-type]
    return [(cell, other) for cell, other in pairs if other is not None and other is not cell]


def test_the_tables_hold_a_capacity_for_every_standard_size() -> None:
    for insulation in ("PVC70", "XLPE90"):
        for conductor, sizes in (("Cu", STANDARD_SIZES), ("Al", STANDARD_SIZES[1:])):
            for loaded in (2, 3):
                for method in METHODS_IN_USE:
                    held = [
                        cell.size
                        for cell in CELLS.values()
                        if (cell.insulation, cell.conductor, cell.loaded, cell.method)
                        == (insulation, conductor, loaded, method)
                    ]
                    assert held == list(sizes), (insulation, conductor, loaded, method)


def test_a_greater_size_carries_more() -> None:
    columns: dict[tuple[str, str, int, str], list[Cell]] = {}
    for cell in CELLS.values():
        column = (cell.insulation, cell.conductor, cell.loaded, cell.method)
        columns.setdefault(column, []).append(cell)
    assert len(columns) == 84
    for column, found in columns.items():
        ordered = sorted(found, key=lambda cell: cell.size)
        for small, large in itertools.pairwise(ordered):
            assert small.current < large.current, (column, large.size)
            # per square millimetre the larger conductor carries less: it has less surface for its section
            assert small.current / small.size > large.current / large.size, (column, large.size)


@pytest.mark.parametrize(
    ("change", "holds"),
    [
        ({"insulation": "XLPE90"}, lambda pvc, xlpe: pvc < xlpe),
        ({"conductor": "Al"}, lambda copper, aluminium: aluminium < copper),
        ({"loaded": 3}, lambda two, three: three < two),
    ],
    ids=["XLPE carries more than PVC", "copper more than aluminium", "two loaded more than three"],
)
def test_one_respect_changes_a_capacity_one_way(
    change: dict[str, object], holds: Callable[[float, float], bool]
) -> None:
    pairs = beside(**change)
    assert len(pairs) > 400
    for cell, other in pairs:
        assert holds(cell.current, other.current), (cell, other)


@pytest.mark.parametrize(("worse", "better"), [("A2", "A1"), ("A1", "B1"), ("B2", "B1"), ("B2", "C"), ("C", "E")])
def test_better_cooled_methods_carry_more(worse: str, better: str) -> None:
    pairs = [(cell, other) for cell, other in beside(method=better) if cell.method == worse]
    assert len(pairs) > 50
    for cell, other in pairs:
        assert cell.current < other.current or (cell.size <= 4 and cell.current == other.current), (cell, other)


# --- Annex D: I = A S^m - B S^n, recalled apart from the tables, so that neither can hide a slip of the other ---


def _coefficients() -> list[dict[str, str]]:
    lines = (Path(__file__).parent / "annex_d_coefficients.csv").read_text("utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("# ")))


def power_law(cell: Cell, ignoring_range: bool = False) -> float | None:
    """The capacity by Annex D, None where it gives no coefficients for the cell."""
    for row in _COEFFICIENTS:
        column = (row["table"], row["conductor"], int(row["loaded"]), row["method"])
        fits = float(row["above"]) < cell.size <= float(row["to"]) or ignoring_range
        if column == (cell.table, cell.conductor, cell.loaded, cell.method) and fits:
            size = 47.5 if cell.size == 50 else cell.size
            first, second = (float(row[a]) * math.pow(size, float(row[m])) for a, m in (("A", "m"), ("B", "n")))
            return first - second
    return None


_COEFFICIENTS = _coefficients()
DEVIATIONS = {cell: cell.current - law for cell in CELLS.values() if (law := power_law(cell)) is not None}


def test_annex_d_reproduces_the_tables_within_rounding() -> None:
    """Greatest deviation 0.50 A, half a unit of the last figure; one cell, copper PVC A1 240 mm2, is off by 0.79 A."""
    greatest = sorted(DEVIATIONS, key=lambda cell: abs(DEVIATIONS[cell]), reverse=True)
    odd, second = greatest[0], greatest[1]
    assert (odd.table, odd.conductor, odd.method, odd.size) == ("b.52.2", "Cu", "A1", 240)
    assert DEVIATIONS[odd] == pytest.approx(0.79, abs=0.01)
    assert odd.status == "formula(dev 0.8 A)"
    assert abs(DEVIATIONS[second]) == pytest.approx(0.50, abs=0.01)


@pytest.mark.parametrize("method", METHODS_IN_USE)
def test_annex_d_reproduces_every_size_of_the_methods_in_use(method: str) -> None:
    checked = [cell for cell in DEVIATIONS if cell.method == method]
    per_column = 11 if method.startswith("B") else 15
    assert len(checked) >= 8 * per_column
    for cell in checked:
        rounding = 0.25 if cell.current < 20 else 0.5
        assert abs(DEVIATIONS[cell]) <= rounding + 0.01, (cell, DEVIATIONS[cell])


def test_a_status_says_formula_exactly_where_annex_d_reproduces_the_value() -> None:
    for cell in CELLS.values():
        assert ("formula" in cell.status) == (cell in DEVIATIONS), cell


def test_large_sizes_in_conduit_are_not_taken_from_the_power_law() -> None:
    """B1 and B2 from 150 mm2, from memory: the 2009 edition lies up to 11 % below the law, in one cell 0.7 % above."""
    large = [cell for cell in CELLS.values() if cell.method in ("B1", "B2") and cell.size > 120]
    assert len(large) == 64
    share = {cell: cell.current / law for cell in large if (law := power_law(cell, ignoring_range=True))}
    lowest, *_, second, highest = sorted(share, key=lambda cell: share[cell])
    assert 0.885 < share[lowest] < 0.9
    assert share[second] < 1
    assert (highest.table, highest.method, highest.size) == ("b.52.3", "B2", 300)
    assert share[highest] == pytest.approx(1.007, abs=0.001)


# --- which table holds a circuit ---


@pytest.mark.parametrize(
    ("insulation", "conductor", "method", "phases", "key"),
    [
        ("PVC70", "Cu", "B2", "L1N", "b.52.2"),
        ("XLPE90", "Al", "C", "L1L3", "b.52.3"),
        ("PVC70", "Al", "A1", "L1L2L3", "b.52.4"),
        ("XLPE90", "Cu", "D1", "L1L2L3N", "b.52.5"),
        ("PVC70", "Cu", "E", "L1N", "b.52.10"),
        ("PVC70", "Al", "F_trefoil", "L1L2L3", "b.52.11"),
        ("XLPE90", "Cu", "E", "L1L2L3N", "b.52.12"),
        ("XLPE90", "Al", "G_vertical", "L1L2L3", "b.52.13"),
    ],
)
def test_the_table_of_a_circuit(insulation: str, conductor: str, method: str, phases: str, key: str) -> None:
    chosen = capacity_table(insulation, conductor, method, phases)
    assert chosen == f"iec-60364-5-52-{key}"
    assert chosen in tables()


def test_the_chosen_table_agrees_with_the_number_of_loaded_conductors() -> None:
    for phases in ("L1N", "L2N", "L3N", "L1L2", "L2L3", "L1L3", "L1L2L3", "L1L2L3N"):
        loaded = table("iec-60364-5-52-523.6").look_up({"phases": phases}).value.number
        for insulation in ("PVC70", "XLPE90"):
            for method in METHODS_IN_USE:
                chosen = table(capacity_table(insulation, "Cu", method, phases))
                found = chosen.look_up({
                    "insulation": insulation, "conductor": "Cu", "method": method,
                    "loaded": Quantity(loaded, "1", "count"), "size": Quantity(25, "mm2", "area"),
                })  # fmt: skip
                assert found.value.number > 0


def test_an_insulation_without_a_table_is_refused() -> None:
    with pytest.raises(LookUpFault) as caught:
        capacity_table("MI", "Cu", "B1", "L1N")
    assert str(caught.value) == "table IEC 60364-5-52, Annex B: has no capacities for MI, Cu, B1"


# --- IEC 60228 ---


def test_resistance_times_size_lies_in_the_band_of_its_metal() -> None:
    """Resistivity at 20 degC with the allowance of the standard: 17.6 to 20 for copper, 29.1 to 32.1 for aluminium."""
    bands = {("Cu", "1"): (17.9, 19.4), ("Cu", "2"): (17.6, 19.4), ("Cu", "5"): (18.0, 20.0), ("Al", "2"): (29.1, 32.1)}
    columns: dict[tuple[str, str], list[tuple[float, float]]] = {}
    for row in table("iec-60228-resistance").rows:
        pair = (float(row["size [mm2]"]), float(row["value"]))
        columns.setdefault((row["conductor"], row["class"]), []).append(pair)
    assert set(columns) == set(bands)
    for column, pairs in columns.items():
        low, high = bands[column]
        for (size, resistance), (larger, lower) in itertools.pairwise(pairs):
            assert size < larger
            assert resistance > lower
        for size, resistance in pairs:
            assert low <= size * resistance <= high, (column, size)


def test_solid_and_stranded_copper_have_one_resistance_up_to_150_mm2() -> None:
    values = {
        (row["class"], float(row["size [mm2]"])): row["value"]
        for row in table("iec-60228-resistance").rows
        if row["conductor"] == "Cu"
    }
    for size in (1.5, 2.5, 4, 6, 10, 16, 25, 35, 50, 70, 95, 120, 150):
        assert values["1", size] == values["2", size]
    assert values["1", 300] != values["2", 300]
