"""What the tests of publish read back: HTML by a parser, PDF by outside programs, glyphs by the compiler."""

from __future__ import annotations

import os
import re
import shutil
import subprocess
from html.parser import HTMLParser
from pathlib import Path

import pytest


class Page(HTMLParser):
    """Tags, anchors, links with their texts, and the running text of a page."""

    def __init__(self, source: str) -> None:
        super().__init__()
        self.tags: list[str] = []
        self.ids: list[str] = []
        self.links: list[tuple[str, str]] = []
        self.addresses: list[str] = []
        self.text = ""
        self._open: list[str] = []
        self.feed(source)
        self.close()

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append(tag)
        named = dict(attrs)
        if named.get("id"):
            self.ids.append(str(named["id"]))
        self.addresses += [str(named[name]) for name in ("href", "src", "action", "data") if name in named]
        if tag == "a":
            self._open.append(str(named["href"]))
            self.links.append((str(named["href"]), ""))

    def handle_endtag(self, tag: str) -> None:
        if tag == "a":
            self._open.pop()

    def handle_data(self, data: str) -> None:
        self.text += data
        if self._open:
            href, text = self.links[-1]
            self.links[-1] = (href, text + data)

    @property
    def linked_texts(self) -> set[str]:
        return {text for _, text in self.links}


def program(name: str) -> str:
    """The path of an outside program; the test is skipped where there is none, and fails on CI."""
    path = shutil.which(name)
    if path is None:
        if os.environ.get("CI") == "true":
            pytest.fail(f"{name} is not installed")
        pytest.skip(f"{name} is not installed")
    return str(path)


def pdf_text(pdf: bytes, folder: Path) -> str:
    """The text of a PDF with every run of white space as one space."""
    path = folder / "read.pdf"
    path.write_bytes(pdf)
    done = subprocess.run([program("pdftotext"), "-layout", str(path), "-"], capture_output=True, check=True)
    return flat(done.stdout.decode("utf-8"))


def flat(text: str) -> str:
    return re.sub(r"\s+", " ", text)
