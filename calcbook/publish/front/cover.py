"""The cover: what the package is, what is open in it, and what made it."""

from __future__ import annotations

from functools import cache
from importlib.metadata import version
from platform import python_version

from calcbook import __version__
from calcbook.publish import cautions
from calcbook.publish.front.listing import Cover, counted
from calcbook.publish.front.material import Material, criteria
from calcbook.publish.front.open_items import adopted_lines, not_confirmed

#: what works the numbers out or puts them on paper
LIBRARIES = ("sympy", "mpmath", "pint", "papermill", "nbconvert", "nbformat", "jinja2", "typst", "pikepdf")


def cover(material: Material) -> Cover:
    """The cover of a package."""
    return Cover(
        material.project.title, _flag(material), counted(len(material.sheets), "sheet"), _cautions(material), versions()
    )


@cache
def versions() -> tuple[str, ...]:
    """calcbook, Python and the libraries, each with its version."""
    libraries = (f"{name} {version(name)}" for name in LIBRARIES)
    return (f"calcbook {__version__}", f"Python {python_version()}", *libraries)


def _flag(material: Material) -> tuple[str, ...]:
    """What stands open, each kind with its count; the sentence that nothing does."""
    statuses = [item.origin.status for item in not_confirmed(material) if item.lines]
    verdicts = [line.verdict for sheet in material.sheets for line in criteria(sheet)]
    kinds = (
        (statuses.count("to be confirmed"), "datum to be confirmed", "data to be confirmed"),
        (statuses.count("assumed"), "assumed datum", "assumed data"),
        (verdicts.count("not met"), "criterion not met", "criteria not met"),
        (verdicts.count("not shown"), "criterion not shown", "criteria not shown"),
    )
    found = [counted(*kind) for kind in kinds if kind[0]]
    if material.failed:
        numbers = ", ".join(sheet.number for sheet in material.failed)
        found.append(f"{counted(len(material.failed), 'sheet')} {cautions.NOT_FOR_ISSUE}: {numbers}")
    return tuple(found)


def _cautions(material: Material) -> tuple[str, ...]:
    """The general cautions, and what the reader must know of tables and adopted values."""
    found = list(cautions.GENERAL)
    unsigned = sum(1 for table in material.tables if table.signed_off is None)
    if unsigned:
        found.append(
            f"{unsigned} of {counted(len(material.tables), 'table')} used: values {cautions.NOT_COMPARED}; "
            "see Status of tables."
        )
    adopted = len(adopted_lines(material))
    if adopted:
        found.append(
            f"{counted(adopted, 'calculated value')} replaced by "
            f"{'an adopted one' if adopted == 1 else 'adopted ones'}; see Adopted values."
        )
    return tuple(found)
