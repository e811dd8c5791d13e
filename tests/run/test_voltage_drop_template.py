"""The voltage-drop template, evaluated alone and behind the templates that give it current and temperature."""

from __future__ import annotations

import math
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from small_templates import plan

from calcbook.formulas.register import DERIVATIONS
from calcbook.records.line import (
    ConclusionLine,
    DatumLine,
    DerivationLine,
    InequalityLine,
    Line,
    StepLine,
    TableLine,
    Valued,
)
from calcbook.records.quantity import Quantity
from calcbook.records.recompute import recompute
from calcbook.records.trace import LINE_MIME, line_from_json
from calcbook.run.assemble import assemble
from calcbook.run.shell import run_notebook
from calcbook.run.templates import find_template
from calcbook.sheet import look_up

NAME = "voltage-drop"
LIGHTING = {
    "phases": "L1N", "kind": "lighting", "design_current": "10 A", "power_factor": "0.95", "insulation": "PVC70",
    "construction": "insulated_in_conduit", "size": "2.5 mm2", "length": "27 m", "length_basis": "estimated",
}  # fmt: skip


def executed(notebook: Any, parameters: dict[str, str], given_values: dict[str, Any] | None = None) -> list[Any]:
    """The outputs of a notebook with some of its parameters changed."""
    for cell in notebook.cells:
        if "parameters" in cell.metadata.get("tags", []):
            cell.source += "".join(f"\n{name} = {text!r}" for name, text in parameters.items())
            cell.source += f"\ngiven = {given_values!r}" if given_values else ""
    return [output for cell in run_notebook(notebook).cells for output in cell.get("outputs", ())]


def lines_of(outputs: list[Any]) -> list[Line]:
    errors = [output["evalue"] for output in outputs if output["output_type"] == "error"]
    assert not errors, errors
    return [line_from_json(output["data"][LINE_MIME]) for output in outputs if LINE_MIME in output.get("data", {})]


def without_derivation() -> Any:
    """The template's notebook without its proofs, which take a second."""
    notebook = find_template(NAME).notebook
    notebook.cells = [cell for cell in notebook.cells if "derivation" not in cell.metadata.get("tags", [])]
    return notebook


def test_the_derivation_is_shown_alone_with_every_stage() -> None:
    lines = lines_of(executed(find_template(NAME).notebook, {}))
    assert sum(isinstance(line, DerivationLine) for line in lines) == len(DERIVATIONS[NAME].stages)


def alone(brought: dict[str, Any] | None = None, /, **parameters: str) -> dict[str, Line]:
    """The lines of the template run alone, without its derivation, by label."""
    found = executed(without_derivation(), parameters, {"brought_forward": brought} if brought else None)
    return {line.label: line for line in lines_of(found)}


def fault(**parameters: str) -> str:
    outputs = executed(without_derivation(), parameters)
    (message,) = (output["evalue"] for output in outputs if output["output_type"] == "error")
    return str(message)


def number(lines: dict[str, Line], label: str) -> float:
    line = lines[label]
    assert isinstance(line, Valued)
    return line.value.number


def test_three_phase_by_hand() -> None:
    lines = alone()
    resistance = 0.727 * (1 + 0.00393 * 70) * 0.062
    sine = math.sqrt(1 - 0.86**2)
    first = math.sqrt(3) * 81 * (resistance * 0.86 + 0.0813 * 0.062 * sine)
    assert number(lines, "dU_1") == pytest.approx(first, rel=1e-3)  # skin and proximity effect: 0.04 %
    assert number(lines, "R_max") == pytest.approx(0.9269977, rel=1e-9)
    assert number(lines, "R_B") == pytest.approx(0.727 * (1 + 0.00393 * 55), rel=1e-12)
    assert number(lines, "du_tot") == pytest.approx(100 * number(lines, "dU") / 400, rel=1e-12)
    criterion = lines["voltage drop"]
    assert isinstance(criterion, InequalityLine)
    assert (criterion.left, criterion.operator, criterion.right, criterion.verdict) == ("du_tot", "<=", "du_tab", "met")
    assert criterion.reference == "IEC 60364-5-52, 525 and G.52.1"


def test_the_greatest_length_is_the_headroom_of_the_length_as_entered() -> None:
    lines = alone(None, **LIGHTING)
    conclusion = lines["conclusion"]
    assert isinstance(conclusion, ConclusionLine)
    (room,) = conclusion.headrooms
    assert (room.datum, room.present_text) == ("l", "27\N{NO-BREAK SPACE}m")
    assert room.limit is not None
    at_limit = alone(None, **{**LIGHTING, "length": f"{room.limit.number!r} m"})
    assert number(at_limit, "du_tot") == pytest.approx(3, rel=1e-9)
    assert number(at_limit, "l_d") == pytest.approx(1.1 * room.limit.number, rel=1e-12)


def test_an_estimated_length_takes_its_tolerance_and_a_measured_one_does_not() -> None:
    estimated, measured = alone(None, **LIGHTING), alone(None, **{**LIGHTING, "length_basis": "measured"})
    assert number(estimated, "l_d") == pytest.approx(29.7)
    assert not {"l_d", "d_l"} & set(measured)
    assert number(estimated, "R") == pytest.approx(1.1 * number(measured, "R"), rel=1e-12)


@pytest.mark.parametrize(("basis", "used"), [("theta_max", "R_max"), ("design_current", "R_B")])
def test_both_resistances_are_printed_and_the_basis_says_which_is_used(basis: str, used: str) -> None:
    lines = alone(resistance_for_drop=basis)
    assert {"R_max", "R_B"} <= set(lines)
    assert number(lines, "R_ac") == pytest.approx(number(lines, used), rel=1e-3)
    step = lines["R_ac"]
    assert isinstance(step, StepLine)
    assert step.written == f"{used}*(1 + y_s + y_p)"


def test_two_lines_carry_the_current_there_and_back() -> None:
    lines = alone(phases="L2L3", board_voltage="395 V", board_drop="1.25 %")
    impedance = complex(number(lines, "R"), number(lines, "X"))
    load = complex(0.86, math.sqrt(1 - 0.86**2)) * number(lines, "U_load")
    assert abs(load + 2 * 81 * impedance) == pytest.approx(395, rel=1e-9)
    assert number(lines, "du_tot") == pytest.approx(1.25 + 100 * number(lines, "dU") / 400, rel=1e-12)


def test_line_to_neutral_is_counted_against_the_voltage_to_earth() -> None:
    lines = alone(None, **LIGHTING)
    assert number(lines, "du") == pytest.approx(100 * number(lines, "dU") / 230, rel=1e-12)
    limit = lines["du_tab"]
    assert isinstance(limit, TableLine)
    assert (limit.value.number, limit.citation.table) == (3, "G.52.1")


def test_voltage_and_drop_of_the_board_are_brought_forward() -> None:
    def brought(number: float, unit: str, kind: str, si: float, line: str) -> dict[str, object]:
        return {"number": number, "unit": unit, "kind": kind, "si": si, "text": f"{number} {unit}", "source": line}

    values = {
        "board_voltage": brought(226.5, "V", "line_to_neutral_voltage", 226.5, "DB-1/demand/U_k[L1]"),
        "board_drop": brought(1.93, "%", "per_cent", 0.0193, "DB-1/demand/du_tot"),
    }
    lines = alone(values, **LIGHTING)
    assert lines["U_sN"].form == lines["du_board"].form == "brought forward"
    assert number(lines, "U_loadN") < 226.5
    assert number(lines, "du_tot") == pytest.approx(1.93 + number(lines, "du"), rel=1e-12)


def test_a_load_without_power_factor_takes_the_most_adverse_one() -> None:
    lines = alone(power_factor="")
    step = lines["cos_phi"]
    assert isinstance(step, StepLine)
    assert step.remark.startswith("none is stated; this one makes the drop greatest")
    for factor in ("0.5", "0.8", "0.95", "1"):
        assert number(alone(power_factor=factor), "dU_1") <= number(lines, "dU_1")


def test_a_limit_of_the_project_wins_over_the_table() -> None:
    lines = alone(drop_limit="1.5 %", length_supplement="claimed")
    assert isinstance(lines["du_max"], DatumLine)
    assert not {"du_tab", "du_s"} & set(lines)
    criterion = lines["voltage drop"]
    assert isinstance(criterion, InequalityLine)
    assert criterion.verdict == "not met"


def test_the_supplement_is_added_only_when_claimed() -> None:
    claimed = alone(length="160 m", length_supplement="claimed")
    assert number(claimed, "du_max") == pytest.approx(5.3)
    assert "du_s" not in alone(length="160 m")


@pytest.mark.parametrize(
    ("parameters", "message"),
    [
        (
            {"kind": "feeder"},
            "sheet alone, voltage-drop, du_tab: table IEC 60364-5-52:2009, G.52.1: kind feeder is not in the table; "
            "it has motor, lighting, socket, heating, charger, capacitor, other",
        ),
        (
            {"frequency": "400 Hz", "size": "300 mm2"},
            "sheet alone, voltage-drop, x_s: x_s is 3.62193; allowed is above 0 to 2.8",
        ),
        ({"length": "0 m"}, "sheet alone, voltage-drop, l: length: l is 0; allowed is more than 0"),
        ({"length": "62 mm"}, "sheet alone, voltage-drop, l: length:"),
        ({"length": "9 km"}, "sheet alone, voltage-drop, U_load:"),
    ],
)
def test_what_cannot_be_worked_out_is_said(parameters: dict[str, str], message: str) -> None:
    assert fault(**parameters).startswith(message)


def test_behind_power_and_cable_current_it_takes_what_they_worked_out() -> None:
    names = ("three-phase-power", "cable-current", NAME)
    made = assemble(plan(*names), [find_template(name) for name in names])
    lines = lines_of(executed(made, {"kind": "motor", "phases": "L1L2L3", "frequency": "50 Hz"}))
    labels = [line.label for line in lines]
    assert len(labels) == len(set(labels))
    by_label = {line.label: line for line in lines}
    assert by_label["theta_max"].template == by_label["theta_B"].template == "cable-current"
    assert by_label["I_B"].template == by_label["cos_phi"].template == "three-phase-power"
    step = by_label["R_B"]
    assert isinstance(step, StepLine)
    assert [binding.rests_on for binding in step.bindings] == [("R_20",), ("alpha_20",), ("theta_B",), ("theta_20",)]
    assert {"du_tot", "voltage drop"} <= set(labels)


_THREE_PHASE = list(alone().values())
_SINGLE = list(alone(None, **LIGHTING).values())
_SIZES = (1.5, 2.5, 4, 6, 10, 16, 25, 35, 50, 70, 95, 120, 150, 185, 240, 300)


def drop(lines: list[Line], length: float, current: float, size: float = 25) -> float:
    changes: dict[str, Quantity | str] = {
        "l": Quantity(length, "m", "one_way_length"),
        "I_B": Quantity(current, "A", "line_current"),
        "size": Quantity(size, "mm2", "area"),
    }
    return recompute(lines, changes, look_up).numbers["du_tot"]


@pytest.mark.parametrize("lines", [_THREE_PHASE, _SINGLE], ids=["three-phase", "line to neutral"])
@settings(max_examples=30, deadline=None)
@given(length=st.floats(1, 60), current=st.floats(1, 60), growth=st.floats(1, 1.5))
def test_more_length_or_current_never_reduces_the_drop_of_a_sheet(
    lines: list[Line], length: float, current: float, growth: float
) -> None:
    before = drop(lines, length, current)
    assert drop(lines, length * growth, current) >= before
    assert drop(lines, length, current * growth) >= before


@pytest.mark.parametrize("lines", [_THREE_PHASE, _SINGLE], ids=["three-phase", "line to neutral"])
def test_a_larger_size_never_raises_the_drop_of_a_sheet(lines: list[Line]) -> None:
    drops = [drop(lines, 20, 20, size) for size in _SIZES]
    assert drops == sorted(drops, reverse=True)
    assert len(set(drops)) == len(drops)
