"""What a formula says to inputs that do not fit."""

from __future__ import annotations

import pytest
from formula_inputs import result

from calcbook.errors import DimensionFault, EvaluationFault
from calcbook.formulas import cable_current, three_phase
from calcbook.formulas.formula import Formula
from calcbook.formulas.register import formulas
from calcbook.records.quantity import Quantity
from calcbook.records.units import KINDS, kind_in_words

ALL = pytest.mark.parametrize("formula", formulas().values(), ids=lambda formula: formula.name)
WITH_SYMBOLS = [formula for formula in formulas().values() if formula.symbols]


def test_apparent_power_is_not_taken_for_shaft_power() -> None:
    inputs = three_phase.CURRENT_OF_MOTOR.example_inputs()
    inputs["P_2"] = Quantity(45, "kVA", "apparent_power")
    with pytest.raises(DimensionFault) as caught:
        three_phase.CURRENT_OF_MOTOR.evaluate(inputs)
    assert str(caught.value) == "formula current_of_motor: P_2 needs active power, got apparent power (45 kVA)"


@ALL
def test_no_symbol_takes_another_kind(formula: Formula) -> None:
    for entry in formula.symbols:
        other = next(kind for kind in KINDS if kind != entry.kind)
        inputs = {**formula.example_inputs(), entry.name: Quantity(1, KINDS[other], other)}
        message = f"formula {formula.name}: {entry.name} needs {kind_in_words(entry.kind)}, got {kind_in_words(other)}"
        with pytest.raises(DimensionFault) as caught:
            formula.evaluate(inputs)
        assert str(caught.value).startswith(message)


def test_line_to_line_voltage_is_not_taken_for_line_to_neutral() -> None:
    inputs = three_phase.LINE_TO_NEUTRAL_CURRENT_OF_MOTOR.example_inputs()
    inputs["U_rN"] = Quantity(400, "V", "line_to_line_voltage")
    with pytest.raises(DimensionFault, match="U_rN needs line-to-neutral voltage, got line-to-line voltage"):
        three_phase.LINE_TO_NEUTRAL_CURRENT_OF_MOTOR.evaluate(inputs)


@pytest.mark.parametrize(
    ("symbol", "text", "message"),
    [
        ("cos_phi", "1.2", "cos_phi is 1.2; allowed is above 0 to 1"),
        ("cos_phi", "0", "cos_phi is 0; allowed is above 0 to 1"),
        ("eta", "92", "eta is 92; allowed is above 0 to 1"),
        ("P_2", "-3 kW", "P_2 is -3; allowed is more than 0"),
        ("U_r", "0 V", "U_r is 0; allowed is more than 0"),
    ],
)
def test_a_number_out_of_range_is_named_with_what_is_allowed(symbol: str, text: str, message: str) -> None:
    texts = {**three_phase.CURRENT_OF_MOTOR.example.inputs, symbol: text}
    with pytest.raises(DimensionFault) as caught:
        result(three_phase.CURRENT_OF_MOTOR, **texts)
    assert str(caught.value) == f"formula current_of_motor: {message}"


def test_fewer_runs_than_one_are_refused() -> None:
    with pytest.raises(DimensionFault, match="n is 0; allowed is 1 or more"):
        result(cable_current.CAPACITY, **{**cable_current.CAPACITY.example.inputs, "n": "0"})


def test_an_ambient_above_the_conductors_greatest_temperature_has_no_factor() -> None:
    with pytest.raises(EvaluationFault, match="no finite real value"):
        result(cable_current.AMBIENT_FACTOR, theta_max="70 degC", theta_a="75 degC", theta_ref="30 degC")


@pytest.mark.parametrize("formula", WITH_SYMBOLS, ids=lambda formula: formula.name)
def test_missing_and_unknown_symbols_are_named(formula: Formula) -> None:
    inputs = formula.example_inputs()
    missing = next(iter(inputs))
    inputs["I_x"] = inputs.pop(missing)
    with pytest.raises(DimensionFault) as caught:
        formula.evaluate(inputs)
    takes = ", ".join(sorted(entry.name for entry in formula.symbols))
    wanted = f"formula {formula.name} lacks {missing} and does not know I_x; it takes {takes}"
    assert str(caught.value) == wanted
