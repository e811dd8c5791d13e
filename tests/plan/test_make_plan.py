"""The plan hands every template parameter over as text, with its origin, adopted values and sign-offs beside it."""

from __future__ import annotations

from dataclasses import asdict, replace
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcbook.inputs.project import read_project
from calcbook.plan.parameters import PARAMETERS
from calcbook.plan.sheets import make_plan, spelled
from calcbook.records.project import Circuit, Datum, Origin, Plan, Project, SignOff
from calcbook.records.quantity import Quantity, read_quantity

EXAMPLES = Path(__file__).resolve().parent.parent.parent / "examples"


@pytest.fixture(scope="module")
def project() -> Project:
    return read_project(EXAMPLES / "tern_quay")


@pytest.fixture(scope="module")
def plan(project: Project) -> Plan:
    return make_plan(project)


def test_one_sheet_a_circuit_in_file_order_then_the_derivations(plan: Plan) -> None:
    numbers = [sheet.number for sheet in plan.sheets]
    circuits = [f"C-00{number}" for number in range(1, 7)]
    assert numbers == [*circuits, "D-three-phase-power", "D-cable-current"]
    assert plan.sheets[0].templates == ("three-phase-power", "cable-current")
    assert plan.sheets[0].title == "Travelling hoist"
    assert plan.sheets[-1].templates == ("derivations",)
    assert plan.sheets[-1].parameters == {"subject": "cable-current"}
    assert plan.sheets[-1].given["sheet"] == "D-cable-current"


def test_every_parameter_is_there_as_entered(plan: Plan) -> None:
    for sheet in plan.sheets[:6]:
        assert tuple(sheet.parameters) == PARAMETERS
    assert plan.sheets[0].parameters == {
        "phases": "L1L2L3",
        "kind": "motor",
        "shaft_power": "45 kW",
        "active_power": "",
        "apparent_power": "",
        "load_current": "",
        "power_factor": "0.86",
        "efficiency": "0.942",
        "rated_current": "81 A",
        "nominal_voltage": "400 V",
        "line_to_earth_voltage": "230 V",
        "rated_voltage": "400 V",
        "conductor": "Cu",
        "insulation": "XLPE90",
        "method": "E",
        "size": "25 mm2",
        "runs": "1",
        "ambient": "35 degC",
        "grouping": "single_layer_tray",
        "circuits_in_group": "3",
        "device": "gG",
        "rating": "160 A",
        "overload_device": "relay60947",
        "overload_setting": "82 A",
    }


def test_origins_stand_beside_the_parameters(project: Project, plan: Plan) -> None:
    sheet = plan.sheets[1]
    origins = sheet.given["origins"]
    assert isinstance(origins, dict)
    assert set(origins) == {name for name, text in sheet.parameters.items() if text}
    assert origins["ambient"] == asdict(project.basis["ambient_air"].origin)
    assert origins["power_factor"]["status"] == "assumed"
    assert origins["overload_setting"]["column"] == "setting_Ir"


def test_adopted_values_go_to_their_sheet_only(plan: Plan) -> None:
    adopted = [sheet.given.get("adopted") for sheet in plan.sheets[:6]]
    reason = "A fifth pillar is expected within two years, letter TQ-C-LET-018"
    assert adopted[:5] == [{}] * 5
    assert adopted[5] == {"I_B": {"value": "80 A", "reason": reason, "by": "AM", "date": "2026-02-26"}}


def test_sign_offs_go_to_every_circuit(project: Project) -> None:
    sign_off = SignOff("RT", "2026-03-09", "QA-7")
    signed = make_plan(replace(project, signed_off={"IEC 60364-5-52:2009, B.52.4": sign_off}))
    wanted = {"IEC 60364-5-52:2009, B.52.4": {"by": "RT", "date": "2026-03-09", "document": "QA-7"}}
    assert signed.sheets[3].given["signed_off"] == wanted


def with_data(project: Project, **texts: str) -> dict[str, str]:
    data = {name: Datum(text, None, Origin("circuits.csv", "C-1", name)) for name, text in texts.items()}
    plan = make_plan(replace(project, circuits=(Circuit("C-1", "x", data),)))
    return dict(plan.sheets[0].parameters)


def test_a_current_is_handed_over_as_load_current(project: Project) -> None:
    assert with_data(project, current="20 A")["load_current"] == "20 A"


def test_the_setting_is_that_of_the_device_that_judges_overload(project: Project) -> None:
    assert with_data(project, setting_Ir="15 A")["overload_setting"] == "15 A"
    both = with_data(project, setting_Ir="15 A", overload_device="relay60947", overload_setting="12 A")
    assert both["overload_setting"] == "12 A"
    assert with_data(project)["overload_setting"] == ""


@given(st.floats(min_value=1e-9, max_value=1e12), st.sampled_from([("A", "line_current"), ("1", "ratio")]))
def test_an_adopted_value_is_read_back_unchanged(number: float, unit: tuple[str, str]) -> None:
    quantity = Quantity(number, *unit)
    assert read_quantity(spelled(quantity), quantity.kind) == quantity
