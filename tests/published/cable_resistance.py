"""The a.c. resistance of a multicore cable with three loaded cores by tables and formulas, as the template has it."""

from __future__ import annotations

from collections.abc import Mapping

from calcbook.formulas import conductor_impedance
from calcbook.formulas.formula import Formula
from calcbook.records.quantity import Quantity, read_quantity
from calcbook.reference import choose
from calcbook.reference.table import Key, table


def ac_resistance(texts: Mapping[str, str]) -> Quantity:
    """From conductor, size, insulation, theta and f as texts."""
    metal, covering, size = texts["conductor"], texts["insulation"], read_quantity(texts["size"], "area")

    def look_up(key: str, **arguments: Key) -> Quantity:
        return table(key).look_up(arguments).value

    def of(formula: Formula, **bound: Quantity) -> Quantity:
        return formula.evaluate(bound)[0]

    r_20 = look_up(choose.RESISTANCE, conductor=metal, size=size, **{"class": "2"})
    warm = of(
        conductor_impedance.RESISTANCE_AT_TEMPERATURE,
        R_20=r_20,
        alpha_20=look_up(choose.TEMPERATURE_COEFFICIENT, conductor=metal),
        theta=read_quantity(texts["theta"], "temperature"),
        theta_20=look_up(choose.RESISTANCE_TEMPERATURE, conductor=metal),
    )
    argument = of(
        conductor_impedance.SKIN_ARGUMENT,
        f=read_quantity(texts["f"], "frequency"),
        k_mu=look_up(choose.SKIN_CONSTANT, medium="non-magnetic"),
        k_sk=look_up(choose.SKIN_FACTOR, conductor=metal),
        R_theta=warm,
    )
    skin = of(conductor_impedance.SKIN_EFFECT, x_s=argument)
    diameter = look_up(choose.CONDUCTOR_DIAMETER, conductor=metal, size=size)
    thickness = look_up(choose.INSULATION_THICKNESS, insulation=covering, size=size)
    distance = of(conductor_impedance.DISTANCE_OF_TOUCHING_CORES, d_c=diameter, t_i=thickness)
    proximity = of(conductor_impedance.PROXIMITY_OF_THREE, y_s=skin, d_c=diameter, s_c=distance)
    return of(conductor_impedance.AC_RESISTANCE, R_theta=warm, y_s=skin, y_p=proximity)
