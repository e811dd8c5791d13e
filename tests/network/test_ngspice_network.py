"""The example's own four-wire network solved by ngspice, with the currents of the sheets as current sources."""

from __future__ import annotations

import cmath
import math
import os
import shutil
import subprocess
from collections.abc import Iterator, Mapping
from pathlib import Path

import pytest
from network_runs import EXAMPLE, Lines, current_of, phasor, run_network, si, voltage_of

from calcbook.inputs.project import read_project
from calcbook.plan.network import Network, is_feeder, read_network
from calcbook.records.project import Circuit

if not shutil.which("ngspice"):
    if os.environ.get("CI") == "true":
        pytest.fail("ngspice is not installed; CI must run these checks", pytrace=False)
    pytest.skip("ngspice is not installed", allow_module_level=True)

LINES = ("L1", "L2", "L3")
NOMINAL, FREQUENCY = 400.0, 50.0
ALLOWED = 1e-4 * NOMINAL  # what is asked for: 0.01 % of the nominal voltage
EXACT = 1e-9 * NOMINAL  # what one linear solution in double precision gives, printed with 12 digits
Done = Mapping[str, Lines]


@pytest.fixture(scope="module")
def network() -> Network:
    return read_network(read_project(EXAMPLE))


@pytest.fixture(scope="module")
def done() -> Done:
    return run_network(read_project(EXAMPLE))


def node(board: str, line: str) -> str:
    return f"{board}_{line}".lower()


def source(origin: str) -> Iterator[str]:
    """Three phase voltages at the origin, whose neutral is the reference."""
    yield f"VN {node(origin, 'N')} 0 0"
    for number, line in enumerate(LINES):
        yield f"V{line} {node(origin, line)} {node(origin, 'N')} AC {NOMINAL / math.sqrt(3)!r} {-120 * number}"


def cable(feeder: Circuit, sheet: Lines) -> Iterator[str]:
    """Resistor and inductor of each line and of the neutral."""
    above, below = feeder.data["from"].text, feeder.data["to"].text
    for line in (*LINES, "N"):
        resistance, reactance = (
            si(sheet, f"{name}_N" if line == "N" and f"{name}_N" in sheet else name) for name in ("R", "X")
        )
        name = f"{feeder.tag}_{line}"
        yield f"R{name} {node(above, line)} m{name} {resistance!r}"
        yield f"L{name} m{name} {node(below, line)} {reactance / (2 * math.pi * FREQUENCY)!r}"


def drawn(name: str, start: str, end: str, current: complex) -> str:
    """A current source that draws a phasor from one node and returns it at another."""
    return f"I{name} {start} {end} AC {abs(current)!r} {math.degrees(cmath.phase(current))!r}"


def currents_of(circuit: Circuit, sheet: Lines) -> dict[str, complex]:
    """The current that a final circuit takes from each line, as its board's sheet states it."""
    turned = {}
    for line in (line for line in LINES if line in circuit.data["phases"].text):
        key = f"{circuit.tag}:{line}" if f"I_p[{circuit.tag}:{line}]" in sheet else circuit.tag
        own = {f"I_p[{line}]": sheet[f"I_p[{key}]"], f"I_q[{line}]": sheet[f"I_q[{key}]"]}
        turned[line] = phasor(own, line, "I_p", "I_q", -1)
    return turned


def loads(board: str, network: Network, done: Done) -> Iterator[str]:
    """The circuits of a board, and what demand and diversity leave out, put in at the busbar."""
    sheet = done[f"{board}~demand"]
    left_out = {line: current_of(sheet, line) for line in LINES}
    for circuit in network.ways[board]:
        if is_feeder(circuit):
            below = done[f"{circuit.data['to'].text}~demand"]
            taken = {line: current_of(below, line) for line in LINES}
        else:
            taken = currents_of(circuit, sheet)
            if len(taken) == 2:
                (first, current), (second, back) = taken.items()
                assert back == pytest.approx(-current, abs=1e-9)
                yield drawn(circuit.tag, node(board, first), node(board, second), current)
            else:
                for line, current in taken.items():
                    yield drawn(f"{circuit.tag}_{line}", node(board, line), node(board, "N"), current)
        for line, current in taken.items():
            left_out[line] -= current
    for line, current in left_out.items():
        yield drawn(f"{board}_{line}", node(board, line), node(board, "N"), current)


def solved(folder: Path, netlist: list[str], boards: tuple[str, ...]) -> dict[tuple[str, str], complex]:
    """The voltage of every line of every board to its own neutral."""
    names = {(board, line): f"v({node(board, line)})" for board in boards for line in (*LINES, "N")}
    prints = "\n".join(f"print {name}" for name in names.values())
    control = f".control\nset numdgt=14\nac lin 1 {FREQUENCY} {FREQUENCY}\n{prints}\nquit 0\n.endc\n.end\n"
    (folder / "network.cir").write_text("network\n" + "\n".join(netlist) + f"\n{control}", "utf-8")
    command = ["ngspice", "-b", "network.cir"]
    ran = subprocess.run(command, cwd=folder, capture_output=True, text=True, timeout=60, check=False)
    assert ran.returncode == 0, ran.stdout + ran.stderr
    found = dict(line.split(" = ") for line in ran.stdout.splitlines() if line.partition(" = ")[0] in names.values())
    to_reference = {at: complex(*map(float, found[name].split(","))) for at, name in names.items()}
    return {(board, line): to_reference[board, line] - to_reference[board, "N"] for board in boards for line in LINES}


def test_voltages_of_every_board_equal_those_of_the_sheets(tmp_path: Path, network: Network, done: Done) -> None:
    netlist = list(source(network.origin))
    for board in network.boards:
        netlist += [*cable(network.feed[board], done[network.feed[board].tag]), *loads(board, network, done)]
    found = solved(tmp_path, netlist, network.boards)
    assert len(found) == 3 * len(network.boards) == 12
    worst = max(abs(found[at] - voltage_of(done[f"{at[0]}~supply"], at[1])) for at in found)
    assert worst < EXACT < ALLOWED


def test_two_boards_at_least_are_unbalanced(done: Done, network: Network) -> None:
    unbalanced = [board for board in network.boards if si(done[f"{board}~demand"], "I_N1") > 5]
    assert len(unbalanced) >= 2


def test_the_check_sees_a_wrong_cable(tmp_path: Path, network: Network, done: Done) -> None:
    netlist = list(source(network.origin))
    for board in network.boards:
        feeder = network.feed[board]
        lines = [line for line in cable(feeder, done[feeder.tag]) if board != "QB" or "_N" not in line.split()[0]]
        lines += [f"R_short {node('MB', 'N')} {node('QB', 'N')} 1e-9"] if board == "QB" else []
        netlist += [*lines, *loads(board, network, done)]
    found = solved(tmp_path, netlist, network.boards)
    assert abs(found["QB", "L2"] - voltage_of(done["QB~supply"], "L2")) > ALLOWED
