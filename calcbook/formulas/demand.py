"""What circuits ask of their board: currents at nominal voltage as phasors, their sums, and the neutral.

Each line's current is stated by its active and its reactive part, counted against that line's own voltage to neutral;
the reactive part is positive for a lagging current.
"""

from __future__ import annotations

from calcbook.formulas.formula import Example, Formula

_DERIVATION = "demand"
_AT_NOMINAL = "currents at nominal voltage, which go up as phasors; I_B is taken as the fundamental"


def _part(name: str, purpose: str, result: str, written: str, printed: str) -> Formula:
    return Formula(
        name=name,
        purpose=purpose,
        result=result,
        written=written,
        valid=_AT_NOMINAL,
        reference="phasor of the current",
        derivation=_DERIVATION,
        example=Example(_LOAD, printed),
    )


_LOAD = {"k_u": "0.8", "I_B": "100 A", "phi": "30 deg"}
ACTIVE_PART = _part(
    "active_part",
    "Active part of the current that a circuit asks of its board.",
    "I_p",
    "k_u*I_B*cos(phi)",
    "69.3 A",
)
REACTIVE_PART = _part(
    "reactive_part",
    "Reactive part of the current that a circuit asks of its board.",
    "I_q",
    "k_u*I_B*sin(phi)",
    "40.0 A",
)
FIRST_LINE_ACTIVE_PART = _part(
    "first_line_active_part",
    "Two-line load: active part in the line that leads, against that line's own voltage to neutral.",
    "I_p",
    "k_u*I_B*cos(phi - pi/6)",
    "80.0 A",
)
FIRST_LINE_REACTIVE_PART = _part(
    "first_line_reactive_part",
    "Two-line load: reactive part in the line that leads.",
    "I_q",
    "k_u*I_B*sin(phi - pi/6)",
    "0 A",
)
SECOND_LINE_ACTIVE_PART = _part(
    "second_line_active_part",
    "Two-line load: active part in the line that follows, where the current returns.",
    "I_p",
    "k_u*I_B*cos(phi + pi/6)",
    "40.0 A",
)
SECOND_LINE_REACTIVE_PART = _part(
    "second_line_reactive_part",
    "Two-line load: reactive part in the line that follows.",
    "I_q",
    "k_u*I_B*sin(phi + pi/6)",
    "69.3 A",
)
HARMONIC_PART = Formula(
    name="harmonic_part",
    purpose="Third harmonic current that a circuit asks of its board.",
    result="I_h",
    written="k_u*h_3*I_B",
    valid="third harmonic as share of the line current",
    reference="IEC 60364-5-52, Annex E",
    citation="IEC 60364-5-52, Annex E: third harmonic content as a share of the line current",
    example=Example({"k_u": "1", "h_3": "20 %", "I_B": "50 A"}, "10.00 A"),
)


def _of_sub_board(name: str, what: str, result: str, part: str) -> Formula:
    return Formula(
        name=name,
        purpose=f"{what} that a sub-board asks of its board through its feeder.",
        result=result,
        written=f"k_u*{part}",
        valid="the sub-board's own diversity is in its current already",
        reference="demand factor",
        citation="definition of the demand factor",
        example=Example({"k_u": "0.9", part: "100 A"}, "90.0 A"),
    )


ACTIVE_PART_OF_SUB_BOARD = _of_sub_board("active_part_of_sub_board", "Active part of the current", "I_p", "I_P")
REACTIVE_PART_OF_SUB_BOARD = _of_sub_board("reactive_part_of_sub_board", "Reactive part of the current", "I_q", "I_Q")
HARMONIC_PART_OF_SUB_BOARD = _of_sub_board("harmonic_part_of_sub_board", "Third harmonic current", "I_h", "I_3")


def _sum(name: str, what: str, result: str, part: str) -> Formula:
    return Formula(
        name=name,
        purpose=f"{what} of the board in one line: the sum over its circuits, with the board's diversity.",
        result=result,
        written=f"k_s*sum({part})",
        valid=_AT_NOMINAL,
        reference="IEC 60364-1, 311",
        citation="Kirchhoff's current law; IEC 60364-1, 311 (demand and diversity)",
        example=Example({"k_s": "0.8", part: "30 A; 20 A; 50 A"}, "80.0 A"),
    )


LINE_ACTIVE = _sum("line_active", "Active part of the current", "I_P", "I_p")
LINE_REACTIVE = _sum("line_reactive", "Reactive part of the current", "I_Q", "I_q")
LINE_HARMONIC = _sum("line_harmonic", "Third harmonic current", "I_3", "I_h")


def _nothing(result: str) -> Formula:
    return Formula(
        name=f"no_{result}",
        purpose="A line of the board that no circuit uses.",
        result=result,
        written="0",
        valid="no circuit of the board is connected to this line",
        reference="no circuit",
        citation="nothing to add",
        example=Example({}, "0 A"),
    )


NO_ACTIVE, NO_REACTIVE, NO_HARMONIC = _nothing("I_P"), _nothing("I_Q"), _nothing("I_3")
LINE_CURRENT = Formula(
    name="line_current_of_parts",
    purpose="Current of a line from its active and reactive part.",
    result="I_S",
    written="hypot(I_P, I_Q)",
    valid="fundamental",
    reference="phasor of the current",
    citation="Pythagoras: the two parts stand at right angles",
    example=Example({"I_P": "40 A", "I_Q": "30 A"}, "50.0 A"),
)
NEUTRAL_ACTIVE = Formula(
    name="neutral_active",
    purpose="Part of the neutral current in phase with the voltage of a line: phasor sum of the three lines.",
    result="I_Np",
    written="I_P1 - (I_P2 + I_P3)/2 - sqrt(3)*(I_Q2 - I_Q3)/2",
    valid="fundamental; symmetrical voltages; the next line lags by a third of a period",
    reference="phasor sum",
    derivation=_DERIVATION,
    example=Example({"I_P1": "50 A", "I_P2": "30 A", "I_P3": "20 A", "I_Q2": "10 A", "I_Q3": "0 A"}, "16.34 A"),
)
NEUTRAL_REACTIVE = Formula(
    name="neutral_reactive",
    purpose="Part of the neutral current a quarter period behind the voltage of a line.",
    result="I_Nq",
    written="I_Q1 - (I_Q2 + I_Q3)/2 + sqrt(3)*(I_P2 - I_P3)/2",
    valid="fundamental; symmetrical voltages; the next line lags by a third of a period",
    reference="phasor sum",
    derivation=_DERIVATION,
    example=Example({"I_Q1": "0 A", "I_Q2": "10 A", "I_Q3": "0 A", "I_P2": "30 A", "I_P3": "20 A"}, "3.66 A"),
)
NEUTRAL_FUNDAMENTAL = Formula(
    name="neutral_fundamental",
    purpose="Fundamental neutral current from its two parts.",
    result="I_N1",
    written="hypot(I_Np, I_Nq)",
    valid="fundamental",
    reference="phasor of the current",
    citation="Pythagoras: the two parts stand at right angles",
    example=Example({"I_Np": "30 A", "I_Nq": "40 A"}, "50.0 A"),
)
NOMINAL_TO_NEUTRAL = Formula(
    name="nominal_to_neutral",
    purpose="Nominal voltage line to neutral that voltages are counted against: the nominal voltage over root three.",
    result="U_N1",
    written="U_n/sqrt(3)",
    valid="symmetrical supply at its origin",
    reference="star connection",
    citation="star connection, sheet D-three-phase-power",
    example=Example({"U_n": "400 V"}, "231 V"),
)

#: of a two-line load: active and reactive part in the line that leads, then in the line that follows
TWO_LINE_PARTS = (
    (FIRST_LINE_ACTIVE_PART, FIRST_LINE_REACTIVE_PART),
    (SECOND_LINE_ACTIVE_PART, SECOND_LINE_REACTIVE_PART),
)
#: current of the board in a line -> formula of the sum over its circuits, and of a line that none uses
SUM_OF_PARTS = {"I_P": LINE_ACTIVE, "I_Q": LINE_REACTIVE, "I_3": LINE_HARMONIC}
NO_PARTS = {"I_P": NO_ACTIVE, "I_Q": NO_REACTIVE, "I_3": NO_HARMONIC}
_PAIRS = {"L1L2": ("L1", "L2"), "L2L3": ("L2", "L3"), "L1L3": ("L3", "L1")}


def lines_of(phases: str) -> tuple[str, ...]:
    """The lines of a circuit or board, each followed by the one that lags it: ("L3", "L1") of "L1L3"."""
    return _PAIRS.get(phases, tuple(line for line in ("L1", "L2", "L3") if line in phases))


def next_lines(line: str) -> tuple[str, str, str]:
    """A line, the one that lags it by a third of a period, and the one after that."""
    start = int(line[1]) - 1
    first, second, third = (f"L{(start + step) % 3 + 1}" for step in range(3))
    return first, second, third
