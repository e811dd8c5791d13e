"""Current-carrying capacity of a cable as installed and its protection against overload."""

from __future__ import annotations

from calcbook.formulas.formula import Example, Formula

_DERIVATION = "cable-current"
_ANNEX_B = "IEC 60364-5-52, 523 and Annex B"

GROUPED_CIRCUITS = Formula(
    name="grouped_circuits",
    purpose="Circuits that count for grouping: those stated, this one once, plus the further runs of this circuit.",
    result="n_c",
    written="n_g + n - 1",
    valid="a group stated as this circuit once and every run of the others",
    reference="IEC 60364-5-52, 523.5",
    citation="IEC 60364-5-52, 523.5 and B.52.17, notes",
    example=Example({"n_g": "3", "n": "2"}, "4.00"),
)
AMBIENT_FACTOR = Formula(
    name="ambient_factor",
    purpose="Factor on the tabulated capacity for another ambient temperature, from the heat balance.",
    result="C_a_f",
    written="sqrt((theta_max - theta_a)/(theta_max - theta_ref))",
    valid="conductor at its greatest temperature; heat given off in proportion to its rise; resistance at theta_max",
    reference="heat balance",
    derivation=_DERIVATION,
    example=Example({"theta_max": "70 degC", "theta_a": "40 degC", "theta_ref": "30 degC"}, "0.866"),
    published=("IEC 60364-5-52:2009, B.52.14", "IEC 60364-5-52:2009, B.52.15"),
)
AMBIENT_FACTOR_DIFFERENCE = Formula(
    name="ambient_factor_difference",
    purpose="How far the tabulated ambient factor lies from the heat balance; the tabulated one is used.",
    result="d_C",
    written="(C_a - C_a_f)/C_a_f",
    valid="comparison; between two rows of the table the step to the warmer row shows in it",
    reference="comparison",
    citation="definition of a relative difference",
    example=Example({"C_a": "0.87", "C_a_f": "0.866"}, "0.462 %"),
)
_AS_INSTALLED = "as for the capacity as installed"
_NEEDED_BY = "IEC 60364-4-43, 433.1; 5-52, 523"
_LIKE_RUNS = "n like runs of equal length and route that share the current equally (433.4.1)"

CAPACITY = Formula(
    name="capacity",
    purpose="Current-carrying capacity of the circuit's cables as installed in air.",
    result="I_Z",
    written="n*I_t*C_a*C_g",
    valid=_LIKE_RUNS,
    reference=_ANNEX_B,
    citation="IEC 60364-5-52, 523 and Annex B, B.52.1",
    example=Example({"n": "1", "I_t": "238 A", "C_a": "0.87", "C_g": "0.54"}, "111.8 A"),
    published=(
        "ABB, Electrical installation handbook",
        "Atlas Copco, instruction book, Cable sizing according IEC",
        "Whitfield, Electrician's Guide to the 16th Edition",
    ),
)
CAPACITY_WITH_HARMONICS = Formula(
    name="capacity_with_harmonics",
    purpose="Current-carrying capacity of the circuit's cables as installed in air, the neutral being loaded.",
    result="I_Z",
    written="n*I_t*C_a*C_g*C_h",
    valid=_LIKE_RUNS,
    reference=f"{_ANNEX_B}; Annex E",
    citation="IEC 60364-5-52, 523, Annex B, B.52.1, and Annex E",
    example=Example({"n": "1", "I_t": "153 A", "C_a": "1", "C_g": "1", "C_h": "0.86"}, "131.6 A"),
)
CAPACITY_IN_GROUND = Formula(
    name="capacity_in_ground",
    purpose="Current-carrying capacity of the circuit's cables as installed in the ground.",
    result="I_Z",
    written="n*I_t*C_a*C_g*C_s",
    valid=f"{_LIKE_RUNS}; depth of laying about 0.7 m",
    reference=_ANNEX_B,
    citation="IEC 60364-5-52, 523 and Annex B, B.52.1",
    example=Example({"n": "1", "I_t": "144 A", "C_a": "0.89", "C_g": "0.85", "C_s": "1.18"}, "128.5 A"),
)
CAPACITY_IN_GROUND_WITH_HARMONICS = Formula(
    name="capacity_in_ground_with_harmonics",
    purpose="Current-carrying capacity of the circuit's cables as installed in the ground, the neutral being loaded.",
    result="I_Z",
    written="n*I_t*C_a*C_g*C_s*C_h",
    valid=f"{_LIKE_RUNS}; depth of laying about 0.7 m",
    reference=f"{_ANNEX_B}; Annex E",
    citation="IEC 60364-5-52, 523, Annex B, B.52.1, and Annex E",
    example=Example({"n": "2", "I_t": "144 A", "C_a": "0.89", "C_g": "0.85", "C_s": "1", "C_h": "0.86"}, "187.4 A"),
)
LEAST_CAPACITY = Formula(
    name="least_capacity",
    purpose="Current-carrying capacity of a circuit whose route has several parts: that of the most adverse part.",
    result="I_Z",
    written="min(I_Zp)",
    valid="every part of the route is stated",
    reference="IEC 60364-5-52, 523.8",
    citation="IEC 60364-5-52, 523.8",
    example=Example({"I_Zp": "128 A"}, "128.0 A"),
)
OPERATING_CURRENT = Formula(
    name="operating_current",
    purpose="Current that ensures operation of the overload device within its conventional time.",
    result="I_2",
    written="k_2*I_r",
    valid="k_2 of the kind of device that judges overload; I_r its setting, or its rated current where it has none",
    reference="product standard of the device",
    citation="IEC 60898-1, 60947-2, 60947-4-1, 60269-1: conventional operating currents",
    example=Example({"k_2": "1.2", "I_r": "81 A"}, "97.2 A"),
)
GREATEST_OPERATING_CURRENT = Formula(
    name="greatest_operating_current",
    purpose="Greatest operating current of the overload device that the cable allows.",
    result="I_2_max",
    written="1.45*I_Z",
    valid="overload protection of conductors",
    reference="IEC 60364-4-43, 433.1 (2)",
    citation="IEC 60364-4-43, 433.1, condition (2)",
    example=Example({"I_Z": "100 A"}, "145.0 A"),
)
CAPACITY_NEEDED = Formula(
    name="capacity_needed",
    purpose="Tabulated capacity that one run must have in air to meet both conditions of overload protection.",
    result="I_t_req",
    written="max(I_r, I_2/1.45)/(n*C_a*C_g)",
    valid=_AS_INSTALLED,
    reference=_NEEDED_BY,
    derivation=_DERIVATION,
    example=Example({"I_r": "32 A", "I_2": "46.4 A", "n": "1", "C_a": "0.94", "C_g": "1"}, "34.0 A"),
    published=(
        "ABB, Electrical installation handbook",
        "Electrical Installation Guide, chapter G",
        "Linsley, Basic Electrical Installation Work",
    ),
)
CAPACITY_NEEDED_WITH_HARMONICS = Formula(
    name="capacity_needed_with_harmonics",
    purpose="Tabulated capacity that one run must have in air for both conditions and for the neutral current.",
    result="I_t_req",
    written="max(I_r, I_2/1.45, I_N)/(n*C_a*C_g*C_h)",
    valid=_AS_INSTALLED,
    reference=_NEEDED_BY,
    derivation=_DERIVATION,
    example=Example(
        {"I_r": "115 A", "I_2": "138 A", "I_N": "96.6 A", "n": "1", "C_a": "1", "C_g": "1", "C_h": "0.86"},
        "133.7 A",
    ),
    published=(
        "ABB, Electrical installation handbook",
        "Pangonilo, Cable rating reduction factor due to harmonic currents",
    ),
)
CAPACITY_NEEDED_IN_GROUND = Formula(
    name="capacity_needed_in_ground",
    purpose="Tabulated capacity that one run must have in the ground to meet both conditions of overload protection.",
    result="I_t_req",
    written="max(I_r, I_2/1.45)/(n*C_a*C_g*C_s)",
    valid=_AS_INSTALLED,
    reference=_NEEDED_BY,
    derivation=_DERIVATION,
    example=Example(
        {"I_r": "100 A", "I_2": "130 A", "n": "1", "C_a": "0.89", "C_g": "0.85", "C_s": "1"},
        "132.2 A",
    ),
)
CAPACITY_NEEDED_IN_GROUND_WITH_HARMONICS = Formula(
    name="capacity_needed_in_ground_with_harmonics",
    purpose="Tabulated capacity that one run must have in the ground for both conditions and for the neutral.",
    result="I_t_req",
    written="max(I_r, I_2/1.45, I_N)/(n*C_a*C_g*C_s*C_h)",
    valid=_AS_INSTALLED,
    reference=_NEEDED_BY,
    derivation=_DERIVATION,
    example=Example(
        {
            "I_r": "100 A",
            "I_2": "130 A",
            "I_N": "84 A",
            "n": "1",
            "C_a": "0.89",
            "C_g": "0.85",
            "C_s": "1",
            "C_h": "0.86",
        },
        "153.7 A",
    ),
)
CONDUCTOR_TEMPERATURE = Formula(
    name="conductor_temperature",
    purpose="Temperature of the conductor at its design current.",
    result="theta_B",
    written="theta_a + (theta_max - theta_a)*(I_B/I_Z)^2",
    valid="I_Z with all factors; resistance taken at theta_max, which is on the warm side",
    reference="heat balance",
    derivation=_DERIVATION,
    example=Example({"theta_a": "30 degC", "theta_max": "70 degC", "I_B": "80 A", "I_Z": "100 A"}, "55.6 °C"),
)
WARMEST_PART = Formula(
    name="warmest_part",
    purpose="Temperature of the conductor at its design current, in the warmest part of the route.",
    result="theta_B",
    written="max(theta_p)",
    valid="a terminal may stand at the end of any part",
    reference="IEC 60364-5-52, 523.8",
    citation="IEC 60364-5-52, 523.8",
    example=Example({"theta_p": "58 degC"}, "58.0 °C"),
)
WARMEST_AMBIENT = Formula(
    name="warmest_ambient",
    purpose="Greatest ambient temperature of the parts of a route.",
    result="theta_a",
    written="max(theta_ap)",
    valid="over which the rise of temperature at the terminals is reckoned, on the safe side",
    reference="IEC 60364-5-52, 523.8",
    citation="IEC 60364-5-52, 523.8",
    example=Example({"theta_ap": "35 degC"}, "35.0 °C"),
)

#: surroundings and whether the neutral is loaded -> formula
CAPACITY_OF = {
    ("air", False): CAPACITY,
    ("air", True): CAPACITY_WITH_HARMONICS,
    ("ground", False): CAPACITY_IN_GROUND,
    ("ground", True): CAPACITY_IN_GROUND_WITH_HARMONICS,
}
CAPACITY_NEEDED_OF = {
    ("air", False): CAPACITY_NEEDED,
    ("air", True): CAPACITY_NEEDED_WITH_HARMONICS,
    ("ground", False): CAPACITY_NEEDED_IN_GROUND,
    ("ground", True): CAPACITY_NEEDED_IN_GROUND_WITH_HARMONICS,
}
