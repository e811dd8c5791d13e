"""Every formula carries what its page promises: symbols, kinds, source, worked example."""

from __future__ import annotations

from dataclasses import replace
from decimal import Decimal

import pytest

from calcbook.errors import DimensionFault
from calcbook.formulas.formula import Formula
from calcbook.formulas.register import DERIVATIONS, formulas
from calcbook.records.notation import named, notation
from calcbook.records.units import UNITS

ALL = pytest.mark.parametrize("formula", formulas().values(), ids=lambda formula: formula.name)
WITH_SYMBOLS = [formula for formula in formulas().values() if formula.symbols]


def _split(text: str) -> tuple[str, str]:
    """Number and printed unit of a printed result."""
    number = text.split(" ", maxsplit=1)[0].rstrip("°")
    return number, text[len(number) :].strip()


def test_a_printed_result_is_read_with_and_without_space() -> None:
    assert [_split(text) for text in ("36.9°", "15.00 kW", "0.866")] == [("36.9", "°"), ("15.00", "kW"), ("0.866", "")]


@ALL
def test_the_worked_example_gives_its_printed_result(formula: Formula) -> None:
    printed, unit = _split(formula.example.result)
    found, _ = formula.evaluate(formula.example_inputs())
    exponent = Decimal(printed).as_tuple().exponent
    assert isinstance(exponent, int)
    assert unit == UNITS[found.unit].printed
    assert abs(Decimal(found.number) - Decimal(printed)) <= Decimal("0.5").scaleb(exponent)


@ALL
def test_the_result_has_the_unit_and_kind_of_its_name(formula: Formula) -> None:
    found, second = formula.evaluate(formula.example_inputs())
    assert (found.unit, found.kind) == (named(formula.result).unit, named(formula.result).kind)
    assert isinstance(second, float)


@ALL
def test_the_page_names_every_symbol_with_its_unit(formula: Formula) -> None:
    page = formula.page()
    assert page.startswith(formula.purpose)
    assert f"{formula.result} = {formula.written}" in page
    for entry in (*formula.symbols, formula.result_name):
        assert f"\n    {entry.name:8} {entry.description} [{UNITS[entry.unit].printed or '-'}" in page
    for heading in ("Valid     ", "Source    ", "Example   ", "Published "):
        assert f"\n{heading}" in page
    assert "\nPublished \n" not in page


@ALL
def test_a_formula_is_derived_or_cited(formula: Formula) -> None:
    assert bool(formula.derivation) != bool(formula.citation), "derived or cited, one of the two"
    if formula.derivation:
        assert formula.derivation in DERIVATIONS
        assert f"Source    derived, sheet D-{formula.derivation}" in formula.page()
    else:
        assert f"Source    {formula.citation}" in formula.page()


def test_a_formula_without_published_example_says_so() -> None:
    without = [formula for formula in formulas().values() if not formula.published]
    assert without
    for formula in without:
        assert formula.page().endswith("Published no published example")


@ALL
def test_symbols_and_result_stand_in_the_notation_list(formula: Formula) -> None:
    assert {entry.name for entry in formula.symbols} <= set(notation())
    assert formula.result not in {entry.name for entry in formula.symbols}


def test_a_formula_stands_in_the_register_under_its_own_name() -> None:
    assert len(formulas()) == len({formula.name for formula in formulas().values()})
    assert all(name == formula.name for name, formula in formulas().items())


def test_the_example_names_all_inputs_and_no_others() -> None:
    for formula in formulas().values():
        assert set(formula.example.inputs) == {entry.name for entry in formula.symbols}, formula.name


@pytest.mark.parametrize("formula", WITH_SYMBOLS, ids=lambda formula: formula.name)
def test_a_result_of_another_dimension_is_found(formula: Formula) -> None:
    other = "R_th" if formula.result != "R_th" else "U"
    wrong = replace(formula, result=other)
    with pytest.raises(DimensionFault, match="the result has dimension"):
        wrong.evaluate(wrong.example_inputs())
