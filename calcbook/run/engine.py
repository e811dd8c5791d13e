"""The papermill engine by its registered name: `papermill --engine calcbook IN OUT`.

Papermill loads this module by entry point while it is itself being loaded. So the engine, which is built on papermill's
classes, stands in `warm_engine` and is fetched when its name is asked for: whoever is imported first, it works.
"""

from __future__ import annotations

import importlib


def __getattr__(name: str) -> type:
    """`WarmEngine`, the engine class that papermill calls."""
    if name != "WarmEngine":
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    importlib.import_module("papermill.engines")
    engine: type = importlib.import_module("calcbook.run.warm_engine").WarmEngine
    return engine
