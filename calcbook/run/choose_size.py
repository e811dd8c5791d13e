"""The smallest standard size that meets every criterion of a sheet, found by recomputing one executed trace.

The sheet is executed once with a large size; every standard size is then tried by `recompute`, table look-ups
included. A size that is given is never changed; only an empty one is chosen.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import asdict, dataclass, replace
from functools import partial

from calcbook.errors import EvaluationFault, LookUpFault
from calcbook.records.conclude import severity
from calcbook.records.line import DatumLine, InequalityLine, RuleLine
from calcbook.records.printed import print_given
from calcbook.records.project import Origin, SheetPlan
from calcbook.records.quantity import Quantity
from calcbook.records.recompute import recompute
from calcbook.records.result import SheetResult
from calcbook.sheet import look_up

SIZE = "size"
RUNS = "n"  # the line of the parallel runs
CHOSEN = "chosen by calcbook"
STANDARD_SIZES = (1.5, 2.5, 4.0, 6.0, 10.0, 16.0, 25.0, 35.0, 50.0, 70.0, 95.0, 120.0, 150.0, 185.0, 240.0, 300.0)

Execute = Callable[[SheetPlan], SheetResult]


def lacks_size(plan: SheetPlan) -> bool:
    """Whether the sheet asks for a size and none is given."""
    return plan.parameters.get(SIZE) == ""


def with_chosen_size(plan: SheetPlan, execute: Execute) -> SheetPlan:
    """The same sheet with the size chosen; its origin says which sizes were tried and why each failed.

    Parameters: `execute` makes a sheet. Where no standard size meets every criterion the largest one is taken, and the
    sheet shows what it does not meet; where the sheet cannot be executed with any, the fault is the sheet's own.
    """
    trial = execute(_sized(plan, _Choice(1, STANDARD_SIZES[-1]), ""))
    tables = plan.given.get("tables")
    own = tables if isinstance(tables, dict) else {}
    tried: list[str] = []
    largest = None
    for choice in (_Choice(runs, size) for runs in range(1, plan.runs_at_most + 1) for size in STANDARD_SIZES):
        try:
            failing = _first_failing(trial, choice, own)
        except LookUpFault:
            continue  # the tables of this cable and method begin or end elsewhere
        except EvaluationFault as fault:
            failing = fault.message
        if not failing:
            return _sized(plan, choice, _reason("the smallest standard size that meets every criterion", tried))
        tried.append(f"{choice.text} {failing}")
        largest = choice
    if largest is None:
        return _sized(plan, _Choice(1, STANDARD_SIZES[-1]), "no standard size is in the tables of this cable")
    return _sized(plan, largest, _reason("no standard size meets every criterion; the largest is taken", tried))


@dataclass(frozen=True)
class _Choice:
    """A number of parallel runs and a size in mm2: the fewest runs are tried first."""

    runs: int
    number: float

    @property
    def size(self) -> Quantity:
        return Quantity(self.number, "mm2", "area")

    @property
    def text(self) -> str:
        return f"{self.runs} × {print_given(self.size)}" if self.runs > 1 else print_given(self.size)


def _first_failing(trial: SheetResult, choice: _Choice, own: Mapping[str, str]) -> str:
    """The criterion that fails first with a size, the most severe of the trial before others; "" where none fails."""
    if not any(isinstance(line, DatumLine) and line.label == SIZE for line in trial.trace.lines):
        raise LookUpFault(trial.number, "the sheet has no size")
    changes: dict[str, Quantity | str] = {SIZE: choice.size}
    if choice.runs > 1:
        changes[RUNS] = Quantity(choice.runs, "1", "count")
    done = recompute(trial.trace.lines, changes, partial(look_up, own=own))
    criteria = [line for line in trial.trace.lines if isinstance(line, InequalityLine | RuleLine)]
    failing = [line for line in criteria if done.verdicts[line.label] != "met"]
    failing.sort(key=lambda line: done.utilisations.get(line.label, severity(line)), reverse=True)
    return failing[0].label if failing else ""


def _reason(found: str, tried: list[str]) -> str:
    return f"{found}; tried: {', '.join(tried)}" if tried else found


def _sized(plan: SheetPlan, choice: _Choice, remark: str) -> SheetPlan:
    origins = plan.given.get("origins")
    known = dict(origins) if isinstance(origins, dict) else {}
    parameters = {**plan.parameters, SIZE: f"{choice.number:g} mm2"}
    known[SIZE] = asdict(Origin(CHOSEN, plan.number, SIZE, remark=remark))
    if plan.runs_at_most > 1:
        parameters["runs"] = str(choice.runs)
        known["runs"] = asdict(Origin(CHOSEN, plan.number, "runs", remark="chosen with the size, the fewest first"))
    return replace(plan, parameters=parameters, given={**plan.given, "origins": known})
