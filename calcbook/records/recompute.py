"""The sheet again with other inputs, from its trace alone: no notebook, no code of the sheet is run.

One function serves headroom, sweeps, choice of size and verification. Written forms are read by the bounded parser
and evaluated by floats; table look-ups are handed in.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field
from functools import lru_cache

from calcbook.errors import EvaluationFault, nearest
from calcbook.records.dimension import coherent_number, in_unit
from calcbook.records.line import (
    Binding,
    BroughtForwardLine,
    ChoiceLine,
    DatumLine,
    InequalityLine,
    Line,
    RuleLine,
    StepLine,
    TableLine,
    Verdict,
)
from calcbook.records.notation import notation, out_of_range
from calcbook.records.quantity import Quantity
from calcbook.records.written.evaluate import compare, evaluate
from calcbook.records.written.tree import Node, parse

#: table key and arguments -> value
LookUp = Callable[[str, Mapping[str, str | Quantity]], Quantity]


@dataclass
class Recomputed:
    """Values in coherent units and words by label; utilisation and verdict of each criterion by label."""

    numbers: dict[str, float] = field(default_factory=dict)
    words: dict[str, str] = field(default_factory=dict)
    utilisations: dict[str, float] = field(default_factory=dict)
    verdicts: dict[str, Verdict] = field(default_factory=dict)


@lru_cache(maxsize=4096)
def _tree(written: str) -> Node:
    return parse(written)


def recompute(lines: Iterable[Line], changes: Mapping[str, Quantity | str], look_up: LookUp) -> Recomputed:
    """Work out the lines of one sheet, in order, with some data changed.

    Parameters: `lines` of a trace; `changes` by label of a line whose value is given (see `is_given`); `look_up` for
    table values whose keys moved or not. Raises EvaluationFault for a change of something else, for a value outside
    its range and where a step has no finite value, LookUpFault where a table does not reach.
    """
    lines = tuple(lines)
    changeable = [line.label for line in lines if is_given(line)]
    for label in changes:
        if label not in changeable:
            raise EvaluationFault(label, f"not a line that can be changed; {nearest(label, changeable)}")
    done = Recomputed()
    for line in lines:
        _recompute_line(line, changes, look_up, done)
    return done


def _recompute_line(line: Line, changes: Mapping[str, Quantity | str], look_up: LookUp, done: Recomputed) -> None:
    label = line.label
    match line:
        case ChoiceLine():
            done.words[label] = str(changes.get(label, line.text))
        case DatumLine() | BroughtForwardLine():
            done.numbers[label] = _changed(line.name, label, changes, line.si)
        case TableLine():
            if label in changes:
                done.numbers[label] = _changed(line.name, label, changes, line.si)
            else:
                done.numbers[label] = coherent_number(look_up(line.table, _arguments(line, done)))
        case StepLine():
            done.numbers[label] = _changed(line.name, label, changes, line.si) if line.adopted else _step(line, done)
        case InequalityLine():
            above = done.numbers[line.above] if line.above else 0.0
            utilisation, holds = judge(line.operator, done.numbers[line.left], done.numbers[line.right], above)
            done.utilisations[label] = utilisation
            done.verdicts[label] = "met" if holds else line.otherwise
        case RuleLine():
            found = done.words.get(line.rests_on, line.found)
            done.verdicts[label] = judge_rule(found, line.allowed)


def is_given(line: Line) -> bool:
    """Whether a line's value is given and not worked out: what recomputation may change."""
    if isinstance(line, StepLine):
        return line.adopted is not None
    return isinstance(line, DatumLine | ChoiceLine | BroughtForwardLine | TableLine)


def judge(operator: str, left: float, right: float, above: float = 0.0) -> tuple[float, bool]:
    """Utilisation and verdict of an inequality: left over right for <=, right over left for >=, unrounded.

    Both sides of the utilisation are reckoned from `above`, an ambient temperature, where there is one.
    """
    part, whole = (left - above, right - above) if operator == "<=" else (right - above, left - above)
    if whole == 0 or (above and whole < 0):
        raise EvaluationFault(f"{left!r} {operator} {right!r}", "no utilisation: the limit is zero")
    return part / whole, compare(operator, left, right)


def judge_rule(found: str, allowed: tuple[str, ...]) -> Verdict:
    """A rule is met where the word found is allowed; without a word it is not shown."""
    if not found:
        return "not shown"
    return "met" if found in allowed else "not met"


def _changed(name: str, label: str, changes: Mapping[str, Quantity | str], present: float) -> float:
    change = changes.get(label)
    if change is None:
        return present
    if isinstance(change, str):
        raise EvaluationFault(label, f'is a quantity, got the word "{change}"')
    entry = notation()[name]
    number = coherent_number(change)
    fault = out_of_range(entry, in_unit(number, entry.unit, entry.kind))
    if fault:
        raise EvaluationFault(label, fault)
    return number


def _arguments(line: TableLine, done: Recomputed) -> dict[str, str | Quantity]:
    arguments: dict[str, str | Quantity] = {}
    for argument in line.arguments:
        if argument.quantity is None:
            arguments[argument.name] = done.words.get(argument.rests_on, argument.text)
        else:
            number = done.numbers.get(argument.rests_on)
            given = argument.quantity
            arguments[argument.name] = given if number is None else in_unit(number, given.unit, given.kind)
    return arguments


def _step(line: StepLine, done: Recomputed) -> float:
    return evaluate(_tree(line.written), {binding.symbol: _bound(binding, done) for binding in line.bindings})


def _bound(binding: Binding, done: Recomputed) -> float | list[float]:
    numbers = [done.numbers[label] for label in binding.rests_on]
    return numbers[0] if len(numbers) == 1 and binding.symbol == binding.rests_on[0] else numbers
