"""Pages in HTML from Jinja templates: every text escaped, every name defined, nothing fetched, no script."""

from __future__ import annotations

from functools import cache
from pathlib import Path

from jinja2 import Environment, FileSystemLoader, StrictUndefined
from markupsafe import Markup

from calcbook.publish import cautions
from calcbook.publish.view import signature
from calcbook.records.written import mathml

_PARTS = Path(__file__).resolve().parent / "html_parts"


def symbol(label: str) -> Markup:
    """A symbol in MathML; the printer escapes what is not its own."""
    return Markup(mathml.symbol(label))  # noqa: S704


@cache
def _environment() -> Environment:
    environment = Environment(
        loader=FileSystemLoader(_PARTS),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
    )
    style = (_PARTS / "style.css").read_text("utf-8")
    environment.globals.update(
        style=Markup(style),  # noqa: S704 - our own file
        symbol=symbol,
        signature=signature,
        general_cautions=cautions.GENERAL,
        not_for_issue=cautions.NOT_FOR_ISSUE,
    )
    return environment


def page(template: str, **data: object) -> str:
    """A page as text: `template` is a file in html_parts, `data` what it shows."""
    return _environment().get_template(template).render(**data)
