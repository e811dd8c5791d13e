"""Look-ups between rows, beyond the last row, and with keys that a table does not have."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcbook.errors import LookUpFault
from calcbook.records.quantity import Quantity
from calcbook.reference import choose
from calcbook.reference.table import Found, Key, table


def count(number: float) -> Quantity:
    return Quantity(number, "1", "count")


def size(number: float) -> Quantity:
    return Quantity(number, "mm2", "area")


def ambient_factor(degrees: float, insulation: str = "PVC70") -> Found:
    arguments: dict[str, Key] = {"insulation": insulation, "ambient": Quantity(degrees, "degC", "temperature")}
    return table(choose.AMBIENT_FACTOR).look_up(arguments)


def group_factor(circuits: float, arrangement: str = "bunched") -> Found:
    return table(choose.GROUPING_FACTOR).look_up({"arrangement": arrangement, "circuits": count(circuits)})


def fault(key: str, arguments: dict[str, Key]) -> str:
    with pytest.raises(LookUpFault) as caught:
        table(key).look_up(arguments)
    return str(caught.value)


CAPACITY = "iec-60364-5-52-b.52.4"
KEYS: dict[str, Key] = {"conductor": "Cu", "method": "B2", "size": size(10)}


def test_a_capacity_with_its_citation() -> None:
    found = table(CAPACITY).look_up(KEYS)
    assert found.value == Quantity(46, "A", "run_current")
    assert (found.row, found.column) == ("10\N{NO-BREAK SPACE}mm²", "conductor Cu, method B2")


def test_keys_that_hold_for_the_whole_table_may_be_given_and_must_agree() -> None:
    assert table(CAPACITY).look_up({**KEYS, "insulation": "PVC70", "loaded": count(3)}).value.number == 46
    message = fault(CAPACITY, {**KEYS, "insulation": "XLPE90"})
    assert message == "table IEC 60364-5-52:2009, B.52.4: holds for insulation PVC70, not XLPE90"
    assert "holds for loaded 3, not 2" in fault(CAPACITY, {**KEYS, "loaded": count(2)})


def test_an_unknown_key_offers_the_nearest() -> None:
    message = fault(CAPACITY, {**KEYS, "metod": "B2"})
    assert message == 'table IEC 60364-5-52:2009, B.52.4: has no key "metod"; did you mean "method"?'


def test_a_missing_key_is_named() -> None:
    assert fault(CAPACITY, {"conductor": "Cu", "method": "B2"}).endswith("B.52.4: needs size")


def test_a_size_that_is_not_in_the_table_lists_those_that_are() -> None:
    message = fault(CAPACITY, {**KEYS, "size": size(12)})
    assert "size 12 mm2 is not in the table; it has 1.5, 2.5, 4, 6, 10, 16" in message


def test_a_method_that_is_not_in_the_table_lists_those_that_are() -> None:
    message = fault(CAPACITY, {**KEYS, "method": "E"})
    assert message.endswith("method E is not in the table; it has A1, A2, B1, B2, C, D1, D2")


def test_a_word_where_a_quantity_belongs() -> None:
    assert fault(CAPACITY, {**KEYS, "size": "ten"}).endswith('size is a quantity in mm2, got the word "ten"')


def test_a_key_in_another_unit_is_converted_to_the_row_it_means() -> None:
    for square_metres, current in ((10e-6, 46), (1.5e-6, 15), (35e-6, 99)):
        arguments: dict[str, Key] = {**KEYS, "size": Quantity(square_metres, "m2", "area")}
        assert table(CAPACITY).look_up(arguments).value.number == current
    assert "size 12 mm2 is not in the table" in fault(CAPACITY, {**KEYS, "size": Quantity(12e-6, "m2", "area")})


def test_a_quantity_of_another_kind_is_refused() -> None:
    message = fault(CAPACITY, {**KEYS, "size": Quantity(10, "m", "one_way_length")})
    assert message.endswith("size is a quantity in mm2, got one-way length")
    difference = Quantity(40, "K", "temperature_difference")
    message = fault(choose.AMBIENT_FACTOR, {"insulation": "PVC70", "ambient": difference})
    assert message.endswith("ambient is a quantity in degC, got temperature difference")


def test_between_rows_the_less_favourable_row_is_read_and_said() -> None:
    found = ambient_factor(37)
    assert (found.value.number, found.row) == (0.87, "40\N{NO-BREAK SPACE}°C")
    assert found.remark == "ambient 37 degC read at 40 degC, less favourable"
    found = group_factor(10)
    assert (found.value.number, found.remark) == (0.45, "circuits 10 read at 12, less favourable")


def test_colder_than_the_first_row_reads_the_first_row() -> None:
    found = ambient_factor(-5)
    assert (found.value.number, found.remark) == (1.22, "ambient -5 degC read at 10 degC, less favourable")


def test_beyond_the_last_row_is_refused_unless_the_table_holds_on() -> None:
    with pytest.raises(LookUpFault, match=r"ambient 65 degC is outside the table, 10 to 60 degC"):
        ambient_factor(65)
    with pytest.raises(LookUpFault, match=r"circuits 21 is outside the table, 1 to 20"):
        group_factor(21)
    found = group_factor(30, "single_layer_tray")
    assert (found.value.number, found.remark) == (0.72, "no further change beyond 9")
    with pytest.raises(LookUpFault, match=r"circuits 2 is outside the table, 1 to 1"):
        group_factor(2, "none")


@given(st.floats(-40, 60), st.floats(-40, 60), st.sampled_from(["PVC70", "XLPE90"]))
def test_a_warmer_place_never_has_the_greater_factor(one: float, other: float, insulation: str) -> None:
    cooler, warmer = sorted((one, other))
    assert ambient_factor(cooler, insulation).value.number >= ambient_factor(warmer, insulation).value.number


@given(st.floats(-40, 60), st.sampled_from([("PVC70", 70), ("XLPE90", 90)]))
def test_the_row_that_is_read_is_never_more_favourable_than_the_heat_balance(
    ambient: float, cable: tuple[str, int]
) -> None:
    insulation, greatest = cable
    balance = ((greatest - max(ambient, 10)) / (greatest - 30)) ** 0.5
    assert ambient_factor(ambient, insulation).value.number <= balance + 0.005  # rounding of the second decimal


@pytest.mark.parametrize(
    "arrangement", ["bunched", "single_layer_wall", "single_layer_ceiling", "single_layer_tray", "single_layer_ladder"]
)
def test_more_circuits_never_have_the_greater_factor(arrangement: str) -> None:
    factors = [group_factor(circuits, arrangement).value.number for circuits in range(1, 21)]
    assert factors == sorted(factors, reverse=True)
    assert factors[0] <= 1
    assert factors[-1] < 1


def test_conventional_operating_currents_of_fuses_by_rating() -> None:
    fuses = table("iec-60269-1-conventional")
    found = {
        rating: fuses.look_up({"device": "gG", "rating": Quantity(rating, "A", "line_current")}).value.number
        for rating in (2, 4, 6, 10, 12, 16, 63, 400)
    }
    assert found == {2: 2.1, 4: 2.1, 6: 1.9, 10: 1.9, 12: 1.9, 16: 1.6, 63: 1.6, 400: 1.6}


def test_conventional_operating_currents_of_breakers_and_relays() -> None:
    found = {
        device: table(choose.operating_current_table(device)).look_up({"device": device}).value.number
        for device in ("mcb60898", "rcbo61009", "breaker60947", "relay60947")
    }
    assert found == {"mcb60898": 1.45, "rcbo61009": 1.45, "breaker60947": 1.30, "relay60947": 1.20}


def test_a_device_that_does_not_protect_against_overload_is_refused() -> None:
    with pytest.raises(LookUpFault) as caught:
        choose.operating_current_table("mcb6898")
    assert str(caught.value) == (
        'table conventional operating currents: "mcb6898" does not protect against overload; did you mean "mcb60898"?'
    )
