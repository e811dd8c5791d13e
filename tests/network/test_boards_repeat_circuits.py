"""What a board's sheet says of a circuit equals what the circuit's own sheet says."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

import pytest
from network_runs import EXAMPLE, Lines, executed, network_only, si

from calcbook.inputs.project import read_project
from calcbook.plan.network import Network, is_feeder, read_network
from calcbook.plan.sheets import make_plan
from calcbook.records.line import StepLine
from calcbook.records.project import Plan

Done = Mapping[str, Lines]


@pytest.fixture(scope="module")
def network() -> Network:
    return read_network(read_project(EXAMPLE))


@pytest.fixture(scope="module")
def done() -> Done:
    """Boards and feeders, and of each final circuit its power and its voltage drop."""
    plan = make_plan(read_project(EXAMPLE))
    kept = ("three-phase-power", "voltage-drop")
    final = [replace(sheet, templates=kept) for sheet in plan.sheets if sheet.templates[0] == "three-phase-power"]
    return executed(Plan((*network_only(plan).sheets, *final)))


def test_design_current_and_angle_equal_those_of_the_circuit(network: Network, done: Done) -> None:
    compared = 0
    for board in network.boards:
        for circuit in network.ways[board]:
            if not is_feeder(circuit):
                for name in ("I_B", "phi"):
                    assert si(done[f"{board}~demand"], f"{name}[{circuit.tag}]") == si(done[circuit.tag], name)
                compared += 1
    assert compared == 24


def test_an_adopted_current_is_adopted_on_the_board_as_well(done: Done) -> None:
    own, repeated = done["C-006"]["I_B"], done["QB~demand"]["I_B[C-006]"]
    assert isinstance(own, StepLine)
    assert isinstance(repeated, StepLine)
    assert own.adopted is not None
    assert repeated.adopted is not None
    assert replace(own.adopted, line="") == replace(repeated.adopted, line="")
    assert own.value.number == repeated.value.number == 80.0


def test_a_circuit_starts_from_the_voltage_and_the_drop_of_its_board(network: Network, done: Done) -> None:
    for board in network.boards:
        supply = done[f"{board}~supply"]
        for circuit in network.ways[board]:
            if is_feeder(circuit):
                continue
            lines, phases = done[circuit.tag], circuit.data["phases"].text
            single = phases in ("L1N", "L2N", "L3N")
            key = phases.removesuffix("N")
            assert si(lines, "U_sN" if single else "U_s") == si(supply, f"U_k[{key}]" if single else f"U_s[{key}]")
            assert si(lines, "du_board") == si(supply, f"du_k[{key}]" if single else f"du_board[{key}]")


def test_a_board_is_fed_by_what_it_asks(network: Network, done: Done) -> None:
    for board in network.boards:
        feeder = network.feed[board]
        for line in ("L1", "L2", "L3"):
            for name in ("I_P", "I_Q", "I_S"):
                assert si(done[feeder.tag], f"{name}[{line}]") == si(done[f"{board}~demand"], f"{name}[{line}]")
            for name in ("U_re", "U_im", "U_k", "du_k"):
                assert si(done[feeder.tag], f"{name}[{line}]") == si(done[f"{board}~supply"], f"{name}[{line}]")
