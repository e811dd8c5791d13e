"""How far one datum may move before a criterion turns: by recomputation, and by algebra where it can be solved."""

from __future__ import annotations

import math
from collections.abc import Sequence
from functools import partial
from typing import Any

import sympy

from calcbook.errors import CalcbookError, DimensionFault
from calcbook.records.dimension import factor, in_unit
from calcbook.records.line import DatumLine, Headroom, InequalityLine, Line, StepLine, TableLine, Valued
from calcbook.records.printed import print_rounded
from calcbook.records.quantity import Quantity
from calcbook.records.recompute import LookUp, recompute
from calcbook.records.written.algebra import expression, symbol

Unknown = DatumLine | StepLine  # a datum, or a step with an adopted value
_FARTHEST = 1000.0
_HALVINGS = 60
_EXTREMES = (sympy.Min, sympy.Max, sympy.Piecewise)


def headroom(lines: Sequence[Line], criterion: InequalityLine, look_up: LookUp) -> Headroom | None:
    """The value of the criterion's own datum at which it turns, None where it declares no datum.

    The limit is searched from the present value to a thousandth and a thousand times of it. Raises DimensionFault
    where recomputation and algebra disagree by more than 1e-9.
    """
    by_label = {line.label: line for line in lines}
    datum = by_label.get(criterion.headroom_of)
    if not isinstance(datum, DatumLine):
        return None
    sides = (criterion.left, criterion.right)
    if not any(_rests_on(by_label, side, datum.label) for side in sides):
        adopted = [label for side in sides for label in _adopted_below(by_label, side)]
        if not adopted:
            return None
        datum = by_label[adopted[0]]  # the adopted value stands between, and is what may move
    if not isinstance(datum, DatumLine | StepLine):
        return None
    make = partial(Headroom, criterion=criterion.label, datum=datum.label, present_text=datum.text)
    limit = _turning_point(lines, criterion, datum, look_up)
    if limit is None:
        reach = "holds" if criterion.verdict == "met" else "is not met"
        remark = f"{reach} for every value that can be worked out"
        return make(limit=None, limit_text="", solved=None, remark=remark)
    quantity = in_unit(limit, datum.value.unit, datum.value.kind)
    solved = _solved(lines, criterion, datum, limit)
    if solved is not None and not math.isclose(solved, limit, rel_tol=1e-9):
        raise DimensionFault(f"headroom of {criterion.label}: recomputation gives {limit!r}, algebra {solved!r}")
    remarks = [
        "" if criterion.verdict == "met" else "must come to this limit for the criterion to be met",
        "the adopted value" if isinstance(datum, StepLine) else "",
        "" if solved is None else "also solved by algebra",
    ]
    text = print_rounded(quantity, up=_holds_above(lines, criterion, datum, look_up, limit))
    return make(limit=quantity, limit_text=text, solved=solved, remark="; ".join(filter(None, remarks)))


def _holds_above(
    lines: Sequence[Line], criterion: InequalityLine, datum: Unknown, look_up: LookUp, limit: float
) -> bool:
    """Whether the criterion holds above the limit and not below: the limit is then printed rounded up."""
    above = _Trial(lines, criterion, datum, look_up).utilisation(limit * (1 + 1e-9) + 1e-12)
    return above is not None and above <= 1


def _adopted_below(by_label: dict[str, Line], label: str) -> list[str]:
    """The adopted values that a line rests on, itself included."""
    line = by_label.get(label)
    if not isinstance(line, StepLine):
        return []
    if line.adopted:
        return [label]
    return [found for binding in line.bindings for part in binding.rests_on for found in _adopted_below(by_label, part)]


class _Trial:
    """Whether the criterion holds with the datum at another value; None where it cannot be worked out."""

    def __init__(self, lines: Sequence[Line], criterion: InequalityLine, datum: Unknown, look_up: LookUp) -> None:
        self.lines, self.criterion, self.datum, self.look_up = lines, criterion, datum, look_up

    def utilisation(self, number: float) -> float | None:
        unit = self.datum.value.unit
        changed = Quantity(number / factor(unit), unit, self.datum.value.kind)
        try:
            done = recompute(self.lines, {self.datum.label: changed}, self.look_up)
        except CalcbookError:
            return None
        return done.utilisations[self.criterion.label]


def _turning_point(lines: Sequence[Line], criterion: InequalityLine, datum: Unknown, look_up: LookUp) -> float | None:
    trial = _Trial(lines, criterion, datum, look_up)
    met = criterion.verdict == "met"
    for ratio in (2.0, 0.5):
        inside, step = datum.si, ratio
        while 1 / _FARTHEST <= step <= _FARTHEST:
            outside = datum.si * step
            utilisation = trial.utilisation(outside)
            if utilisation is None:
                outside = _edge(trial, inside, outside)
                utilisation = trial.utilisation(outside)
                if utilisation is None or (utilisation <= 1) == met:
                    break
            if (utilisation <= 1) != met:
                return _bisect(trial, inside, outside, met)
            inside, step = outside, step * ratio
    return None


def _edge(trial: _Trial, inside: float, outside: float) -> float:
    """The last value towards `outside` that can be worked out."""
    for _ in range(_HALVINGS):
        middle = (inside + outside) / 2
        if trial.utilisation(middle) is None:
            outside = middle
        else:
            inside = middle
    return inside


def _bisect(trial: _Trial, inside: float, outside: float, met: bool) -> float:
    """The last value on the side where the criterion holds."""
    for _ in range(_HALVINGS):
        middle = (inside + outside) / 2
        utilisation = trial.utilisation(middle)
        if utilisation is not None and (utilisation <= 1) == met:
            inside = middle
        else:
            outside = middle
    return inside if met else outside


def _solved(lines: Sequence[Line], criterion: InequalityLine, datum: Unknown, near: float) -> float | None:
    """The solution of left = right for the datum that lies nearest to `near`.

    None where the equation is no polynomial in the datum: under a root or in a min( ) it takes algebra minutes.
    """
    by_label = {line.label: line for line in lines}
    unknown = symbol(datum.label)
    try:
        left, right = (_in_terms_of(by_label, side, datum.label) for side in (criterion.left, criterion.right))
        numerator = sympy.numer(sympy.together(left - right))
        solutions = [complex(root) for root in sympy.Poly(numerator, unknown).nroots()]
    except (sympy.PolynomialError, _NotAlgebraicError, TypeError):  # a root or a min( ) of the datum: not solved
        return None
    real = [solution.real for solution in solutions if abs(solution.imag) <= 1e-12 * abs(solution.real)]
    best = min(real, key=lambda number: abs(number - near), default=None)
    return best if best is not None and math.isclose(best, near, rel_tol=1e-6) else None


class _NotAlgebraicError(Exception):
    """The datum reaches the criterion through a table, a sum over lines, or a min, max or choose."""


def _in_terms_of(by_label: dict[str, Line], label: str, unknown: str) -> Any:
    line = by_label[label]
    if label == unknown:
        return symbol(label)
    if isinstance(line, StepLine) and not line.adopted:
        if any(len(binding.rests_on) != 1 for binding in line.bindings):
            raise _NotAlgebraicError
        written = expression(line.written)
        if written.has(*_EXTREMES) and _rests_on(by_label, label, unknown):
            raise _NotAlgebraicError  # putting the datum into a min, max or choose alone takes algebra minutes
        pairs = ((binding.symbol, binding.rests_on[0]) for binding in line.bindings)
        parts = {symbol(name): _in_terms_of(by_label, rests_on, unknown) for name, rests_on in pairs}
        return written.subs(parts, simultaneous=True)
    if isinstance(line, TableLine) and _rests_on(by_label, label, unknown):
        raise _NotAlgebraicError
    if not isinstance(line, Valued):
        raise _NotAlgebraicError
    return sympy.Float(line.si)


def _rests_on(by_label: dict[str, Line], label: str, unknown: str) -> bool:
    line = by_label.get(label)
    if label == unknown:
        return True
    if isinstance(line, StepLine) and not line.adopted:
        return any(_rests_on(by_label, part, unknown) for binding in line.bindings for part in binding.rests_on)
    if isinstance(line, TableLine):
        return any(_rests_on(by_label, argument.rests_on, unknown) for argument in line.arguments)
    return False
