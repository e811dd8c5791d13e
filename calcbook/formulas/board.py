"""What stands between a board and its feeder: the feeder's design current, the board's voltages and its drop."""

from __future__ import annotations

from calcbook.formulas.formula import Example, Formula

_DERIVATION = "demand"
_KIRCHHOFF = "Kirchhoff's current law"

NEUTRAL_OF_ONE_LINE_ACTIVE = Formula(
    name="neutral_of_one_line_active",
    purpose="Active part of the neutral current where there is one line: all of it returns by the neutral.",
    result="I_Np",
    written="I_P",
    valid="a board of one line and neutral",
    reference=_KIRCHHOFF,
    citation=_KIRCHHOFF,
    example=Example({"I_P": "40 A"}, "40.0 A"),
)
NEUTRAL_OF_ONE_LINE_REACTIVE = Formula(
    name="neutral_of_one_line_reactive",
    purpose="Reactive part of the neutral current where there is one line: all of it returns by the neutral.",
    result="I_Nq",
    written="I_Q",
    valid="a board of one line and neutral",
    reference=_KIRCHHOFF,
    citation=_KIRCHHOFF,
    example=Example({"I_Q": "30 A"}, "30.0 A"),
)
NEUTRAL_THIRD_HARMONIC = Formula(
    name="neutral_third_harmonic",
    purpose="Third-harmonic current in the neutral of a board: those of its lines add up.",
    result="I_N3",
    written="sum(I_3)",
    valid="third harmonics of the lines in phase with each other, the greatest they can add up to",
    reference="IEC 60364-5-52, Annex E",
    citation="IEC 60364-5-52, Annex E",
    example=Example({"I_3": "4 A; 5 A; 3 A"}, "12.00 A"),
)
NEUTRAL_TOTAL = Formula(
    name="neutral_total",
    purpose="Neutral current of a board: fundamental and third harmonic together.",
    result="I_N",
    written="hypot(I_N1, I_N3)",
    valid="rms of currents of different frequency",
    reference="rms of two frequencies",
    citation="the squares of the rms values of different frequencies add up",
    example=Example({"I_N1": "16 A", "I_N3": "12 A"}, "20.0 A"),
)
GREATEST_LINE = Formula(
    name="greatest_line",
    purpose="Design current of a feeder: the current of the line that carries most, with the demand of the board.",
    result="I_B",
    written="max(I_S)",
    valid="the demand of the board at nominal voltage",
    reference="IEC 60364-4-43, 433.1",
    citation="IEC 60364-4-43, 433.1; IEC 60364-1, 311",
    example=Example({"I_S": "50 A"}, "50.0 A"),
)
HARMONIC_OF_FEEDER = Formula(
    name="harmonic_of_feeder",
    purpose=(
        "Third harmonic of a balanced circuit whose neutral carries what this feeder's neutral carries, the unbalance "
        "counted with it."
    ),
    result="h_3",
    written="hypot(I_N1, sum(I_3))/(3*I_B)",
    valid="on the safe side: the fundamental in the neutral unloads some line, which is not counted",
    reference="IEC 60364-5-52, Annex E",
    citation="IEC 60364-5-52, Annex E: the neutral carries three times the third harmonic of a line",
    example=Example({"I_N1": "16 A", "I_3": "4 A; 5 A; 3 A", "I_B": "50 A"}, "13.33 %"),
)
ORIGIN_ACTIVE = Formula(
    name="origin_active",
    purpose="Voltage of a line at the origin: the nominal voltage, against which all others are counted.",
    result="U_re",
    written="U_N1",
    valid="the origin that the basis names; U_n over root three, not the nominal voltage line to earth",
    reference="origin of the drops",
    citation="IEC 60364-5-52, 525: drops are counted from the origin",
    example=Example({"U_N1": "231 V"}, "231 V"),
)
ORIGIN_REACTIVE = Formula(
    name="origin_reactive",
    purpose="Voltage of a line at the origin has no part at right angles to itself.",
    result="U_im",
    written="0",
    valid="the origin that the basis names",
    reference="origin of the drops",
    citation="each line is counted against its own voltage at the origin",
    example=Example({}, "0 V"),
)
SECTION_DROP = Formula(
    name="section_drop",
    purpose="Voltage drop of one line along the feeder in per cent of the nominal voltage line to neutral.",
    result="du",
    written="dU_k/U_N1",
    valid="counted against U_n over root three",
    reference="IEC 60364-5-52, 525",
    citation="IEC 60364-5-52, 525",
    example=Example({"dU_k": "4.62 V", "U_N1": "231 V"}, "2.00 %"),
)
DROP_OF_LINE = Formula(
    name="drop_of_line",
    purpose="Voltage drop of one line from the origin to the board in per cent of the nominal voltage line to neutral.",
    result="du_k",
    written="(U_N1 - U_k)/U_N1",
    valid="counted against U_n over root three",
    reference="IEC 60364-5-52, 525",
    citation="IEC 60364-5-52, 525: from the origin of the installation",
    example=Example({"U_N1": "231 V", "U_k": "226 V"}, "2.16 %"),
)
WORST_LINE = Formula(
    name="worst_line",
    purpose="Voltage drop from the origin to the board in the line that drops most.",
    result="du_tot",
    written="max(du_k)",
    valid="lines of one board",
    reference="IEC 60364-5-52, 525",
    citation="IEC 60364-5-52, 525: the worst line decides",
    example=Example({"du_k": "2.16 %"}, "2.16 %"),
)
VOLTAGE_OF_LOWEST_LINE = Formula(
    name="voltage_of_lowest_line",
    purpose="Voltage between lines that three-phase circuits of the board are reckoned with: from its lowest line.",
    result="U_s",
    written="sqrt(3)*min(U_k)",
    valid="three-phase circuits are balanced; every line is taken to be as low as the lowest",
    reference="star connection",
    citation="star connection, sheet D-three-phase-power; the lowest line for all three",
    example=Example({"U_k": "226 V"}, "391 V"),
)
DROP_OF_LOWEST_LINE = Formula(
    name="drop_of_lowest_line",
    purpose="Voltage drop from the origin to the board that three-phase circuits of the board are reckoned with.",
    result="du_board",
    written="max(du_k)",
    valid="lines of one board",
    reference="IEC 60364-5-52, 525",
    citation="IEC 60364-5-52, 525: the worst line decides",
    example=Example({"du_k": "2.16 %"}, "2.16 %"),
)
VOLTAGE_BETWEEN_LINES = Formula(
    name="voltage_between_lines",
    purpose="Voltage of the board between two lines, the first leading: difference of their phasors.",
    result="U_s",
    written=(
        "sqrt(U_re1^2 + U_im1^2 + U_re2^2 + U_im2^2 + U_re1*U_re2 + U_im1*U_im2 + sqrt(3)*(U_im1*U_re2 - U_re1*U_im2))"
    ),
    valid="each line counted against its own voltage at the origin, the second a third of a period behind the first",
    reference="phasors",
    derivation=_DERIVATION,
    example=Example({"U_re1": "226 V", "U_im1": "-3 V", "U_re2": "228 V", "U_im2": "-1 V"}, "392 V"),
)
DROP_BETWEEN_LINES = Formula(
    name="drop_between_lines",
    purpose="Voltage drop from the origin to the board between two lines, in per cent of the nominal voltage.",
    result="du_board",
    written="(U_n - U_s)/U_n",
    valid="counted against the nominal voltage between lines",
    reference="IEC 60364-5-52, 525",
    citation="IEC 60364-5-52, 525: from the origin of the installation",
    example=Example({"U_n": "400 V", "U_s": "391 V"}, "2.25 %"),
)
