"""The nbconvert exporter `calcbook-pdf`: an executed workbook as a calculation sheet in PDF/A-3b."""

from __future__ import annotations

from typing import Any

from nbconvert.exporters import Exporter
from nbformat import NotebookNode
from traitlets.config import Config

from calcbook.publish.sheet_pdf import sheet_pdf
from calcbook.publish.sheet_view import Context, sheet_view


class SheetPDFExporter(Exporter):  # type: ignore[misc] # nbconvert has no types
    """The PDF of one workbook; built with an empty configuration, as the HTML exporter is.

    Raises SheetFault for a workbook that failed: it is not for issue and has no paper form.
    """

    export_from_notebook = "calculation sheet (PDF)"
    output_mimetype = "application/pdf"

    def __init__(self, config: Config | None = None, context: Context | None = None, **traits: Any) -> None:
        """Build the exporter; `config` is there because nbconvert hands one over, and is not used."""
        super().__init__(config=Config(), **traits)
        self.context = context or Context()

    def _file_extension_default(self) -> str:
        return ".pdf"

    def from_notebook_node(
        self, nb: NotebookNode, resources: dict[str, Any] | None = None, **kw: object
    ) -> tuple[bytes, dict[str, Any]]:
        """The bytes of the PDF, and nbconvert's resources."""
        notebook, resources = super().from_notebook_node(nb, resources, **kw)
        return sheet_pdf(sheet_view(notebook, self.context)), resources
