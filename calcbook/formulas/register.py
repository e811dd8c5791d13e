"""Every formula and derivation of the package, by name."""

from __future__ import annotations

from functools import cache
from types import ModuleType

from calcbook.formulas import cable_current, three_phase
from calcbook.formulas.cable_current_derivation import CABLE_CURRENT
from calcbook.formulas.derivation import Derivation
from calcbook.formulas.formula import Formula
from calcbook.formulas.three_phase_derivation import THREE_PHASE_POWER

_MODULES: tuple[ModuleType, ...] = (three_phase, cable_current)

DERIVATIONS: dict[str, Derivation] = {derivation.key: derivation for derivation in (THREE_PHASE_POWER, CABLE_CURRENT)}


@cache
def calculated_names() -> frozenset[str]:
    """The names of the notation list that a formula works out: the lines for which a value may be adopted."""
    return frozenset(formula.result for formula in formulas().values())


@cache
def formulas() -> dict[str, Formula]:
    """The formulas by name, in the order of their modules."""
    found = (value for module in _MODULES for value in vars(module).values() if isinstance(value, Formula))
    return {formula.name: formula for formula in found}
