"""Voltage drop from the phasors of a circuit: exact, its series, and the lines of a feeder."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import sympy

from calcbook.formulas import feeder_drop, voltage_drop
from calcbook.formulas.derivation import Derivation, Stage
from calcbook.records.written.algebra import expression

_PHASOR_DROP = "(R + j X) times the current, which lags by φ behind the load's voltage"
_SMALL = sympy.Symbol("share", positive=True)


def _phasor_drop() -> Any:
    return sympy.expand(expression("R") + sympy.I * expression("X")) * (
        expression("I_B") * (expression("cos_phi") - sympy.I * expression("sin_phi"))
    )


def _solved_for_load(source: str, load: str, conductors: str) -> Callable[[], Any]:
    """The voltage at the load from the right triangle of the phasors: the greater of the two solutions."""

    def derived() -> Any:
        drop = _phasor_drop()
        along, across = (expression(conductors) * part(sympy.expand(drop)) for part in (sympy.re, sympy.im))
        unknown = expression(load)
        triangle = sympy.Eq(expression(f"{source}^2"), (unknown + along) ** 2 + across**2)
        return max(sympy.solve(triangle, unknown), key=lambda solution: solution.subs(_sample(solution)))

    return derived


def _sample(solution: Any) -> dict[Any, Any]:
    """Numbers for which the drop is small: they tell the voltage of service from the other solution."""
    return {symbol: 1000 if str(symbol).startswith("U") else sympy.Rational(1, 2) for symbol in solution.free_symbols}


def _order_of_drop(written: str, source: str, orders: tuple[int, ...]) -> Callable[[], Any]:
    """Terms of the exact drop's series in the current, to the orders wanted."""

    def derived() -> Any:
        current = expression("I_B")
        drop = expression(source) - expression(written)
        series = sympy.series(drop, current, 0, max(orders) + 1).removeO()
        return sum(series.coeff(current, order) * current**order for order in orders)

    return derived


def _most_adverse() -> Any:
    """The power factor at which the in-phase drop has its greatest value."""
    resistance, reactance, angle = expression("R"), expression("X"), sympy.Symbol("angle", real=True)
    drop = resistance * sympy.cos(angle) + reactance * sympy.sin(angle)
    greatest = sympy.atan(reactance / resistance)
    if sympy.simplify(sympy.diff(drop, angle).subs(angle, greatest)) != 0:
        return sympy.nan
    return sympy.simplify(sympy.cos(greatest))


def _line_phasor(share: Any = 1, neutral: bool = True) -> Any:
    """U_s - share (z I + z_N I_N) of one line."""
    pairs = [("R", "X", "I_P", "I_Q"), ("R_N", "X_N", "I_Np", "I_Nq")][: 2 if neutral else 1]
    drops = (
        (expression(r) + sympy.I * expression(x)) * (expression(p) - sympy.I * expression(q)) for r, x, p, q in pairs
    )
    return expression("U_s_re") + sympy.I * expression("U_s_im") - share * sympy.Add(*drops)


def _part(part: Callable[[Any], Any], neutral: bool) -> Callable[[], Any]:
    return lambda: part(sympy.expand(_line_phasor(neutral=neutral)))


def _first_order_of_line() -> Any:
    """The drop with all impedances times a share, its series to the first power of the share."""
    phasor = sympy.expand(_line_phasor(_SMALL))
    size = sympy.sqrt(sympy.re(phasor) ** 2 + sympy.im(phasor) ** 2)
    return -sympy.diff(size, _SMALL).subs(_SMALL, 0)


_STAGES = (
    Stage("cos_phi", "cos_phi", "cos(phi)", "definition of the power factor", is_premise=True),
    Stage("sin_phi", "sin_phi", "sin(phi)", "definition of the sine of the phase angle", is_premise=True),
    Stage("sine", "sin_phi^2", "(sqrt(1 - cos_phi^2))^2", "sine and cosine of one angle", formula="sine_of_angle"),
    Stage("dU_re", "dU_re", "I_B*(R*cos_phi + X*sin_phi)", f"real part of {_PHASOR_DROP}",
          derived=lambda: sympy.re(sympy.expand(_phasor_drop()))),
    Stage("dU_im", "dU_im", "I_B*(X*cos_phi - R*sin_phi)", f"imaginary part of {_PHASOR_DROP}",
          derived=lambda: sympy.im(sympy.expand(_phasor_drop()))),
    Stage("triangle", "U_s^2", "(U_load + sqrt(3)*dU_re)^2 + (sqrt(3)*dU_im)^2",
          "three-phase: the voltage at the board is the phasor sum of the load's voltage and the drop; its two parts "
          "stand at right angles", is_premise=True),
    Stage("U_load", "U_load", voltage_drop.LOAD_VOLTAGE.written,
          "three-phase: solved for the voltage at the load, the greater solution",
          derived=_solved_for_load("U_s", "U_load", "sqrt(3)"), formula="load_voltage"),
    Stage("U_load_2", "U_load", voltage_drop.TWO_LINE_LOAD_VOLTAGE.written,
          "two lines: the current passes both conductors, the same triangle with 2 for the root of 3",
          derived=_solved_for_load("U_s", "U_load", "2"), formula="two_line_load_voltage"),
    Stage("U_loadN", "U_loadN", voltage_drop.NEUTRAL_LOAD_VOLTAGE.written,
          "line and neutral: the same with the voltage line to neutral",
          derived=_solved_for_load("U_sN", "U_loadN", "2"), formula="neutral_load_voltage"),
    Stage("first_order", "dU_1", voltage_drop.FIRST_ORDER_DROP.written,
          "three-phase: the exact drop U_s less U_load as a series in the current, its first term",
          derived=_order_of_drop(voltage_drop.LOAD_VOLTAGE.written, "U_s", (1,)), formula="first_order_drop"),
    Stage("second_order", "dU - dU_1", "3*I_B^2*(X*cos_phi - R*sin_phi)^2/(2*U_s)",
          "the next term of the series: what the first-order formula leaves out",
          derived=_order_of_drop(voltage_drop.LOAD_VOLTAGE.written, "U_s", (2,))),
    Stage("loop_first_order", "dU_1", voltage_drop.LOOP_FIRST_ORDER_DROP.written,
          "two conductors: the first term of the series of the exact drop",
          derived=_order_of_drop(voltage_drop.NEUTRAL_LOAD_VOLTAGE.written, "U_sN", (1,)),
          formula="loop_first_order_drop"),
    Stage("adverse", "cos_phi", voltage_drop.ADVERSE_POWER_FACTOR.written,
          "the drop is greatest where its derivative by the angle is zero: tan φ = X/R",
          derived=_most_adverse, formula="adverse_power_factor"),
    Stage("U_re", "U_re", feeder_drop.FEEDER_VOLTAGE_RE.written,
          "feeder: real part of the voltage of one line less the drops of its own current in the line and of the "
          "neutral current in the neutral", derived=_part(sympy.re, True), formula="feeder_voltage_re"),
    Stage("U_im", "U_im", feeder_drop.FEEDER_VOLTAGE_IM.written, "feeder: its imaginary part",
          derived=_part(sympy.im, True), formula="feeder_voltage_im"),
    Stage("U_re_3", "U_re", feeder_drop.BALANCED_VOLTAGE_RE.written, "feeder without neutral current: real part",
          derived=_part(sympy.re, False), formula="balanced_voltage_re"),
    Stage("U_im_3", "U_im", feeder_drop.BALANCED_VOLTAGE_IM.written, "feeder without neutral current: imaginary part",
          derived=_part(sympy.im, False), formula="balanced_voltage_im"),
    Stage("U_k", "U_k", feeder_drop.FEEDER_VOLTAGE.written, "size of a phasor from its two parts",
          derived=lambda: sympy.Abs(expression("U_re") + sympy.I * expression("U_im")), formula="feeder_voltage"),
    Stage("dU_k1", "dU_k1", feeder_drop.FEEDER_DROP_FIRST_ORDER.written,
          "feeder: the drop of the line as a series in the impedances, its first term", derived=_first_order_of_line,
          formula="feeder_drop_first_order"),
)  # fmt: skip

VOLTAGE_DROP = Derivation(
    key="voltage-drop", title="Voltage drop from the phasors of a circuit, and its series", stages=_STAGES
)
