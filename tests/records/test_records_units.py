"""The closed list of units: every factor against a list made by hand, and against the unit library."""

from __future__ import annotations

import math
from typing import Any

import pint
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcbook.records.dimension import coherent_number, dimension, factor, in_unit
from calcbook.records.quantity import Quantity
from calcbook.records.units import AMBIGUOUS, KINDS, UNITS, kind_in_words, units_of

# what one of each unit is in the coherent unit of its kind, written down without looking at the package
BY_HAND = {
    "W": 1, "kW": 1e3, "MW": 1e6, "hp_imperial": 745.7, "hp_metric": 735.5,
    "var": 1, "kvar": 1e3, "Mvar": 1e6, "VA": 1, "kVA": 1e3, "MVA": 1e6,
    "mV": 1e-3, "V": 1, "kV": 1e3, "mA": 1e-3, "A": 1, "kA": 1e3, "A2s": 1, "kA2s": 1e6,
    "degC": 1, "K": 1, "m": 1, "mm": 1e-3, "km": 1e3, "ohm": 1, "mohm": 1e-3,
    "ohm/m": 1, "mohm/m": 1e-3, "ohm/km": 1e-3, "K.m/W": 1, "K/W": 1, "1/K": 1,
    "F": 1, "uF": 1e-6, "H/m": 1, "uH/m": 1e-6,
    "m2": 1, "mm2": 1e-6, "ms": 1e-3, "s": 1, "h": 3600, "Hz": 1, "rad/s": 1, "J": 1, "kWh": 3.6e6,
    "rad": 1, "deg": math.pi / 180, "1": 1, "%": 0.01, "1/m": 1, "%/m": 0.01, "1/s": 1, "1/h": 1 / 3600,
}  # fmt: skip

# the same units in the library's own words, where it knows them under their common name
LIBRARY = {
    "kW": "kW", "MW": "MW", "kVA": "kVA", "kV": "kV", "kA": "kA", "mm2": "mm^2", "ohm/km": "ohm/km",
    "kWh": "kWh", "h": "hour", "uF": "uF", "deg": "degree", "K.m/W": "K*m/W", "A2s": "A^2*s", "%": "percent",
}  # fmt: skip

LIBRARY_UNITS: Any = pint.UnitRegistry()
ALL = pytest.mark.parametrize("unit", UNITS)


@ALL
def test_a_factor_is_the_one_written_down_by_hand(unit: str) -> None:
    assert factor(unit) == pytest.approx(BY_HAND[unit], rel=1e-15)


def test_the_hand_written_list_is_complete() -> None:
    assert set(BY_HAND) == set(UNITS)


@pytest.mark.parametrize(("unit", "name"), LIBRARY.items())
def test_the_unit_library_agrees(unit: str, name: str) -> None:
    coherent = KINDS[UNITS[unit].kinds[0]].replace("K.m/W", "K*m/W").replace("A2s", "A^2*s").replace("m2", "m^2")
    converted = LIBRARY_UNITS.Quantity(1.0, name).to("1" if coherent == "1" else coherent)
    assert factor(unit) == pytest.approx(float(converted.magnitude), rel=1e-15)


@ALL
def test_a_unit_has_the_dimension_of_the_coherent_unit_of_each_kind_it_carries(unit: str) -> None:
    for kind in UNITS[unit].kinds:
        assert dimension(unit) == dimension(KINDS[kind]), kind


@pytest.mark.parametrize("kind", KINDS)
def test_a_kind_may_be_given_in_some_unit_and_its_coherent_unit_has_factor_one(kind: str) -> None:
    assert units_of(kind)
    assert factor(KINDS[kind]) == 1


@ALL
def test_a_unit_carries_known_kinds_only_and_prints(unit: str) -> None:
    assert set(UNITS[unit].kinds) <= set(KINDS)
    assert UNITS[unit].spelling == unit
    assert UNITS[unit].printed or unit == "1"


@settings(max_examples=200)
@given(unit=st.sampled_from(sorted(UNITS)), number=st.floats(-1e9, 1e9))
def test_there_and_back_again(unit: str, number: float) -> None:
    kind = UNITS[unit].kinds[0]
    back = in_unit(coherent_number(Quantity(number, unit, kind)), unit, kind)
    assert (back.unit, back.kind) == (unit, kind)
    assert back.number == pytest.approx(number, rel=1e-15, abs=1e-300)


def test_two_horsepowers_are_two_units_and_neither_is_called_hp() -> None:
    assert "hp" not in UNITS
    assert AMBIGUOUS["hp"] == ("hp_imperial", "hp_metric")
    assert factor("hp_imperial") / factor("hp_metric") == pytest.approx(1.01387, abs=1e-5)


def test_powers_of_one_dimension_are_three_kinds() -> None:
    assert dimension("kW") == dimension("kvar") == dimension("kVA")
    assert not set(units_of("active_power")) & set(units_of("apparent_power"))
    assert not set(units_of("reactive_power")) & set(units_of("apparent_power"))


def test_a_kind_reads_in_a_sentence() -> None:
    assert kind_in_words("line_to_neutral_voltage") == "line-to-neutral voltage"
    assert kind_in_words("one_way_length") == "one-way length"
    assert kind_in_words("active_power") == "active power"
