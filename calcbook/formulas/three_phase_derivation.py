"""Three-phase power from sinusoidal phase quantities, in star and in delta."""

from __future__ import annotations

from functools import partial

from calcbook.formulas.derivation import Derivation, Stage, put_into, solved_for
from calcbook.formulas.three_phase import APPARENT_OF_CURRENT, LINE_CURRENT

_VOLTAGE = "sqrt(2)*U_ph*cos(omega*t{shift})"
_CURRENT = "sqrt(2)*I_ph*cos(omega*t{shift} - phi)"
_SHIFTS = ("", " - 2*pi/3", " - 4*pi/3")


_OF_SINES = "the power factor of a sinusoidal load is the cosine of its phase angle"


def _premises() -> list[Stage]:
    stages = [Stage("T", "T", "2*pi/omega", "period of the supply", is_premise=True)]
    for index, shift in enumerate(_SHIFTS, start=1):
        reason = (
            "balanced supply: sinusoidal voltages of equal size, a third of a period apart"
            if index == 1
            else "the same"
        )
        stages.append(Stage(f"u_{index}", f"u_{index}", _VOLTAGE.format(shift=shift), reason, is_premise=True))
    for index, shift in enumerate(_SHIFTS, start=1):
        reason = "each current lags behind its voltage by the angle φ" if index == 1 else "the same"
        stages.append(Stage(f"i_{index}", f"i_{index}", _CURRENT.format(shift=shift), reason, is_premise=True))
    stages.append(
        Stage(
            "cos_phi",
            "cos_phi",
            "cos(phi)",
            _OF_SINES,
            is_premise=True,
        )
    )
    return stages


_POWER = "sqrt(3)*U*I*cos_phi"

_STAGES = (
    *_premises(),
    Stage("sum_u", "u_1 + u_2 + u_3", "0", "the phase voltages sum to zero at every instant"),
    Stage("sum_i", "i_1 + i_2 + i_3", "0", "the phase currents sum to zero: no neutral current in balance"),
    Stage("rms_u", "sqrt(integral(u_1^2, t, 0, T)/T)", "U_ph", "the root of the mean square is the rms value"),
    Stage("peak", "U_pk", "sqrt(2)*U_ph", "the greatest value, reached at t = 0",
          derived=lambda: put_into(_VOLTAGE.format(shift=""), t="0"), formula="peak_voltage"),
    Stage("p", "u_1*i_1 + u_2*i_2 + u_3*i_3", "3*U_ph*I_ph*cos(phi)",
          "the instantaneous power of the three phases is constant"),
    Stage("star_u", "sqrt(integral((u_1 - u_2)^2, t, 0, T)/T)", "sqrt(3)*U_ph",
          "star: the voltage between lines is the difference of two phase voltages", formula="star_line_voltage"),
    Stage("delta_i", "sqrt(integral((i_1 - i_3)^2, t, 0, T)/T)", "sqrt(3)*I_ph",
          "delta: the line current is the difference of two phase currents", formula="delta_line_current"),
    Stage("P_star", "P", _POWER, "star: U_ph = U/√3 and I_ph = I put into 3 U_ph I_ph cos φ",
          derived=lambda: put_into("3*U_ph*I_ph*cos_phi", U_ph="U/sqrt(3)", I_ph="I"), formula="active_power"),
    Stage("P_delta", "P", _POWER, "delta: U_ph = U and I_ph = I/√3 put into 3 U_ph I_ph cos φ: the same",
          derived=lambda: put_into("3*U_ph*I_ph*cos_phi", U_ph="U", I_ph="I/sqrt(3)"), formula="active_power"),
    Stage("S_line", "S", "sqrt(3)*U*I", "apparent power: the active power at φ = 0",
          derived=lambda: put_into("sqrt(3)*U*I*cos(phi)", phi="0"), formula="apparent_power_of_line"),
    Stage("Q_line", "S^2 - P^2", "(sqrt(3)*U*I*sin(phi))^2", "reactive power: what the square of S leaves beside P",
          derived=lambda: put_into("S^2 - P^2", S="sqrt(3)*U*I", P="sqrt(3)*U*I*cos(phi)"),
          formula="reactive_power_of_line"),
    Stage("S_1", "S_1", "P_1/cos_phi", "P = S cos φ solved for S",
          derived=lambda: solved_for("P_1", "S_1*cos_phi", "S_1"), formula="apparent_power"),
    Stage("P_of_S", "P_1", "S_1*cos_phi", "the same read the other way",
          derived=lambda: solved_for("S_1", "P_1/cos_phi", "P_1"), formula="active_power_of_apparent"),
    Stage("Q_1", "Q_1", "P_1*tan(phi)", "Q = S sin φ with S = P/cos φ",
          derived=lambda: put_into("S_1*sin(phi)", S_1="P_1/cos(phi)"), formula="reactive_power"),
    Stage("Q_of_S", "Q_1", "S_1*sin(phi)", "Q = √3 U I sin φ with S = √3 U I",
          derived=lambda: put_into("sqrt(3)*U*I*sin(phi)", I="S_1/(sqrt(3)*U)"), formula="reactive_power_of_apparent"),
    Stage("P_1", "P_1", "P_2/eta", "P_2 = η P_1 solved for P_1",
          derived=lambda: solved_for("P_2", "eta*P_1", "P_1"), formula="input_power"),
    Stage("single", "integral(u_1*i_1, t, 0, T)/T", "U_ph*I_ph*cos(phi)",
          "one phase alone: the mean of u i over a period"),
    Stage("S_single", "S", "U_ph*I_ph", "one phase alone: its apparent power, the active power at φ = 0",
          derived=lambda: put_into("U_ph*I_ph*cos(phi)", phi="0")),
)  # fmt: skip

# connection -> active and apparent power in terms of the line current
_OF_LINE = {
    "three-phase": ("sqrt(3)*U_r*I_L*cos_phi", "sqrt(3)*U_r*I_L", "√3 U I"),
    "line to neutral": ("U_rN*I_L*cos_phi", "U_rN*I_L", "U I"),
    "two-line": ("U_r*I_L*cos_phi", "U_r*I_L", "U I"),
}
_GIVEN = {"shaft_power": "P_2/eta", "active_power": "P_1", "apparent_power": "S_1"}


def _line_currents() -> list[Stage]:
    stages = []
    for (connection, load), formula in LINE_CURRENT.items():
        active, apparent, reason = _OF_LINE[connection]
        power = apparent if load == "apparent_power" else active
        law = f"S = {reason}" if load == "apparent_power" else f"P = {reason} cos φ"
        given = _GIVEN[load]
        stages.append(
            Stage(
                formula.name,
                "I_L",
                formula.written,
                f"{connection}: {law} solved for I",
                derived=partial(solved_for, given, power, "I_L"),
                formula=formula.name,
            )
        )
    for connection, formula in APPARENT_OF_CURRENT.items():
        _, apparent, reason = _OF_LINE[connection]
        stages.append(
            Stage(
                formula.name,
                "S_1",
                formula.written,
                f"{connection}: S = {reason} of a load given by its current",
                derived=partial(put_into, apparent, I_L="I_a"),
                formula=formula.name,
            )
        )
    return stages


THREE_PHASE_POWER = Derivation(
    key="three-phase-power",
    title="Three-phase power from sinusoidal phase quantities",
    stages=(*_STAGES, *_line_currents()),
)
