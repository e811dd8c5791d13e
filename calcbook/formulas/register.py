"""Every formula and derivation of the package, by name."""

from __future__ import annotations

from functools import cache
from types import ModuleType

from calcbook.formulas import (
    board,
    cable_current,
    conductor_impedance,
    demand,
    feeder_drop,
    neutral,
    three_phase,
    voltage_drop,
)
from calcbook.formulas.cable_current_derivation import CABLE_CURRENT
from calcbook.formulas.demand_derivation import DEMAND
from calcbook.formulas.derivation import Derivation
from calcbook.formulas.formula import Formula
from calcbook.formulas.three_phase_derivation import THREE_PHASE_POWER
from calcbook.formulas.voltage_drop_derivation import VOLTAGE_DROP

_MODULES: tuple[ModuleType, ...] = (
    three_phase,
    cable_current,
    neutral,
    demand,
    conductor_impedance,
    voltage_drop,
    feeder_drop,
    board,
)

DERIVATIONS: dict[str, Derivation] = {
    derivation.key: derivation for derivation in (THREE_PHASE_POWER, CABLE_CURRENT, DEMAND, VOLTAGE_DROP)
}


@cache
def calculated_names() -> frozenset[str]:
    """The names of the notation list that a formula works out: the lines for which a value may be adopted."""
    return frozenset(formula.result for formula in formulas().values())


@cache
def formulas() -> dict[str, Formula]:
    """The formulas by name, in the order of their modules."""
    found = (value for module in _MODULES for value in vars(module).values() if isinstance(value, Formula))
    return {formula.name: formula for formula in found}
