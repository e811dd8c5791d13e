"""What every engineer expects of a voltage drop, by the formulas and by the tables they rest on."""

from __future__ import annotations

import itertools
import math

import pytest
from formula_inputs import result
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy import special

from calcbook.errors import EvaluationFault
from calcbook.formulas import conductor_impedance, feeder_drop, voltage_drop
from calcbook.reference.table import tables

FEW = settings(max_examples=60, deadline=None)
FACTORS = st.floats(0.1, 1)
CONNECTIONS = pytest.mark.parametrize("connection", ["three-phase", "line to neutral", "two-line"])
_REACTANCES = tables()["cei-unel-35023-reactance"].rows
_RESISTANCES = {
    (row["conductor"], float(row["size [mm2]"])): float(row["value"])
    for row in tables()["iec-60228-resistance"].rows
    if row["class"] == "2"
}


def angle(factor: float) -> dict[str, str]:
    return {"cos_phi": f"{factor:.15g}", "sin_phi": f"{math.sqrt(1 - factor**2):.15g}"}


def exact(connection: str, current: float, r: float, x: float, factor: float) -> float:
    """The exact drop at 400 V or 230 V from numbers in ampere and ohm."""
    source = {"U_sN": "230 V"} if connection == "line to neutral" else {"U_s": "400 V"}
    texts = {"I_B": f"{current:.15g} A", "R": f"{r:.15g} ohm", "X": f"{x:.15g} ohm", **angle(factor)}
    try:
        at_load = result(voltage_drop.LOAD_VOLTAGE_OF[connection], **source, **texts)
    except EvaluationFault:  # more than the source can drive through the cable
        return math.inf
    return (230 if "U_sN" in source else 400) - at_load


CABLES = st.tuples(st.floats(1e-4, 0.3), st.floats(0, 0.1))


@CONNECTIONS
@FEW
@given(current=st.floats(1, 500), cable=CABLES, factor=FACTORS, growth=st.floats(1, 3))
def test_more_current_or_length_never_reduces_the_drop(
    connection: str, current: float, cable: tuple[float, float], factor: float, growth: float
) -> None:
    r, x = cable
    drop = exact(connection, current, r, x, factor)
    assert exact(connection, current * growth, r, x, factor) >= drop - 1e-9
    assert exact(connection, current, r * growth, x * growth, factor) >= drop - 1e-9


@CONNECTIONS
@FEW
@given(current=st.floats(1, 100), r=st.floats(1e-3, 0.1), x=st.floats(0, 0.1), factor=FACTORS)
def test_the_first_order_drop_is_never_above_the_exact_one(
    connection: str, current: float, r: float, x: float, factor: float
) -> None:
    texts = {"I_B": f"{current:.15g} A", "R": f"{r:.15g} ohm", "X": f"{x:.15g} ohm", **angle(factor)}
    first = result(voltage_drop.FIRST_ORDER_OF[connection], **texts)
    drop = exact(connection, current, r, x, factor)
    assume(drop < 100)
    assert first <= drop + 1e-9
    assert drop - first <= (2 * current * abs(complex(r, x))) ** 2 / 230


@FEW
@given(r=st.floats(1e-3, 1), x=st.floats(0, 1), factor=FACTORS)
def test_no_power_factor_makes_a_greater_drop_than_the_adverse_one(r: float, x: float, factor: float) -> None:
    texts = {"R": f"{r:.15g} ohm", "X": f"{x:.15g} ohm"}
    adverse = result(voltage_drop.ADVERSE_POWER_FACTOR, **texts)
    greatest = result(voltage_drop.FIRST_ORDER_DROP, I_B="10 A", **texts, **angle(adverse))
    assert result(voltage_drop.FIRST_ORDER_DROP, I_B="10 A", **texts, **angle(factor)) <= greatest * (1 + 1e-9)
    assert greatest == pytest.approx(math.sqrt(3) * 10 * math.hypot(r, x), rel=1e-6)


@pytest.mark.parametrize("construction", sorted({row["construction"] for row in _REACTANCES}))
@pytest.mark.parametrize("conductor", ["Cu", "Al"])
@pytest.mark.parametrize("factor", [0.1, 0.5, 0.8, 0.95, 1.0])
def test_a_larger_size_never_raises_the_drop(construction: str, conductor: str, factor: float) -> None:
    of_size = {
        float(row["size [mm2]"]): float(row["value"]) for row in _REACTANCES if row["construction"] == construction
    }
    sizes = sorted(size for size in of_size if (conductor, size) in _RESISTANCES)
    assert len(sizes) >= 11
    drops = [exact("three-phase", 20, _RESISTANCES[conductor, size] / 10, of_size[size] / 10, factor) for size in sizes]
    for less, more in itertools.pairwise(drops):
        assert more < less


def test_a_spaced_cable_has_more_reactance_than_a_touching_one_than_a_multicore_one() -> None:
    by_key = {(row["construction"], row["size [mm2]"]): float(row["value"]) for row in _REACTANCES}
    for size in {size for _, size in by_key}:
        ordered = ("multicore", "single_trefoil", "single_flat", "single_spaced")
        values = [by_key[construction, size] for construction in ordered]
        assert values == sorted(values)
        assert len(set(values)) == 4


@FEW
@given(st.floats(0.02, 40), st.floats(16, 60), st.floats(3, 40), st.floats(0.1, 5))
def test_an_alternating_current_meets_no_less_resistance(
    resistance: float, frequency: float, diameter: float, thickness: float
) -> None:
    argument = result(
        conductor_impedance.SKIN_ARGUMENT,
        f=f"{frequency:.15g} Hz", k_mu="0.1 uH/m", k_sk="1", R_theta=f"{resistance:.15g} ohm/km",
    )  # fmt: skip
    assume(argument <= 2.8)
    skin = result(conductor_impedance.SKIN_EFFECT, x_s=f"{argument:.15g}")
    shape = {"d_c": f"{diameter:.15g} mm", "s_c": f"{diameter + 2 * thickness:.15g} mm"}
    for formula in (conductor_impedance.PROXIMITY_OF_THREE, conductor_impedance.PROXIMITY_OF_TWO):
        proximity = result(formula, y_s=f"{skin:.15g}", **shape)
        assert 0 < proximity < 6 * skin


def test_the_skin_effect_is_that_of_bessel_functions() -> None:
    """The real part of a round wire's internal impedance, from the field equation and not from the standard's fit."""
    for argument in (0.3, 0.8, 1.2, 2.0, 2.8):
        radius = argument * complex(1, -1) / math.sqrt(2)  # over the wave number: radius over depth of penetration
        ratio = (radius / 2 * special.jv(0, radius) / special.jv(1, radius)).real
        ours = result(conductor_impedance.SKIN_EFFECT, x_s=f"{argument}")
        assert ours == pytest.approx(ratio - 1, abs=0.01)


def test_a_line_without_neutral_current_is_the_balanced_feeder() -> None:
    line = {"R": "0.02 ohm", "X": "0.01 ohm", "I_P": "100 A", "I_Q": "50 A"}
    idle = {"R_N": "0.04 ohm", "X_N": "0.02 ohm", "I_Np": "0 A", "I_Nq": "0 A"}
    for with_neutral, without, part in (
        (feeder_drop.FEEDER_VOLTAGE_RE, feeder_drop.BALANCED_VOLTAGE_RE, {"U_s_re": "231 V"}),
        (feeder_drop.FEEDER_VOLTAGE_IM, feeder_drop.BALANCED_VOLTAGE_IM, {"U_s_im": "0 V"}),
    ):
        assert result(with_neutral, **part, **line, **idle) == result(without, **part, **line)


@pytest.mark.parametrize(("length", "supplement"), [(40, 0), (100, 0), (160, 0.3), (200, 0.5), (900, 0.5)])
def test_the_supplement_begins_at_its_length_and_ends_at_its_greatest_value(length: int, supplement: float) -> None:
    found = result(
        voltage_drop.LENGTH_SUPPLEMENT, k_l="0.005 %/m", l=f"{length} m", l_0="100 m", du_s_max="0.5 %"
    )  # fmt: skip
    assert found == pytest.approx(supplement)
