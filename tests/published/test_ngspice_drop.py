"""Voltages at the end of circuits and feeders, solved by ngspice from their resistors, inductors and sources."""

from __future__ import annotations

import cmath
import math
import os
import shutil
import subprocess
from pathlib import Path

import pytest

from calcbook.formulas import feeder_drop, three_phase, voltage_drop
from calcbook.formulas.formula import Formula
from calcbook.records.notation import named
from calcbook.records.quantity import Quantity

if not shutil.which("ngspice"):
    if os.environ.get("CI") == "true":
        pytest.fail("ngspice is not installed; CI must run these checks", pytrace=False)
    pytest.skip("ngspice is not installed", allow_module_level=True)

FREQUENCY = 50.0
OMEGA = 2 * math.pi * FREQUENCY
EXACT = 1e-9  # one linear solution in double precision, printed with 12 digits
R, X, CURRENT, POWER_FACTOR = 0.23, 0.031, 63.0, 0.82
AT_LOAD = {"I_B": CURRENT, "R": R, "X": X, "cos_phi": POWER_FACTOR, "sin_phi": math.sqrt(1 - POWER_FACTOR**2)}


def ours(formula: Formula, **numbers: float) -> float:
    """A formula's result in the unit of the notation list, from numbers in the units of the notation list."""
    inputs = {name: Quantity(number, named(name).unit, named(name).kind) for name, number in numbers.items()}
    return formula.evaluate(inputs)[0].number


def solved(folder: Path, netlist: str, *names: str) -> list[complex]:
    """The rms phasors of the names of ngspice, in order."""
    prints = "\n".join(f"print {name}" for name in names)
    control = f".control\nset numdgt=12\nac lin 1 {FREQUENCY} {FREQUENCY}\n{prints}\nquit 0\n.endc\n.end\n"
    (folder / "drop.cir").write_text(f"drop\n{netlist}\n{control}", "utf-8")
    done = subprocess.run(
        ["ngspice", "-b", "drop.cir"], cwd=folder, capture_output=True, text=True, timeout=60, check=False
    )
    assert done.returncode == 0, done.stdout + done.stderr
    found = dict(line.split(" = ") for line in done.stdout.splitlines() if line.partition(" = ")[0] in names)
    return [complex(*(float(part) for part in found[name].split(","))) for name in names]


def branch(name: str, start: str, end: str, resistance: float, reactance: float) -> str:
    """A resistor and an inductor in series."""
    middle = f"m{name}"
    return f"R{name} {start} {middle} {resistance!r}\nL{name} {middle} {end} {reactance / OMEGA!r}"


def load(voltage: float) -> complex:
    """The impedance that takes the design current at its power factor from a voltage across it."""
    return cmath.rect(voltage / CURRENT, math.acos(POWER_FACTOR))


def test_a_three_phase_load_at_the_end_of_its_cable(tmp_path: Path) -> None:
    at_load = ours(voltage_drop.LOAD_VOLTAGE, U_s=400, **AT_LOAD)
    impedance = load(at_load / math.sqrt(3))
    lines = []
    for k in (1, 2, 3):
        lines += [f"V{k} s{k} 0 AC {400 / math.sqrt(3)!r} {-120 * (k - 1)}", f"VA{k} s{k} a{k} 0"]
        lines += [
            branch(f"c{k}", f"a{k}", f"b{k}", R, X),
            branch(f"z{k}", f"b{k}", "n", impedance.real, impedance.imag),
        ]
    b1, b2, current = solved(tmp_path, "\n".join([*lines, "VN n 0 0"]), "v(b1)", "v(b2)", "i(va1)")
    assert abs(current) == pytest.approx(CURRENT, rel=EXACT)
    assert math.cos(cmath.phase(b1) - cmath.phase(current)) == pytest.approx(POWER_FACTOR, rel=EXACT)
    assert abs(b1 - b2) == pytest.approx(at_load, rel=EXACT)


@pytest.mark.parametrize(("connection", "source"), [("line to neutral", {"U_sN": 230.0}), ("two-line", {"U_s": 400.0})])
def test_a_load_of_two_conductors(tmp_path: Path, connection: str, source: dict[str, float]) -> None:
    assert set(three_phase.CONNECTIONS.values()) == set(voltage_drop.LOAD_VOLTAGE_OF)
    (voltage,) = source.values()
    at_load = ours(voltage_drop.LOAD_VOLTAGE_OF[connection], **source, **AT_LOAD)
    impedance = load(at_load)
    netlist = [f"V1 s 0 AC {voltage!r} 0", "VA s a 0", branch("go", "a", "b", R, X), branch("back", "n", "0", R, X)]
    netlist += [branch("z", "b", "n", impedance.real, impedance.imag)]
    b, n, current = solved(tmp_path, "\n".join(netlist), "v(b)", "v(n)", "i(va)")
    assert abs(current) == pytest.approx(CURRENT, rel=EXACT)
    assert abs(b - n) == pytest.approx(at_load, rel=EXACT)


@pytest.mark.parametrize("line", [0, 1, 2])
def test_an_unbalanced_feeder_with_its_neutral(tmp_path: Path, line: int) -> None:
    """Currents fixed as phasors, each counted against its own line; the reactive part is positive when lagging."""
    parts = [(80.0, 40.0), (35.0, 5.0), (10.0, -3.0)]
    r_n, x_n = 0.09, 0.02
    axes = [cmath.rect(1, -2 * math.pi * k / 3) for k in range(3)]
    currents = [complex(p, -q) * axis for (p, q), axis in zip(parts, axes, strict=True)]
    netlist = [branch("n", "n", "0", r_n, x_n)]
    for k, (axis, current) in enumerate(zip(axes, currents, strict=True)):
        netlist += [f"V{k} s{k} 0 AC 231.0 {math.degrees(cmath.phase(axis))!r}"]
        netlist += [branch(f"c{k}", f"s{k}", f"b{k}", 0.05, X)]
        netlist += [f"I{k} b{k} n AC {abs(current)!r} {math.degrees(cmath.phase(current))!r}"]
    b, n = solved(tmp_path, "\n".join(netlist), f"v(b{line})", "v(n)")
    neutral = sum(currents) / axes[line]
    active, reactive = parts[line]
    given = {"R": 0.05, "X": X, "I_P": active, "I_Q": reactive}
    given |= {"R_N": r_n, "X_N": x_n, "I_Np": neutral.real, "I_Nq": -neutral.imag}
    real = ours(feeder_drop.FEEDER_VOLTAGE_RE, U_s_re=231.0, **given)
    imaginary = ours(feeder_drop.FEEDER_VOLTAGE_IM, U_s_im=0.0, **given)
    simulated = (b - n) / axes[line]
    assert complex(real, imaginary) == pytest.approx(simulated, rel=EXACT)
    size = ours(feeder_drop.FEEDER_VOLTAGE, U_re=real, U_im=imaginary)
    assert size == pytest.approx(abs(simulated), rel=EXACT)
    drop = ours(feeder_drop.FEEDER_DROP, U_s_re=231.0, U_s_im=0.0, U_k=size)
    first = ours(feeder_drop.FEEDER_DROP_FIRST_ORDER, U_s_re=231.0, U_s_im=0.0, **given)
    assert drop == pytest.approx(231.0 - abs(simulated), rel=1e-7)
    assert first - drop == pytest.approx(imaginary**2 / (2 * 231.0), rel=0.06)  # the next term of the series
