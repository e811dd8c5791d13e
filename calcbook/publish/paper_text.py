"""User text made fit for paper: one missing glyph would fail a PDF/A whole, so each character is checked first.

`glyphs.txt` lists, as ranges of code points, what the fonts inside the typst wheel can show; a test proves it current.
Marks that combine with the letter before them are not in it: a letter and its mark need one font that has both.
"""

from __future__ import annotations

import re
import unicodedata
from bisect import bisect_right
from functools import cache
from importlib.resources import files

_LONGEST_WORD = 18
_BREAK = "\N{ZERO WIDTH SPACE}"


@cache
def glyph_ranges() -> tuple[tuple[int, int], ...]:
    """The ranges of code points that can be printed, first and last, ascending."""
    lines = files("calcbook.publish").joinpath("glyphs.txt").read_text("ascii").split()
    return tuple((int(line.split("-")[0], 16), int(line.split("-")[-1], 16)) for line in lines)


def has_glyph(character: str) -> bool:
    """Whether the fonts can show a character."""
    code = ord(character)
    index = bisect_right(glyph_ranges(), (code, 0x110000)) - 1
    return index >= 0 and code <= glyph_ranges()[index][1]


def on_paper(text: str) -> str:
    """The text as the fonts can show it: a character without a glyph becomes its code point, as [U+1F6A4].

    Words longer than a column get places where they may be broken.
    """
    composed = unicodedata.normalize("NFC", text)
    shown = "".join(character if has_glyph(character) else f"[U+{ord(character):04X}]" for character in composed)
    return re.sub(rf"\S{{{_LONGEST_WORD + 1},}}", _breakable, shown)


def _breakable(match: re.Match[str]) -> str:
    """Breaks after signs that join words, and within what is still too long."""
    at_signs = re.sub(r"(?<=[_/.,-])(?=\w)", _BREAK, match[0])
    return re.sub(rf"[^{_BREAK}]{{{_LONGEST_WORD + 1},}}", _in_pieces, at_signs)


def _in_pieces(match: re.Match[str]) -> str:
    return re.sub(r".{12}(?=.)", rf"\g<0>{_BREAK}", match[0])
