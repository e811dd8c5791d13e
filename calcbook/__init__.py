"""calcbook: traceable calculation sheets for low-voltage three-phase installations."""

__version__ = "0.1.0"
