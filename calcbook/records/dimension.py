"""Conversion to coherent units, by pint: the only file that knows the unit library."""

from __future__ import annotations

from functools import cache
from typing import Any

import pint

from calcbook.records.quantity import Quantity
from calcbook.records.units import KINDS, UNITS


@cache
def _registry() -> Any:  # pint's registry type is built at run time
    registry: Any = pint.UnitRegistry(on_redefinition="raise")
    registry.define("hp_imperial = 745.7 * watt")
    registry.define("hp_metric = 735.5 * watt")
    return registry


@cache
def factor(unit: str) -> float:
    """What a number in `unit` is multiplied by to be in the coherent unit of its kind."""
    coherent = KINDS[UNITS[unit].kinds[0]]
    quantity = _registry().Quantity(1.0, UNITS[unit].pint_name)
    return float(quantity.to(UNITS[coherent].pint_name).magnitude) if unit != coherent else 1.0


def coherent_number(quantity: Quantity) -> float:
    """The number of a quantity in the coherent unit of its kind: the value formulas are evaluated with."""
    return quantity.number * factor(quantity.unit)


def in_unit(number: float, unit: str, kind: str) -> Quantity:
    """A quantity in `unit` from a number in the coherent unit of `kind`."""
    return Quantity(number / factor(unit), unit, kind)


@cache
def dimension(unit: str) -> Any:
    """The dimension of a unit, a container that multiplies, divides and takes powers."""
    return _registry().Quantity(1.0, UNITS[unit].pint_name).dimensionality
