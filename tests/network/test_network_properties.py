"""Small random networks against complex arithmetic of our own: Kirchhoff, neutral, voltages, and what length does."""

from __future__ import annotations

import cmath
import math
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from network_runs import Lines, current_of, run_network, si, small_project, voltage_of, with_text

LINES = ("L1", "L2", "L3")
TURN = cmath.exp(-2j * math.pi / 3)
PLACE = {"L1": 1, "L2": TURN, "L3": TURN**2}
EXACT = 1e-10

load = st.fixed_dictionaries(
    {
        "phases": st.sampled_from(["L1L2L3", "L1L2L3N", "L1N", "L2N", "L3N", "L1L2", "L2L3", "L1L3"]),
        "current [A]": st.integers(10, 300).map(lambda number: str(number / 10)),
        "power_factor": st.integers(60, 100).map(lambda number: str(number / 100)),
        "demand_factor": st.integers(1, 10).map(lambda number: str(number / 10)),
        "third_harmonic [%]": st.integers(0, 33).map(str),
    }
)
networks = st.tuples(st.lists(load, min_size=1, max_size=5), st.sampled_from([0.6, 1.0]))


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return tmp_path_factory.mktemp("network")


def expected_currents(loads: list[dict[str, str]], diversity: float) -> dict[str, complex]:
    """The line currents of the loads by their own voltages: a two-line load by the difference of two."""
    found: dict[str, complex] = dict.fromkeys(LINES, 0j)
    for one in loads:
        size = float(one["current [A]"]) * float(one["demand_factor"]) * diversity
        lag = cmath.exp(-1j * math.acos(float(one["power_factor"])))
        phases = [line for line in LINES if line in one["phases"]]
        if len(phases) == 2 and "N" not in one["phases"]:
            across = PLACE[phases[0]] - PLACE[phases[1]]
            found[phases[0]] += size * lag * across / abs(across)
            found[phases[1]] -= size * lag * across / abs(across)
        else:
            for line in phases:
                found[line] += size * lag * PLACE[line]
    return found


@settings(max_examples=25)
@given(networks)
def test_currents_of_a_board_are_the_sum_of_its_loads(
    folder: Path, network: tuple[list[dict[str, str]], float]
) -> None:
    done = run_network(small_project(folder, *network))
    board, main, feeder = done["SB~demand"], done["MB~demand"], done["F-1"]
    expected = expected_currents(*network)
    for line in LINES:
        assert current_of(board, line) == pytest.approx(expected[line], abs=1e-9)
        assert current_of(main, line) == pytest.approx(0.9 * expected[line], abs=1e-9)
        assert si(board, f"I_S[{line}]") == pytest.approx(abs(expected[line]), abs=1e-9)
    assert si(board, "I_N1") == pytest.approx(abs(sum(expected.values())), abs=1e-9)
    assert si(feeder, "I_B") == pytest.approx(max(map(abs, expected.values())), rel=EXACT)
    in_neutral = sum(
        3 * _third(one) if one["phases"] == "L1L2L3N" else _third(one)
        for one in network[0]
        if one["phases"].endswith("N")
    )
    assert si(board, "I_N3") == pytest.approx(network[1] * in_neutral, abs=1e-9)
    assert si(feeder, "h_3") * 3 * si(feeder, "I_B") == pytest.approx(si(board, "I_N"), rel=EXACT, abs=1e-9)


def _third(one: dict[str, str]) -> float:
    numbers = ("current [A]", "demand_factor", "third_harmonic [%]")
    return math.prod(float(one[name]) for name in numbers) / 100


@settings(max_examples=25)
@given(networks)
def test_voltages_of_a_board_follow_from_the_node_equations(
    folder: Path, network: tuple[list[dict[str, str]], float]
) -> None:
    done = run_network(small_project(folder, *network))
    feeder, board = done["F-1"], done["SB~supply"]
    impedance = complex(si(feeder, "R"), si(feeder, "X"))
    currents = expected_currents(*network)
    nominal = 400 / math.sqrt(3)
    neutral = impedance * sum(currents.values())
    voltages = {line: nominal * PLACE[line] - impedance * currents[line] - neutral for line in LINES}
    for line in LINES:
        assert voltage_of(board, line) == pytest.approx(voltages[line], rel=EXACT)
        assert si(board, f"U_k[{line}]") == pytest.approx(abs(voltages[line]), rel=EXACT)
    for pair in ("L1L2", "L2L3", "L1L3"):
        between = abs(voltages[pair[:2]] - voltages[pair[2:]])
        assert si(board, f"U_s[{pair}]") == pytest.approx(between, rel=EXACT)
    lowest = min(map(abs, voltages.values()))
    assert si(board, "U_s[L1L2L3]") == pytest.approx(math.sqrt(3) * lowest, rel=EXACT)
    assert si(feeder, "du_tot") == pytest.approx((nominal - lowest) / nominal, abs=1e-12)


def lengthened(folder: Path, network: tuple[list[dict[str, str]], float], metres: int) -> Lines:
    project = with_text(small_project(folder, *network), "F-1", "length", lambda text: f"{60 + metres} m")
    return run_network(project)["F-1"]


@settings(max_examples=12)
@given(networks, st.integers(1, 200))
def test_more_length_never_lessens_the_drop_of_the_worst_line(
    folder: Path, network: tuple[list[dict[str, str]], float], metres: int
) -> None:
    short = run_network(small_project(folder, *network))["F-1"]
    assert si(lengthened(folder, network, metres), "du_tot") >= si(short, "du_tot") - 1e-12


@settings(max_examples=10)
@given(networks, st.integers(1, 200))
def test_more_length_never_raises_a_voltage_of_a_balanced_board(
    folder: Path, network: tuple[list[dict[str, str]], float], metres: int
) -> None:
    balanced = ([{**one, "phases": "L1L2L3"} for one in network[0]], network[1])
    short = run_network(small_project(folder, *balanced))["F-1"]
    long = lengthened(folder, balanced, metres)
    for line in LINES:
        assert si(long, f"U_k[{line}]") <= si(short, f"U_k[{line}]")
