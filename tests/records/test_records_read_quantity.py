"""Our own reader of quantities: a number, a space, a unit; and what it says to everything else."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcbook.errors import QuantityFault
from calcbook.records.quantity import Quantity, check_unit, read_number, read_quantity
from calcbook.records.units import UNITS


def fault(text: str, kind: str) -> str:
    with pytest.raises(QuantityFault) as caught:
        read_quantity(text, kind)
    return str(caught.value)


@pytest.mark.parametrize(
    ("text", "kind", "quantity"),
    [
        ("45 kW", "active_power", Quantity(45, "kW", "active_power")),
        ("  45   kW ", "active_power", Quantity(45, "kW", "active_power")),
        ("-5 degC", "temperature", Quantity(-5, "degC", "temperature")),
        ("+.5 m", "one_way_length", Quantity(0.5, "m", "one_way_length")),
        ("1.2e3 VA", "apparent_power", Quantity(1200, "VA", "apparent_power")),
        ("0.86", "ratio", Quantity(0.86, "1", "ratio")),
        ("3", "count", Quantity(3, "1", "count")),
        ("15 hp_imperial", "active_power", Quantity(15, "hp_imperial", "active_power")),
        ("2.5 K.m/W", "thermal_resistivity", Quantity(2.5, "K.m/W", "thermal_resistivity")),
        ("80 %", "per_cent", Quantity(80, "%", "per_cent")),
    ],
)
def test_a_quantity_is_read(text: str, kind: str, quantity: Quantity) -> None:
    assert read_quantity(text, kind) == quantity


def test_a_column_with_its_unit_in_the_head_needs_none_in_the_cell() -> None:
    assert read_quantity("85", "one_way_length", "m") == Quantity(85, "m", "one_way_length")
    assert read_quantity("0.1 km", "one_way_length", "m") == Quantity(0.1, "km", "one_way_length")


@settings(max_examples=200)
@given(unit=st.sampled_from(sorted(UNITS)), number=st.floats(-1e12, 1e12))
def test_every_spelling_of_the_list_is_read(unit: str, number: float) -> None:
    for kind in UNITS[unit].kinds:
        assert read_quantity(f"{number!r} {unit}", kind) == Quantity(number, unit, kind)


@pytest.mark.parametrize(
    ("text", "kind", "message"),
    [
        ("12O m", "one_way_length", '"12O" is not a number'),
        ("1,5 m", "one_way_length", '"1,5" has a decimal comma; write "1.5"'),
        ("1,500 m", "one_way_length", '"1,500" has a decimal comma; write "1.500" or "1500"'),
        ("5*3 m", "one_way_length", '"5*3" is not a number'),
        ("1/2 m", "one_way_length", '"1/2" is not a number'),
        ("1.000,5 m", "one_way_length", '"1.000,5" is not a number'),
        ("1_000 m", "one_way_length", '"1_000" is not a number'),
        ("0x10 m", "one_way_length", '"0x10" is not a number'),
        ("nan m", "one_way_length", '"nan" is not a number'),
        ("inf m", "one_way_length", '"inf" is not a number'),
        ("-inf m", "one_way_length", '"-inf" is not a number'),
        ("1e999 m", "one_way_length", '"1e999" is too large'),
        ("1e9999 m", "one_way_length", '"1e9999" is not a number'),
        ("5. m", "one_way_length", '"5." is not a number'),
        ("١٢ m", "one_way_length", '"١٢" is not a number'),
        ("１２ m", "one_way_length", '"１２" is not a number'),
        ("² m", "one_way_length", '"²" is not a number'),
        ("− 5 m", "one_way_length", '"− 5 m" is not a number, a space and a unit'),
        ("−5 m", "one_way_length", '"−5" is not a number'),
        ("__import__('os') m", "one_way_length", "\"__import__('os')\" is not a number"),
        ("", "one_way_length", '"" is not a number, a space and a unit'),
        ("85", "one_way_length", '"85" has no unit; one-way length takes "m" or "km"'),
        ("85m", "one_way_length", '"85m": write a space between number and unit, "85 m"'),
        ("85 m long", "one_way_length", '"85 m long" is not a number, a space and a unit'),
        ("m 85", "one_way_length", '"m" is not a number'),
        ("45 kVA", "active_power", '"kVA" is a unit of apparent power; active power takes "W"'),
        ("45 kW", "apparent_power", '"kW" is a unit of active power; apparent power takes "VA", "kVA" or "MVA"'),
        ("45 KW", "active_power", '"KW" is not a unit calcbook knows; did you mean "kW"?'),
        ("45 PS", "active_power", '"PS" is not a unit calcbook knows; allowed: MW, W, hp_imperial'),
        ("10 hp", "active_power", '"hp" names two units; write "hp_imperial" or "hp_metric"'),
        ("30 K", "temperature", '"K" is a unit of temperature difference; temperature takes "degC"'),
        ("30 °C", "temperature", '"°C" is not a unit calcbook knows; allowed: "degC"'),
        ("92 %", "ratio", '"%" is a unit of per cent; ratio takes a plain number'),
        ("10 mm²", "area", '"mm²" is not a unit calcbook knows; did you mean "mm2"?'),
        ("10 m", "area", '"m" is a unit of one-way length; area takes "m2" or "mm2"'),
    ],
)
def test_every_other_text_is_refused_with_the_remedy(text: str, kind: str, message: str) -> None:
    assert fault(text, kind).startswith(message)


def test_a_long_number_is_refused_by_its_length() -> None:
    assert fault("1" * 31 + " m", "one_way_length") == "a number of 31 characters; allowed are 30"
    assert "10000 characters" in fault("9" * 10_000 + " m", "one_way_length")
    assert len(fault("9" * 10_000 + " m", "one_way_length")) < 100


@given(st.text(max_size=20))
def test_no_text_makes_more_than_a_finite_number(text: str) -> None:
    try:
        number = read_number(text)
    except QuantityFault:
        return
    assert math.isfinite(number)
    assert text.strip().isascii()


def test_a_unit_is_checked_by_itself() -> None:
    assert check_unit("kA", "line_current") == "kA"
    with pytest.raises(QuantityFault, match='"kV" is a unit of line-to-line voltage; line current takes'):
        check_unit("kV", "line_current")
