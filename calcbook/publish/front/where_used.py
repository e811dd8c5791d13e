"""Which tables the package rests on and how far they are compared; which sheets rest on which table and formula."""

from __future__ import annotations

from collections.abc import Sequence

from calcbook.formulas.formula import Formula
from calcbook.formulas.register import formulas
from calcbook.publish import anchors, cautions
from calcbook.publish.front.listing import Listing, Part, columns, enumerated, words
from calcbook.publish.front.material import Material, to_line, to_sheet, users
from calcbook.publish.rows import compared
from calcbook.publish.view import Paragraph, Span
from calcbook.records.line import ChoiceLine, DatumLine, StepLine, TableLine
from calcbook.records.printed_table import PrintedTable


def table_status(material: Material) -> Part:
    """Each table used: standard, edition, how its values were obtained, and whether it is signed off."""
    whole = {table.key: table for table in material.tables}
    rows = tuple(_status(key, lines, whole.get(key)) for key, lines in _tables(material).items())
    heads = columns(
        Standard="auto", Edition="auto", Table="auto", Title="1.6fr", Values_obtained="1.6fr",
        Compared_with_a_licensed_copy="1.3fr",
    )  # fmt: skip
    return Part("tables", "Status of tables", (), (Listing("Tables used", heads, rows),), wide=True)


def _tables(material: Material) -> dict[str, list[TableLine]]:
    """The tables that sheets cite, each with its lines, by standard and number."""
    found: dict[str, list[TableLine]] = {}
    for line in material.lines():
        if isinstance(line, TableLine):
            found.setdefault(line.table, []).append(line)
    return dict(sorted(found.items(), key=lambda pair: cautions.table_name(pair[1][0])))


def _status(key: str, lines: Sequence[TableLine], whole: PrintedTable | None) -> tuple[Paragraph, ...]:
    citation = lines[0].citation
    signed = (whole.signed_off if whole else None) or citation.signed_off
    standing = compared(citation) if signed else cautions.NOT_COMPARED
    return (
        words(citation.standard),
        words(citation.edition),
        (Span(citation.table, f"{anchors.TABLES}#{anchors.anchor(key)}"),),
        words(citation.title),
        words(whole.obtained if whole else citation.status),
        (Span(standing, strong=signed is None),),
    )


def where_used(material: Material) -> Part:
    """Table, formula, document -> sheets, for whoever learns that one of them has an error or a new revision."""
    tables = tuple(
        ((Span(cautions.table_name(lines[0]), f"{anchors.TABLES}#{anchors.anchor(key)}"),), users(lines))
        for key, lines in _tables(material).items()
    )
    steps: dict[str, list[StepLine]] = {}
    for line in material.lines():
        if isinstance(line, StepLine):
            steps.setdefault(line.formula, []).append(line)
    widths = {"Formula": "0.9fr", "Purpose": "1.3fr", "Derived_or_cited": "1fr", "Published_examples": "1.3fr"}
    rows = tuple(
        (words(name.replace("_", " ")), *_source(name, formulas().get(name), material), users(lines))
        for name, lines in steps.items()
    )
    documents = columns(Document_or_drawing="1fr", Revision="auto", Sheets="2fr")
    listings = (
        Listing("Tables", columns(Table="1fr", Sheets="2fr"), tables),
        Listing("Formulas", columns(**widths, Sheets="2.4fr"), rows),
        Listing("Documents and drawings", documents, _documents(material), "None named by data that sheets use."),
    )
    return Part("where-used", "Where tables, formulas and documents are used", (), listings, wide=True)


def _source(name: str, formula: Formula | None, material: Material) -> tuple[Paragraph, Paragraph, Paragraph]:
    """What a formula is for, where it comes from, and what its published examples are."""
    if name in material.derivations:
        sheet, label = material.derivations[name]
        origin: Paragraph = (Span("derived: "), Span(sheet, anchors.to_sheet(sheet, label)))
    elif formula is not None and formula.derivation:
        origin = words(f"derived: D-{formula.derivation}")
    else:
        origin = words(f"cited: {formula.citation}" if formula is not None else "of the project")
    published = "; ".join(formula.published) if formula is not None else ""
    return words(formula.purpose if formula else ""), origin, words(published or "no published example")


def _documents(material: Material) -> tuple[tuple[Paragraph, ...], ...]:
    """The source documents of the data that sheets use, and the drawings of the circuits that have a sheet."""
    found: dict[tuple[str, str], dict[str, Span]] = {}
    for line in material.lines():
        if isinstance(line, DatumLine | ChoiceLine) and line.origin.document:
            sheets = found.setdefault((line.origin.document, line.origin.revision), {})
            sheets.setdefault(line.sheet, to_line(line, line.sheet))
    numbers = {sheet.number for sheet in material.sheets}
    for circuit in material.project.circuits:
        drawing = circuit.data.get("drawing")
        if drawing is not None and circuit.tag in numbers:
            found.setdefault((drawing.text, ""), {}).setdefault(circuit.tag, to_sheet(circuit.tag))
    return tuple(
        (words(document), words(revision), enumerated(list(sheets.values())))
        for (document, revision), sheets in sorted(found.items())
    )
