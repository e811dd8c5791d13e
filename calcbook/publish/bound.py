"""The bound package: its front matter, in PDF and HTML, and what is attached to it."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from pathlib import Path

from calcbook.errors import WorkspaceFault
from calcbook.publish.front.front import front
from calcbook.publish.front.front_pdf import front_pdf
from calcbook.publish.front.material import Material
from calcbook.publish.html_page import page
from calcbook.publish.joining import Attachment, join, page_count
from calcbook.publish.paper_text import on_paper
from calcbook.publish.sheet_pdf import day_of
from calcbook.records.result import SheetResult
from calcbook.records.trace import trace_to_json

INPUT_FILES = ("inputs.toml", "circuits.csv", "notes.csv", "adopted.csv", "routes.csv")
_MIME = {"toml": "application/toml", "csv": "text/csv", "ipynb": "application/x-ipynb+json", "json": "application/json"}


def bound(material: Material, pdfs: Mapping[str, bytes], attachments: Sequence[Attachment]) -> tuple[bytes, str]:
    """package.pdf and package.html.

    Parameters: `pdfs` by sheet number, in the order of the register, of the sheets that have one.
    """
    counts = {number: page_count(pdf) for number, pdf in pdfs.items()}
    whole = front(replace(material, page_counts=counts))
    paper = front_pdf(whole)
    block = material.project.title
    names = {sheet.number: _unbroken(f"{sheet.number} {sheet.title}") for sheet in material.sheets}
    sheets = {names[number]: pdf for number, pdf in pdfs.items()}
    title = _unbroken(" ".join(text for text in (block.number, block.title) if text))
    html = page("package.html", front=whole, title=block, length=page_count(paper))
    return join(title, day_of(block), paper, sheets, attachments), html


def _unbroken(text: str) -> str:
    """A text for bookmarks and metadata: what has no glyph as on paper, without places for breaks."""
    return on_paper(text).replace("\N{ZERO WIDTH SPACE}", "")


def attached(folder: Path, groups: Mapping[str, Sequence[SheetResult]], results: str) -> Iterator[Attachment]:
    """What goes with the package so that it can be verified from itself: inputs, workbooks, traces, results."""
    for name in INPUT_FILES:
        path = folder / name
        if path.is_file():
            yield _attachment(name, f"inputs of the project, {name}", "Source", _read(path))
    yield _attachment("results.json", "every value and criterion by sheet and line", "Data", results.encode("utf-8"))
    for number, parts in groups.items():
        for part in parts:
            if part.workbook:
                yield _attachment(f"{part.name}.ipynb", f"workbook of sheet {number}", "Source", part.workbook.encode())
            trace = trace_to_json(part.trace).encode("utf-8")
            yield _attachment(f"{part.name}.trace.json", f"trace of sheet {number}", "Data", trace)


def _attachment(name: str, description: str, relationship: str, content: bytes) -> Attachment:
    return Attachment(name, description, _MIME[name.rpartition(".")[2]], relationship, content)


def _read(path: Path) -> bytes:
    try:
        return path.read_bytes()
    except OSError as error:
        raise WorkspaceFault(f"{path}: cannot be read ({error.strerror or error})") from error
