"""Common practice, no source: what every engineer knows of a balanced three-phase supply holds for our derivation."""

from __future__ import annotations

import math

import pytest
from scipy import integrate

from calcbook.formulas.register import DERIVATIONS
from calcbook.records.written.evaluate import evaluate
from calcbook.records.written.tree import parse

FREQUENCY = 50.0
PERIOD = 1 / FREQUENCY
STATE = {"U_ph": 230.0, "I_ph": 10.0, "omega": 2 * math.pi * FREQUENCY, "phi": math.radians(30)}
FORMS = {stage.left: parse(stage.right) for stage in DERIVATIONS["three-phase-power"].stages if stage.is_premise}


def at(name: str, time: float) -> float:
    return evaluate(FORMS[name], {**STATE, "t": time})


def phase_of(name: str) -> float:
    """Angle of the fundamental in degrees, by Fourier integrals over one period."""
    omega = STATE["omega"]
    real, _ = integrate.quad(lambda t: at(name, t) * math.cos(omega * t), 0, PERIOD)
    imaginary, _ = integrate.quad(lambda t: at(name, t) * math.sin(omega * t), 0, PERIOD)
    return math.degrees(math.atan2(imaginary, real)) % 360


def rms_of(name: str) -> float:
    square, _ = integrate.quad(lambda t: at(name, t) ** 2, 0, PERIOD)
    return math.sqrt(square / PERIOD)


def test_the_phases_are_120_degrees_apart() -> None:
    angles = [phase_of(f"u_{k}") for k in (1, 2, 3)]
    steps = [(angles[1] - angles[0]) % 360, (angles[2] - angles[1]) % 360, (angles[0] - angles[2]) % 360]
    assert steps == pytest.approx([120, 120, 120], abs=1e-6)


def test_each_current_lags_its_voltage_by_the_phase_angle() -> None:
    for k in (1, 2, 3):
        lag = (phase_of(f"i_{k}") - phase_of(f"u_{k}")) % 360
        assert lag == pytest.approx(30, abs=1e-6)


def test_the_neutral_current_is_zero_in_balance() -> None:
    for step in range(40):
        time = step * PERIOD / 40
        assert at("i_1", time) + at("i_2", time) + at("i_3", time) == pytest.approx(0, abs=1e-12 * 10)


def test_230_v_rms_has_a_peak_of_325_v_and_400_v_between_lines() -> None:
    assert rms_of("u_1") == pytest.approx(230, rel=1e-9)
    assert max(at("u_1", step * PERIOD / 1000) for step in range(1000)) == pytest.approx(325, abs=0.5)
    square, _ = integrate.quad(lambda t: (at("u_1", t) - at("u_2", t)) ** 2, 0, PERIOD)
    # 400 V is the rounded nominal value that belongs to 230 V
    assert math.sqrt(square / PERIOD) == pytest.approx(400, abs=1.7)
