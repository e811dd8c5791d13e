"""The lines of a sheet: each a frozen record that is enough to print it, trace it and recompute it.

A line's identity is sheet, template, name and, for repeated lines, a key: "C-014/cable-current/I_Z". Its position is
not part of it. Numbers are stored at full precision beside the text that is printed.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

from calcbook.records.project import Adopted, Origin, SignOff
from calcbook.records.quantity import Quantity

Verdict = Literal["met", "not met", "not shown"]


@dataclass(frozen=True, kw_only=True)
class Identity:
    """Sheet number, template, name (a name of the notation list, or of a criterion) and key."""

    sheet: str
    template: str
    name: str
    key: str = ""

    @property
    def label(self) -> str:
        """Name with key: unique within a sheet, the name of the line in results.json."""
        return f"{self.name}[{self.key}]" if self.key else self.name

    @property
    def id(self) -> str:
        """The identity as one text."""
        return f"{self.sheet}/{self.template}/{self.label}"


@dataclass(frozen=True, kw_only=True)
class Valued(Identity):
    """A line that has a value: `si` is `value` in the coherent unit of its kind, `text` the value as printed."""

    description: str
    value: Quantity
    si: float
    text: str


@dataclass(frozen=True, kw_only=True)
class DatumLine(Valued):
    """A quantity from the inputs."""

    form: Literal["datum"] = "datum"
    parameter: str
    origin: Origin


@dataclass(frozen=True, kw_only=True)
class ChoiceLine(Identity):
    """A word from the inputs: method of installation, insulation, kind of device."""

    form: Literal["choice"] = "choice"
    description: str
    parameter: str
    text: str
    origin: Origin


@dataclass(frozen=True, kw_only=True)
class Citation:
    """Where a table value stands: standard, edition, table, row, column; how the stored value was obtained."""

    standard: str
    edition: str
    table: str
    title: str
    row: str
    column: str
    status: str
    conditions: str = ""
    signed_off: SignOff | None = None
    remark: str = ""


@dataclass(frozen=True, kw_only=True)
class Argument:
    """One key of a look-up: its name in the table, the line it rests on ("" for a literal), and its value."""

    name: str
    rests_on: str
    text: str
    quantity: Quantity | None = None


@dataclass(frozen=True, kw_only=True)
class TableLine(Valued):
    """A value looked up in a published table; `table` is its key in the reference folder."""

    form: Literal["table value"] = "table value"
    table: str
    arguments: tuple[Argument, ...]
    citation: Citation


@dataclass(frozen=True, kw_only=True)
class BroughtForwardLine(Valued):
    """A value that another sheet worked out: `source` is the id of that line."""

    form: Literal["brought forward"] = "brought forward"
    source: str


@dataclass(frozen=True, kw_only=True)
class Binding:
    """What one symbol of a written form stands for: a line, or several keyed lines inside `sum`."""

    symbol: str
    rests_on: tuple[str, ...]
    texts: tuple[str, ...]


@dataclass(frozen=True, kw_only=True)
class StepLine(Valued):
    """One line of calculation.

    `written` is the form with the symbols of the lines it rests on; `formula` names its page; `calculated` and
    `calculated_text` stand beside `value` when the engineer adopted another; `second` is the number of the written
    form evaluated beside the algebra's; `reference` is the clause printed in the left column;
    `valid` says for what the formula holds.
    """

    form: Literal["step"] = "step"
    formula: str
    written: str
    bindings: tuple[Binding, ...]
    reference: str
    second: float
    calculated: Quantity
    calculated_text: str
    adopted: Adopted | None = None
    valid: str = ""
    remark: str = ""


@dataclass(frozen=True, kw_only=True)
class InequalityLine(Identity):
    """A criterion of two sides. `left` and `right` are labels of lines of this sheet; the verdict is unrounded.

    `utilisation` is left over right for <= and right over left for >=; above 1 is not met. `headroom_of` is the label
    of the datum whose greatest change is worked out where this criterion governs. `above` is the label of a line that
    both sides of the utilisation are reckoned from: of temperatures the rise over ambient counts. `governs` is false
    where sizes are compared, which go in steps: only where it is not met does the utilisation say anything. `otherwise`
    is the verdict where the inequality does not hold: "not shown" where that puts a datum in doubt, not the design.
    """

    form: Literal["inequality"] = "inequality"
    description: str
    operator: Literal["<=", ">="]
    left: str
    right: str
    left_text: str
    right_text: str
    utilisation: float
    utilisation_text: str
    verdict: Verdict
    reference: str
    headroom_of: str = ""
    above: str = ""
    governs: bool = True
    otherwise: Verdict = "not met"


@dataclass(frozen=True, kw_only=True)
class RuleLine(Identity):
    """A criterion that is a rule: `requirement` in words, the word found (a choice line's label), the words allowed."""

    form: Literal["rule"] = "rule"
    description: str
    requirement: str
    rests_on: str
    found: str
    allowed: tuple[str, ...]
    verdict: Verdict
    reference: str


@dataclass(frozen=True, kw_only=True)
class DerivationLine(Identity):
    """One line of a derivation: `left` = `right` in the grammar, a premise or proven by algebra.

    `reason` says how it follows; for a proven line `reached` is the expression that the algebra arrives at, in the
    grammar, and `proof` says what was simplified to zero; `formula` names the
    formula whose written form this line is, if any.
    """

    form: Literal["derivation"] = "derivation"
    description: str
    left: str
    right: str
    standing: Literal["premise", "proven"]
    reason: str
    proof: str = ""
    reached: str = ""
    formula: str = ""


@dataclass(frozen=True, kw_only=True)
class Headroom:
    """How far one datum may move before a criterion stops holding.

    `limit` is None where the criterion holds (or fails) over the whole range tried, which `remark` states. `solved`
    is the same limit from the algebra, None where the equation has table look-ups that move or cannot be solved.
    """

    criterion: str
    datum: str
    present_text: str
    limit: Quantity | None
    limit_text: str
    solved: float | None
    remark: str = ""


@dataclass(frozen=True, kw_only=True)
class ConclusionLine(Identity):
    """The end of a sheet: criteria from the most to the least utilised, verdict of all, headroom of the first two."""

    form: Literal["conclusion"] = "conclusion"
    verdict: Verdict
    governing: str
    order: tuple[str, ...]
    headrooms: tuple[Headroom, ...]
    open_items: tuple[str, ...]
    cautions: tuple[str, ...] = field(default=())


Line = (
    DatumLine
    | ChoiceLine
    | TableLine
    | BroughtForwardLine
    | StepLine
    | InequalityLine
    | RuleLine
    | DerivationLine
    | ConclusionLine
)
CriterionLine = InequalityLine | RuleLine
