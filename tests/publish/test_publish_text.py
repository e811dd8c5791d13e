from __future__ import annotations

import json
import unicodedata

import pytest
import typst
from hypothesis import given
from hypothesis import strategies as st

from calcbook.publish.paper_text import glyph_ranges, has_glyph, on_paper
from calcbook.publish.sheet_pdf import _compiler
from calcbook.publish.typst_source import Mathematics, literal
from calcbook.records.notation import notation
from calcbook.records.units import UNITS


def compiled(characters: list[str]) -> str:
    """What the compiler says of the characters, each on its own; "" where it can show them all."""
    boxes = "\n".join(f"#box({literal_of(character)})" for character in characters)
    source = (
        f"#set document(date: datetime(year: 2026, month: 1, day: 2))\n#set page(width: 200cm, height: auto)\n{boxes}"
    )
    try:
        _compiler().compile(input=source.encode(), format="pdf", pdf_standards="a-3b", pdf_tags=False)
    except typst.TypstError as error:
        return str(error.diagnostic)
    return ""


def literal_of(character: str) -> str:
    return '"' + character.replace("\\", "\\\\").replace('"', '\\"') + '"'


def test_the_fonts_show_every_character_of_the_list() -> None:
    characters = [chr(code) for first, last in glyph_ranges() for code in range(first, last + 1)]
    assert len(characters) > 5000
    assert compiled(characters) == ""


def test_the_fonts_lack_the_characters_beside_the_ranges() -> None:
    beside = {code for first, last in glyph_ranges() for code in (first - 1, last + 1)}
    wanted = [chr(code) for code in sorted(beside) if unicodedata.category(chr(code)) in ("Lu", "Ll", "Lo", "So", "Sm")]
    said = compiled([character for character in wanted if not has_glyph(character)])
    assert said.count("could not be displayed") == len(wanted) > 50


def test_every_unit_and_letter_of_the_notation_can_be_printed() -> None:
    texts = [unit.printed for unit in UNITS.values()] + [
        entry.letter + entry.subscript for entry in notation().values()
    ]
    assert [text for text in texts if on_paper(text) != text] == []


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("boat 🚤", "boat [U+1F6A4]"),
        ("קידוח", "קידוח"),
        ("tab\there", "tab[U+0009]here"),
        ("\u202eabc", "[U+202E]abc"),
        ("e\u0301", "é"),
        ("q\u0301", "q[U+0301]"),
        ("字", "[U+5B57]"),
    ],
)
def test_a_character_without_a_glyph_prints_as_its_code_point(text: str, shown: str) -> None:
    assert on_paper(text) == shown


def test_long_words_may_break() -> None:
    assert on_paper("A" * 30) == "\u200b".join(["A" * 12, "A" * 12, "A" * 6])
    assert on_paper("A" * 18) == "A" * 18
    assert (
        on_paper("line_to_neutral_current_of_load") == "line_\u200bto_\u200bneutral_\u200bcurrent_\u200bof_\u200bload"
    )


def test_literals() -> None:
    assert literal({"a": 'say "x" \\ #y', "b": [None, True, 3, Mathematics("x_1")], "c": {}}) == (
        r'(a: "say \"x\" \\ #y", b: (none, true, 3, $x_1$, ), c: (:))'
    )


@given(st.text(max_size=40))
def test_any_text_is_one_literal_and_comes_back_unread(text: str) -> None:
    back = typst.query(f"#metadata({literal(text)}) <it>".encode(), "<it>", field="value", one=True)
    assert json.loads(back) == on_paper(text)


_COVERED = st.sampled_from([chr(code) for first, last in glyph_ranges() for code in range(first, last + 1)])


@given(st.text(st.one_of(_COVERED, st.characters()), max_size=60))
def test_any_text_can_be_set_in_a_pdf(text: str) -> None:
    assert compiled([on_paper(text)]) == ""
