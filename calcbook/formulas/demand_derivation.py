"""Parts of phasors against each line's own voltage, the neutral current as their sum, the voltage between two lines."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import Any

import sympy

from calcbook.formulas import board, demand
from calcbook.formulas.derivation import Derivation, Stage
from calcbook.formulas.formula import Formula
from calcbook.records.written.algebra import expression

_TURN = 2 * sympy.pi / 3


def _phasor_part(lag: Any, *, reactive: bool) -> Any:
    """A part of the phasor I e^(-j lag): the real one, or minus the imaginary one."""
    phasor = expression("k_u*I_B") * sympy.exp(-sympy.I * lag)
    return sympy.simplify(-sympy.im(phasor) if reactive else sympy.re(phasor))


def _neutral_part(*, reactive: bool) -> Any:
    """A part of the sum of the three lines' phasors, each turned to its place: itself, the next, the one after."""
    total = sum(
        expression(f"I_P{line} - I_Q{line}*j").subs(expression("j"), sympy.I) * sympy.exp(-sympy.I * _TURN * (line - 1))
        for line in (1, 2, 3)
    )
    total = sympy.expand(total, complex=True)
    return -sympy.im(total) if reactive else sympy.re(total)


def _between_lines() -> Any:
    """The modulus of the difference of two phasors, the second turned by a third of a period."""
    first, second = (expression(f"U_re{line} + U_im{line}*j").subs(expression("j"), sympy.I) for line in (1, 2))
    difference = sympy.expand(first - second * sympy.exp(-sympy.I * _TURN), complex=True)
    return sympy.sqrt(sympy.expand(sympy.re(difference) ** 2 + sympy.im(difference) ** 2))


def _stage(formula: Formula, reason: str, derived: Callable[[], Any]) -> Stage:
    return Stage(formula.name, formula.result, formula.written, reason, derived=derived, formula=formula.name)


_PHI = expression("phi")
_SIXTH = sympy.pi / 6
_PARTS = (
    (demand.ACTIVE_PART, "three-phase or line to neutral: the current lags its line's voltage by φ", _PHI, False),
    (demand.REACTIVE_PART, "the same, at right angles", _PHI, True),
    (demand.FIRST_LINE_ACTIVE_PART, "two-line: the voltage between lines leads that of its first line by 30°",
     _PHI - _SIXTH, False),
    (demand.FIRST_LINE_REACTIVE_PART, "the same, at right angles", _PHI - _SIXTH, True),
    (demand.SECOND_LINE_ACTIVE_PART,
     "two-line: the returning current is opposite and lags the second line's voltage by φ + 30°", _PHI + _SIXTH, False),
    (demand.SECOND_LINE_REACTIVE_PART, "the same, at right angles", _PHI + _SIXTH, True),
)  # fmt: skip

DEMAND = Derivation(
    key="demand",
    title="Currents and voltages of a board as phasors",
    stages=(
        *(
            _stage(formula, reason, partial(_phasor_part, lag, reactive=reactive))
            for formula, reason, lag, reactive in _PARTS
        ),
        _stage(
            demand.NEUTRAL_ACTIVE,
            "neutral: the sum of three lines, each a third of a period after the one before, along the line's voltage",
            partial(_neutral_part, reactive=False),
        ),
        _stage(demand.NEUTRAL_REACTIVE, "the same, at right angles", partial(_neutral_part, reactive=True)),
        _stage(
            board.VOLTAGE_BETWEEN_LINES,
            "two lines: the voltage between them is the difference of their phasors, a third of a period apart",
            _between_lines,
        ),
    ),
)
