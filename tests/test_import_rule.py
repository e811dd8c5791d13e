"""The import rule: a module imports from its left or its own folder only, templates' code cells included.

errors <- records <- {formulas, reference} <- sheet <- {inputs, plan, run, publish, review} <- flow <- report <- cli
"""

from __future__ import annotations

import ast
import json
from collections.abc import Iterator
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent
PACKAGE = ROOT / "calcbook"
STAGES = ("inputs", "plan", "run", "publish", "review")
LEFT: dict[str, tuple[str, ...]] = {
    "errors": (),
    "records": ("errors",),
    "formulas": ("errors", "records"),
    "reference": ("errors", "records"),
    "sheet": ("errors", "records", "formulas", "reference"),
    **dict.fromkeys(STAGES, ("errors", "records", "formulas", "reference", "sheet")),
}
LEFT["flow"] = (*LEFT["run"], *STAGES)
LEFT["report"] = (*LEFT["flow"], "flow")
LEFT["cli"] = (*LEFT["report"], "report")
#: outside library -> the places that own it
OWNERS: dict[str, tuple[str, ...]] = {
    "pint": ("records/dimension.py",),
    "sympy": ("records/written/algebra.py", "records/headroom.py", "formulas/"),
    "mpmath": ("records/written/evaluate.py",),
    "papermill": ("run/",),
    "nbformat": ("run/", "publish/"),
    "nbconvert": ("publish/",),
    "IPython": ("run/", "sheet.py"),
    "typst": ("publish/",),
    "pikepdf": ("publish/",),
    "pydantic": ("records/trace.py", "inputs/"),
    "typer": ("cli.py",),
    "rich": ("cli.py", "report.py"),
    "jinja2": ("publish/",),
}


def imported(source: str) -> Iterator[str]:
    """The names of modules that a source text imports, at any depth."""
    for node in ast.walk(ast.parse(source)):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom) and node.module:
            yield node.module
            yield from (f"{node.module}.{alias.name}" for alias in node.names if node.module == "calcbook")


def part_of(module: str) -> str:
    """The part of the package that a module belongs to; "" for the package itself."""
    pieces = module.split(".")
    return pieces[1] if len(pieces) > 1 else ""


def modules() -> list[Path]:
    return sorted(path for path in PACKAGE.rglob("*.py") if path.name != "__init__.py" or path.parent != PACKAGE)


@pytest.mark.parametrize("path", modules(), ids=lambda path: str(path.relative_to(PACKAGE)))
def test_modules_import_from_their_left(path: Path) -> None:
    own = path.relative_to(PACKAGE).parts[0].removesuffix(".py")
    allowed = {*LEFT[own], own, "", "__version__"}
    for module in imported(path.read_text("utf-8")):
        if module.split(".")[0] == "calcbook":
            assert part_of(module) in allowed, f"{path.relative_to(ROOT)} imports {module}"


@pytest.mark.parametrize("path", modules(), ids=lambda path: str(path.relative_to(PACKAGE)))
def test_outside_libraries_stay_with_their_owners(path: Path) -> None:
    place = path.relative_to(PACKAGE).as_posix()
    for module in imported(path.read_text("utf-8")):
        owners = OWNERS.get(module.split(".")[0])
        assert owners is None or place.startswith(owners), f"{place} imports {module}, which belongs to {owners}"


@pytest.mark.parametrize("path", sorted((ROOT / "templates").glob("*.ipynb")), ids=lambda path: path.stem)
def test_templates_import_what_a_template_may(path: Path) -> None:
    for cell in json.loads(path.read_text("utf-8"))["cells"]:
        if cell["cell_type"] != "code":
            continue
        for module in imported("".join(cell["source"])):
            assert module.split(".")[0] == "calcbook", f"{path.name} imports {module}"
            assert part_of(module) in {"formulas", "reference", "sheet", ""}, f"{path.name} imports {module}"


def test_visible_top_level_is_fixed() -> None:
    allowed = {"README.md", "DEVELOPERS.md", "pyproject.toml", "calcbook", "templates", "tests", "examples"}
    made = {"build", "dist"}
    visible = {path.name for path in ROOT.iterdir() if not path.name.startswith(".")} - made
    assert visible == allowed


def test_files_stay_short() -> None:
    for folder in ("calcbook", "tests"):
        for path in (ROOT / folder).rglob("*.py"):
            assert len(path.read_text("utf-8").splitlines()) <= 400, path
