"""package.pdf: front matter and sheets joined into one PDF/A-3b, with bookmarks and attached files."""

from __future__ import annotations

import io
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from xml.sax.saxutils import escape

from pikepdf import Array, AttachedFileSpec, Dictionary, Name, OutlineItem, Pdf, String

from calcbook import __version__

_MAKER = f"calcbook {__version__}"
_XMP = """<?xpacket begin="\ufeff" id="W5M0MpCehiHzreSzNTczkc9d"?>
<x:xmpmeta xmlns:x="adobe:ns:meta/"><rdf:RDF xmlns:rdf="http://www.w3.org/1999/02/22-rdf-syntax-ns#">
<rdf:Description rdf:about="" xmlns:dc="http://purl.org/dc/elements/1.1/" xmlns:xmp="http://ns.adobe.com/xap/1.0/" \
xmlns:pdf="http://ns.adobe.com/pdf/1.3/" xmlns:pdfaid="http://www.aiim.org/pdfa/ns/id/">
<pdfaid:part>3</pdfaid:part><pdfaid:conformance>B</pdfaid:conformance>
<dc:format>application/pdf</dc:format>
<dc:title><rdf:Alt><rdf:li xml:lang="x-default">{title}</rdf:li></rdf:Alt></dc:title>
<dc:language><rdf:Bag><rdf:li>en</rdf:li></rdf:Bag></dc:language>
<xmp:CreatorTool>{maker}</xmp:CreatorTool><pdf:Producer>{maker}</pdf:Producer>
<xmp:CreateDate>{day}T00:00:00Z</xmp:CreateDate><xmp:ModifyDate>{day}T00:00:00Z</xmp:ModifyDate>
</rdf:Description></rdf:RDF></x:xmpmeta>
<?xpacket end="r"?>"""


@dataclass(frozen=True)
class Attachment:
    """A file inside the package: `relationship` "Source" (what the package is made from) or "Data"."""

    name: str
    description: str
    mime: str
    relationship: str
    content: bytes


def page_count(pdf: bytes) -> int:
    """The number of pages of a PDF."""
    with Pdf.open(io.BytesIO(pdf)) as document:
        return len(document.pages)


def join(title: str, day: date, front: bytes, sheets: Mapping[str, bytes], attachments: Sequence[Attachment]) -> bytes:
    """One PDF of the front matter and the sheets: the same bytes for the same parts.

    Parameters: `title` of the document; `day` stands for every date in it; `sheets` maps a bookmark to its PDF, in
    order. Every part is PDF/A-3b with the same output intent, of which the joined file keeps one. The attached files
    stand in the catalog too, as PDF/A-3 asks.
    """
    with Pdf.open(io.BytesIO(front)) as package:
        firsts: dict[str, int] = {}
        for name, pdf in sheets.items():
            firsts[name] = len(package.pages)
            with Pdf.open(io.BytesIO(pdf)) as sheet:
                package.pages.extend(sheet.pages)
        _bookmark(package, firsts)
        for attachment in attachments:
            package.attachments[attachment.name] = _file(package, attachment, day)
        package.Root.AF = Array([package.attachments[attachment.name].obj for attachment in attachments])
        _describe(package, title, day)
        written = io.BytesIO()
        package.save(written, deterministic_id=True)
    return written.getvalue()


def _bookmark(package: Pdf, firsts: Mapping[str, int]) -> None:
    """The sheets below the bookmarks that the front matter has already."""
    with package.open_outline() as outline:
        sheets = OutlineItem("Calculation sheets", min(firsts.values(), default=None))
        sheets.children.extend(OutlineItem(name, page, "Fit") for name, page in firsts.items())
        if firsts:
            outline.root.append(sheets)
    package.Root.PageMode = Name.UseOutlines


def _file(package: Pdf, attachment: Attachment, day: date) -> AttachedFileSpec:
    """One file to attach; its size and checksum are written with it."""
    return AttachedFileSpec(
        package,
        attachment.content,
        filename=attachment.name,
        description=attachment.description,
        mime_type=attachment.mime,
        creation_date=_stamp(day),
        mod_date=_stamp(day),
        relationship=Name(f"/{attachment.relationship}"),
    )


def _stamp(day: date) -> str:
    return f"D:{day:%Y%m%d}000000Z"


def _describe(package: Pdf, title: str, day: date) -> None:
    """Document information and XMP that say the same of the whole."""
    package.Root.Metadata = package.make_stream(
        _XMP.format(title=escape(title), maker=_MAKER, day=day.isoformat()).encode("utf-8"),
        Type=Name.Metadata,
        Subtype=Name.XML,
    )
    stamp = String(_stamp(day))
    package.docinfo = package.make_indirect(
        Dictionary(Title=String(title), Creator=_MAKER, Producer=_MAKER, CreationDate=stamp, ModDate=stamp)
    )
