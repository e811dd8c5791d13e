"""Voltage drop of a final circuit: exact and to first order, in per cent, from the origin, and what is allowed.

The design current is held, and its power factor is that at the load's own voltage.
"""

from __future__ import annotations

from calcbook.formulas.formula import Example, Formula

_DERIVATION = "voltage-drop"
_HELD = "design current held; power factor at the load's own voltage, lagging"
_BALANCED = "balanced load; " + _HELD
_LOOP = "the current returns by a conductor like the line; " + _HELD
_525 = "IEC 60364-5-52, 525"
_ANNEX_G = "IEC 60364-5-52, Annex G"

SINE_OF_ANGLE = Formula(
    name="sine_of_angle",
    purpose="Sine of the phase angle from the power factor.",
    result="sin_phi",
    written="sqrt(1 - cos_phi^2)",
    valid="lagging current",
    reference="sine and cosine",
    derivation=_DERIVATION,
    example=Example({"cos_phi": "0.8"}, "0.600"),
)
ADVERSE_POWER_FACTOR = Formula(
    name="adverse_power_factor",
    purpose="The power factor that makes the drop greatest, for a load whose power factor is not stated.",
    result="cos_phi",
    written="R/hypot(R, X)",
    valid="lagging current",
    reference="most adverse",
    derivation=_DERIVATION,
    example=Example({"R": "0.04 ohm", "X": "0.03 ohm"}, "0.800"),
)


def _load_voltage(name: str, what: str, written: str, example: Example, *published: str) -> Formula:
    return Formula(
        name=name,
        purpose=f"Voltage at the load, exact: {what}.",
        result="U_load" if "U_s" in example.inputs else "U_loadN",
        written=written,
        valid=_BALANCED if "sqrt(3)" in written else _LOOP,
        reference="phasors",
        derivation=_DERIVATION,
        example=example,
        published=published,
    )


_CABLE = {"I_B": "100 A", "R": "0.1 ohm", "X": "0.05 ohm", "cos_phi": "0.8", "sin_phi": "0.6"}
LOAD_VOLTAGE = _load_voltage(
    "load_voltage",
    "three-phase circuit, between lines",
    "sqrt(U_s^2 - 3*I_B^2*(X*cos_phi - R*sin_phi)^2) - sqrt(3)*I_B*(R*cos_phi + X*sin_phi)",
    Example({"U_s": "400 V", **_CABLE}, "381 V"),
    "Saadat, Power System Analysis",
)
TWO_LINE_LOAD_VOLTAGE = _load_voltage(
    "two_line_load_voltage",
    "circuit of two lines",
    "sqrt(U_s^2 - 4*I_B^2*(X*cos_phi - R*sin_phi)^2) - 2*I_B*(R*cos_phi + X*sin_phi)",
    Example({"U_s": "400 V", **_CABLE}, "378 V"),
)
NEUTRAL_LOAD_VOLTAGE = _load_voltage(
    "neutral_load_voltage",
    "circuit of line and neutral",
    "sqrt(U_sN^2 - 4*I_B^2*(X*cos_phi - R*sin_phi)^2) - 2*I_B*(R*cos_phi + X*sin_phi)",
    Example({"U_sN": "230 V", **_CABLE}, "208 V"),
    "Mehta and Mehta, Principles of Power System",
)


def _exact_drop(name: str, source: str, load: str, example: Example) -> Formula:
    return Formula(
        name=name,
        purpose="Voltage drop in the circuit, exact.",
        result="dU",
        written=f"{source} - {load}",
        valid=_HELD,
        reference=_525,
        citation="definition of the voltage drop",
        example=example,
    )


EXACT_DROP = _exact_drop("exact_drop", "U_s", "U_load", Example({"U_s": "400 V", "U_load": "381 V"}, "19.00 V"))
NEUTRAL_EXACT_DROP = _exact_drop(
    "neutral_exact_drop", "U_sN", "U_loadN", Example({"U_sN": "230 V", "U_loadN": "208 V"}, "22.0 V")
)
FIRST_ORDER_DROP = Formula(
    name="first_order_drop",
    purpose="Voltage drop of a three-phase circuit between lines, to first order.",
    result="dU_1",
    written="sqrt(3)*I_B*(R*cos_phi + X*sin_phi)",
    valid=_BALANCED + "; small drops",
    reference=_ANNEX_G,
    derivation=_DERIVATION,
    example=Example(_CABLE, "19.05 V"),
    published=(
        "ABB, Electrical installation handbook",
        "Bartleby, question on a short three-phase line",
        "BS 7671, table 4E4B",
        "Electrical Installation Guide, chapter G",
        "NFPA, NEC Handbook",
    ),
)
LOOP_FIRST_ORDER_DROP = Formula(
    name="loop_first_order_drop",
    purpose="Voltage drop of a circuit of line and neutral or of two lines, to first order.",
    result="dU_1",
    written="2*I_B*(R*cos_phi + X*sin_phi)",
    valid=_LOOP + "; small drops",
    reference=_ANNEX_G,
    derivation=_DERIVATION,
    example=Example(_CABLE, "22.0 V"),
    published=("BS 7671, table 4E4B", "Electrical Installation Guide, chapter G"),
)
FIRST_ORDER_DIFFERENCE = Formula(
    name="first_order_difference",
    purpose="How far the first-order drop lies from the exact one, which is used.",
    result="d_dU",
    written="(dU_1 - dU)/dU",
    valid="information",
    reference="comparison",
    citation="definition of a relative difference",
    example=Example({"dU_1": "19.05 V", "dU": "19 V"}, "0.263 %"),
)


def _share(name: str, nominal: str, which: str, example: Example, *published: str) -> Formula:
    return Formula(
        name=name,
        purpose=f"Voltage drop in the circuit in per cent of the nominal voltage {which}.",
        result="du",
        written=f"dU/{nominal}",
        valid="counted against the nominal voltage of the basis",
        reference=_525,
        citation="IEC 60364-5-52, 525",
        example=example,
        published=published,
    )


DROP_SHARE = _share(
    "drop_share",
    "U_n",
    "between lines",
    Example({"dU": "15 V", "U_n": "400 V"}, "3.75 %"),
    "ABB, Electrical installation handbook",
    "Electrical Installation Guide, chapter G",
    "NFPA, NEC Handbook",
)
NEUTRAL_DROP_SHARE = _share(
    "neutral_drop_share",
    "U_0",
    "line to earth",
    Example({"dU": "9.6 V", "U_0": "230 V"}, "4.17 %"),
    "Electrical Installation Guide, chapter G",
)
TOTAL_DROP = Formula(
    name="total_drop",
    purpose="Voltage drop from the origin of the installation to the load.",
    result="du_tot",
    written="du_board + du",
    valid="both in per cent of the nominal voltage, counted from the origin that the basis states",
    reference=_525,
    citation="IEC 60364-5-52, 525: from the origin of the installation to the load",
    example=Example({"du_board": "1.2 %", "du": "2.1 %"}, "3.30 %"),
)
LENGTH_SUPPLEMENT = Formula(
    name="length_supplement",
    purpose="What a long main wiring adds to the greatest drop of the table, where it is claimed.",
    result="du_s",
    written="min(max(k_l*(l - l_0), 0), du_s_max)",
    valid="length as entered; only where it is claimed",
    reference="IEC 60364-5-52, G.52.1",
    citation="IEC 60364-5-52, Table G.52.1, note",
    example=Example({"k_l": "0.005 %/m", "l": "160 m", "l_0": "100 m", "du_s_max": "0.5 %"}, "0.300 %"),
)
GREATEST_DROP = Formula(
    name="greatest_drop",
    purpose="Greatest voltage drop allowed, with the supplement for length.",
    result="du_max",
    written="du_tab + du_s",
    valid="where the supplement is claimed",
    reference="IEC 60364-5-52, G.52.1",
    citation="IEC 60364-5-52, Table G.52.1, note",
    example=Example({"du_tab": "5 %", "du_s": "0.3 %"}, "5.30 %"),
)

#: connection -> formula of the voltage at the load
LOAD_VOLTAGE_OF: dict[str, Formula] = {
    "three-phase": LOAD_VOLTAGE,
    "line to neutral": NEUTRAL_LOAD_VOLTAGE,
    "two-line": TWO_LINE_LOAD_VOLTAGE,
}
#: connection -> formula of the first-order drop
FIRST_ORDER_OF: dict[str, Formula] = {
    "three-phase": FIRST_ORDER_DROP,
    "line to neutral": LOOP_FIRST_ORDER_DROP,
    "two-line": LOOP_FIRST_ORDER_DROP,
}
