"""The cable-current template, evaluated alone: every method, the ground, harmonics, routes, omitted protection."""

from __future__ import annotations

from functools import cache
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcbook.records.line import (
    ChoiceLine,
    ConclusionLine,
    InequalityLine,
    Line,
    RuleLine,
    StepLine,
    TableLine,
    Valued,
)
from calcbook.records.quantity import Quantity
from calcbook.records.recompute import recompute
from calcbook.records.trace import LINE_MIME, line_from_json
from calcbook.run.shell import run_notebook
from calcbook.run.templates import find_template
from calcbook.sheet import look_up

NAME = "cable-current"
SIZES = (25, 35, 50, 70, 95, 120, 150, 185, 240, 300)
GROUND = {"ambient": "25 degC", "soil_resistivity": "2.5 K.m/W", "depth": "0.7 m", "spacing": "250 mm"}
METHODS = {
    "A1": {"construction": "insulated_in_conduit", "grouping": "bunched"},
    "A2": {"grouping": "bunched"},
    "B1": {"construction": "insulated_in_conduit", "grouping": "bunched"},
    "B2": {"grouping": "bunched"},
    "C": {"grouping": "single_layer_wall"},
    "D1": {"grouping": "ducts", **GROUND},
    "D2": {"grouping": "buried", **GROUND},
    "E": {"grouping": "perforated_tray", "trays": "1"},
    "F": {"construction": "single_flat", "grouping": "ladder", "trays": "1"},
    "G": {"construction": "single_spaced", "grouping": "none", "circuits_in_group": "1"},
}
FOUR_WIRE = {"phases": "L1L2L3N", "size": "70 mm2"}
DUCT = {
    "method": "D1", "part_length": "60 m", "ambient": "20 degC", "soil_resistivity": "2.5 K.m/W", "depth": "0.7 m",
    "grouping": "ducts", "circuits_in_group": "2", "spacing": "250 mm",
}  # fmt: skip
TRAY = {
    "method": "E", "part_length": "20 m", "ambient": "40 degC", "grouping": "perforated_tray",
    "circuits_in_group": "4", "trays": "2",
}  # fmt: skip


def outputs(**parameters: Any) -> list[Any]:
    notebook = find_template(NAME).notebook
    notebook.cells = [cell for cell in notebook.cells if "derivation" not in cell.metadata.get("tags", [])]
    for cell in notebook.cells:
        if "parameters" in cell.metadata.get("tags", []):
            cell.source += "".join(f"\n{name} = {value!r}" for name, value in parameters.items())
    return [output for cell in run_notebook(notebook).cells for output in cell.get("outputs", ())]


def sheet(**parameters: Any) -> dict[str, Line]:
    """The lines of the template with some parameters changed, by label."""
    found = outputs(**parameters)
    errors = [output["evalue"] for output in found if output["output_type"] == "error"]
    assert not errors, errors
    lines = [line_from_json(output["data"][LINE_MIME]) for output in found if LINE_MIME in output.get("data", {})]
    return {line.label: line for line in lines}


@cache
def sheet_of_method(method: str) -> dict[str, Line]:
    return sheet(method=method, **METHODS[method])


def number(lines: dict[str, Line], label: str) -> float:
    line = lines[label]
    assert isinstance(line, Valued)
    return line.value.number


def verdict(lines: dict[str, Line], label: str) -> str:
    line = lines[label]
    assert isinstance(line, InequalityLine | RuleLine)
    return line.verdict


def written(lines: dict[str, Line], label: str) -> str:
    line = lines[label]
    assert isinstance(line, StepLine)
    return line.written


@pytest.mark.parametrize("method", METHODS)
def test_every_method_has_a_capacity_with_its_factors(method: str) -> None:
    lines = sheet_of_method(method)
    factors = [number(lines, name) for name in ("C_a", "C_g", "C_s") if name in lines]
    capacity = number(lines, "I_t")
    for factor in factors:
        capacity *= factor
    assert number(lines, "I_Z") == pytest.approx(capacity, rel=1e-12)
    assert ("C_s" in lines) == (method in ("D1", "D2"))
    assert number(lines, "theta_ref") == (20 if method in ("D1", "D2") else 30)


def test_the_table_of_a_factor_follows_the_method() -> None:
    tables = {
        (method, name): line.table.removeprefix("iec-60364-5-52-")
        for method in METHODS
        for name in ("C_a", "C_g")
        if isinstance(line := sheet_of_method(method)[name], TableLine)
    }
    assert {method for method in METHODS if tables[method, "C_a"] == "b.52.15"} == {"D1", "D2"}
    wanted = {"B2": "b.52.17", "D1": "b.52.19", "D2": "b.52.18", "E": "b.52.20", "F": "b.52.21", "G": "b.52.17"}
    assert {method: tables[method, "C_g"] for method in wanted} == wanted


def test_a_buried_cable_by_hand() -> None:
    lines = sheet(
        method="D2", conductor="Al", size="120 mm2", grouping="buried", circuits_in_group="3",
        ambient="25 degC", soil_resistivity="1.5 K.m/W", depth="0.7 m", spacing="250 mm", runs="2",
    )  # fmt: skip
    # n_c = 3 + 1 = 4 circuits at 250 mm: 0.75; soil 1.5: 1.28; ground 25 degC: 0.96
    assert number(lines, "n_c") == 4
    assert number(lines, "I_Z") == pytest.approx(2 * number(lines, "I_t") * 0.96 * 0.75 * 1.28, rel=1e-12)
    assert written(lines, "I_Z") == "n*I_t*C_a*C_g*C_s"
    assert number(lines, "C_a_f") == pytest.approx((65 / 70) ** 0.5)


@pytest.mark.parametrize(
    ("share", "factor", "neutral"),
    [("10 %", 1.0, 24.3), ("28 %", 0.86, 68.04), ("40 %", 0.86, 97.2), ("60 %", 1, 145.8)],
)
def test_third_harmonics_of_a_four_wire_circuit(share: str, factor: float, neutral: float) -> None:
    lines = sheet(**FOUR_WIRE, third_harmonic=share)
    assert number(lines, "C_h") == factor
    assert number(lines, "I_N") == pytest.approx(neutral)
    assert number(lines, "I_Z") == pytest.approx(number(lines, "I_t") * number(lines, "C_a") * 0.82 * factor)
    assert number(lines, "I_ZN") == pytest.approx(number(lines, "I_Z"))
    assert verdict(lines, "neutral current") == ("met" if neutral <= number(lines, "I_Z") else "not met")
    rises = [40 + 50 * (current / number(lines, "I_Z")) ** 2 for current in (81, neutral)]
    assert number(lines, "theta_B") == pytest.approx(max(rises))


def test_the_example_of_a_handbook_needs_the_sizes_it_chooses() -> None:
    """115 A, PVC, method E, 30 degC, one circuit: 35, 50, 70 and 95 mm2 with 0, 28, 40 and 60 % third harmonic."""
    given_there = {
        "phases": "L1L2L3N", "design_current": "115 A", "overload_setting": "115 A", "insulation": "PVC70",
        "ambient": "30 degC", "grouping": "none", "circuits_in_group": "1",
    }  # fmt: skip
    smaller = {"35 mm2": "25 mm2", "50 mm2": "35 mm2", "70 mm2": "50 mm2", "95 mm2": "70 mm2"}
    criteria = ("setting", "neutral current")
    for share, size in (("0 %", "35 mm2"), ("28 %", "50 mm2"), ("40 %", "70 mm2"), ("60 %", "95 mm2")):
        chosen = sheet(**given_there, third_harmonic=share, size=size)
        assert {verdict(chosen, name) for name in criteria} == {"met"}, share
        below = sheet(**given_there, third_harmonic=share, size=smaller[size])
        assert "not met" in {verdict(below, name) for name in criteria}, share
        assert number(chosen, "I_t") >= number(chosen, "I_t_req") > number(below, "I_t")


def test_a_reduced_neutral_has_its_own_capacity_and_rule() -> None:
    lines = sheet(**FOUR_WIRE, third_harmonic="12 %", neutral_size="35 mm2")
    share = number(lines, "I_tN") / number(lines, "I_t")
    assert number(lines, "I_ZN") == pytest.approx(number(lines, "I_Z") * share)
    assert (number(lines, "size_N_min"), verdict(lines, "neutral size")) == (16, "met")
    lines = sheet(**FOUR_WIRE, third_harmonic="12 %", neutral_size="10 mm2")
    assert verdict(lines, "neutral size") == "not met"
    lines = sheet(**FOUR_WIRE, third_harmonic="16 %", neutral_size="35 mm2")
    assert (number(lines, "size_N_min"), verdict(lines, "neutral size")) == (70, "not met")


def test_a_neutral_for_which_no_size_is_stated_equals_the_line() -> None:
    lines = sheet(phases="L1N", method="C", grouping="single_layer_wall")
    assert (number(lines, "size_N"), verdict(lines, "neutral size")) == (35, "met")
    assert "C_h" not in lines
    assert "size_N" not in sheet_of_method("E")


def test_sizes_do_not_govern_while_they_are_met() -> None:
    lines = sheet(phases="L1N", method="C", grouping="single_layer_wall", overload_setting="85 A")
    conclusion = lines["conclusion"]
    assert isinstance(conclusion, ConclusionLine)
    assert conclusion.governing == "design current"
    assert set(conclusion.order[-3:]) == {"minimum size", "neutral size", "overload device"}
    aluminium = sheet(conductor="Al", size="6 mm2", design_current="10 A", overload_setting="10 A")
    assert verdict(aluminium, "minimum size") == "not met"
    conclusion = aluminium["conclusion"]
    assert isinstance(conclusion, ConclusionLine)
    assert conclusion.governing == "minimum size"


def test_detection_of_overcurrent_in_the_neutral_is_asked_for_unless_four_poles_have_it() -> None:
    lines = sheet(**FOUR_WIRE, third_harmonic="40 %", overload_setting="150 A")
    assert number(lines, "I_Nr") == pytest.approx(180)
    assert verdict(lines, "neutral overload") == "not met"
    assert "neutral overload" not in sheet(**FOUR_WIRE, third_harmonic="40 %", overload_setting="150 A", poles="4")


def test_the_terminal_temperature_is_a_rise_over_the_ambient() -> None:
    lines = sheet()
    criterion = lines["terminal temperature"]
    assert isinstance(criterion, InequalityLine)
    assert (criterion.left, criterion.right, criterion.above) == ("theta_B", "theta_t", "theta_a")
    assert criterion.utilisation == pytest.approx((number(lines, "theta_B") - 40) / 30)
    warm = sheet(size="25 mm2")
    assert (verdict(warm, "terminal temperature"), verdict(warm, "setting")) == ("not met", "met")
    assert verdict(sheet(size="25 mm2", terminal_temperature="90 degC"), "terminal temperature") == "met"


def test_omitted_overload_protection_leaves_the_design_current_against_the_capacity() -> None:
    lines = sheet(overload_omitted="433.3.3", reason="Fire pump", overload_device="", overload_setting="")
    criterion, rule, reason = lines["design current"], lines["overload device"], lines["reason"]
    assert isinstance(criterion, InequalityLine)
    assert (criterion.left, criterion.right, criterion.verdict) == ("I_B", "I_Z", "met")
    assert isinstance(rule, RuleLine)
    assert (rule.found, rule.verdict, rule.reference) == ("433.3.3", "met", "IEC 60364-4-43, 433.3")
    assert "an overload gives an alarm instead of a trip" in rule.requirement
    assert isinstance(reason, ChoiceLine)
    assert reason.text == "Fire pump"
    assert not {"setting", "operating current", "I_2", "I_t_req"} & set(lines)


def test_the_most_adverse_part_of_a_route_decides() -> None:
    lines = sheet(route={"P1": DUCT, "P2": TRAY})
    parts = {part: number(lines, f"I_Z[{part}]") for part in ("P1", "P2")}
    assert written(lines, "I_Z[P1]") == "n*I_t[P1]*C_a[P1]*C_g[P1]*C_s[P1]"
    assert written(lines, "I_Z") == "min(I_Z[P1], I_Z[P2])"
    assert number(lines, "I_Z") == min(parts.values()) == parts["P1"]
    assert written(lines, "theta_B") == "max(theta_B[P1], theta_B[P2])"
    assert number(lines, "theta_a") == 40
    assert {"C_s[P1]", "l_p[P2]", "trays[P2]", "spacing[P1]", "I_t_req[P2]"} <= set(lines)
    assert not {"C_s[P2]", "spacing[P2]", "C_a", "n_c"} & set(lines)


def test_a_route_recomputes_and_its_other_part_may_come_to_decide() -> None:
    lines = sheet(route={"P1": DUCT, "P2": TRAY})
    hot = {"theta_a[P2]": Quantity(55.0, "degC", "temperature")}
    done = recompute(lines.values(), hot, look_up)
    assert done.numbers["I_Z"] == done.numbers["I_Z[P2]"] < done.numbers["I_Z[P1]"]
    again = sheet(route={"P1": DUCT, "P2": {**TRAY, "ambient": "55 degC"}})
    assert done.numbers["I_Z"] == pytest.approx(number(again, "I_Z"), rel=1e-12)


def test_a_route_with_a_loaded_neutral_takes_the_worst_of_both() -> None:
    lines = sheet(**FOUR_WIRE, third_harmonic="40 %", route={"P1": DUCT, "P2": TRAY})
    assert written(lines, "I_ZN") == "min(I_ZN[P1], I_ZN[P2])"
    assert written(lines, "theta_B") == "max(theta_B[P1.L], theta_B[P1.N], theta_B[P2.L], theta_B[P2.N])"


def test_a_method_that_the_table_lacks_stops_the_sheet() -> None:
    (error,) = (output for output in outputs(method="G", phases="L1N") if output["output_type"] == "error")
    assert "has no capacities for method G, multicore, L1N" in error["evalue"]


# --- what is worse is never better ---


def capacity(method: str, **changes: Quantity) -> float:
    return recompute(sheet_of_method(method).values(), changes, look_up).numbers["I_Z"]


@settings(max_examples=40, deadline=None)
@given(st.sampled_from(list(METHODS)), st.floats(0, 60), st.floats(0, 60))
def test_more_ambient_never_raises_the_capacity(method: str, one: float, other: float) -> None:
    low, high = (Quantity(number, "degC", "temperature") for number in sorted((one, other)))
    assert capacity(method, theta_a=high) <= capacity(method, theta_a=low)


@settings(max_examples=40, deadline=None)
@given(st.sampled_from([method for method in METHODS if method != "G"]), st.integers(1, 9), st.integers(1, 9))
def test_more_circuits_never_raise_the_capacity(method: str, one: int, other: int) -> None:
    most = 3 if method == "F" else 9
    few, many = (Quantity(float(min(number, most)), "1", "count") for number in sorted((one, other)))
    assert capacity(method, n_g=many) <= capacity(method, n_g=few)


@settings(max_examples=30, deadline=None)
@given(st.sampled_from(["D1", "D2"]), st.floats(0.3, 3), st.floats(0.3, 3))
def test_a_drier_soil_never_raises_the_capacity(method: str, one: float, other: float) -> None:
    wet, dry = (Quantity(number, "K.m/W", "thermal_resistivity") for number in sorted((one, other)))
    assert capacity(method, rho_s=dry) <= capacity(method, rho_s=wet)


@pytest.mark.parametrize("method", METHODS)
def test_a_larger_size_never_lowers_the_capacity(method: str) -> None:
    found = [capacity(method, size=Quantity(float(size), "mm2", "area")) for size in SIZES]
    assert found == sorted(found)
