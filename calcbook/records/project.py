"""What the inputs say: data with their origin, circuits, adopted values, sign-offs; and the plan of sheets."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from calcbook.records.quantity import Quantity

Status = Literal["confirmed", "assumed", "to be confirmed"]


@dataclass(frozen=True)
class Origin:
    """Where a datum comes from.

    `file`, `tag` and `column` (in TOML the table, as `boards.MB`, and the key) are printed on sheets; row numbers are
    not, so that an inserted row moves nothing. `document`, `revision` and `page` name the source document.
    """

    file: str
    tag: str
    column: str
    status: Status = "to be confirmed"
    document: str = ""
    revision: str = ""
    page: str = ""
    remark: str = ""


@dataclass(frozen=True)
class Datum:
    """A value from the inputs: a quantity, or a word of a closed list, or free text (then `quantity` is None)."""

    text: str
    quantity: Quantity | None
    origin: Origin


@dataclass(frozen=True)
class Adopted:
    """A value the engineer puts in place of a calculated one, with reason, initials and date (ISO)."""

    line: str
    value: Quantity
    reason: str
    by: str
    date: str


@dataclass(frozen=True)
class SignOff:
    """A table that the engineer has compared with a licensed copy."""

    by: str
    date: str
    document: str


@dataclass(frozen=True)
class TitleBlock:
    """What the title block of every sheet says of the project; `date` is data, never the clock."""

    number: str
    title: str
    client: str = ""
    date: str = ""
    prepared: str = ""
    checked: str = ""
    approved: str = ""
    revision: str = ""
    state: str = "draft"


@dataclass(frozen=True)
class Circuit:
    """One row of circuits.csv; `data` by column name, empty cells absent."""

    tag: str
    description: str
    data: Mapping[str, Datum] = field(default_factory=dict)
    adopted: tuple[Adopted, ...] = ()


@dataclass(frozen=True)
class Board:
    """One table `[boards.TAG]`; `data` by key."""

    tag: str
    data: Mapping[str, Datum] = field(default_factory=dict)


@dataclass(frozen=True)
class Source:
    """One table `[sources.TAG]`; `data` by key."""

    tag: str
    data: Mapping[str, Datum] = field(default_factory=dict)


@dataclass(frozen=True)
class Project:
    """Everything the inputs say, validated.

    `folder` is the project's path; `basis` by key; `editions` maps a standard to its edition; `signed_off` maps a
    table ("IEC 60364-5-52:2009, B.52.4") to its sign-off; `unused` names accepted columns that no subject uses yet;
    `tables` holds the texts of the project's own tables by key.
    """

    folder: str
    title: TitleBlock
    basis: Mapping[str, Datum]
    editions: Mapping[str, str]
    boards: tuple[Board, ...]
    circuits: tuple[Circuit, ...]
    sources: tuple[Source, ...] = ()
    signed_off: Mapping[str, SignOff] = field(default_factory=dict)
    unused: tuple[str, ...] = ()
    tables: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True)
class SheetPlan:
    """One workbook to be made: its sheet's number, the templates in order, and what is handed to them.

    `parameters` by template parameter name, texts as entered (repeated ones as a dict of texts by key); `given` is the
    reserved parameter of the same name. A board's sheet has two workbooks: `part` is "demand" or "supply". `rests_on`
    names, by parameter, the workbook and the line whose value is brought forward; `runs_at_most` parallel runs may be
    chosen with an empty size.
    """

    number: str
    title: str
    templates: tuple[str, ...]
    parameters: Mapping[str, str | Mapping[str, Mapping[str, str]]]
    given: Mapping[str, object]
    part: str = ""
    rests_on: Mapping[str, tuple[str, str]] = field(default_factory=dict)
    runs_at_most: int = 1

    @property
    def name(self) -> str:
        """The name of the workbook: the sheet's number, with the part behind it where there is one."""
        return workbook_name(self.number, self.part)


def workbook_name(number: str, part: str) -> str:
    """The name of a workbook: "C-014", "MB~demand"."""
    return f"{number}~{part}" if part else number


@dataclass(frozen=True)
class Plan:
    """The sheets of a project, in the order of the register."""

    sheets: tuple[SheetPlan, ...]
