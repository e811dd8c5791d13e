"""Lines of a sheet: what a template may do, and the sentence it reads where it may not."""

from __future__ import annotations

import re

import pytest
from sheet_samples import motor_circuit, quiet_sheet

from calcbook.errors import DimensionFault, SheetFault
from calcbook.formulas import three_phase
from calcbook.formulas.formula import Formula
from calcbook.records.line import ConclusionLine, InequalityLine, StepLine, TableLine
from calcbook.reference import choose


def test_motor_circuit_lines_and_verdicts(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = motor_circuit(quiet_sheet(monkeypatch))
    lines = {line.label: line for line in sheet.lines}
    current, capacity = lines["I_B"], lines["I_Z"]
    assert isinstance(current, StepLine)
    assert isinstance(capacity, StepLine)
    assert current.text == "80.7\N{NO-BREAK SPACE}A"
    assert current.written == "P_2/(sqrt(3)*U_r*eta*cos_phi)"
    assert capacity.value.number == pytest.approx(127 * 0.91 * 0.82, rel=1e-12)
    conclusion = lines["conclusion"]
    assert isinstance(conclusion, ConclusionLine)
    assert conclusion.verdict == "met"
    assert conclusion.order == ("design current", "setting", "device")
    assert conclusion.governing == "design current"


def test_table_line_cites_row_and_column(monkeypatch: pytest.MonkeyPatch) -> None:
    line = next(line for line in motor_circuit(quiet_sheet(monkeypatch)).lines if line.label == "I_t")
    assert isinstance(line, TableLine)
    assert (line.citation.standard, line.citation.edition, line.citation.table) == ("IEC 60364-5-52", "2009", "B.52.12")
    assert (line.citation.row, line.citation.column) == ("25\N{NO-BREAK SPACE}mm²", "method E, loaded 3")
    assert [argument.rests_on for argument in line.arguments] == ["method", "n_l", "size"]


def test_identity_is_sheet_template_name(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = quiet_sheet(monkeypatch)
    sheet.begin("cable-current")
    sheet.datum("size")
    assert sheet.lines[0].id == "C-001/cable-current/size"


def test_a_name_is_given_once(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = quiet_sheet(monkeypatch)
    sheet.datum("size")
    with pytest.raises(SheetFault, match="sheet C-001, test, size: stands on this sheet already; a name is given once"):
        sheet.datum("size")


@pytest.mark.parametrize(
    ("parameter", "text", "message"),
    [
        ("shaft_power", "45 kVA", 'P_2: shaft_power: "kVA" is a unit of apparent power; active power takes'),
        ("shaft_power", "45 hp", '"hp" names two units; write "hp_imperial" or "hp_metric"'),
        ("shaft_power", "", "P_2: shaft_power is empty; it is needed here"),
        ("efficiency", "93.6", "efficiency: eta is 93.6; allowed is above 0 to 1"),
        ("power_factor", "0", "cos_phi is 0; allowed is above 0 to 1"),
        ("size", "1,5 mm2", '"1,5" has a decimal comma; write "1.5"'),
        ("ambient", "40", '"40" has no unit; temperature takes "degC"'),
    ],
)
def test_bad_datum(monkeypatch: pytest.MonkeyPatch, parameter: str, text: str, message: str) -> None:
    sheet = quiet_sheet(monkeypatch, **{parameter: text})
    with pytest.raises(SheetFault, match=re.escape(message)):
        sheet.datum(parameter)


def test_unknown_parameter_names_the_nearest(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = quiet_sheet(monkeypatch)
    with pytest.raises(SheetFault, match='the notation list has no "shaft_powr" for this parameter'):
        sheet.datum("shaft_powr")
    with pytest.raises(SheetFault, match=r'is not a parameter; did you mean "method"\?'):
        sheet.choice("methd", "method")


def test_step_refuses_what_does_not_fit(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = quiet_sheet(monkeypatch)
    P_2, eta = sheet.datum("shaft_power"), sheet.datum("efficiency")
    with pytest.raises(SheetFault, match="formula input_power lacks eta and does not know cos_phi; it takes P_2, eta"):
        sheet.step("P_1", three_phase.INPUT_POWER, P_2=P_2, cos_phi=eta)
    with pytest.raises(SheetFault, match="P_2 needs active power, got ratio"):
        sheet.step("P_1", three_phase.INPUT_POWER, P_2=eta, eta=eta)
    with pytest.raises(SheetFault, match="is apparent_power, formula input_power gives active_power"):
        sheet.step("S_1", three_phase.INPUT_POWER, P_2=P_2, eta=eta)
    with pytest.raises(SheetFault, match=r'"P_one" is not in the notation list; nearest: '):
        sheet.step("P_one", three_phase.INPUT_POWER, P_2=P_2, eta=eta)


def test_two_evaluators_that_differ_stop_the_line(monkeypatch: pytest.MonkeyPatch) -> None:
    """The algebra's number and the written form's are compared at every line: a wrong one does not pass."""
    monkeypatch.setattr("calcbook.formulas.formula.number_function", lambda _: lambda P_2, eta: P_2 / eta * (1 + 1e-9))
    sheet = quiet_sheet(monkeypatch)
    with pytest.raises(SheetFault, match=r"formula input_power: algebra gives .* the written form"):
        sheet.step("P_1", three_phase.INPUT_POWER, P_2=sheet.datum("shaft_power"), eta=sheet.datum("efficiency"))


def test_value_from_an_earlier_template_is_taken_by_name(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = motor_circuit(quiet_sheet(monkeypatch))
    assert sheet.taken("design_current").label == "I_B"
    alone = quiet_sheet(monkeypatch, design_current="12 A")
    assert alone.taken("design_current").text == "12\N{NO-BREAK SPACE}A"
    assert alone.lines[0].form == "datum"


def test_exactly_one_load(monkeypatch: pytest.MonkeyPatch) -> None:
    assert quiet_sheet(monkeypatch, active_power="").stated("shaft_power", "active_power") == "shaft_power"
    with pytest.raises(
        SheetFault, match="exactly one of shaft_power, active_power is needed; stated: shaft_power and act"
    ):
        quiet_sheet(monkeypatch, active_power="3 kW").stated("shaft_power", "active_power")
    with pytest.raises(SheetFault, match="stated: none"):
        quiet_sheet(monkeypatch, shaft_power="").stated("shaft_power", "active_power")


def test_adopted_value_stands_beside_the_calculated_one(monkeypatch: pytest.MonkeyPatch) -> None:
    adopted = {"I_B": {"value": "85 A", "reason": "maker's data sheet", "by": "A.B.", "date": "2026-05-04"}}
    sheet = motor_circuit(quiet_sheet(monkeypatch, {"adopted": adopted}))
    line = next(line for line in sheet.lines if line.label == "I_B")
    assert isinstance(line, StepLine)
    assert (line.text, line.calculated_text) == ("85\N{NO-BREAK SPACE}A", "80.7\N{NO-BREAK SPACE}A")
    verdict = next(line for line in sheet.lines if line.label == "design current")
    assert isinstance(verdict, InequalityLine)
    assert verdict.verdict == "not met"  # judged with the adopted value: 85 A over 81 A
    conclusion = sheet.lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    assert any("adopted in place of 80.7\N{NO-BREAK SPACE}A" in caution for caution in conclusion.cautions)
    room = conclusion.headrooms[0]
    assert (room.datum, room.limit_text) == ("I_B", "81.00\N{NO-BREAK SPACE}A")
    assert room.remark.startswith("must come to this limit for the criterion to be met; the adopted value")
    assert not any("less safe" in item for item in conclusion.open_items)


def test_adopted_value_less_safe_than_calculated_is_an_open_item(monkeypatch: pytest.MonkeyPatch) -> None:
    adopted = {"I_B": {"value": "70 A", "reason": "measured", "by": "A.B.", "date": "2026-05-04"}}
    conclusion = motor_circuit(quiet_sheet(monkeypatch, {"adopted": adopted})).lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    assert (
        "design current 70\N{NO-BREAK SPACE}A adopted: less safe than the calculated 80.7\N{NO-BREAK SPACE}A "
        "for design current" in conclusion.open_items
    )


def test_adopted_value_of_a_table_line_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    adopted = {"C_g": {"value": "0.5", "reason": "r", "by": "A.B.", "date": "2026-05-04"}}
    with pytest.raises(SheetFault, match=r"C_g: adopted\.csv has a value for it, but this sheet has no such step"):
        motor_circuit(quiet_sheet(monkeypatch, {"adopted": adopted}))


def test_criterion_that_puts_a_datum_in_doubt_is_not_shown(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = quiet_sheet(monkeypatch, overload_setting="200 A")
    I_r, I_B = sheet.datum("overload_setting"), sheet.datum("rating")
    sheet.criterion("doubt", I_r <= I_B, cite="common practice", otherwise="not shown")
    sheet.conclude()
    conclusion = sheet.lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    assert conclusion.verdict == "not shown"


def test_adopted_value_of_no_step_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    adopted = {"I_L": {"value": "85 A", "reason": "r", "by": "A.B.", "date": "2026-05-04"}}
    with pytest.raises(
        SheetFault, match=r"adopted\.csv has a value for it, but this sheet has no such step; did you mean"
    ):
        motor_circuit(quiet_sheet(monkeypatch, {"adopted": adopted}))


def test_sign_off_lifts_the_caution(monkeypatch: pytest.MonkeyPatch) -> None:
    signed = {"IEC 60364-5-52:2009, B.52.14": {"by": "A.B.", "date": "2026-05-04", "document": "copy 7"}}
    conclusion = motor_circuit(quiet_sheet(monkeypatch, {"signed_off": signed})).lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    (caution,) = conclusion.cautions
    assert caution.startswith("not yet compared with a licensed copy: ")
    assert "IEC 60364-5-52:2009, B.52.12" in caution
    assert "B.52.14" not in caution


def test_citations_carry_the_edition_of_the_basis(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = quiet_sheet(monkeypatch, {"editions": {"IEC 60364-5-52": "2011"}})
    I_B = sheet.step("I_B", three_phase.DESIGN_CURRENT, I=sheet.datum("overload_setting"))
    sheet.criterion("same", sheet.step("I_L", three_phase.DESIGN_CURRENT, I=I_B) >= I_B, cite="IEC 60364-5-52, 523")
    covering, ambient = sheet.choice("insulation", "insulation"), sheet.datum("ambient")
    sheet.table_value("C_a", choose.AMBIENT_FACTOR, insulation=covering, ambient=ambient)
    criterion, line = sheet.lines[3], sheet.lines[-1]
    assert isinstance(criterion, InequalityLine)
    assert isinstance(line, TableLine)
    assert criterion.reference == "IEC 60364-5-52:2011, 523"
    assert line.citation.remark == "table of edition 2009; the basis states 2011"


def test_open_items_are_data_not_confirmed(monkeypatch: pytest.MonkeyPatch) -> None:
    origin = {"file": "circuits.csv", "tag": "C-001", "column": "size", "status": "confirmed"}
    assumed = {
        "file": "inputs.toml",
        "tag": "basis",
        "column": "ambient_air",
        "status": "assumed",
        "remark": "no record",
    }
    conclusion = motor_circuit(quiet_sheet(monkeypatch, {"origins": {"size": origin, "ambient": assumed}})).lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    assert (
        "ambient temperature 40\N{NO-BREAK SPACE}°C: assumed, inputs.toml, basis, ambient_air (no record)"
        in conclusion.open_items
    )
    assert not any("circuits.csv" in item for item in conclusion.open_items)


def test_rule_not_met_governs(monkeypatch: pytest.MonkeyPatch) -> None:
    conclusion = motor_circuit(quiet_sheet(monkeypatch, overload_device="aM")).lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    assert (conclusion.verdict, conclusion.governing) == ("not met", "device")


def test_rule_without_a_word_is_not_shown(monkeypatch: pytest.MonkeyPatch) -> None:
    conclusion = motor_circuit(quiet_sheet(monkeypatch, overload_device="")).lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    assert conclusion.verdict == "not shown"


def test_table_fault_names_sheet_and_table(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = quiet_sheet(monkeypatch, ambient="95 degC")
    with pytest.raises(SheetFault, match="theta_a: ambient: theta_a is 95; allowed is from -50 to 80"):
        sheet.datum("ambient")
    sheet = quiet_sheet(monkeypatch, insulation="PVC70", ambient="65 degC")
    covering, ambient = sheet.choice("insulation", "insulation"), sheet.datum("ambient")
    with pytest.raises(
        SheetFault, match=r"C_a: table IEC 60364-5-52:2009, B\.52\.14: ambient 65 degC is outside the table"
    ):
        sheet.table_value("C_a", choose.AMBIENT_FACTOR, insulation=covering, ambient=ambient)


def test_unknown_derivation(monkeypatch: pytest.MonkeyPatch) -> None:
    with pytest.raises(SheetFault, match=r'there is no such derivation; did you mean "cable-current"\?'):
        quiet_sheet(monkeypatch).derivation("cable-curent")


def test_formula_of_wrong_dimension_is_refused() -> None:
    page = three_phase.INPUT_POWER
    wrong = Formula("wrong", "p", "I_L", "P_2/eta", "v", "r", page.example, citation="none")
    with pytest.raises(DimensionFault, match="P_2/eta: the result has dimension"):
        wrong.evaluate({"P_2": page.example_inputs()["P_2"], "eta": page.example_inputs()["eta"]})


def test_the_same_look_up_by_an_earlier_template_is_taken(monkeypatch: pytest.MonkeyPatch) -> None:
    sheet = quiet_sheet(monkeypatch)
    first = sheet.table_value("theta_max", choose.GREATEST_TEMPERATURE, insulation="XLPE90")
    sheet.begin("voltage-drop")
    again = sheet.table_value("theta_max", choose.GREATEST_TEMPERATURE, insulation="XLPE90")
    assert (again.label, again.si) == (first.label, first.si)
    assert len(sheet.lines) == 1
    with pytest.raises(SheetFault, match="theta_max: stands on this sheet already; a name is given once"):
        sheet.table_value("theta_max", choose.GREATEST_TEMPERATURE, insulation="PVC70")
