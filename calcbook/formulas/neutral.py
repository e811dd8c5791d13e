"""The neutral conductor of a circuit: its current with third harmonics, its capacity, its size."""

from __future__ import annotations

from calcbook.formulas.formula import Example, Formula

_ANNEX_E = "IEC 60364-5-52, Annex E"

THIRD_HARMONIC_CURRENT = Formula(
    name="third_harmonic_neutral_current",
    purpose="Third-harmonic current in the neutral of a balanced circuit: those of the three lines add up.",
    result="I_N3",
    written="3*h_3*I_B",
    valid="equal loads on the three lines; h_3 as share of the line current",
    reference=_ANNEX_E,
    derivation="cable-current",
    example=Example({"h_3": "40 %", "I_B": "115 A"}, "138.0 A"),
    published=("ABB, Electrical installation handbook",),
)
NEUTRAL_CURRENT = Formula(
    name="neutral_current",
    purpose="Neutral current of a balanced circuit: its fundamental currents add up to nothing.",
    result="I_N",
    written="I_N3",
    valid="equal loads on the three lines",
    reference=_ANNEX_E,
    citation="IEC 60364-5-52, Annex E, E.52.1",
    example=Example({"I_N3": "138 A"}, "138.0 A"),
)
CURRENT_AT_SETTING = Formula(
    name="neutral_current_at_setting",
    purpose="Third-harmonic neutral current while the lines carry what the overload device lets pass.",
    result="I_Nr",
    written="3*h_3*I_r",
    valid="equal loads on the three lines; h_3 as share of the line current",
    reference="IEC 60364-4-43, 431.2.3",
    derivation="cable-current",
    example=Example({"h_3": "40 %", "I_r": "125 A"}, "150.0 A"),
)
CAPACITY = Formula(
    name="neutral_capacity",
    purpose="Current-carrying capacity of a neutral conductor that equals the line conductors.",
    result="I_ZN",
    written="I_Z",
    valid="neutral of the size and metal of the lines",
    reference=_ANNEX_E,
    citation="IEC 60364-5-52, Annex E, E.52.1",
    example=Example({"I_Z": "168.6 A"}, "168.6 A"),
)
CAPACITY_OF_OTHER_SIZE = Formula(
    name="other_neutral_capacity",
    purpose="Current-carrying capacity of a neutral conductor whose size is not that of the line conductors.",
    result="I_ZN",
    written="I_Z*I_tN/I_t",
    valid="the same factors act on the neutral; I_tN tabulated for its own size",
    reference="IEC 60364-5-52, 524.2.3",
    citation="IEC 60364-5-52, 524.2.3 and Annex B",
    example=Example({"I_Z": "196 A", "I_tN": "126 A", "I_t": "196 A"}, "126.0 A"),
)
LEAST_CAPACITY = Formula(
    name="least_neutral_capacity",
    purpose="Current-carrying capacity of the neutral of a route in parts: that of the most adverse part.",
    result="I_ZN",
    written="min(I_ZNp)",
    valid="every part of the route is stated",
    reference="IEC 60364-5-52, 523.8",
    citation="IEC 60364-5-52, 523.8",
    example=Example({"I_ZNp": "128 A"}, "128.0 A"),
)
EQUAL_SIZE = Formula(
    name="equal_neutral_size",
    purpose="Cross-section of a neutral conductor for which none is stated: that of the line conductors.",
    result="size_N",
    written="size",
    valid="multicore cables with equal cores, or single-core cables of one size",
    reference="IEC 60364-5-52, 524.2.1",
    citation="IEC 60364-5-52, 524.2.1",
    example=Example({"size": "35 mm2"}, "35.0 mm²"),
)
SMALLEST_EQUAL = Formula(
    name="smallest_equal_neutral",
    purpose="Smallest cross-section of a neutral that must equal the line conductors.",
    result="size_N_min",
    written="size",
    valid="single-phase circuits",
    reference="IEC 60364-5-52, 524.2.1",
    citation="IEC 60364-5-52, 524.2.1",
    example=Example({"size": "35 mm2"}, "35.0 mm²"),
)
SMALLEST = Formula(
    name="smallest_neutral",
    purpose="Smallest neutral of a three-phase circuit: above 15 % third harmonic it equals the line.",
    result="size_N_min",
    written="choose(h_3 <= 0.15, min(size, size_Nr), size)",
    valid="equal loads on the three lines; a smaller neutral is protected against overcurrent (431.2)",
    reference="IEC 60364-5-52, 524.2",
    citation="IEC 60364-5-52, 524.2.1 to 524.2.3",
    example=Example({"h_3": "12 %", "size": "35 mm2", "size_Nr": "16 mm2"}, "16.00 mm²"),
)
TEMPERATURE = Formula(
    name="neutral_temperature",
    purpose="Temperature of the neutral conductor where its current exceeds that of the lines.",
    result="theta_B",
    written="theta_a + (theta_max - theta_a)*(I_N/I_ZN)^2",
    valid="I_ZN with all factors; resistance taken at theta_max, which is on the warm side",
    reference="heat balance",
    derivation="cable-current",
    example=Example({"theta_a": "30 degC", "theta_max": "70 degC", "I_N": "138 A", "I_ZN": "168.6 A"}, "56.8 °C"),
)
