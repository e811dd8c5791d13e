"""A sheet as one HTML page that is complete in itself."""

from __future__ import annotations

from markupsafe import Markup

from calcbook.publish.anchors import INDEX
from calcbook.publish.html_page import page, symbol
from calcbook.publish.view import Formula, SheetView, Span
from calcbook.records.written import mathml


def sheet_html(view: SheetView, *, in_package: bool) -> str:
    """The page of a sheet, of a failed one too; `in_package` adds the way back to the register."""
    return page("sheet.html", view=view, side=_side, register=INDEX if in_package else "")


def _side(side: Formula | Span) -> Markup:
    """One side of an equation in MathML; texts are escaped by the printers or here."""
    if isinstance(side, Formula):
        inner = mathml.symbols(side.node) if side.texts is None else mathml.values(side.node, side.texts, side.links)
        return Markup(inner)  # noqa: S704
    if side.symbol:
        return symbol(side.text)
    if side.link:
        return Markup('<mn><a href="{}">{}</a></mn>').format(side.link, side.text)
    return Markup("<mn>{}</mn>").format(side.text)
