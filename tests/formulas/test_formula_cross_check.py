"""The same physics by numerical integration and root finding, with no algebra of ours."""

from __future__ import annotations

import math
from collections.abc import Callable

import pytest
from formula_inputs import result
from scipy import integrate, optimize

from calcbook.formulas import cable_current, three_phase

U_PH, I_PH, PHI = 230.0, 25.0, math.radians(40)
PERIOD = 0.02
OMEGA = 2 * math.pi / PERIOD


def voltage(time: float, phase: int) -> float:
    return math.sqrt(2) * U_PH * math.cos(OMEGA * time - 2 * math.pi * phase / 3)


def current(time: float, phase: int) -> float:
    return math.sqrt(2) * I_PH * math.cos(OMEGA * time - 2 * math.pi * phase / 3 - PHI)


def mean(function: Callable[[float], float]) -> float:
    area, _ = integrate.quad(function, 0, PERIOD, epsabs=0, epsrel=1e-12)
    return float(area) / PERIOD


def test_rms_of_a_peak_is_the_phase_voltage() -> None:
    assert math.sqrt(mean(lambda t: voltage(t, 0) ** 2)) == pytest.approx(U_PH, rel=1e-10)
    greatest = optimize.minimize_scalar(lambda t: -voltage(t, 0), bounds=(-0.005, 0.005), method="bounded").fun
    assert result(three_phase.PEAK_VOLTAGE, U_ph=f"{U_PH} V") == pytest.approx(-greatest, rel=1e-9)


def test_line_voltage_of_star_is_the_rms_of_the_difference() -> None:
    rms = math.sqrt(mean(lambda t: (voltage(t, 0) - voltage(t, 1)) ** 2))
    assert result(three_phase.STAR_LINE_VOLTAGE, U_ph=f"{U_PH} V") == pytest.approx(rms, rel=1e-10)


def test_line_current_of_delta_is_the_rms_of_the_difference() -> None:
    rms = math.sqrt(mean(lambda t: (current(t, 0) - current(t, 2)) ** 2))
    assert result(three_phase.DELTA_LINE_CURRENT, I_ph=f"{I_PH} A") == pytest.approx(rms, rel=1e-10)


def test_active_power_is_the_mean_of_the_instantaneous_power() -> None:
    average = mean(lambda t: sum(voltage(t, k) * current(t, k) for k in range(3)))
    line = f"{math.sqrt(3) * U_PH:.15g} V"
    power = result(three_phase.ACTIVE_POWER, U=line, I=f"{I_PH} A", cos_phi=f"{math.cos(PHI):.15g}")
    assert 1e3 * power == pytest.approx(average, rel=1e-10)


def test_reactive_power_is_the_mean_with_the_voltage_a_quarter_period_later() -> None:
    average = mean(lambda t: sum(voltage(t - PERIOD / 4, k) * current(t, k) for k in range(3)))
    line = f"{math.sqrt(3) * U_PH:.15g} V"
    power = result(three_phase.REACTIVE_POWER_OF_LINE, U=line, I=f"{I_PH} A", phi=f"{PHI:.15g} rad")
    assert 1e3 * power == pytest.approx(average, rel=1e-10)


@pytest.mark.parametrize("ambient", [10, 25, 40, 55])
def test_ambient_factor_solves_the_heat_balance(ambient: int) -> None:
    """Heat c I^2 given off at a rise over ambient; c from a cable that reaches 70 degC at 100 A and 30 degC."""
    constant = (70 - 30) / 100**2
    carried = optimize.brentq(lambda i: ambient + constant * i**2 - 70, 0, 1000, xtol=1e-12)
    factor = result(cable_current.AMBIENT_FACTOR, theta_max="70 degC", theta_a=f"{ambient} degC", theta_ref="30 degC")
    assert 100 * factor == pytest.approx(carried, rel=1e-12)


def test_conductor_temperature_solves_the_heat_balance() -> None:
    found = optimize.brentq(lambda theta: (theta - 35) / (90 - 35) - (63 / 97) ** 2, 35, 90, xtol=1e-12)
    ours = result(cable_current.CONDUCTOR_TEMPERATURE, theta_a="35 degC", theta_max="90 degC", I_B="63 A", I_Z="97 A")
    assert ours == pytest.approx(found, rel=1e-12)
