"""Recomputation from the trace alone, and the headroom found with it."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from sheet_samples import motor_circuit, quiet_sheet

from calcbook.errors import EvaluationFault, LookUpFault
from calcbook.records.headroom import headroom
from calcbook.records.line import ConclusionLine, InequalityLine, Line, Valued
from calcbook.records.printed import print_rounded
from calcbook.records.quantity import Quantity, read_quantity
from calcbook.records.recompute import recompute
from calcbook.sheet import look_up


@pytest.fixture(scope="module")
def lines() -> tuple[Line, ...]:
    with pytest.MonkeyPatch.context() as monkeypatch:
        return tuple(motor_circuit(quiet_sheet(monkeypatch)).lines)


def test_unchanged_inputs_give_the_sheet_again(lines: tuple[Line, ...]) -> None:
    done = recompute(lines, {}, look_up)
    for line in lines:
        if isinstance(line, Valued):
            assert done.numbers[line.label] == pytest.approx(line.si, rel=1e-12), line.label
        if isinstance(line, InequalityLine):
            assert done.verdicts[line.label] == line.verdict
            assert done.utilisations[line.label] == pytest.approx(line.utilisation, rel=1e-12)


@given(
    power=st.floats(1.0, 500.0), size=st.sampled_from([16.0, 25.0, 35.0, 50.0, 95.0]), ambient=st.floats(-10.0, 80.0)
)
def test_changed_inputs_give_what_a_new_sheet_gives(power: float, size: float, ambient: float) -> None:
    changes = {
        "P_2": Quantity(power, "kW", "active_power"),
        "size": Quantity(size, "mm2", "area"),
        "theta_a": Quantity(ambient, "degC", "temperature"),
    }
    texts = {"shaft_power": f"{power!r} kW", "size": f"{size!r} mm2", "ambient": f"{ambient:.6f} degC"}
    changes["theta_a"] = read_quantity(texts["ambient"], "temperature")
    with pytest.MonkeyPatch.context() as monkeypatch:
        first = motor_circuit(quiet_sheet(monkeypatch)).lines
        again = motor_circuit(quiet_sheet(monkeypatch, **texts)).lines
    done = recompute(first, dict(changes), look_up)
    for line in again:
        if isinstance(line, Valued):
            assert done.numbers[line.label] == pytest.approx(line.si, rel=1e-11), line.label


def test_word_changes_move_look_ups(lines: tuple[Line, ...]) -> None:
    done = recompute(lines, {"method": "F_trefoil"}, look_up)
    assert done.numbers["I_t"] == 135
    with pytest.raises(LookUpFault, match="method B1 is not in the table"):
        recompute(lines, {"method": "B1"}, look_up)


def test_only_data_can_be_changed(lines: tuple[Line, ...]) -> None:
    with pytest.raises(EvaluationFault, match=r"I_B: not a line that can be changed; .*"):
        recompute(lines, {"I_B": Quantity(1, "A", "line_current")}, look_up)
    with pytest.raises(EvaluationFault, match='P_2: is a quantity, got the word "x"'):
        recompute(lines, {"P_2": "x"}, look_up)
    with pytest.raises(EvaluationFault, match=r"eta is 1\.2; allowed is above 0 to 1"):
        recompute(lines, {"eta": Quantity(1.2, "1", "ratio")}, look_up)


def test_headroom_by_recomputation_and_by_algebra(lines: tuple[Line, ...]) -> None:
    conclusion = lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    load, ambient = conclusion.headrooms
    assert load.limit is not None
    # I_B reaches 81 A at P_2 = sqrt(3) 400 V 81 A 0.936 0.86
    assert load.limit.number == pytest.approx(3**0.5 * 400 * 81 * 0.936 * 0.86 / 1000, rel=1e-9)
    assert load.solved == pytest.approx(load.limit.number * 1000, rel=1e-9)
    assert load.limit_text == "45.17\N{NO-BREAK SPACE}kW"
    assert ambient.limit is not None
    assert ambient.limit.number == pytest.approx(50.0, rel=1e-9)  # the last row whose factor still suffices: 0.82
    assert ambient.solved is None  # the factor is read from a table


@given(st.floats(20.0, 44.9))
def test_criterion_turns_at_its_headroom(power: float) -> None:
    with pytest.MonkeyPatch.context() as monkeypatch:
        lines = motor_circuit(quiet_sheet(monkeypatch, shaft_power=f"{power!r} kW")).lines
    criterion = next(line for line in lines if isinstance(line, InequalityLine))
    room = headroom(lines, criterion, look_up)
    assert room is not None
    assert room.limit is not None
    limit = room.limit.number
    below = recompute(lines, {"P_2": Quantity(limit * (1 - 1e-9), "kW", "active_power")}, look_up)
    above = recompute(lines, {"P_2": Quantity(limit * (1 + 1e-9), "kW", "active_power")}, look_up)
    assert (below.verdicts[criterion.label], above.verdicts[criterion.label]) == ("met", "not met")


def test_a_criterion_not_met_has_the_value_at_which_it_would_be(monkeypatch: pytest.MonkeyPatch) -> None:
    lines = motor_circuit(quiet_sheet(monkeypatch, shaft_power="55 kW")).lines
    criterion = next(line for line in lines if isinstance(line, InequalityLine))
    assert criterion.verdict == "not met"
    room = headroom(lines, criterion, look_up)
    assert room is not None
    assert room.limit_text == "45.17\N{NO-BREAK SPACE}kW"


@given(st.floats(0.001, 99999), st.booleans())
def test_limits_are_printed_on_the_safe_side(number: float, up: bool) -> None:
    printed = float(print_rounded(Quantity(number, "A", "line_current"), up=up).split("\N{NO-BREAK SPACE}")[0])
    assert printed >= number * (1 - 1e-10) if up else printed <= number * (1 + 1e-10)
    assert printed == pytest.approx(number, rel=1.1e-3)


def test_criterion_that_holds_over_the_whole_range(monkeypatch: pytest.MonkeyPatch) -> None:
    lines = motor_circuit(quiet_sheet(monkeypatch, overload_setting="20 A")).lines
    criterion = next(line for line in lines if line.label == "setting")
    assert isinstance(criterion, InequalityLine)
    room = headroom(lines, criterion, look_up)
    assert room is not None
    assert room.limit is None
    assert room.remark == "holds for every value that can be worked out"
