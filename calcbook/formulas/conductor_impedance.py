"""Resistance and reactance of a circuit's conductors: temperature, skin and proximity effect, frequency, runs."""

from __future__ import annotations

from calcbook.formulas.formula import Example, Formula

_IEC_60287 = "IEC 60287-1-1, 2.1"
_SKIN = "IEC 60287-1-1, 2.1.2"
_PROXIMITY = "IEC 60287-1-1, 2.1.4"
_ROUND = "round stranded conductors, not dried and impregnated; x_s to 2.8"

RESISTANCE_AT_TEMPERATURE = Formula(
    name="resistance_at_temperature",
    purpose="D.c. resistance per length at a temperature of the conductor.",
    result="R_theta",
    written="R_20*(1 + alpha_20*(theta - theta_20))",
    valid="copper and aluminium between 0 and 150 °C",
    reference=f"IEC 60228; {_IEC_60287}",
    citation="IEC 60287-1-1, 2.1.1",
    example=Example(
        {"R_20": "0.727 ohm/km", "alpha_20": "0.00393 1/K", "theta": "90 degC", "theta_20": "20 degC"}, "0.927 Ω/km"
    ),
    published=("Stevenson, Elements of Power System Analysis",),
)
SKIN_ARGUMENT = Formula(
    name="skin_argument",
    purpose="Argument of skin and proximity effect.",
    result="x_s",
    written="sqrt(8*pi*f*k_mu*k_sk/R_theta)",
    valid=_ROUND,
    reference=_SKIN,
    citation="IEC 60287-1-1, 2.1.2 and 2.1.4, where k_mu is written as 1e-7",
    example=Example({"f": "50 Hz", "k_mu": "0.1 uH/m", "k_sk": "1", "R_theta": "0.0961 ohm/km"}, "1.144"),
)
SKIN_EFFECT = Formula(
    name="skin_effect",
    purpose="Skin effect: what it adds to the resistance, as a share.",
    result="y_s",
    written="x_s^4/(192 + 0.8*x_s^4)",
    valid=_ROUND,
    reference=_SKIN,
    citation=_SKIN,
    example=Example({"x_s": "1.143"}, "0.00883"),
    published=("NFPA 70 before 1987, multiplying factors of Table 9",),
)
PROXIMITY_OF_THREE = Formula(
    name="proximity_of_three",
    purpose="Proximity effect of three loaded conductors: what it adds to the resistance, as a share.",
    result="y_p",
    written="y_s*(d_c/s_c)^2*(0.312*(d_c/s_c)^2 + 1.18/(y_s + 0.27))",
    valid=f"{_ROUND}; with one factor for both effects the function of the proximity effect is y_s",
    reference=_PROXIMITY,
    citation=_PROXIMITY,
    example=Example({"y_s": "0.00883", "d_c": "20.6 mm", "s_c": "24 mm"}, "0.0290"),
)
PROXIMITY_OF_TWO = Formula(
    name="proximity_of_two",
    purpose="Proximity effect of two loaded conductors: what it adds to the resistance, as a share.",
    result="y_p",
    written="2.9*y_s*(d_c/s_c)^2",
    valid=f"{_ROUND}; with one factor for both effects the function of the proximity effect is y_s",
    reference="IEC 60287-1-1, 2.1.3",
    citation="IEC 60287-1-1, 2.1.3",
    example=Example({"y_s": "0.00883", "d_c": "20.6 mm", "s_c": "24 mm"}, "0.01887"),
)
DISTANCE_OF_TOUCHING_CORES = Formula(
    name="distance_of_touching_cores",
    purpose="Distance between the axes of two conductors whose insulations touch.",
    result="s_c",
    written="d_c + 2*t_i",
    valid="assumed for every construction: sheaths and spacing would only lessen the proximity effect",
    reference="geometry, assumed",
    citation="geometry: two cores that touch",
    example=Example({"d_c": "20.6 mm", "t_i": "1.7 mm"}, "24.0 mm"),
)
AC_RESISTANCE = Formula(
    name="ac_resistance",
    purpose="A.c. resistance per length of a conductor.",
    result="R_ac",
    written="R_theta*(1 + y_s + y_p)",
    valid="cables without magnetic armour or conduit around a single conductor",
    reference=_IEC_60287,
    citation=_IEC_60287,
    example=Example({"R_theta": "0.0961 ohm/km", "y_s": "0.00883", "y_p": "0.029"}, "0.0997 Ω/km"),
    published=("AS/NZS 3008.1.2:2010, a.c. resistance of multicore cables",),
)
REACTANCE_AT_FREQUENCY = Formula(
    name="reactance_at_frequency",
    purpose="Reactance per length at the frequency of the supply.",
    result="X_f",
    written="X_ref*f/f_ref",
    valid="inductance that does not depend on frequency",
    reference="proportional to frequency",
    citation="X = 2 pi f L",
    example=Example({"X_ref": "0.0813 ohm/km", "f": "60 Hz", "f_ref": "50 Hz"}, "0.0976 Ω/km"),
)
LENGTH_FOR_DROP = Formula(
    name="length_for_drop",
    purpose="Length of an estimated route on its adverse side for the drop.",
    result="l_d",
    written="l*(1 + d_l)",
    valid="estimated lengths; a measured length is taken as it is",
    reference="estimated length",
    citation="definition of a relative tolerance",
    example=Example({"l": "60 m", "d_l": "10 %"}, "66.0 m"),
)
CIRCUIT_RESISTANCE = Formula(
    name="circuit_resistance",
    purpose="Resistance of one line of the circuit over its length, with its runs in parallel.",
    result="R",
    written="R_ac*l/n",
    valid="n like runs of equal length and route that share the current equally",
    reference="n runs in parallel",
    citation="n equal resistances in parallel",
    example=Example({"R_ac": "0.927 ohm/km", "l": "62 m", "n": "1"}, "0.0575 Ω"),
)
CIRCUIT_REACTANCE = Formula(
    name="circuit_reactance",
    purpose="Reactance of one line of the circuit over its length, with its runs in parallel.",
    result="X",
    written="X_f*l/n",
    valid="n like runs of equal length and route, each with all lines of the circuit",
    reference="n runs in parallel",
    citation="n equal reactances in parallel that are not coupled",
    example=Example({"X_f": "0.0813 ohm/km", "l": "62 m", "n": "1"}, "0.00504 Ω"),
)

#: connection -> formula of the proximity effect by the number of loaded conductors
PROXIMITY_EFFECT: dict[str, Formula] = {
    "three-phase": PROXIMITY_OF_THREE,
    "line to neutral": PROXIMITY_OF_TWO,
    "two-line": PROXIMITY_OF_TWO,
}
