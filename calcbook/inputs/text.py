"""What text may hold, how a found value is shown in a message, and what may be a tag."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Collection
from itertools import islice

from calcbook.errors import nearest

LONGEST_TAG = 32
LONGEST_DESCRIPTION = 120
LONGEST_TEXT = 200
_LONGEST_SHOWN = 40
_LONGEST_COMPARED = 60
_MOST_COMPARED = 1000
_MOST_LISTED = 20

_LAST_TWO_OF_EACH_PLANE = "".join(chr(plane << 16 | last) for plane in range(17) for last in (0xFFFE, 0xFFFF))
_REFUSED = re.compile(
    "[\x00-\x1f\x7f-\x9f"  # control characters
    "\u061c\u200e\u200f\u202a-\u202e\u2066-\u2069"  # direction marks, overrides and isolates
    "\u2028\u2029"  # line and paragraph separators
    "\ud800-\udfff\ufdd0-\ufdef" + _LAST_TWO_OF_EACH_PLANE + "]"  # surrogates and noncharacters
)

_TAG = re.compile(r"[A-Za-z0-9][A-Za-z0-9._-]*", re.ASCII)
_DEVICE_NAMES = ("con", "prn", "aux", "nul", *(f"{port}{n}" for port in ("com", "lpt") for n in range(1, 10)))
_OWN_NAMES = ("index", "package", "inputs", "tables", "cover", "register", "basis", "project", "default")
_OWN_BEGINNINGS = ("d-", "boards.", "sources.", "cases.", "couplers.")


def shown(text: str, longest: int = _LONGEST_SHOWN) -> str:
    """A found value as a message shows it: in quotes, shortened, what cannot be printed as its code point."""
    short = text if len(text) <= longest else text[: longest - 3] + "..."
    return '"' + "".join(one if one.isprintable() else f"<{_code_point(one)}>" for one in short) + '"'


def wrong_characters(text: str) -> str:
    """What is wrong with the characters of a text; "" where nothing is."""
    match = _REFUSED.search(text)
    if not match:
        return ""
    unnamed = "control character" if unicodedata.category(match[0]) == "Cc" else "no character"
    name = unicodedata.name(match[0], unnamed).lower()
    return (
        f"{shown(text)} holds {_code_point(match[0])} ({name}) as character {match.start() + 1}; "
        "control, direction and line-separating characters are not allowed"
    )


def wrong_text(text: str, longest: int = LONGEST_TEXT) -> str:
    """What is wrong with a text, its length or its characters; "" where nothing is."""
    if len(text) > longest:
        return f"{shown(text)} has {len(text)} characters; allowed are {longest}"
    return wrong_characters(text)


def wrong_tag(tag: str) -> str:
    """What is wrong with a tag, which names files and sheets for life; "" where nothing is."""
    wrong = wrong_text(tag, LONGEST_TAG)
    if wrong:
        return wrong
    if not _TAG.fullmatch(tag):
        return (
            f'{shown(tag)} is not a tag; a tag has letters A to Z, digits, "-", "." and "_" '
            "and begins with a letter or digit"
        )
    if tag.endswith(".") or ".." in tag:
        return f"{shown(tag)} is not a tag; a tag has no two dots in a row and none at its end"
    lower = tag.lower()
    if lower in _OWN_NAMES or lower.startswith(_OWN_BEGINNINGS):
        return f"{shown(tag)} is a name that calcbook keeps for itself; choose another tag"
    if lower.split(".")[0] in _DEVICE_NAMES:
        return f"{shown(tag)} is the name of a device in some operating systems; choose another tag"
    return ""


def nearest_name(name: str, known: Collection[str]) -> str:
    """Like `nearest`, for names of a project, of which there may be very many."""
    question = nearest(name[:_LONGEST_COMPARED], islice(known, _MOST_COMPARED))
    if question.startswith("did") or len(known) <= _MOST_LISTED:
        return question if known else "there are none"
    return f"none of the {len(known)} is near"


def _code_point(character: str) -> str:
    return f"U+{ord(character):04X}"
