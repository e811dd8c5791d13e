"""The register of the package, and the basis it rests on."""

from __future__ import annotations

from calcbook.publish import anchors, cautions
from calcbook.publish.front.listing import Cell, Listing, Pages, Part, columns, words
from calcbook.publish.front.material import Material, to_sheet, verdict
from calcbook.publish.rows import document, prose
from calcbook.publish.view import Paragraph, Span
from calcbook.records.notation import names_of_parameter
from calcbook.records.printed import print_given
from calcbook.records.project import Board, Datum, Source
from calcbook.records.result import SheetResult


def register(material: Material) -> Part:
    """Every sheet with its pages in the package, state, revision and verdict."""
    heads = columns(Sheet="auto", Title="2fr", Pages="auto", State="auto", Revision="auto", Verdict="1fr")
    pages = _pages(material)
    rows = tuple(_register_row(sheet, pages.get(sheet.number), material) for sheet in material.sheets)
    opening = ("Pages are those of the package; each sheet carries its own page numbers.",)
    return Part("register", "Register of sheets", opening, (Listing("Sheets in order", heads, rows),))


def _pages(material: Material) -> dict[str, Pages]:
    """Where each sheet that has a PDF stands."""
    found: dict[str, Pages] = {}
    last = 0
    for number, count in material.page_counts.items():
        found[number] = Pages(last + 1, last + count)
        last += count
    return found


def _register_row(sheet: SheetResult, pages: Pages | None, material: Material) -> tuple[Cell, ...]:
    block = material.project.title
    said = cautions.NOT_FOR_ISSUE if sheet.failure else verdict(sheet) or "no criteria"
    return (
        (to_sheet(sheet.number),),
        words(sheet.title),
        pages or words("none"),
        words(block.state),
        words(block.revision or "–"),
        (Span(said, strong=said != "no criteria"),),
    )


def basis(material: Material) -> Part:
    """Every datum of the basis with its source and status, sources and boards, and the editions of the standards."""
    project = material.project
    data = columns(Datum="1.6fr", Value="auto", Document="1.4fr", Status="auto", Remark="1.6fr")
    parts = columns(Tag="auto", Datum="1fr", Value="1.4fr", Document="1.4fr", Status="auto", Remark="1fr")
    tagged: tuple[Source | Board, ...] = (*project.sources, *project.boards)
    return Part(
        "basis",
        "Basis and assumptions",
        (),
        (
            Listing("Basis of calculation", data, tuple(_datum(key, datum) for key, datum in project.basis.items())),
            Listing(
                "Sources and boards",
                parts,
                tuple((words(it.tag), *_datum(key, datum)) for it in tagged for key, datum in it.data.items()),
            ),
            Listing(
                "Editions of the standards",
                columns(Standard="auto", Edition="1fr"),
                tuple((words(standard), words(edition)) for standard, edition in project.editions.items()),
            ),
        ),
    )


def _datum(key: str, datum: Datum) -> tuple[Paragraph, ...]:
    text = print_given(datum.quantity) if datum.quantity is not None else datum.text
    origin = datum.origin
    return (
        _in_words(key),
        words(text, anchors.to_datum(origin)),
        words(document(origin)),
        words(origin.status),
        words(origin.remark),
    )


def _in_words(key: str) -> Paragraph:
    """A key of the inputs as a phrase; where the notation list knows it, with its symbol."""
    entries = names_of_parameter(key)
    phrase = key.replace("_", " ").replace(".", ": ")
    return (*prose(entries[0].description), Span(" "), Span(entries[0].name, symbol=True)) if entries else words(phrase)
