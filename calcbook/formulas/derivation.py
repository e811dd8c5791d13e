"""What a derivation is: stages from first principles to the written forms of formulas, each proven by algebra."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cache, cached_property
from typing import Any

import sympy

from calcbook.errors import DimensionFault, WrittenFormFault
from calcbook.records.written.algebra import expression
from calcbook.records.written.tree import parse


@dataclass(frozen=True)
class Stage:
    """One line of a derivation: `left` = `right`, both in the grammar.

    A premise (`is_premise`) states a definition or a law, `reason` says which. Any other stage is proven: `derived`
    gives the expression that the algebra reaches for `left` (None: the premises put into `left`), and its difference
    from `right` must simplify to zero. `formula` names the formula whose written form `right` is.
    """

    name: str
    left: str
    right: str
    reason: str
    is_premise: bool = False
    derived: Callable[[], Any] | None = None
    formula: str = ""


@cache
def _derived(stage: Stage) -> Any:
    """What the algebra reaches for a stage: asked for by its proof and by its print."""
    return stage.derived() if stage.derived else None


@dataclass(frozen=True)
class Derivation:
    """A subject's derivation; `key` gives the sheet number D-key."""

    key: str
    title: str
    stages: tuple[Stage, ...]

    @cached_property
    def premises(self) -> dict[Any, Any]:
        """The premises as substitutions; those whose left side is not a single symbol are laws, not definitions."""
        pairs = ((expression(stage.left), expression(stage.right)) for stage in self.stages if stage.is_premise)
        return {left: right for left, right in pairs if left.is_Symbol}

    def reached(self, stage: Stage) -> str:
        """The expression that the algebra reaches for `left`, as a written form; "" where the grammar has none."""
        if stage.is_premise or stage.derived is None:
            return ""
        text = str(_derived(stage)).replace("**", "^").replace("Abs(", "abs(").replace("Max(", "max(")
        try:
            parse(text)
        except WrittenFormFault:
            return ""
        return "" if text == stage.right.replace(" ", "") else text

    def prove(self, stage: Stage) -> str:
        """Prove one stage; the sentence that is printed. Raises DimensionFault where the difference is not zero."""
        reached = _derived(stage) if stage.derived else expression(stage.left)
        difference = self._expanded(reached) - self._expanded(expression(stage.right))
        remainder = sympy.simplify(difference)
        if remainder != 0:
            raise DimensionFault(
                f"derivation {self.key}, {stage.name}: {stage.left} = {stage.right} is not proven; "
                f"the difference is {remainder}"
            )
        return "its difference from what the algebra reaches simplifies to 0"

    def _expanded(self, reached: Any) -> Any:
        premises = self.premises
        for _ in range(3):  # definitions rest on definitions at most three deep
            reached = reached.subs(premises)
        return reached.doit().rewrite(sympy.Abs)  # max(a, b) as (a + b + |a - b|)/2, which algebra can compare


def solved_for(left: str, right: str, unknown: str) -> Any:
    """The one solution of left = right for a symbol; DimensionFault where there is none or more than one."""
    solutions = sympy.solve(sympy.Eq(expression(left), expression(right)), expression(unknown))
    if len(solutions) != 1:
        raise DimensionFault(f"{left} = {right} has {len(solutions)} solutions for {unknown}")
    return solutions[0]


def put_into(form: str, **replacements: str) -> Any:
    """The expression of a form with symbols replaced by forms."""
    pairs = {expression(name): expression(text) for name, text in replacements.items()}
    return expression(form).subs(pairs, simultaneous=True)
