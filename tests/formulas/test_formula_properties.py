"""What every engineer expects of the formulas, whatever the numbers."""

from __future__ import annotations

import math

import pytest
from formula_inputs import inputs, result
from hypothesis import given, settings
from hypothesis import strategies as st

from calcbook.formulas import cable_current, three_phase
from calcbook.formulas.formula import Formula
from calcbook.records.quantity import Quantity

FEW = settings(max_examples=20, deadline=None)
GROWTH = st.floats(1.001, 2)

# formula -> symbols it rises with and symbols it falls with
MONOTONE: list[tuple[Formula, tuple[str, ...], tuple[str, ...]]] = [
    (three_phase.INPUT_POWER, ("P_2",), ("eta",)),
    (three_phase.CURRENT_OF_MOTOR, ("P_2",), ("U_r", "eta", "cos_phi")),
    (three_phase.CURRENT_OF_ACTIVE_POWER, ("P_1",), ("U_r", "cos_phi")),
    (three_phase.CURRENT_OF_APPARENT_POWER, ("S_1",), ("U_r",)),
    (three_phase.LINE_TO_NEUTRAL_CURRENT_OF_MOTOR, ("P_2",), ("U_rN", "eta", "cos_phi")),
    (three_phase.LINE_TO_NEUTRAL_CURRENT_OF_ACTIVE_POWER, ("P_1",), ("U_rN", "cos_phi")),
    (three_phase.TWO_LINE_CURRENT_OF_MOTOR, ("P_2",), ("U_r", "eta", "cos_phi")),
    (three_phase.TWO_LINE_CURRENT_OF_ACTIVE_POWER, ("P_1",), ("U_r", "cos_phi")),
    (three_phase.ACTIVE_POWER, ("U", "I", "cos_phi"), ()),
    (three_phase.APPARENT_POWER, ("P_1",), ("cos_phi",)),
    (cable_current.CAPACITY, ("n", "I_t", "C_a", "C_g"), ()),
    (cable_current.OPERATING_CURRENT, ("k_2", "I_r"), ()),
    (cable_current.CAPACITY_NEEDED, (), ("n", "C_a", "C_g")),
    (cable_current.CONDUCTOR_TEMPERATURE, ("I_B",), ("I_Z",)),
    (cable_current.GROUPED_CIRCUITS, ("n", "n_g"), ()),
]


def _grown(drawn: dict[str, Quantity], symbol: str, growth: float) -> dict[str, Quantity]:
    """The same inputs with one of them greater; a ratio stays below 1."""
    old = drawn[symbol]
    number = old.number + 1 if old.kind == "count" else old.number * growth
    if old.kind == "ratio":
        number = old.number + (1 - old.number) * (growth - 1)
    return {**drawn, symbol: Quantity(number, old.unit, old.kind)}


@pytest.mark.parametrize(("formula", "rises", "falls"), MONOTONE, ids=lambda part: getattr(part, "name", ""))
@FEW
@given(data=st.data(), growth=GROWTH)
def test_a_result_rises_and_falls_with_its_symbols(
    formula: Formula, rises: tuple[str, ...], falls: tuple[str, ...], data: st.DataObject, growth: float
) -> None:
    whole = data.draw(inputs(formula))
    drawn = {
        name: Quantity(min(quantity.number, 0.99), "1", "ratio") if quantity.kind == "ratio" else quantity
        for name, quantity in whole.items()
        if isinstance(quantity, Quantity)
    }
    before = formula.evaluate(drawn)[0].number
    for symbol in rises:
        assert formula.evaluate(_grown(drawn, symbol, growth))[0].number > before, symbol
    for symbol in falls:
        assert formula.evaluate(_grown(drawn, symbol, growth))[0].number < before, symbol


@FEW
@given(st.floats(0.1, 1000), st.floats(100, 1000), st.floats(0.05, 1))
def test_current_and_power_are_inverse(power: float, voltage: float, factor: float) -> None:
    texts = {"cos_phi": f"{factor:.6f}"}
    current = result(three_phase.CURRENT_OF_ACTIVE_POWER, P_1=f"{power:.6f} kW", U_r=f"{voltage:.6f} V", **texts)
    back = result(three_phase.ACTIVE_POWER, U=f"{voltage:.6f} V", I=f"{current:.15g} A", **texts)
    assert back == pytest.approx(float(f"{power:.6f}"), rel=1e-12)


@FEW
@given(st.floats(10, 1000), st.floats(0.1, 1000), st.floats(0, 89))
def test_active_reactive_and_apparent_power_make_a_right_triangle(voltage: float, current: float, angle: float) -> None:
    texts = {"U": f"{voltage:.9f} V", "I": f"{current:.9f} A"}
    active = result(three_phase.ACTIVE_POWER, **texts, cos_phi=f"{math.cos(math.radians(angle)):.17g}")
    reactive = result(three_phase.REACTIVE_POWER_OF_LINE, **texts, phi=f"{angle:.17g} deg")
    apparent = result(three_phase.APPARENT_POWER_OF_LINE, **texts)
    assert math.hypot(active, reactive) == pytest.approx(apparent, rel=1e-9)


def test_the_same_load_takes_root_three_times_the_current_between_two_lines() -> None:
    two_line = result(three_phase.TWO_LINE_CURRENT_OF_APPARENT_POWER, S_1="6 kVA", U_r="400 V")
    three = result(three_phase.CURRENT_OF_APPARENT_POWER, S_1="6 kVA", U_r="400 V")
    assert two_line == pytest.approx(math.sqrt(3) * three, rel=1e-15)


def test_imperial_and_metric_horsepower_are_two_units() -> None:
    motor = {"U_r": "400 V", "eta": "0.9", "cos_phi": "0.85"}
    imperial = result(three_phase.CURRENT_OF_MOTOR, P_2="10 hp_imperial", **motor)
    metric = result(three_phase.CURRENT_OF_MOTOR, P_2="10 hp_metric", **motor)
    kilowatt = result(three_phase.CURRENT_OF_MOTOR, P_2="7.457 kW", **motor)
    assert imperial == pytest.approx(kilowatt, rel=1e-15)
    assert metric / imperial == pytest.approx(735.5 / 745.7, rel=1e-15)


@FEW
@given(st.floats(10, 60), st.floats(1, 500))
def test_a_cable_at_its_capacity_reaches_its_greatest_temperature(ambient: float, capacity: float) -> None:
    texts = {"theta_a": f"{ambient:.6f} degC", "theta_max": "70 degC", "I_Z": f"{capacity:.6f} A"}
    full = result(cable_current.CONDUCTOR_TEMPERATURE, **texts, I_B=f"{capacity:.6f} A")
    assert full == pytest.approx(70, rel=1e-14)
    unloaded = result(cable_current.CONDUCTOR_TEMPERATURE, **texts, I_B="0.000001 A")
    assert unloaded == pytest.approx(float(f"{ambient:.6f}"), abs=1e-9)


@FEW
@given(
    st.floats(1, 1000), st.sampled_from([1.2, 1.3, 1.45, 1.6, 1.9, 2.1]), st.integers(1, 4), st.floats(0.3, 1.2),
    st.floats(0.3, 1),
)  # fmt: skip
def test_the_needed_capacity_just_meets_both_conditions(
    setting: float, multiple: float, runs: int, ambient: float, group: float
) -> None:
    shared = {"n": f"{runs}", "C_a": f"{ambient:.6f}", "C_g": f"{group:.6f}"}
    i_2 = result(cable_current.OPERATING_CURRENT, k_2=f"{multiple}", I_r=f"{setting:.6f} A")
    needed = result(cable_current.CAPACITY_NEEDED, I_r=f"{setting:.6f} A", I_2=f"{i_2:.15g} A", **shared)
    i_z = result(cable_current.CAPACITY, I_t=f"{needed:.15g} A", **shared)
    allowed = result(cable_current.GREATEST_OPERATING_CURRENT, I_Z=f"{i_z:.15g} A")
    spare = min(i_z / float(f"{setting:.6f}"), allowed / i_2)
    assert spare == pytest.approx(1, rel=1e-12)


def test_the_ambient_factor_is_one_at_the_reference_and_falls_with_the_ambient() -> None:
    factors = [
        result(cable_current.AMBIENT_FACTOR, theta_max="90 degC", theta_a=f"{ambient} degC", theta_ref="30 degC")
        for ambient in range(0, 81, 5)
    ]
    assert factors[6] == 1
    assert factors == sorted(factors, reverse=True)


@pytest.mark.parametrize("connection", ["three-phase", "line to neutral", "two-line"])
def test_current_of_a_load_given_by_its_current_comes_back(connection: str) -> None:
    voltage = {"U_rN" if connection == "line to neutral" else "U_r": "230 V"}
    apparent = result(three_phase.APPARENT_OF_CURRENT[connection], I_a="16 A", **voltage)
    formula = three_phase.LINE_CURRENT[connection, "apparent_power"]
    assert result(formula, S_1=f"{apparent:.15g} kVA", **voltage) == pytest.approx(16, rel=1e-13)


def test_every_connection_has_a_formula_for_every_load() -> None:
    loads = ("shaft_power", "active_power", "apparent_power")
    connections = set(three_phase.CONNECTIONS.values())
    assert set(three_phase.LINE_CURRENT) == {(connection, load) for connection in connections for load in loads}
    assert set(three_phase.APPARENT_OF_CURRENT) == connections
