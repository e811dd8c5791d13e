"""Power and line current of balanced three-phase, line-to-neutral and two-line loads."""

from __future__ import annotations

from calcbook.formulas.formula import Example, Formula

_DERIVATION = "three-phase-power"
_BALANCED = "balanced sinusoidal three-phase load"
_SINGLE = "sinusoidal single-phase load"

INPUT_POWER = Formula(
    name="input_power",
    purpose="Active power that a motor takes from its supply, from its shaft power.",
    result="P_1",
    written="P_2/eta",
    valid="efficiency at the shaft power given",
    reference="definition of efficiency",
    derivation=_DERIVATION,
    example=Example({"P_2": "12.75 kW", "eta": "0.85"}, "15.00 kW"),
    published=("Bird, Electrical Circuit Theory and Technology",),
)
PHASE_ANGLE = Formula(
    name="phase_angle",
    purpose="Angle by which the current lags behind the voltage.",
    result="phi",
    written="acos(cos_phi)",
    valid="lagging load; a leading load has the same angle with opposite sign",
    reference="definition of power factor",
    citation="IEC 60050-131, 131-11-46 (power factor of sinusoidal quantities)",
    example=Example({"cos_phi": "0.8"}, "36.9°"),
)
REACTIVE_POWER = Formula(
    name="reactive_power",
    purpose="Reactive power beside a given active power.",
    result="Q_1",
    written="P_1*tan(phi)",
    valid="sinusoidal quantities, lagging load",
    reference="power triangle",
    derivation=_DERIVATION,
    example=Example({"P_1": "10 kW", "phi": "36.87 deg"}, "7.50 kvar"),
    published=(
        "ElMeasure, How to select capacitor size in kvar",
        "Gonen, Electric Power Distribution System Engineering",
    ),
)
REACTIVE_POWER_OF_APPARENT = Formula(
    name="reactive_power_of_apparent",
    purpose="Reactive part of a given apparent power.",
    result="Q_1",
    written="S_1*sin(phi)",
    valid="sinusoidal quantities, lagging load",
    reference="power triangle",
    derivation=_DERIVATION,
    example=Example({"S_1": "10 kVA", "phi": "36.87 deg"}, "6.00 kvar"),
    published=("Gonen, Electric Power Distribution System Engineering",),
)
APPARENT_POWER = Formula(
    name="apparent_power",
    purpose="Apparent power beside a given active power.",
    result="S_1",
    written="P_1/cos_phi",
    valid="sinusoidal quantities",
    reference="power triangle",
    derivation=_DERIVATION,
    example=Example({"P_1": "10 kW", "cos_phi": "0.8"}, "12.50 kVA"),
    published=("Gonen, Electric Power Distribution System Engineering",),
)
ACTIVE_POWER_OF_APPARENT = Formula(
    name="active_power_of_apparent",
    purpose="Active part of a given apparent power.",
    result="P_1",
    written="S_1*cos_phi",
    valid="sinusoidal quantities",
    reference="power triangle",
    derivation=_DERIVATION,
    example=Example({"S_1": "10 kVA", "cos_phi": "0.8"}, "8.00 kW"),
    published=("Gonen, Electric Power Distribution System Engineering",),
)
ACTIVE_POWER = Formula(
    name="active_power",
    purpose="Active power of a three-phase load, star or delta, from line quantities.",
    result="P",
    written="sqrt(3)*U*I*cos_phi",
    valid=_BALANCED,
    reference="three-phase power",
    derivation=_DERIVATION,
    example=Example({"U": "400 V", "I": "20 A", "cos_phi": "1"}, "13.86 kW"),
    published=(
        "Bird, Electrical Circuit Theory and Technology",
        "electricremont, article on current in a three-phase network",
        "Engineering ToolBox, Three-phase power equations",
        "Hambley, Electrical Engineering: Principles and Applications",
    ),
)
REACTIVE_POWER_OF_LINE = Formula(
    name="reactive_power_of_line",
    purpose="Reactive power of a three-phase load from line quantities.",
    result="Q",
    written="sqrt(3)*U*I*sin(phi)",
    valid=_BALANCED + ", lagging",
    reference="three-phase power",
    derivation=_DERIVATION,
    example=Example({"U": "400 V", "I": "20 A", "phi": "30 deg"}, "6.93 kvar"),
    published=("Hambley, Electrical Engineering: Principles and Applications",),
)
APPARENT_POWER_OF_LINE = Formula(
    name="apparent_power_of_line",
    purpose="Apparent power of a three-phase load from line quantities.",
    result="S",
    written="sqrt(3)*U*I",
    valid=_BALANCED,
    reference="three-phase power",
    derivation=_DERIVATION,
    example=Example({"U": "400 V", "I": "20 A"}, "13.86 kVA"),
    published=(
        "Bird, Electrical Circuit Theory and Technology",
        "Electrical Engineering Portal, transformer size and motor starting",
    ),
)
STAR_LINE_VOLTAGE = Formula(
    name="star_line_voltage",
    purpose="Voltage between lines of a star-connected load or source.",
    result="U",
    written="sqrt(3)*U_ph",
    valid="balanced symmetrical voltages",
    reference="star connection",
    derivation=_DERIVATION,
    example=Example({"U_ph": "230 V"}, "398 V"),
    published=(
        "Bird, Electrical Circuit Theory and Technology",
        "Hambley, Electrical Engineering: Principles and Applications",
        "Kuphaldt, Lessons in Electric Circuits, vol. II",
        "Mehta and Mehta, Principles of Power System",
    ),
)
DELTA_LINE_CURRENT = Formula(
    name="delta_line_current",
    purpose="Line current of a delta-connected load.",
    result="I",
    written="sqrt(3)*I_ph",
    valid=_BALANCED,
    reference="delta connection",
    derivation=_DERIVATION,
    example=Example({"I_ph": "83.33 A"}, "144.3 A"),
    published=(
        "Bird, Electrical Circuit Theory and Technology",
        "Hubert, Electric Machines",
        "Kuphaldt, Lessons in Electric Circuits, vol. II",
    ),
)
PEAK_VOLTAGE = Formula(
    name="peak_voltage",
    purpose="Peak of a sinusoidal voltage from its rms value.",
    result="U_pk",
    written="sqrt(2)*U_ph",
    valid="sinusoidal voltage",
    reference="rms and peak",
    derivation=_DERIVATION,
    example=Example({"U_ph": "230 V"}, "325 V"),
    published=("Hambley, Electrical Engineering: Principles and Applications",),
)


def _current(name: str, purpose: str, written: str, valid: str, example: Example, *published: str) -> Formula:
    """A line current formula: they differ in written form and example only."""
    return Formula(
        name=name,
        purpose=purpose,
        result="I_L",
        written=written,
        valid=valid,
        reference="line current",
        derivation=_DERIVATION,
        example=example,
        published=published,
    )


CURRENT_OF_MOTOR = _current(
    "current_of_motor",
    "Line current of a three-phase motor at its rated voltage, from its shaft power.",
    "P_2/(sqrt(3)*U_r*eta*cos_phi)",
    _BALANCED + "; efficiency and power factor at the shaft power given",
    Example({"P_2": "12.75 kW", "U_r": "415 V", "eta": "0.85", "cos_phi": "0.77"}, "27.1 A"),
    "Bird, Electrical Circuit Theory and Technology",
)
CURRENT_OF_ACTIVE_POWER = _current(
    "current_of_active_power",
    "Line current of a three-phase load from its electrical active power.",
    "P_1/(sqrt(3)*U_r*cos_phi)",
    _BALANCED,
    Example({"P_1": "15 kW", "U_r": "415 V", "cos_phi": "0.77"}, "27.1 A"),
    "Bird, Electrical Circuit Theory and Technology",
    "Electrical Engineering Portal, transformer size and motor starting",
    "Sarma, Introduction to Electrical Engineering, 2001",
)
CURRENT_OF_APPARENT_POWER = _current(
    "current_of_apparent_power",
    "Line current of a three-phase load from its apparent power.",
    "S_1/(sqrt(3)*U_r)",
    _BALANCED,
    Example({"S_1": "1000 kVA", "U_r": "480 V"}, "1203 A"),
    "Cooper Bussmann, Electrical Plan Review",
    "Electrical Engineering Portal, transformer size and motor starting",
    "Electrical Installation Guide, chapter G",
    "Glover, Sarma and Overbye, Power System Analysis and Design",
    "Kosow, Electric Machinery and Transformers",
    "Sarma, Introduction to Electrical Engineering, 2001",
)
LINE_TO_NEUTRAL_CURRENT_OF_MOTOR = _current(
    "line_to_neutral_current_of_motor",
    "Line current of a motor connected line to neutral, from its shaft power.",
    "P_2/(U_rN*eta*cos_phi)",
    _SINGLE + "; efficiency and power factor at the shaft power given",
    Example({"P_2": "4.8 kW", "U_rN": "240 V", "eta": "0.8", "cos_phi": "0.625"}, "40.0 A"),
    "Bird, Electrical Circuit Theory and Technology",
)
LINE_TO_NEUTRAL_CURRENT_OF_ACTIVE_POWER = _current(
    "line_to_neutral_current_of_active_power",
    "Line current of a load connected line to neutral, from its active power.",
    "P_1/(U_rN*cos_phi)",
    _SINGLE,
    Example({"P_1": "10 kW", "U_rN": "120 V", "cos_phi": "1"}, "83.3 A"),
    "Bird, Electrical Circuit Theory and Technology",
    "Kuphaldt, Lessons in Electric Circuits, vol. II",
    "Mehta and Mehta, Principles of Power System",
)
LINE_TO_NEUTRAL_CURRENT_OF_APPARENT_POWER = _current(
    "line_to_neutral_current_of_apparent_power",
    "Line current of a load connected line to neutral, from its apparent power.",
    "S_1/U_rN",
    _SINGLE,
    Example({"S_1": "28.75 kVA", "U_rN": "230 V"}, "125.0 A"),
    "Mehta and Mehta, Principles of Power System",
)
TWO_LINE_CURRENT_OF_MOTOR = _current(
    "two_line_current_of_motor",
    "Current of a motor connected between two lines, from its shaft power.",
    "P_2/(U_r*eta*cos_phi)",
    _SINGLE + "; the current enters one line and leaves by the other",
    Example({"P_2": "4 kW", "U_r": "400 V", "eta": "0.8", "cos_phi": "0.8"}, "15.62 A"),
    "Bird, Electrical Circuit Theory and Technology",
)
TWO_LINE_CURRENT_OF_ACTIVE_POWER = _current(
    "two_line_current_of_active_power",
    "Current of a load connected between two lines, from its active power.",
    "P_1/(U_r*cos_phi)",
    _SINGLE + "; the current enters one line and leaves by the other",
    Example({"P_1": "6 kW", "U_r": "400 V", "cos_phi": "1"}, "15.00 A"),
    "Mondal, Electric Circuit Analysis, tutorial 19",
)
TWO_LINE_CURRENT_OF_APPARENT_POWER = _current(
    "two_line_current_of_apparent_power",
    "Current of a load connected between two lines, from its apparent power.",
    "S_1/U_r",
    _SINGLE + "; the current enters one line and leaves by the other",
    Example({"S_1": "6 kVA", "U_r": "400 V"}, "15.00 A"),
)


def _apparent(name: str, purpose: str, written: str, valid: str, example: Example, *published: str) -> Formula:
    """Apparent power of a load that is given by its current."""
    return Formula(
        name=name,
        purpose=purpose,
        result="S_1",
        written=written,
        valid=valid,
        reference="three-phase power" if "sqrt" in written else "single-phase power",
        derivation=_DERIVATION,
        example=example,
        published=published,
    )


APPARENT_POWER_OF_CURRENT = _apparent(
    "apparent_power_of_current",
    "Apparent power of a three-phase load that is given by its line current.",
    "sqrt(3)*U_r*I_a",
    _BALANCED,
    Example({"U_r": "400 V", "I_a": "20 A"}, "13.86 kVA"),
    "Electrical Engineering Portal, transformer size and motor starting",
)
LINE_TO_NEUTRAL_APPARENT_POWER_OF_CURRENT = _apparent(
    "line_to_neutral_apparent_power_of_current",
    "Apparent power of a line-to-neutral load that is given by its current.",
    "U_rN*I_a",
    _SINGLE,
    Example({"U_rN": "230 V", "I_a": "16 A"}, "3.68 kVA"),
    "Mehta and Mehta, Principles of Power System",
)
TWO_LINE_APPARENT_POWER_OF_CURRENT = _apparent(
    "two_line_apparent_power_of_current",
    "Apparent power of a two-line load that is given by its current.",
    "U_r*I_a",
    _SINGLE,
    Example({"U_r": "400 V", "I_a": "16 A"}, "6.40 kVA"),
)
NAMEPLATE_DIFFERENCE = Formula(
    name="nameplate_difference",
    purpose="How far the nameplate current lies from the calculated one.",
    result="d_I",
    written="abs(I_np - I_L)/I_L",
    valid="loads with a nameplate, whose current is used",
    reference="comparison",
    citation="definition of a relative difference",
    example=Example({"I_np": "81 A", "I_L": "80 A"}, "1.250 %"),
)
NAMEPLATE_TOLERANCE = Formula(
    name="nameplate_tolerance",
    purpose="Greatest difference of a nameplate current from the calculated one that puts no datum in doubt.",
    result="d_max",
    written="0.1",
    valid="loads with a nameplate; above it one of the data is in doubt",
    reference="common practice",
    citation="common practice, no source",
    example=Example({}, "10.00 %"),
)
DESIGN_CURRENT = Formula(
    name="design_current",
    purpose="Design current of the circuit: the line current of its load, with no demand factor.",
    result="I_B",
    written="I",
    valid="one circuit; a demand factor acts on what the board receives, never here",
    reference="IEC 60364-4-43, 433.1",
    citation="IEC 60364-4-43, 433.1; IEC 60364-1, 311",
    example=Example({"I": "81 A"}, "81.0 A"),
)

#: phases of the circuit -> kind of connection
CONNECTIONS: dict[str, str] = {
    "L1L2L3": "three-phase",
    "L1L2L3N": "three-phase",
    "L1N": "line to neutral",
    "L2N": "line to neutral",
    "L3N": "line to neutral",
    "L1L2": "two-line",
    "L2L3": "two-line",
    "L1L3": "two-line",
}

#: connection and given load -> formula of the line current
LINE_CURRENT: dict[tuple[str, str], Formula] = {
    ("three-phase", "shaft_power"): CURRENT_OF_MOTOR,
    ("three-phase", "active_power"): CURRENT_OF_ACTIVE_POWER,
    ("three-phase", "apparent_power"): CURRENT_OF_APPARENT_POWER,
    ("line to neutral", "shaft_power"): LINE_TO_NEUTRAL_CURRENT_OF_MOTOR,
    ("line to neutral", "active_power"): LINE_TO_NEUTRAL_CURRENT_OF_ACTIVE_POWER,
    ("line to neutral", "apparent_power"): LINE_TO_NEUTRAL_CURRENT_OF_APPARENT_POWER,
    ("two-line", "shaft_power"): TWO_LINE_CURRENT_OF_MOTOR,
    ("two-line", "active_power"): TWO_LINE_CURRENT_OF_ACTIVE_POWER,
    ("two-line", "apparent_power"): TWO_LINE_CURRENT_OF_APPARENT_POWER,
}

#: connection -> formula of the apparent power of a load given by its current
APPARENT_OF_CURRENT: dict[str, Formula] = {
    "three-phase": APPARENT_POWER_OF_CURRENT,
    "line to neutral": LINE_TO_NEUTRAL_APPARENT_POWER_OF_CURRENT,
    "two-line": TWO_LINE_APPARENT_POWER_OF_CURRENT,
}
