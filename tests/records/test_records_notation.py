"""The notation list: every symbol once, each with a kind, a unit and a range that fit together."""

from __future__ import annotations

import csv
from collections import Counter
from importlib.resources import files

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcbook.errors import DimensionFault
from calcbook.records.notation import Name, named, names_of_parameter, notation, out_of_range, range_in_words, within
from calcbook.records.quantity import Quantity
from calcbook.records.units import KINDS, UNITS
from calcbook.records.written.tree import FUNCTIONS, Symbol, parse

ROWS = list(csv.DictReader(files("calcbook.records").joinpath("notation.csv").read_text("utf-8").splitlines()))
ALL = pytest.mark.parametrize("entry", notation().values(), ids=lambda entry: entry.name)


def test_a_name_stands_once() -> None:
    repeated = [name for name, count in Counter(row["name"] for row in ROWS).items() if count > 1]
    assert not repeated
    assert len(notation()) == len(ROWS)


@ALL
def test_an_entry_has_a_known_kind_and_a_unit_that_may_carry_it(entry: Name) -> None:
    assert entry.kind in KINDS
    assert entry.kind in UNITS[entry.unit].kinds


@ALL
def test_an_entry_is_a_symbol_of_the_grammar_with_a_letter_and_a_description(entry: Name) -> None:
    assert parse(entry.name) == Symbol(entry.name)
    assert entry.name not in FUNCTIONS
    assert entry.letter
    assert entry.description
    assert not entry.description.endswith(".")


@ALL
def test_a_range_can_be_read(entry: Name) -> None:
    assert isinstance(within(entry.range, 0.0), bool)
    assert not entry.range or range_in_words(entry.range)


def test_what_is_printed_names_one_quantity() -> None:
    """S is both apparent power and cross-section, as the trade writes them; their units tell them apart."""
    printed = Counter((entry.function, entry.letter, entry.subscript) for entry in notation().values())
    assert [letters for letters, count in printed.items() if count > 1] == [("", "S", "")]
    assert (named("S").unit, named("size").unit) == ("kVA", "mm2")


def test_a_parameter_stands_for_one_symbol_or_for_one_a_connection() -> None:
    parameters = {entry.parameter for entry in notation().values() if entry.parameter}
    several = {"rated_voltage", "board_voltage", "voltage_re", "voltage_im"}
    assert {name for name in parameters if len(names_of_parameter(name)) > 1} == several
    assert [entry.name for entry in names_of_parameter("rated_voltage")] == ["U_r", "U_rN"]
    assert names_of_parameter("no_such_parameter") == ()


def test_an_unknown_name_offers_the_nearest() -> None:
    with pytest.raises(DimensionFault) as caught:
        named("cos_phy")
    assert str(caught.value) == '"cos_phy" is not in the notation list; did you mean "cos_phi"?'


@pytest.mark.parametrize(
    ("text", "inside", "outside", "words"),
    [
        (">0", [1e-9, 1e9], [0, -1], "more than 0"),
        (">=1", [1, 2], [0.999, 0], "1 or more"),
        ("(0,1]", [1e-9, 1], [0, 1.0001], "above 0 to 1"),
        ("[0,90)", [0, 89.999], [90, -1e-9], "from 0 to below 90"),
        ("[-50,80]", [-50, 80], [-50.1, 80.1], "from -50 to 80"),
    ],
)
def test_ranges_hold_their_ends_as_written(text: str, inside: list[float], outside: list[float], words: str) -> None:
    assert all(within(text, number) for number in inside)
    assert not any(within(text, number) for number in outside)
    assert range_in_words(text) == words


@given(st.floats(allow_nan=False))
def test_no_range_holds_every_number(number: float) -> None:
    assert within("", number)


def test_not_a_number_is_inside_no_range() -> None:
    for text in {entry.range for entry in notation().values() if entry.range}:
        assert not within(text, float("nan")), text


def test_what_is_out_of_range_is_said_in_the_entrys_own_unit() -> None:
    assert out_of_range(named("eta"), Quantity(92, "1", "ratio")) == "eta is 92; allowed is above 0 to 1"
    assert out_of_range(named("eta"), Quantity(0.92, "1", "ratio")) == ""
