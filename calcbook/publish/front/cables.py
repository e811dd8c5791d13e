"""The cable schedule: what each circuit is built of, from the inputs and from the lines of its sheet."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from calcbook.publish import anchors, cautions
from calcbook.publish.front.listing import Column, Listing, Part, words
from calcbook.publish.front.material import Material, conclusion, criteria, to_line, to_sheet
from calcbook.publish.rows import in_words, prose
from calcbook.publish.view import Paragraph, Span
from calcbook.records.line import ChoiceLine, Line, Valued
from calcbook.records.printed import print_given
from calcbook.records.project import Circuit
from calcbook.records.result import SheetResult


@dataclass(frozen=True)
class _Cable:
    """One circuit with its sheet; `lines` by label, none where there is no sheet or it failed."""

    circuit: Circuit
    sheet: SheetResult | None

    @property
    def lines(self) -> dict[str, Line]:
        made = self.sheet is not None and self.sheet.failure is None
        return {line.label: line for line in self.sheet.trace.lines} if self.sheet and made else {}


_Cell = Callable[[_Cable], Paragraph]


@dataclass(frozen=True)
class _Heading:
    """A column of the schedule: its head, where its cells come from, its width."""

    head: Paragraph
    cell: _Cell
    width: str = "auto"


def _datum(cable: _Cable, *columns: str) -> Paragraph:
    """The first of several columns that the circuit fills in."""
    for column in columns:
        datum = cable.circuit.data.get(column)
        if datum is not None:
            text = print_given(datum.quantity) if datum.quantity is not None else datum.text
            return words(text.replace("_", " "), anchors.to_datum(datum.origin))
    return ()


def _line(cable: _Cable, *labels: str) -> Paragraph:
    """The first of several lines that the sheet has; of one repeated for each conductor the greatest, with its key."""
    lines = cable.lines
    for label in labels:
        line = lines.get(label)
        if isinstance(line, Valued | ChoiceLine):
            return (to_line(line, line.text),)
        repeated = [line for line in lines.values() if isinstance(line, Valued) and line.name == label and line.key]
        if repeated:
            greatest = max(repeated, key=lambda line: line.si)
            return (to_line(greatest, greatest.text), Span(f" {greatest.key}"))
    return ()


def _from(*columns: str) -> _Cell:
    return lambda cable: _datum(cable, *columns)


def _worked(label: str, *columns: str) -> _Cell:
    """A line of the sheet; where there is none, a column of the inputs."""
    return lambda cable: _line(cable, label) or _datum(cable, *columns)


def _setting(cable: _Cable) -> Paragraph:
    return _line(cable, "I_r") or _datum(cable, "setting_Ir", "overload_setting")


def _device(cable: _Cable) -> Paragraph:
    """The device at the origin, and the one that judges overload where it is another."""
    other = _datum(cable, "overload_device")
    return (*_datum(cable, "device"), *((Span(", "), *other) if other else ()))


def _tag(cable: _Cable) -> Paragraph:
    number = cable.circuit.tag
    spans = (to_sheet(number) if cable.sheet else Span(number),)
    own = _datum(cable, "cable_tag")
    return (*own, Span(", "), *spans) if own else spans


def _to(cable: _Cable) -> Paragraph:
    board = _datum(cable, "to")
    return (*board, Span(", "), Span(cable.circuit.description)) if board else words(cable.circuit.description)


def _type(cable: _Cable) -> Paragraph:
    parts = [_datum(cable, column) for column in ("conductor", "insulation", "construction")]
    return tuple(span for part in parts if part for span in (*part, Span(" ")))[:-1]


def _governing(cable: _Cable) -> Paragraph:
    if cable.sheet is None:
        return words("no sheet")
    if cable.sheet.failure is not None:
        return (Span(cautions.NOT_FOR_ISSUE, strong=True),)
    end = conclusion(cable.sheet)
    for line in criteria(cable.sheet):
        if end is not None and line.label == end.governing:
            return prose(in_words(line))
    return ()


def _symbol(name: str) -> _Heading:
    return _Heading((Span(name, symbol=True),), _worked(name))


#: shown where at least one circuit fills them
_SCHEDULE = (
    _Heading(words("Cable, sheet"), _tag),
    _Heading(words("From"), _from("from")),
    _Heading(words("To"), _to, "1.5fr"),
    _Heading(words("Type"), _type, "1fr"),
    _Heading(words("Cores"), _from("cores")),
    _Heading(words("Size"), _worked("size", "size")),
    _Heading(words("Neutral"), _from("neutral_size")),
    _Heading(words("PE"), _from("protective_size")),
    _Heading(words("Runs"), _worked("n", "runs")),
    _Heading(words("Length"), _worked("l", "length")),
    _Heading(words("Method"), _from("method")),
    _symbol("I_B"),
    _Heading(words("Device"), _device, "1fr"),
    _Heading((Span("I_n", symbol=True),), _worked("I_n", "rating")),
    _Heading((Span("I_r", symbol=True),), _setting),
    _symbol("C_a"),
    _symbol("C_s"),
    _symbol("C_d"),
    _symbol("C_g"),
    _symbol("C_h"),
    _symbol("I_t"),
    _symbol("I_Z"),
    _symbol("du"),
    _symbol("du_tot"),
    _Heading(words("Governing criterion"), _governing, "1.3fr"),
    _Heading(words("Drawing"), _from("drawing"), "0.7fr"),
)


def cable_schedule(material: Material) -> Part:
    """Every circuit of the project with its cable; columns that no circuit fills are left out."""
    sheets = {sheet.number: sheet for sheet in material.sheets}
    cables = [_Cable(circuit, sheets.get(circuit.tag)) for circuit in material.project.circuits]
    cells = [[heading.cell(cable) for heading in _SCHEDULE] for cable in cables]
    filled = [index for index in range(len(_SCHEDULE)) if any(row[index] for row in cells)]
    heads = tuple(Column(_SCHEDULE[index].head, _SCHEDULE[index].width) for index in filled)
    rows = tuple(tuple(row[index] for index in filled) for row in cells)
    return Part("cables", "Cable schedule", (), (Listing("Cables", heads, rows, "There are no circuits."),), wide=True)
