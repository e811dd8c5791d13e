"""The nbconvert exporter `calcbook-html`: an executed workbook as a calculation sheet in HTML."""

from __future__ import annotations

from typing import Any

from nbconvert.exporters import Exporter
from nbformat import NotebookNode
from traitlets.config import Config

from calcbook.publish.sheet_html import sheet_html
from calcbook.publish.sheet_view import Context, sheet_view


class SheetHTMLExporter(Exporter):  # type: ignore[misc] # nbconvert has no types
    """A self-contained page of one workbook.

    Built with an empty configuration: nothing set for nbconvert on this machine changes a sheet. `context` is the
    title block and what lies beside the sheet; on its own a workbook prints as a draft.
    """

    export_from_notebook = "calculation sheet (HTML)"
    output_mimetype = "text/html"

    def __init__(self, config: Config | None = None, context: Context | None = None, **traits: Any) -> None:
        """Build the exporter; `config` is there because nbconvert hands one over, and is not used."""
        super().__init__(config=Config(), **traits)
        self.context = context or Context()

    def _file_extension_default(self) -> str:
        return ".html"

    def from_notebook_node(
        self, nb: NotebookNode, resources: dict[str, Any] | None = None, **kw: object
    ) -> tuple[str, dict[str, Any]]:
        """The page as text, and nbconvert's resources."""
        notebook, resources = super().from_notebook_node(nb, resources, **kw)
        return sheet_html(sheet_view(notebook, self.context), in_package=self.context.in_package), resources
