"""Ambient factor, conductor temperature and needed capacity from the heat balance of a conductor."""

from __future__ import annotations

from typing import Any

import sympy

from calcbook.formulas.cable_current import CAPACITY_NEEDED
from calcbook.formulas.derivation import Derivation, Stage, solved_for
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


def _capacity_needed() -> Any:
    by_setting = solved_for("I_r", "n*I_t_req*C_a*C_g", "I_t_req")
    by_operation = solved_for("I_2", "1.45*n*I_t_req*C_a*C_g", "I_t_req")
    return sympy.Max(by_setting, by_operation)


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
        Stage("setting", "n*I_t_req*C_a*C_g", "I_r", "condition (1) of 433.1 at its limit", is_premise=True),
        Stage("operation", "1.45*n*I_t_req*C_a*C_g", "I_2", "condition (2) of 433.1 at its limit", is_premise=True),
        Stage("I_t_req", "I_t_req", CAPACITY_NEEDED.written,
              "both conditions of 433.1 at their limit, each solved for the tabulated capacity; the larger is needed",
              derived=_capacity_needed, formula="capacity_needed"),
    ),
)  # fmt: skip
