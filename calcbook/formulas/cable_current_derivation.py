"""Ambient factor, conductor temperature and needed capacity from the heat balance of a conductor."""

from __future__ import annotations

from functools import partial
from typing import Any

import sympy

from calcbook.formulas import neutral
from calcbook.formulas.cable_current import CAPACITY_NEEDED_OF
from calcbook.formulas.derivation import Derivation, Stage, solved_for
from calcbook.formulas.formula import Formula
from calcbook.records.written.algebra import expression


def _thermal_constant(current: str, rise: str) -> Any:
    """R R_th from one known state: a current and the rise of temperature it makes."""
    return sympy.solve(sympy.Eq(expression(f"R_R*{current}^2"), expression(rise)), expression("R_R"))[0]


def _ambient_factor() -> Any:
    constant = _thermal_constant("I_t", "theta_max - theta_ref")
    allowed = expression("theta_max - theta_a") / constant
    return sympy.sqrt(allowed) / expression("I_t")


def _conductor_temperature() -> Any:
    constant = _thermal_constant("I_Z", "theta_max - theta_a")
    return expression("theta_a") + constant * expression("I_B") ** 2


def _neutral_temperature() -> Any:
    constant = _thermal_constant("I_ZN", "theta_max - theta_a")
    return expression("theta_a") + constant * expression("I_N") ** 2


def _capacity_needed(installed: str) -> Any:
    limits = ["I_r", "I_2/1.45"] + (["I_N"] if "C_h" in installed else [])
    factors = expression(installed)
    needed = (solved_for(limit, f"{installed}*I_t_req", "I_t_req") for limit in limits)
    return sympy.Max(*(sympy.simplify(one * factors) for one in needed)) / factors


def _needed_stage(formula: Formula) -> Stage:
    installed = formula.written.partition("/(n")[2].rstrip(")")
    reason = (
        "both conditions of 433.1 at their limit, each solved for the tabulated capacity; the larger is needed"
        if formula.name == "capacity_needed"
        else "the same with the further factors; a loaded neutral must carry its own current too"
    )
    derived = partial(_capacity_needed, f"n{installed}")
    return Stage(formula.name, "I_t_req", formula.written, reason, derived=derived, formula=formula.name)


def _third_harmonics_of_three_lines(line_current: str) -> Any:
    """The three lines' third harmonics, each a third of a period of the fundamental later, over one of them."""
    angle = expression("omega*t")
    waves = [sympy.cos(3 * (angle - 2 * sympy.pi * line / 3)) for line in range(3)]
    return expression(f"h_3*{line_current}") * sympy.simplify(sum(waves) / waves[0])


CABLE_CURRENT = Derivation(
    key="cable-current",
    title="Current of a cable from the heat balance of its conductor",
    stages=(
        Stage("balance", "theta - theta_a", "R*R_th*I^2",
              "in steady service the heat made equals the heat given off: the rise over ambient is the loss times the "
              "thermal resistance; the resistance is taken at the greatest temperature, the warm side",
              is_premise=True),
        Stage("table", "theta_max - theta_ref", "R*R_th*I_t^2", "the tabulated capacity, at the table's own ambient",
              is_premise=True),
        Stage("other", "theta_max - theta_a", "R*R_th*(C*I_t)^2", "the cable at another ambient carries C times that",
              is_premise=True),
        Stage("full", "theta_max - theta_a", "R*R_th*I_Z^2",
              "the cable as installed, at its full capacity, reaches the greatest temperature", is_premise=True),
        Stage("C_a_f", "C", "sqrt((theta_max - theta_a)/(theta_max - theta_ref))",
              "the last line divided by the one before, solved for C", derived=_ambient_factor,
              formula="ambient_factor"),
        Stage("theta_B", "theta_B", "theta_a + (theta_max - theta_a)*(I_B/I_Z)^2",
              "the balance at the design current, its constant from the balance at full capacity",
              derived=_conductor_temperature, formula="conductor_temperature"),
        *map(_needed_stage, CAPACITY_NEEDED_OF.values()),
        Stage("I_N3", "I_N3", neutral.THIRD_HARMONIC_CURRENT.written,
              "a third of a period of the fundamental is a whole one of the third harmonic: those of the three lines "
              "are in phase and add up in the neutral",
              derived=partial(_third_harmonics_of_three_lines, "I_B"), formula="third_harmonic_neutral_current"),
        Stage("I_Nr", "I_Nr", neutral.CURRENT_AT_SETTING.written, "the same with the lines at the setting",
              derived=partial(_third_harmonics_of_three_lines, "I_r"), formula="neutral_current_at_setting"),
        Stage("theta_N", "theta_B", neutral.TEMPERATURE.written,
              "the balance at the neutral current, its constant from the balance at the capacity of the neutral",
              derived=_neutral_temperature, formula="neutral_temperature"),
    ),
)  # fmt: skip
