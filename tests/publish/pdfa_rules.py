"""The rules of PDF/A-3b (ISO 19005-3) that joining can break, each checked with pikepdf; no validator is to be had.

- file: header of version 1.4 to 1.7; an ID in the trailer; no encryption
- metadata: one XMP stream in the catalog, not compressed, part 3 conformance B; title, makers and dates as in the
  document information
- colour: one output intent with a profile; each page's device colours rest on it
- fonts: every font of every page, its forms and descendants has its program embedded
- actions: no JavaScript, no action on opening, no additional actions; links lead inside the file
- annotations: each has its print flag and no hidden one
- files: each has F, UF, AFRelationship, MIME type, date, size, checksum; each stands in the catalog's AF too
- streams: no LZW, no encryption filter, no data outside the file
- structure: no remains of tags, forms, layers or XFA; every bookmark leads to a page of the file
- pages: sides of 3 to 14400 units
"""

from __future__ import annotations

import hashlib
import io
from collections.abc import Iterator
from typing import Any

import pikepdf
from pikepdf import Name, Pdf

_FORBIDDEN_ACTIONS = {"/JavaScript", "/Launch", "/Sound", "/Movie", "/ResetForm", "/ImportData", "/Hide", "/Rendition"}


def broken_rules(pdf: bytes) -> list[str]:
    """Every rule that the file breaks, in words; none where it is as it should be."""
    with Pdf.open(io.BytesIO(pdf)) as document:
        checks = (_metadata, _colour, _fonts, _actions, _files, _streams, _structure)
        return [*_file(pdf, document), *(fault for check in checks for fault in check(document))]


def _file(pdf: bytes, document: Pdf) -> Iterator[str]:
    if not pdf.startswith(b"%PDF-1.") or pdf[7:8] not in b"4567":
        yield f"header {pdf[:8]!r}"
    comment = pdf.splitlines()[1]
    if not comment.startswith(b"%") or sum(byte > 127 for byte in comment) < 4:
        yield "no comment of four high bytes after the header"
    if "/ID" not in document.trailer:
        yield "no ID in the trailer"
    if "/Encrypt" in document.trailer:
        yield "encrypted"
    for page in document.pages:
        left, low, right, high = (float(side) for side in page.mediabox)
        if not (3 <= right - left <= 14400 and 3 <= high - low <= 14400):
            yield "a page is too small or too large"


def _metadata(document: Pdf) -> Iterator[str]:
    stream = document.Root.get("/Metadata")
    streams = [it for it in document.objects if isinstance(it, pikepdf.Stream) and it.get("/Type") == Name.Metadata]
    if stream is None or len(streams) != 1:
        yield f"{len(streams)} metadata streams"
        return
    if "/Filter" in stream:
        yield "the metadata are compressed"
    text = stream.read_raw_bytes().decode("utf-8")
    for said in ("<pdfaid:part>3<", "<pdfaid:conformance>B<"):
        if text.count(said) != 1:
            yield f"metadata without {said}"
    with document.open_metadata(set_pikepdf_as_editor=False, update_docinfo=False) as metadata:
        info = {key: str(value) for key, value in document.docinfo.items()}
        pairs = (("dc:title", "/Title"), ("xmp:CreatorTool", "/Creator"), ("pdf:Producer", "/Producer"))
        for name, key in pairs:
            if metadata.get(name) != info.get(key):
                yield f"{name} {metadata.get(name)!r} differs from {key} {info.get(key)!r}"
        for name, key in (("xmp:CreateDate", "/CreationDate"), ("xmp:ModifyDate", "/ModDate")):
            digits = "".join(character for character in str(metadata.get(name)) if character.isdigit())
            if f"D:{digits}Z" != info.get(key):
                yield f"{name} differs from {key}"


def _colour(document: Pdf) -> Iterator[str]:
    intents: Any = document.Root.get("/OutputIntents", [])
    if len(intents) != 1:
        yield f"{len(intents)} output intents"
    for intent in intents:
        if intent.get("/S") != Name.GTS_PDFA1 or "/DestOutputProfile" not in intent:
            yield "an output intent without purpose or profile"


def _fonts(document: Pdf) -> Iterator[str]:
    fonts = [it for it in document.objects if isinstance(it, pikepdf.Dictionary) and it.get("/Type") == Name.Font]
    if not fonts:
        yield "no font at all"
    for font in fonts:
        if font.get("/Subtype") in (Name.Type0, Name.Type3):
            continue
        descriptor: Any = font.get("/FontDescriptor", {})
        if not any(key in descriptor for key in ("/FontFile", "/FontFile2", "/FontFile3")):
            yield f"font {font.get('/BaseFont')} is not embedded"
        if font.get("/Subtype") == Name.CIDFontType2 and "/CIDToGIDMap" not in font:
            yield f"font {font.get('/BaseFont')} has no map of glyphs"


def _actions(document: Pdf) -> Iterator[str]:
    if "/OpenAction" in document.Root or "/JavaScript" in document.Root.get("/Names", {}):
        yield "an action on opening or JavaScript"
    for it in document.objects:
        if not isinstance(it, pikepdf.Dictionary):
            continue
        if "/AA" in it or "/JS" in it or str(it.get("/S", "")) in _FORBIDDEN_ACTIONS:
            yield "an action that is not allowed"
    for page in document.pages:
        for note in page.get("/Annots", []):
            flags = int(note.get("/F", 0))
            if not flags & 4 or flags & 0b100011:
                yield f"an annotation with the flags {flags}"


def _files(document: Pdf) -> Iterator[str]:
    files: Any = document.Root.get("/AF", [])
    associated = sorted(it.objgen for it in files)
    named = dict(pikepdf.NameTree(document.Root.Names.EmbeddedFiles)) if document.attachments else {}
    if associated != sorted(it.objgen for it in named.values()):
        yield "the files of AF are not those attached"
    for name, it in named.items():
        spec: Any = it
        if str(spec.get("/F")) != name or str(spec.get("/UF")) != name or "/AFRelationship" not in spec:
            yield f"{name}: F, UF or AFRelationship"
        stream = spec.EF.F
        parameters = stream.get("/Params", {})
        data = stream.read_bytes()
        if "/" not in str(stream.get("/Subtype", ""))[1:]:
            yield f"{name}: no MIME type"
        if int(parameters.get("/Size", -1)) != len(data) or "/ModDate" not in parameters:
            yield f"{name}: size or date"
        if bytes(parameters.get("/CheckSum", b"")) != hashlib.md5(data, usedforsecurity=False).digest():
            yield f"{name}: checksum"


def _streams(document: Pdf) -> Iterator[str]:
    for it in document.objects:
        if isinstance(it, pikepdf.Stream):
            if "LZW" in str(it.get("/Filter", "")) or "Crypt" in str(it.get("/Filter", "")):
                yield "a filter that is not allowed"
            if "/F" in it:
                yield "a stream outside the file"


def target(item: pikepdf.OutlineItem) -> Any:
    """The page object that a bookmark leads to."""
    destination: Any = item.destination
    if destination is None and item.action is not None:
        destination = item.action.D
    return destination[0]


def _structure(document: Pdf) -> Iterator[str]:
    for key in ("/StructTreeRoot", "/MarkInfo", "/AcroForm", "/OCProperties", "/Perms", "/Requirements"):
        if key in document.Root:
            yield f"{key} in the catalog"
    pages = {page.obj.objgen for page in document.pages}
    if any("/StructParents" in page.obj for page in document.pages):
        yield "a page with remains of tags"
    with document.open_outline() as outline:
        items = list(outline.root)
        while items:
            item = items.pop()
            items += item.children
            if target(item).objgen not in pages:
                yield f"bookmark {item.title} leads nowhere"
