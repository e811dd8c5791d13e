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
    published=("IEC 60364-5-52:2009, B.52.14",),
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
CAPACITY = Formula(
    name="capacity",
    purpose="Current-carrying capacity of the circuit's cables as installed.",
    result="I_Z",
    written="n*I_t*C_a*C_g",
    valid="n like runs of equal length and route that share the current equally (433.4.1)",
    reference=_ANNEX_B,
    citation="IEC 60364-5-52, 523 and Annex B, B.52.1",
    example=Example({"n": "1", "I_t": "238 A", "C_a": "0.87", "C_g": "0.54"}, "111.8 A"),
    published=(
        "ABB, Electrical installation handbook",
        "Atlas Copco, instruction book, Cable sizing according IEC",
        "Whitfield, Electrician's Guide to the 16th Edition",
    ),
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
    purpose="Tabulated capacity that one run must have to meet both conditions of overload protection.",
    result="I_t_req",
    written="max(I_r, I_2/1.45)/(n*C_a*C_g)",
    valid="as for the capacity as installed",
    reference="IEC 60364-4-43, 433.1; 5-52, 523",
    derivation=_DERIVATION,
    example=Example({"I_r": "32 A", "I_2": "46.4 A", "n": "1", "C_a": "0.94", "C_g": "1"}, "34.0 A"),
    published=(
        "ABB, Electrical installation handbook",
        "Electrical Installation Guide, chapter G",
        "Linsley, Basic Electrical Installation Work",
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
