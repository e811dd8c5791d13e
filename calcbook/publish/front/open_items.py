"""Data to be confirmed and assumptions, and the values that the engineer adopted."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from calcbook.publish import anchors
from calcbook.publish.front.listing import Listing, Part, columns, words
from calcbook.publish.front.material import Material, data_of, to_line, users
from calcbook.publish.rows import document, place, prose
from calcbook.publish.view import Paragraph, Span
from calcbook.records.line import ChoiceLine, DatumLine, StepLine
from calcbook.records.printed import print_given
from calcbook.records.project import Origin


@dataclass
class NotConfirmed:
    """A datum that is not confirmed, with the lines that use it: none where no sheet does."""

    origin: Origin
    text: str
    lines: list[DatumLine | ChoiceLine] = field(default_factory=list)


def not_confirmed(material: Material) -> tuple[NotConfirmed, ...]:
    """Every datum of the inputs and of the sheets that is not confirmed, in the order of the inputs."""
    found: dict[str, NotConfirmed] = {}
    for datum in data_of(material.project):
        if datum.origin.status != "confirmed":
            text = print_given(datum.quantity) if datum.quantity is not None else datum.text
            found[anchors.datum_anchor(datum.origin)] = NotConfirmed(datum.origin, text)
    for line in material.lines():
        if isinstance(line, DatumLine | ChoiceLine) and line.origin.status != "confirmed":
            key = anchors.datum_anchor(line.origin)
            found.setdefault(key, NotConfirmed(line.origin, line.text)).lines.append(line)
    return tuple(found.values())


def open_items(material: Material) -> Part:
    """The part that lists what is not confirmed; what no sheet uses stands apart."""
    items = not_confirmed(material)
    return Part(
        "open-items",
        "Data to be confirmed and assumptions",
        (),
        (
            _listing("Used by sheets", [item for item in items if item.lines]),
            _listing("Not used by any sheet", [item for item in items if not item.lines]),
        ),
        wide=True,
    )


def _listing(caption: str, items: Sequence[NotConfirmed]) -> Listing:
    widths = {"Status": "auto", "Datum": "1.4fr", "Value": "auto", "Place_in_the_inputs": "1.5fr", "Document": "1.2fr"}
    return Listing(caption, columns(**widths, Remark="1.4fr", Sheets="1.2fr"), tuple(_row(item) for item in items))


def _row(item: NotConfirmed) -> tuple[Paragraph, ...]:
    origin = item.origin
    return (
        (Span(origin.status, strong=True),),
        prose(item.lines[0].description) if item.lines else words(origin.column.replace("_", " ")),
        words(item.text or "not stated", anchors.to_datum(origin)),
        words(place(origin)),
        words(document(origin)),
        words(origin.remark),
        users(item.lines),
    )


def adopted_lines(material: Material) -> list[StepLine]:
    """The steps with an adopted value; a board's line that repeats one of a circuit, as I_B[C-014], is not another."""
    lines = [line for line in material.lines() if isinstance(line, StepLine) and line.adopted]
    own = {(line.sheet, line.name) for line in lines}
    return [line for line in lines if (line.key, line.name) not in own]


def adopted_values(material: Material) -> Part:
    """The part that lists every value adopted in place of a calculated one."""
    rows = tuple(_adopted_row(line) for line in adopted_lines(material))
    widths = {"Sheet": "auto", "Line": "auto", "What": "1.3fr", "Calculated": "auto", "Adopted": "auto"}
    heads = columns(**widths, Reason="2fr", By="auto", Date="auto")
    listing = Listing("Adopted in place of calculated", heads, rows)
    return Part("adopted", "Adopted values", (), (listing,), wide=True)


def _adopted_row(line: StepLine) -> tuple[Paragraph, ...]:
    adopted = line.adopted
    assert adopted is not None  # noqa: S101 - the caller lists adopted values only
    return (
        (to_line(line, line.sheet),),
        (Span(line.label, symbol=True),),
        prose(line.description),
        (to_line(line, line.calculated_text),),
        (to_line(line, line.text),),
        words(adopted.reason),
        words(adopted.by),
        words(adopted.date),
    )
