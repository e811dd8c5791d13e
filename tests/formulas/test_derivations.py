"""Every derivation is proven from its premises, and the proof can fail."""

from __future__ import annotations

from dataclasses import replace

import pytest

from calcbook.errors import DimensionFault
from calcbook.formulas.derivation import Derivation, Stage, put_into, solved_for
from calcbook.formulas.formula import Formula
from calcbook.formulas.register import DERIVATIONS, formulas
from calcbook.records.written.algebra import expression
from calcbook.records.written.tree import parse

PROVEN = [
    pytest.param(derivation, stage, id=f"{derivation.key}: {stage.name}")
    for derivation in DERIVATIONS.values()
    for stage in derivation.stages
    if not stage.is_premise
]
DERIVED = [formula for formula in formulas().values() if formula.derivation]


@pytest.mark.parametrize(("derivation", "stage"), PROVEN)
def test_a_stage_is_proven(derivation: Derivation, stage: Stage) -> None:
    assert derivation.prove(stage) == "its difference from what the algebra reaches simplifies to 0"


@pytest.mark.parametrize(("derivation", "stage"), PROVEN)
def test_a_wrong_written_form_is_not_proven(derivation: Derivation, stage: Stage) -> None:
    wrong = replace(stage, right=f"1.01*({stage.right})" if stage.right != "0" else "u_1")
    with pytest.raises(DimensionFault) as caught:
        derivation.prove(wrong)
    message = str(caught.value)
    assert message.startswith(f"derivation {derivation.key}, {stage.name}: {stage.left} = {wrong.right} is not proven")
    assert "; the difference is " in message


@pytest.mark.parametrize("formula", DERIVED, ids=lambda formula: formula.name)
def test_a_derived_formula_has_a_proven_stage_that_ends_in_its_written_form(formula: Formula) -> None:
    stages = [stage for stage in DERIVATIONS[formula.derivation].stages if stage.formula == formula.name]
    assert stages
    assert not any(stage.is_premise for stage in stages)
    # reactive power is proven as its square, because the square leaves the sign open
    wanted = (formula.written, f"({formula.written})^2")
    assert all(stage.right in wanted for stage in stages), [stage.right for stage in stages]


def test_a_stage_names_only_formulas_that_rest_on_its_derivation() -> None:
    for derivation in DERIVATIONS.values():
        for stage in derivation.stages:
            if stage.formula:
                assert formulas()[stage.formula].derivation == derivation.key, stage.name


def test_every_stage_can_be_read_and_says_why_it_holds() -> None:
    for derivation in DERIVATIONS.values():
        assert derivation.title
        names = [stage.name for stage in derivation.stages]
        assert len(names) == len(set(names)), derivation.key
        for stage in derivation.stages:
            parse(stage.left)
            parse(stage.right)
            assert stage.reason, stage.name


def test_a_stage_that_only_repeats_its_left_side_rests_on_the_premises() -> None:
    """A proof without a derived expression puts the premises in: without them it does not hold."""
    derivation = DERIVATIONS["three-phase-power"]
    stage = next(stage for stage in derivation.stages if stage.name == "sum_u")
    bare = replace(derivation, stages=(stage,))
    with pytest.raises(DimensionFault, match="is not proven"):
        bare.prove(stage)


def test_solving_says_when_there_is_no_single_solution() -> None:
    with pytest.raises(DimensionFault, match=r"theta\^2 = R_th\^2 has 2 solutions for theta"):
        solved_for("theta^2", "R_th^2", "theta")
    assert solved_for("P_1", "S_1*cos_phi", "S_1") == expression("P_1/cos_phi")


def test_putting_in_happens_at_once() -> None:
    assert put_into("U*I", U="I", I="U") == expression("U*I")
    assert put_into("U/I", U="I", I="U") == expression("I/U")
