"""Voltage of each line at the end of a feeder, its currents fixed phasors at nominal voltage.

Everything of a line is counted against that line's own voltage at the origin: real and imaginary part of voltages,
active and reactive part of currents, the reactive part positive for a lagging current.
"""

from __future__ import annotations

from calcbook.formulas.formula import Example, Formula

_DERIVATION = "voltage-drop"
_MEHTA = "Mehta and Mehta, Principles of Power System"
_FIXED = "currents fixed as phasors at nominal voltage"
_LINES = {"R": "0.02 ohm", "X": "0.01 ohm", "I_P": "100 A", "I_Q": "50 A"}
_NEUTRAL = {"R_N": "0.04 ohm", "X_N": "0.01 ohm", "I_Np": "30 A", "I_Nq": "-10 A"}
_AT_BOARD = {"U_s_re": "230 V", "U_s_im": "-2 V"}


def _part(name: str, purpose: str, result: str, written: str, printed: str, *published: str) -> Formula:
    given = {**_AT_BOARD, **_LINES, **(_NEUTRAL if "R_N" in written else {})}
    other = "U_s_im" if result == "U_re" else "U_s_re"
    return Formula(
        name=name,
        purpose=purpose,
        result=result,
        written=written,
        valid=_FIXED,
        reference="phasors",
        derivation=_DERIVATION,
        example=Example({symbol: text for symbol, text in given.items() if symbol != other}, printed),
        published=published,
    )


FEEDER_VOLTAGE_RE = _part(
    "feeder_voltage_re",
    "Real part of the voltage of one line at the board: less the drops of the line and of the neutral.",
    "U_re",
    "U_s_re - (R*I_P + X*I_Q) - (R_N*I_Np + X_N*I_Nq)",
    "226 V",
)
FEEDER_VOLTAGE_IM = _part(
    "feeder_voltage_im",
    "Imaginary part of the voltage of one line at the board: less the drops of the line and of the neutral.",
    "U_im",
    "U_s_im - (X*I_P - R*I_Q) - (X_N*I_Np - R_N*I_Nq)",
    "-2.70 V",
)
BALANCED_VOLTAGE_RE = _part(
    "balanced_voltage_re",
    "Real part of the voltage of one line at the board: no neutral current.",
    "U_re",
    "U_s_re - (R*I_P + X*I_Q)",
    "228 V",
    _MEHTA,
)
BALANCED_VOLTAGE_IM = _part(
    "balanced_voltage_im",
    "Imaginary part of the voltage of one line at the board: no neutral current.",
    "U_im",
    "U_s_im - (X*I_P - R*I_Q)",
    "-2.00 V",
    _MEHTA,
)
FEEDER_VOLTAGE = Formula(
    name="feeder_voltage",
    purpose="Voltage of one line at the board, line to neutral, from its two parts.",
    result="U_k",
    written="hypot(U_re, U_im)",
    valid=_FIXED,
    reference="phasors",
    derivation=_DERIVATION,
    example=Example({"U_re": "226 V", "U_im": "-2.7 V"}, "226 V"),
)
FEEDER_DROP = Formula(
    name="feeder_drop",
    purpose="Voltage drop of one line from the feeding board to the board fed, line to neutral.",
    result="dU_k",
    written="hypot(U_s_re, U_s_im) - U_k",
    valid=_FIXED,
    reference="IEC 60364-5-52, 525",
    citation="definition of the voltage drop",
    example=Example({**_AT_BOARD, "U_k": "226 V"}, "4.01 V"),
)
FEEDER_DROP_FIRST_ORDER = Formula(
    name="feeder_drop_first_order",
    purpose="Voltage drop of one line along the feeder to first order: the drops in phase with its voltage.",
    result="dU_k1",
    written=(
        "(U_s_re*(R*I_P + X*I_Q + R_N*I_Np + X_N*I_Nq) + U_s_im*(X*I_P - R*I_Q + X_N*I_Np - R_N*I_Nq))"
        "/hypot(U_s_re, U_s_im)"
    ),
    valid=f"{_FIXED}; small drops",
    reference="IEC 60364-5-52, Annex G",
    derivation=_DERIVATION,
    example=Example({**_AT_BOARD, **_LINES, **_NEUTRAL}, "3.59 V"),
)

#: whether the feeder has a neutral that carries current -> formula of each part of a line's voltage at the board
ACTIVE_VOLTAGE = {True: FEEDER_VOLTAGE_RE, False: BALANCED_VOLTAGE_RE}
REACTIVE_VOLTAGE = {True: FEEDER_VOLTAGE_IM, False: BALANCED_VOLTAGE_IM}
