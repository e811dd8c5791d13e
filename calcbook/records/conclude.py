"""The end of a sheet: which criterion governs, how far the next one is, what is still open."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from calcbook.records.headroom import headroom
from calcbook.records.line import (
    ChoiceLine,
    ConclusionLine,
    CriterionLine,
    DatumLine,
    InequalityLine,
    Line,
    RuleLine,
    StepLine,
    TableLine,
    Verdict,
)
from calcbook.records.recompute import LookUp, recompute

_LENGTH = "l"  # the line of the route length


def conclusion(identity: Mapping[str, Any], lines: Sequence[Line], look_up: LookUp) -> ConclusionLine:
    """The conclusion of the lines so far.

    The governing criterion is the one with the highest utilisation; a rule that is not met governs before all. The
    headroom of the governing inequality and of the next is worked out, and wherever it is one of length: the greatest
    length is asked of every circuit.
    """
    criteria = [line for line in lines if isinstance(line, InequalityLine | RuleLine)]
    order = sorted(criteria, key=severity, reverse=True)
    inequalities = [line for line in order if isinstance(line, InequalityLine)]
    wanted = inequalities[:2] + [line for line in inequalities[2:] if line.headroom_of == _LENGTH]
    rooms = (headroom(lines, criterion, look_up) for criterion in wanted)
    return ConclusionLine(
        **identity,
        verdict=verdict_of(criteria),
        governing=order[0].label if order else "",
        order=tuple(line.label for line in order),
        headrooms=tuple(room for room in rooms if room is not None),
        open_items=(*_open_items(lines), *_less_safe(lines, look_up)),
        cautions=tuple(_cautions(lines)),
    )


def severity(criterion: CriterionLine) -> float:
    """The rank of a criterion: its utilisation; above all a rule that is not met or not shown, below all one met."""
    if isinstance(criterion, InequalityLine) and (criterion.governs or criterion.verdict == "not met"):
        return criterion.utilisation
    return {"not met": float("inf"), "not shown": float("inf"), "met": -1.0}[criterion.verdict]


def verdict_of(criteria: Sequence[CriterionLine]) -> Verdict:
    """The verdict of several criteria together: the worst of theirs."""
    verdicts = {criterion.verdict for criterion in criteria}
    return "not met" if "not met" in verdicts else "not shown" if "not shown" in verdicts else "met"


def _open_items(lines: Sequence[Line]) -> list[str]:
    """Data that are not confirmed, in one sentence each."""
    items = []
    for line in lines:
        if isinstance(line, DatumLine | ChoiceLine) and line.origin.status != "confirmed":
            place = ", ".join(part for part in (line.origin.file, line.origin.tag, line.origin.column) if part)
            remark = f" ({line.origin.remark})" if line.origin.remark else ""
            items.append(f"{line.description} {line.text or 'not stated'}: {line.origin.status}, {place}{remark}")
    return items


def _less_safe(lines: Sequence[Line], look_up: LookUp) -> list[str]:
    """Adopted values that make a criterion easier to meet than the calculated value would."""
    found = []
    for line in lines:
        if not isinstance(line, StepLine) or line.adopted is None:
            continue
        calculated = recompute(lines, {line.label: line.calculated}, look_up)
        harder = [
            other.label
            for other in lines
            if isinstance(other, InequalityLine) and calculated.utilisations[other.label] > other.utilisation
        ]
        if harder:
            found.append(
                f"{line.description} {line.text} adopted: less safe than the calculated {line.calculated_text} for "
                f"{', '.join(harder)}"
            )
    return found


def _cautions(lines: Sequence[Line]) -> list[str]:
    """Adopted values, tables of another edition, and tables not compared with a licensed copy, each once."""
    cautions, not_compared = [], []
    for line in lines:
        if isinstance(line, TableLine):
            source = f"{line.citation.standard}:{line.citation.edition}, {line.citation.table}"
            if line.citation.signed_off is None:
                not_compared.append(source)
            if "the basis states" in line.citation.remark:
                cautions.append(f"{source}: {line.citation.remark}")
        if isinstance(line, StepLine) and line.adopted:
            adopted = line.adopted
            cautions.append(
                f"{line.description}: {line.text} adopted in place of {line.calculated_text} "
                f"({adopted.reason}; {adopted.by}, {adopted.date})"
            )
    if not_compared:
        cautions.append(f"not yet compared with a licensed copy: {'; '.join(dict.fromkeys(not_compared))}")
    return list(dict.fromkeys(cautions))
