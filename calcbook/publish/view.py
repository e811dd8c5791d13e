"""A sheet ready for print: the texts, and where they stand. HTML and PDF are made from this and from nothing else."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from calcbook.records.project import TitleBlock
from calcbook.records.result import Failure
from calcbook.records.written.layout import Texts
from calcbook.records.written.tree import Node


@dataclass(frozen=True)
class Span:
    """A piece of running text; with `symbol` the text is the label of a symbol and is set as one."""

    text: str
    link: str = ""
    symbol: bool = False
    strong: bool = False


Paragraph = tuple[Span, ...]


@dataclass(frozen=True)
class Formula:
    """A formula: with its symbols, or, where `texts` are given, with values that link to the lines they come from."""

    node: Node
    texts: Texts | None = None
    links: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True)
class Equation:
    """One line of mathematics: left side, sign, right side; a left side left out repeats the one above."""

    left: Formula | Span | None
    sign: str
    right: Formula | Span


@dataclass(frozen=True)
class DataRow:
    """A datum or a choice: one row of a compact table."""

    anchor: str
    label: str
    description: Paragraph
    value: Span
    place: str
    document: str
    status: str
    remark: str


@dataclass(frozen=True)
class WorkRow:
    """A line of working: reference column, working with its description and notes, result column."""

    anchor: str
    reference: tuple[Paragraph, ...]
    description: Paragraph
    equations: tuple[Equation, ...]
    notes: tuple[Paragraph, ...]
    result: tuple[Paragraph, ...]


@dataclass(frozen=True)
class Section:
    """What stands under one heading: opening text, the data in one table, then the working with text between.

    `level` is 1 for a subject and more for its parts.
    """

    title: Paragraph
    level: int
    opening: tuple[Paragraph, ...]
    data: tuple[DataRow, ...]
    work: tuple[WorkRow | Paragraph, ...]


@dataclass(frozen=True)
class CriterionRow:
    """A criterion in the summary, with the words that say whether it governs."""

    description: Span
    sides: tuple[Span, ...]
    utilisation: Span
    verdict: str
    governs: str


@dataclass(frozen=True)
class HeadroomRow:
    """How far a datum may move."""

    criterion: Span
    datum: Span
    symbol: str
    present: Span
    limit: Span
    remark: str


@dataclass(frozen=True)
class Summary:
    """The end of a sheet; `verdict` in a sentence, `examined` the subjects it speaks of, `adopted` one line a value."""

    verdict: str
    examined: str
    adopted: tuple[Paragraph, ...]
    governing: Paragraph
    criteria: tuple[CriterionRow, ...]
    headrooms: tuple[HeadroomRow, ...]
    open_items: tuple[str, ...]
    cautions: tuple[str, ...]


@dataclass(frozen=True)
class SheetView:
    """One sheet; `caution` names its tables not signed off, beside the general cautions in the footer of every page."""

    number: str
    title: str
    block: TitleBlock
    version: str
    sections: tuple[Section, ...]
    summary: Summary | None
    caution: str
    failure: Failure | None


def signature(block: TitleBlock, name: str) -> str:
    """A name in the title block for check or approval: of a draft it says that the person has not signed yet."""
    return f"{name}, not yet" if name and block.state == "draft" else name
