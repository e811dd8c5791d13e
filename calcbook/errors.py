"""Every error that calcbook reports to its user.

CalcbookError
    UsageFault            the command was called in a way that cannot work            exit 2
    InputFaults           the project's inputs hold faults: all of them, in one error  exit 2
    QuantityFault         a text is not a number with an allowed unit                  exit 2
    WrittenFormFault      a written form breaks the grammar or its bounds              exit 3
    DimensionFault        units or kinds do not fit a formula                          exit 3
    EvaluationFault       a formula has no value for the given numbers                 exit 3
    LookUpFault           a table has no value for the given keys                      exit 3
    TemplateFault         a template breaks the rules of templates                     exit 3
    SheetFault            a line of a sheet cannot be made                             exit 3
    WorkspaceFault        the machine does not let calcbook work (disk, rights)        exit 4

Errors keep fields and build their sentence when it is asked for; they survive pickling.
"""

from __future__ import annotations

import difflib
from collections.abc import Iterable
from dataclasses import dataclass, fields
from typing import ClassVar


@dataclass(eq=False)
class CalcbookError(Exception):
    """Anything calcbook says to its user instead of a traceback."""

    exit_code: ClassVar[int] = 3

    def __str__(self) -> str:
        return self.sentence()

    def __reduce__(self) -> tuple[type[CalcbookError], tuple[object, ...]]:
        return type(self), tuple(getattr(self, field.name) for field in fields(self))

    def sentence(self) -> str:
        """The message: what, where, what was found, what is allowed."""
        return type(self).__name__


@dataclass(eq=False)
class UsageFault(CalcbookError):
    """The command was called in a way that cannot work."""

    exit_code: ClassVar[int] = 2
    message: str

    def sentence(self) -> str:
        """The message as given."""
        return self.message


@dataclass(frozen=True)
class Fault:
    """One fault of the inputs: its place, what was found and what is allowed."""

    file: str
    place: str
    message: str

    def __str__(self) -> str:
        return ", ".join(part for part in (self.file, self.place) if part) + ": " + self.message


@dataclass(eq=False)
class InputFaults(CalcbookError):
    """Raised once, after the whole of the inputs was read, with every fault found."""

    exit_code: ClassVar[int] = 2
    faults: tuple[Fault, ...]

    def sentence(self) -> str:
        """One line a fault."""
        return "\n".join(str(fault) for fault in self.faults)


@dataclass(eq=False)
class QuantityFault(CalcbookError):
    """A text is not a number with an allowed unit."""

    exit_code: ClassVar[int] = 2
    message: str

    def sentence(self) -> str:
        """The message as given."""
        return self.message


@dataclass(eq=False)
class WrittenFormFault(CalcbookError):
    """A written form breaks the grammar or one of its bounds."""

    text: str
    message: str
    position: int = 0

    def sentence(self) -> str:
        """The message with the place in the (shortened) written form."""
        shown = self.text if len(self.text) <= 80 else self.text[:77] + "..."
        return f"written form {shown!r}, character {self.position + 1}: {self.message}"


@dataclass(eq=False)
class DimensionFault(CalcbookError):
    """Units or kinds of quantity do not fit a formula."""

    message: str

    def sentence(self) -> str:
        """The message as given."""
        return self.message


@dataclass(eq=False)
class EvaluationFault(CalcbookError):
    """A formula has no finite real value for the numbers it was given."""

    text: str
    message: str

    def sentence(self) -> str:
        """The formula and why it has no value."""
        return f"{self.text}: {self.message}"


@dataclass(eq=False)
class LookUpFault(CalcbookError):
    """A table has no value for the given keys."""

    table: str
    message: str

    def sentence(self) -> str:
        """The table and what it lacks."""
        return f"table {self.table}: {self.message}"


@dataclass(eq=False)
class TemplateFault(CalcbookError):
    """A template breaks the rules of templates."""

    template: str
    message: str

    def sentence(self) -> str:
        """The template and the rule."""
        return f"template {self.template}: {self.message}"


@dataclass(eq=False)
class SheetFault(CalcbookError):
    """A line of a sheet cannot be made."""

    sheet: str
    template: str
    line: str
    message: str

    def sentence(self) -> str:
        """Sheet, template and line, then what is wrong there."""
        place = ", ".join(part for part in (f"sheet {self.sheet}", self.template, self.line) if part)
        return f"{place}: {self.message}"


@dataclass(eq=False)
class WorkspaceFault(CalcbookError):
    """The machine does not let calcbook work: disk, rights, project in use."""

    exit_code: ClassVar[int] = 4
    message: str

    def sentence(self) -> str:
        """The message as given."""
        return self.message


_MOST_CHOICES = 20


def nearest(name: str, valid: Iterable[str]) -> str:
    """A question that offers the nearest valid name, else the list of valid names.

    Parameters: `name` as found; `valid` names allowed there. Result: a sentence to end a message with.
    """
    choices = sorted(valid)
    close = difflib.get_close_matches(name.lower(), [choice.lower() for choice in choices], n=1, cutoff=0.6)
    if close:
        found = next(choice for choice in choices if choice.lower() == close[0])
        return f'did you mean "{found}"?'
    if len(choices) > _MOST_CHOICES:
        return "nearest: " + ", ".join(difflib.get_close_matches(name, choices, n=5, cutoff=0.0))
    return "allowed: " + ", ".join(choices)
