"""The factors of soil, harmonics and grouping: right ways up, the smaller where sources disagree, bands, steps down."""

from __future__ import annotations

from itertools import pairwise, product

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcbook.errors import LookUpFault
from calcbook.records.quantity import Quantity
from calcbook.reference import choose
from calcbook.reference.table import Found, Key, table

TRAYS = "perforated_tray", "perforated_tray_spaced", "vertical_tray", "vertical_tray_spaced", "ladder", "ladder_spaced"
GROUPS = [
    ("bunched", "multicore"),
    ("buried", "multicore"),
    ("buried_one_diameter", "multicore"),
    ("ducts", "multicore"),
    ("ducts", "single_flat"),
    ("unperforated_tray", "multicore"),
    *product(TRAYS, ("multicore", "single_flat")),
]


def group(grouping: str, construction: str, circuits: float, further: float = 1) -> Found:
    """The grouping factor; `further` is the number of trays or the spacing in mm."""
    key = choose.grouping_table(grouping, construction)
    keys: dict[str, Key] = {"arrangement": grouping, "circuits": Quantity(circuits, "1", "count")}
    keys |= choose.cable_kind(grouping, construction)
    if choose.grouping_needs(grouping) == "trays":
        keys["trays"] = Quantity(further, "1", "count")
    elif choose.grouping_needs(grouping) == "spacing":
        keys["spacing"] = Quantity(further, "mm", "dimension")
    return table(key).look_up(keys)


def soil(method: str, resistivity: float) -> Found:
    return table(choose.SOIL_FACTOR).look_up({
        "method": method, "soil_resistivity": Quantity(resistivity, "K.m/W", "thermal_resistivity"),
    })  # fmt: skip


def harmonic(share: float) -> Found:
    return table(choose.HARMONIC_FACTOR).look_up({"third_harmonic": Quantity(share, "%", "per_cent")})


@pytest.mark.parametrize(
    ("grouping", "construction", "circuits", "further", "factor"),
    [
        ("buried", "multicore", 4, 0, 0.60),
        ("buried", "multicore", 4, 250, 0.75),
        ("buried_one_diameter", "multicore", 3, 0, 0.70),
        ("ducts", "multicore", 3, 250, 0.85),
        ("ducts", "single_trefoil", 3, 250, 0.80),
        ("unperforated_tray", "multicore", 1, 1, 0.97),
        ("perforated_tray", "multicore", 6, 3, 0.71),
        ("perforated_tray", "single_flat", 3, 2, 0.81),
        ("ladder_spaced", "single_trefoil", 3, 3, 0.90),
        ("ladder", "multicore", 9, 1, 0.78),
    ],
)
def test_the_factor_of_an_arrangement(
    grouping: str, construction: str, circuits: int, further: float, factor: float
) -> None:
    found = group(grouping, construction, circuits, further)
    assert (found.value.number, found.remark) == (factor, "")


@pytest.mark.parametrize(
    ("grouping", "circuits", "further", "factor"),
    [
        ("ducts", 6, 1000, 0.80),
        ("ladder", 3, 2, 0.80),
        ("ladder", 2, 6, 0.83),
        ("ladder", 3, 6, 0.76),
        ("ladder", 6, 6, 0.68),
        ("ladder", 9, 6, 0.64),
    ],
)
def test_where_sources_disagree_the_smaller_factor_is_held_and_the_file_says_so(
    grouping: str, circuits: int, further: float, factor: float
) -> None:
    assert group(grouping, "multicore", circuits, further).value.number == factor
    obtained = table(choose.grouping_table(grouping, "multicore")).header["obtained"]
    assert "Sources disagree" in obtained
    assert "the smaller is held" in obtained


def test_a_spacing_between_columns_takes_the_narrower_one() -> None:
    found = group("buried", "multicore", 5, 200)
    assert (found.value.number, found.remark) == (0.65, "spacing 200 mm read at 125 mm, less favourable")
    found = group("buried", "multicore", 10, 800)
    assert found.value.number == 0.71
    assert found.remark == ("spacing 800 mm read at 500 mm, less favourable; circuits 10 read at 12, less favourable")


def test_trays_between_rows_take_the_higher_stack() -> None:
    found = group("perforated_tray", "multicore", 5, 4)
    assert found.value.number == 0.68
    assert "trays 4 read at 6, less favourable" in found.remark
    with pytest.raises(LookUpFault, match=r"trays 7 is outside the table, 1 to 6"):
        group("perforated_tray", "multicore", 5, 7)


@pytest.mark.parametrize(("grouping", "construction"), GROUPS)
def test_more_circuits_and_more_trays_never_have_the_greater_factor(grouping: str, construction: str) -> None:
    rows = table(choose.grouping_table(grouping, construction)).rows
    mine = [row for row in rows if row.get("arrangement", "ducts") == grouping]
    most = max(int(row["circuits [1]"]) for row in mine)
    stacked = choose.grouping_needs(grouping) == "trays"
    if grouping in ("buried", "ducts"):
        steps: list[float] = [1000, 500, 250, 125, 0]
    else:
        steps = list(range(1, 1 + max(int(row["trays [1]"]) for row in mine))) if stacked else [0]
    factors = [[group(grouping, construction, n, step).value.number for n in range(1, most + 1)] for step in steps]
    for line in factors:
        assert line == sorted(line, reverse=True)
    for wider, narrower in pairwise(factors):
        assert all(second <= first for first, second in zip(wider, narrower, strict=True))


def test_a_lone_circuit_in_the_ground_has_no_reduction() -> None:
    for grouping in ("buried", "buried_one_diameter", "ducts"):
        found = group(grouping, "multicore", 1, 0)
        assert (found.value.number, found.status) == (1.0, "definition")


@given(st.floats(0.3, 3), st.floats(0.3, 3), st.sampled_from(["D1", "D2"]))
def test_a_drier_soil_never_has_the_greater_factor(one: float, other: float, method: str) -> None:
    wetter, drier = sorted((one, other))
    assert soil(method, wetter).value.number >= soil(method, drier).value.number


def test_the_reference_soil_has_no_factor_and_between_rows_the_drier_is_read() -> None:
    assert [soil(method, 2.5).value.number for method in ("D1", "D2")] == [1.0, 1.0]
    found = soil("D2", 0.9)
    assert (found.value.number, found.remark) == (1.5, "soil_resistivity 0.9 K.m/W read at 1 K.m/W, less favourable")
    with pytest.raises(LookUpFault, match=r"soil_resistivity 3\.1 K\.m/W is outside the table, 0\.5 to 3 K\.m/W"):
        soil("D1", 3.1)


@pytest.mark.parametrize(
    ("share", "factor", "end"),
    [(0, 1, 15), (15, 1, 15), (15.01, 0.86, 33), (33, 0.86, 33), (33.5, 0.86, 45), (45, 0.86, 45), (45.1, 1, 100)],
)
def test_the_bands_of_the_third_harmonic(share: float, factor: float, end: int) -> None:
    found = harmonic(share)
    assert found.value.number == factor
    assert found.remark == ("" if share == end else f"in the band that ends at {end} %")


def test_the_column_of_single_core_cables() -> None:
    assert choose.capacity_column("F", "single_trefoil", "L1L2L3") == "F_trefoil"
    assert choose.capacity_column("F", "single_flat", "L1L2L3N") == "F_flat_touching"
    assert choose.capacity_column("F", "single_flat", "L1N") == "F"
    assert choose.capacity_column("G", "single_spaced", "L1L2L3") == "G_vertical"
    assert choose.capacity_column("G", "single_spaced_horizontal", "L1L2L3") == "G_horizontal"
    assert choose.capacity_column("D2", "single_flat", "L1L2L3") == "D2"
    with pytest.raises(LookUpFault, match="has no capacities for method G, single_spaced, L1N"):
        choose.capacity_column("G", "single_spaced", "L1N")


def test_spaced_cables_are_taken_as_the_less_favourable_column() -> None:
    for key in ("b.52.10", "b.52.11", "b.52.12", "b.52.13"):
        rows = table(f"iec-60364-5-52-{key}").rows
        by_size: dict[str, dict[str, float]] = {}
        for row in rows:
            by_size.setdefault(row["size [mm2]"], {})[row["method"]] = float(row["value"])
        spaced = [columns for columns in by_size.values() if "G_vertical" in columns]
        assert spaced
        assert all(columns["G_vertical"] < columns["G_horizontal"] for columns in spaced)


def test_smallest_sizes_by_metal() -> None:
    found = {metal: table(choose.SMALLEST_SIZE).look_up({"conductor": metal}) for metal in ("Cu", "Al")}
    assert {metal: value.value.number for metal, value in found.items()} == {"Cu": 1.5, "Al": 10.0}
    assert {value.status for value in found.values()} == {"memory"}
    equal = {metal: table(choose.EQUAL_NEUTRAL).look_up({"conductor": metal}).value.number for metal in ("Cu", "Al")}
    assert equal == {"Cu": 16.0, "Al": 25.0}
