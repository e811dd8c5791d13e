"""What a template holds in its hands: names of lines, without arithmetic and without truth value.

Every number on paper must be a recorded line, so a Value refuses to be added, compared for truth or turned into a
float; the sentence it raises says what to write instead.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Literal, NoReturn

from calcbook.errors import DimensionFault
from calcbook.records.quantity import Quantity

_ARITHMETIC = "has no arithmetic: write a formula in calcbook/formulas and a step, sheet.step(name, formula, ...)"
_TRUTH = (
    "has no truth value: branch on the template's parameters or with choose( ) in a formula; "
    "a criterion is one inequality, sheet.criterion(name, left <= right, ...), never a chain"
)


class _WithoutArithmetic:
    """Refuses every operator that would make a number outside of the trace."""

    def _no_arithmetic(self, *_: object) -> NoReturn:
        raise DimensionFault(f"{self!r} {_ARITHMETIC}")

    __add__ = __radd__ = __sub__ = __rsub__ = __mul__ = __rmul__ = _no_arithmetic
    __truediv__ = __rtruediv__ = __floordiv__ = __rfloordiv__ = __mod__ = __rmod__ = _no_arithmetic
    __pow__ = __rpow__ = __neg__ = __pos__ = __abs__ = __round__ = _no_arithmetic
    __float__ = __int__ = __complex__ = __index__ = _no_arithmetic

    def __bool__(self) -> NoReturn:
        raise DimensionFault(f"{self!r} {_TRUTH}")

    def __eq__(self, other: object) -> NoReturn:
        raise DimensionFault(f"{self!r} {_TRUTH}")

    def __ne__(self, other: object) -> NoReturn:
        raise DimensionFault(f"{self!r} {_TRUTH}")

    def __lt__(self, other: object) -> NoReturn:
        raise DimensionFault(f"{self!r}: a criterion is <= or >=, so that the limit itself is allowed")

    __gt__ = __lt__

    def _ipython_display_(self) -> None:
        """Nothing: the line itself was displayed when it was made."""

    __hash__ = None  # type: ignore[assignment]  # nothing may key on a value


@dataclass(frozen=True, eq=False, repr=False)
class Value(_WithoutArithmetic):
    """A line that has a quantity; `text` is the value as printed."""

    label: str
    quantity: Quantity
    si: float
    text: str

    def __repr__(self) -> str:
        return f"line {self.label}"

    def __le__(self, other: Value) -> Comparison:
        return Comparison(self, "<=", other)

    def __ge__(self, other: Value) -> Comparison:
        return Comparison(self, ">=", other)


@dataclass(frozen=True, eq=False, repr=False)
class Choice(_WithoutArithmetic):
    """A line that has a word of a closed list."""

    label: str
    text: str

    def __repr__(self) -> str:
        return f"line {self.label}"


@dataclass(frozen=True, eq=False, repr=False)
class Comparison(_WithoutArithmetic):
    """Two values of one kind with <= or >= between them: what a criterion is made of."""

    left: Value
    operator: Literal["<=", ">="]
    right: Value
    above: Value | None = None
    governs: bool = True

    def over(self, ambient: Value) -> Comparison:
        """The same, its utilisation reckoned as the rise over an ambient temperature."""
        return replace(self, above=ambient)

    def of_sizes(self) -> Comparison:
        """The same between sizes, which go in steps: it does not govern unless it is not met."""
        return replace(self, governs=False)

    def __post_init__(self) -> None:
        if not isinstance(self.right, Value):
            raise DimensionFault(f"{self!r}: both sides must be lines of the sheet")
        if self.left.quantity.kind != self.right.quantity.kind:
            raise DimensionFault(
                f"{self!r}: {self.left.quantity.kind} cannot be compared with {self.right.quantity.kind}"
            )

    def __repr__(self) -> str:
        right = self.right.label if isinstance(self.right, Value) else repr(self.right)
        return f"{self.left.label} {self.operator} {right}"
