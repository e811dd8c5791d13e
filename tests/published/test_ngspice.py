"""Our formulas against a circuit simulator that knows nothing of them: star and delta loads solved by ngspice."""

from __future__ import annotations

import math
import os
import shutil
import subprocess
from pathlib import Path

import pytest

from calcbook.formulas import three_phase
from calcbook.formulas.formula import Formula
from calcbook.records.notation import named
from calcbook.records.quantity import Quantity

if not shutil.which("ngspice"):
    if os.environ.get("CI") == "true":
        pytest.fail("ngspice is not installed; CI must run these checks", pytrace=False)
    pytest.skip("ngspice is not installed", allow_module_level=True)

VOLTAGE, FREQUENCY, RESISTANCE, INDUCTANCE = 400.0, 50.0, 8.0, 0.0191
OMEGA = 2 * math.pi * FREQUENCY
POWER_FACTOR = RESISTANCE / math.hypot(RESISTANCE, OMEGA * INDUCTANCE)
PHASE_VOLTAGE = VOLTAGE / math.sqrt(3)

# A.C. analysis is one linear solution in double precision, printed with 12 digits.
EXACT = 1e-9
# Transient analysis integrates in steps of 10 us; its error in a 50 Hz sine is of the order (omega*step)^2 / 12 = 1e-6.
STEP, STEPPED = 1e-5, 1e-5


def _branches(connection: str) -> str:
    """Three R-L branches, each behind an ammeter of its own; the star point is joined to the neutral by a fourth."""
    ends = {"star": ("1 n", "2 n", "3 n"), "delta": ("1 2", "2 3", "3 1")}[connection]
    lines = ["VN n 0 0"] if connection == "star" else []
    for k, pair in enumerate(ends, start=1):
        start, end = pair.split()
        lines += [f"VP{k} b{start} p{k} 0", f"R{k} p{k} q{k} {RESISTANCE}"]
        lines += [f"L{k} q{k} {'n' if end == 'n' else 'b' + end} {INDUCTANCE}"]
    return "\n".join(lines)


def _sources(kind: str) -> str:
    """Phase voltages behind ammeters of the lines; nodes b1 to b3 are the load's terminals."""
    lines = []
    for k in (1, 2, 3):
        angle = -120 * (k - 1)
        peak = math.sqrt(2) * PHASE_VOLTAGE
        wave = f"AC {PHASE_VOLTAGE!r} {angle}" if kind == "ac" else f"SIN(0 {peak!r} {FREQUENCY} 0 0 {angle + 90})"
        lines += [f"V{k} a{k} 0 {wave}", f"VA{k} a{k} b{k} 0"]
    return "\n".join(lines)


def _run(folder: Path, connection: str, kind: str, control: str) -> str:
    netlist = folder / f"{connection}.cir"
    text = f"{connection} load\n{_sources(kind)}\n{_branches(connection)}\n.options reltol=1e-7 abstol=1e-9\n"
    netlist.write_text(f"{text}.control\nset numdgt=12\n{control}\nquit 0\n.endc\n.end\n", "utf-8")
    done = subprocess.run(
        ["ngspice", "-b", netlist.name], cwd=folder, capture_output=True, text=True, timeout=60, check=False
    )
    assert done.returncode == 0, done.stdout + done.stderr
    return done.stdout


def phasors(folder: Path, connection: str) -> dict[str, complex]:
    """Currents of lines, phases and neutral and voltages of the terminals, rms, by name of ngspice."""
    names = ["i(va1)", "i(va2)", "i(va3)", "i(vp1)", "v(b1)", "v(b2)", "v(b3)"]
    names += ["i(vn)"] if connection == "star" else []
    prints = "\n".join(f"print {name}" for name in names)
    found = {}
    for line in _run(folder, connection, "ac", f"ac lin 1 {FREQUENCY} {FREQUENCY}\n{prints}").splitlines():
        name, _, value = line.partition(" = ")
        if name in names:
            real, imaginary = value.split(",")
            found[name] = complex(float(real), float(imaginary))
    assert set(found) == set(names)
    return found


def waves(folder: Path) -> list[dict[str, float]]:
    """The last two periods of a star load, once the direct component of switching on has died away."""
    names = ["v(b1)", "v(b2)", "v(b3)", "i(va1)", "i(va2)", "i(va3)", "i(vn)"]
    times = f"{STEP} {0.14} {0.1} {STEP}"
    _run(folder, "star", "tran", f"tran {times} uic\nlinearize\nwrdata waves {' '.join(names)}")
    rows = [line.split() for line in (folder / "waves").read_text("utf-8").splitlines()]
    return [dict(zip(names, map(float, row[1::2]), strict=True)) for row in rows]


def ours(formula: Formula, **numbers: float) -> float:
    """A formula's result in the unit of the notation list, from numbers in the units of the notation list."""
    inputs = {name: Quantity(number, named(name).unit, named(name).kind) for name, number in numbers.items()}
    return formula.evaluate(inputs)[0].number


def power(found: dict[str, complex]) -> complex:
    """Active and reactive power in W and var that the three lines carry."""
    return sum((found[f"v(b{k})"] * found[f"i(va{k})"].conjugate() for k in (1, 2, 3)), 0j)


@pytest.mark.parametrize("connection", ["star", "delta"])
def test_power_of_star_and_delta_follows_from_line_quantities(tmp_path: Path, connection: str) -> None:
    found = phasors(tmp_path, connection)
    current = abs(found["i(va1)"])
    angle = math.degrees(math.acos(POWER_FACTOR))
    active = ours(three_phase.ACTIVE_POWER, U=VOLTAGE, I=current, cos_phi=POWER_FACTOR)
    reactive = ours(three_phase.REACTIVE_POWER_OF_LINE, U=VOLTAGE, I=current, phi=angle)
    apparent = ours(three_phase.APPARENT_POWER_OF_LINE, U=VOLTAGE, I=current)
    simulated = power(found)
    assert (active, reactive, apparent) == pytest.approx(
        (simulated.real / 1e3, simulated.imag / 1e3, abs(simulated) / 1e3), rel=EXACT
    )


@pytest.mark.parametrize("connection", ["star", "delta"])
def test_line_current_follows_from_power(tmp_path: Path, connection: str) -> None:
    found = phasors(tmp_path, connection)
    active = power(found).real / 1e3
    current = ours(three_phase.CURRENT_OF_ACTIVE_POWER, P_1=active, U_r=VOLTAGE, cos_phi=POWER_FACTOR)
    for k in (1, 2, 3):
        assert current == pytest.approx(abs(found[f"i(va{k})"]), rel=EXACT)


def test_line_current_of_delta_is_root_three_times_its_phase_current(tmp_path: Path) -> None:
    found = phasors(tmp_path, "delta")
    line = ours(three_phase.DELTA_LINE_CURRENT, I_ph=abs(found["i(vp1)"]))
    assert line == pytest.approx(abs(found["i(va1)"]), rel=EXACT)
    phase = ours(
        three_phase.TWO_LINE_CURRENT_OF_ACTIVE_POWER,
        P_1=power(found).real / 3e3, U_r=VOLTAGE, cos_phi=POWER_FACTOR,
    )  # fmt: skip
    assert phase == pytest.approx(abs(found["i(vp1)"]), rel=EXACT)


def test_line_voltage_of_star_is_root_three_times_its_phase_voltage(tmp_path: Path) -> None:
    found = phasors(tmp_path, "star")
    line = ours(three_phase.STAR_LINE_VOLTAGE, U_ph=abs(found["v(b1)"]))
    assert line == pytest.approx(abs(found["v(b1)"] - found["v(b2)"]), rel=EXACT)
    phase = ours(
        three_phase.LINE_TO_NEUTRAL_CURRENT_OF_ACTIVE_POWER,
        P_1=power(found).real / 3e3, U_rN=abs(found["v(b1)"]), cos_phi=POWER_FACTOR,
    )  # fmt: skip
    assert phase == pytest.approx(abs(found["i(vp1)"]), rel=EXACT)


def test_delta_takes_three_times_the_line_current_of_star(tmp_path: Path) -> None:
    star, delta = phasors(tmp_path, "star"), phasors(tmp_path, "delta")
    assert abs(delta["i(va1)"]) == pytest.approx(3 * abs(star["i(va1)"]), rel=EXACT)


def test_no_neutral_current_in_balance(tmp_path: Path) -> None:
    found = phasors(tmp_path, "star")
    assert abs(found["i(vn)"]) < EXACT * abs(found["i(va1)"])


def test_instantaneous_power_is_constant_and_voltages_sum_to_zero(tmp_path: Path) -> None:
    samples = waves(tmp_path)
    assert len(samples) >= 0.04 / STEP
    powers = [sum(sample[f"v(b{k})"] * sample[f"i(va{k})"] for k in (1, 2, 3)) for sample in samples]
    current = VOLTAGE / (math.sqrt(3) * math.hypot(RESISTANCE, OMEGA * INDUCTANCE))
    expected = 1e3 * ours(three_phase.ACTIVE_POWER, U=VOLTAGE, I=current, cos_phi=POWER_FACTOR)
    assert max(powers) == pytest.approx(expected, rel=STEPPED)
    assert min(powers) == pytest.approx(expected, rel=STEPPED)
    single = [sample["v(b1)"] * sample["i(va1)"] for sample in samples]
    assert max(single) - min(single) > 0.5 * expected  # one phase alone pulsates
    for sample in samples:
        assert abs(sum(sample[f"v(b{k})"] for k in (1, 2, 3))) < STEPPED * VOLTAGE
        assert abs(sample["i(vn)"]) < STEPPED * current


def test_the_peak_of_a_phase_voltage(tmp_path: Path) -> None:
    peak = max(sample["v(b1)"] for sample in waves(tmp_path))
    assert peak == pytest.approx(ours(three_phase.PEAK_VOLTAGE, U_ph=PHASE_VOLTAGE), rel=STEPPED)
    assert ours(three_phase.PEAK_VOLTAGE, U_ph=230) == pytest.approx(325, abs=0.5)  # common practice: 325 V
