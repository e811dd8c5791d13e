"""The plan hands every template parameter over as text, with its origin, adopted values and sign-offs beside it."""

from __future__ import annotations

from dataclasses import asdict, replace
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcbook.inputs.project import read_project
from calcbook.plan.given import spelled
from calcbook.plan.parameters import PARAMETERS
from calcbook.plan.sheets import make_plan
from calcbook.records.project import Datum, Origin, Plan, Project, SheetPlan, SignOff
from calcbook.records.quantity import Quantity, read_quantity

EXAMPLES = Path(__file__).resolve().parent.parent.parent / "examples"


@pytest.fixture(scope="module")
def project() -> Project:
    return read_project(EXAMPLES / "tern_quay")


@pytest.fixture(scope="module")
def plan(project: Project) -> Plan:
    return make_plan(project)


def sheet_of(plan: Plan, name: str) -> SheetPlan:
    return next(sheet for sheet in plan.sheets if sheet.name == name)


def test_boards_come_from_the_origin_downwards_each_before_its_circuits_then_the_derivations(plan: Plan) -> None:
    names = [sheet.name for sheet in plan.sheets]
    assert names[:4] == ["F-001", "MB~demand", "MB~supply", "F-002"]
    boards = [name.removesuffix("~demand") for name in names if name.endswith("~demand")]
    assert boards == ["MB", "SW", "PS", "QB"]
    after = names.index("SW~supply") + 1
    assert names[after : names.index("PS~demand")] == ["C-003", "C-012", "C-013", "C-014", "C-015", "C-016"]
    assert names[-4:] == ["D-three-phase-power", "D-cable-current", "D-demand", "D-voltage-drop"]
    assert len(names) == len(set(names))


def test_each_kind_of_sheet_has_its_templates(plan: Plan) -> None:
    assert sheet_of(plan, "C-001").templates == ("three-phase-power", "cable-current", "voltage-drop")
    feeder = ("feeder-current", "cable-current", "conductor-impedance", "feeder-voltage")
    assert sheet_of(plan, "F-004").templates == feeder
    assert sheet_of(plan, "QB~demand").templates == ("board-demand",)
    assert sheet_of(plan, "QB~supply").templates == ("board-supply",)
    assert sheet_of(plan, "C-001").title == "Travelling hoist"
    assert sheet_of(plan, "QB~supply").title == "Quay board, shore power"
    assert plan.sheets[-1].parameters == {"subject": "voltage-drop"}
    assert plan.sheets[-1].given["sheet"] == "D-voltage-drop"


@pytest.mark.parametrize(
    ("name", "rests_on"),
    [
        ("C-001", {"board_voltage": ("MB~supply", "U_s[L1L2L3]"), "board_drop": ("MB~supply", "du_board[L1L2L3]")}),
        ("C-006", {"board_voltage": ("QB~supply", "U_s[L1L2L3]"), "board_drop": ("QB~supply", "du_board[L1L2L3]")}),
        ("C-004", {"board_voltage": ("QB~supply", "U_k[L2]"), "board_drop": ("QB~supply", "du_k[L2]")}),
        ("C-020", {"board_voltage": ("PS~supply", "U_s[L1L3]"), "board_drop": ("PS~supply", "du_board[L1L3]")}),
        (
            "QB~supply",
            {f"voltage_{a}[{k}]": ("F-004", f"U_{a}[{k}]") for a in ("re", "im") for k in ("L1", "L2", "L3")},
        ),
    ],
)
def test_what_a_sheet_rests_on(plan: Plan, name: str, rests_on: dict[str, tuple[str, str]]) -> None:
    assert sheet_of(plan, name).rests_on == rests_on


def test_a_feeder_rests_on_both_its_ends(plan: Plan) -> None:
    rests_on = sheet_of(plan, "F-004").rests_on
    assert {workbook for workbook, _ in rests_on.values()} == {"QB~demand", "MB~supply"}
    assert rests_on["active_current[L2]"] == ("QB~demand", "I_P[L2]")
    assert rests_on["neutral_fundamental"] == ("QB~demand", "I_N1")
    assert rests_on["voltage_im[L3]"] == ("MB~supply", "U_im[L3]")
    of_origin = sheet_of(plan, "F-001")
    assert {workbook for workbook, _ in of_origin.rests_on.values()} == {"MB~demand"}
    assert of_origin.parameters["line_voltages"] == {}


def test_nothing_rests_on_itself(plan: Plan) -> None:
    done: set[str] = set()
    waiting = {sheet.name: {workbook for workbook, _ in sheet.rests_on.values()} for sheet in plan.sheets}
    while waiting:
        ready = {name for name, sources in waiting.items() if sources <= done}
        assert ready, waiting
        done |= ready
        waiting = {name: sources for name, sources in waiting.items() if name not in ready}


def test_every_parameter_is_there_as_entered(plan: Plan) -> None:
    circuits = [sheet for sheet in plan.sheets if sheet.number.startswith("C-")]
    assert len(circuits) == 24
    for sheet in circuits:
        assert set(sheet.parameters) == {*PARAMETERS, "route"}
    stated = {name: text for name, text in sheet_of(plan, "C-001").parameters.items() if text}
    assert stated == {
        "kind": "motor",
        "phases": "L1L2L3",
        "shaft_power": "45 kW",
        "power_factor": "0.86",
        "efficiency": "0.942",
        "rated_current": "81 A",
        "rated_voltage": "400 V",
        "line_to_earth_voltage": "230 V",
        "conductor": "Cu",
        "insulation": "XLPE90",
        "construction": "multicore",
        "method": "E",
        "size": "35 mm2",
        "runs": "1",
        "terminal_temperature": "70 degC",
        "ambient": "35 degC",
        "grouping": "perforated_tray",
        "circuits_in_group": "4",
        "trays": "1",
        "device": "gG",
        "rating": "160 A",
        "overload_device": "relay60947",
        "overload_setting": "82 A",
        "length": "62 m",
        "length_basis": "measured",
        "length_tolerance": "10 %",
        "frequency": "50 Hz",
        "resistance_for_drop": "theta_max",
        "nominal_voltage": "400 V",
        "supply_is": "private",
    }


def test_a_board_is_handed_its_circuits_and_feeders(plan: Plan) -> None:
    parameters = sheet_of(plan, "MB~demand").parameters
    assert parameters["phases"] == "L1L2L3N"
    assert parameters["diversity"] == "0.9"
    loads = parameters["loads"]
    assert isinstance(loads, dict)
    assert list(loads) == ["C-001", "C-002", "C-007", "C-008", "C-009", "C-010", "C-011"]
    assert parameters["feeders"] == {
        "F-002": {"phases": "L1L2L3N", "demand_factor": "0.9"},
        "F-003": {"phases": "L1L2L3N", "demand_factor": "1"},
        "F-004": {"phases": "L1L2L3N", "demand_factor": "1"},
    }
    assert list(parameters["sub_boards"])[:2] == ["F-002:L1", "F-002:L2"]
    assert loads["C-011"] == {
        "phases": "L1N",
        "active_power": "1.5 kW",
        "power_factor": "0.95",
        "third_harmonic": "20 %",
        "demand_factor": "0.9",
    }
    origins = sheet_of(plan, "MB~demand").given["origins"]
    assert isinstance(origins, dict)
    assert origins["shaft_power[C-001]"]["tag"] == "C-001"
    assert origins["demand_factor[F-002]"]["column"] == "demand_factor"


def test_origins_stand_beside_the_parameters(project: Project, plan: Plan) -> None:
    sheet = sheet_of(plan, "C-002")
    origins = sheet.given["origins"]
    assert isinstance(origins, dict)
    assert set(origins) == {name for name, text in sheet.parameters.items() if text}
    assert origins["ambient"] == asdict(project.basis["ambient_air"].origin)
    assert origins["power_factor"]["status"] == "assumed"
    assert origins["overload_setting"]["column"] == "setting_Ir"


def test_adopted_values_go_to_their_sheet_and_to_their_board(plan: Plan) -> None:
    reason = "A fifth pillar is expected within two years, letter TQ-C-LET-018"
    adopted = {"value": "80 A", "reason": reason, "by": "AM", "date": "2026-02-26"}
    found = {sheet.name: sheet.given["adopted"] for sheet in plan.sheets if sheet.given.get("adopted")}
    assert found == {"C-006": {"I_B": adopted}, "QB~demand": {"I_B[C-006]": adopted}}


def test_sign_offs_go_to_every_circuit_and_board(project: Project) -> None:
    sign_off = SignOff("RT", "2026-03-09", "QA-7")
    signed = make_plan(replace(project, signed_off={"IEC 60364-5-52:2009, B.52.4": sign_off}))
    wanted = {"IEC 60364-5-52:2009, B.52.4": {"by": "RT", "date": "2026-03-09", "document": "QA-7"}}
    for name in ("C-003", "F-001", "MB~supply"):
        assert sheet_of(signed, name).given["signed_off"] == wanted


def with_data(project: Project, **texts: str) -> dict[str, object]:
    """The parameters of the hoist with these data in place of its own setting."""
    circuit = next(circuit for circuit in project.circuits if circuit.tag == "C-001")
    kept = {name: datum for name, datum in circuit.data.items() if not name.startswith(("overload", "shaft"))}
    data = {name: Datum(text, None, Origin("circuits.csv", "C-001", name)) for name, text in texts.items()}
    changed = replace(circuit, data={**kept, **data})
    circuits = tuple(changed if other.tag == "C-001" else other for other in project.circuits)
    return dict(sheet_of(make_plan(replace(project, circuits=circuits)), "C-001").parameters)


def test_a_current_is_handed_over_as_load_current(project: Project) -> None:
    assert with_data(project, current="20 A")["load_current"] == "20 A"


def test_the_limit_of_the_drop_is_the_circuits_own_else_that_of_its_kind(project: Project) -> None:
    assert with_data(project)["drop_limit"] == ""
    limit = Datum("3 %", None, Origin("inputs.toml", "basis", "drop_limits.motor"))
    stated = replace(project, basis={**project.basis, "drop_limits.motor": limit})
    assert with_data(stated)["drop_limit"] == "3 %"
    assert with_data(stated, drop_limit="2 %")["drop_limit"] == "2 %"


def test_the_supplement_for_length_is_handed_over_only_when_claimed(project: Project, plan: Plan) -> None:
    assert with_data(project)["length_supplement"] == ""
    assert with_data(project, length_supplement="claimed")["length_supplement"] == "claimed"
    assert all("length_supplement" not in sheet.parameters for sheet in plan.sheets if sheet.number.startswith("F-"))


def test_the_setting_is_that_of_the_device_that_judges_overload(project: Project) -> None:
    assert with_data(project, setting_Ir="15 A")["overload_setting"] == "15 A"
    both = with_data(project, setting_Ir="15 A", overload_device="relay60947", overload_setting="12 A")
    assert both["overload_setting"] == "12 A"
    assert with_data(project)["overload_setting"] == ""


@given(st.floats(min_value=1e-9, max_value=1e12), st.sampled_from([("A", "line_current"), ("1", "ratio")]))
def test_an_adopted_value_is_read_back_unchanged(number: float, unit: tuple[str, str]) -> None:
    quantity = Quantity(number, *unit)
    assert read_quantity(spelled(quantity), quantity.kind) == quantity
