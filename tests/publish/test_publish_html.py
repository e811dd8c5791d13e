from __future__ import annotations

import subprocess
from pathlib import Path

import pytest
from publish_sample import CONTEXT, code, datum, derivations, hoist, markdown, notebook, result_of
from publish_tools import Page, flat, program
from test_publish_pdf import number_texts

from calcbook.publish.cautions import GENERAL
from calcbook.publish.results import results
from calcbook.publish.sheet_html import sheet_html
from calcbook.publish.sheet_view import Context, sheet_view
from calcbook.records.project import TitleBlock
from calcbook.records.result import Failure


@pytest.fixture(scope="module")
def source() -> str:
    return sheet_html(sheet_view(hoist(), CONTEXT), in_package=True)


def test_every_number_of_the_results_is_a_link(source: str) -> None:
    linked = {flat(text) for text in Page(source).linked_texts}
    missing = {flat(text) for text in number_texts(results("", [result_of(hoist())]))} - linked
    assert missing == set()


def test_links_within_the_sheet_resolve(source: str) -> None:
    page = Page(source)
    assert len(page.ids) == len(set(page.ids)) > 15
    inside = {href[1:] for href, _ in page.links if href.startswith("#")}
    assert inside - set(page.ids) == set()
    assert len(inside) > 10


def test_the_page_is_complete_in_itself(source: str) -> None:
    page = Page(source)
    assert "script" not in page.tags
    assert [address for address in page.addresses if ":" in address or address.startswith("//")] == []
    assert page.tags.count("style") == 1
    style = source.split("<style>")[1].split("</style>", maxsplit=1)[0]
    assert "url(" not in style
    assert "@media print" in style
    assert len(style) < 6000
    assert '<html lang="en">' in source
    assert "default-src 'none'" in source


def test_tables_have_captions_and_heads(source: str) -> None:
    page = Page(source)
    assert page.tags.count("caption") == page.tags.count("table") == 9
    assert source.count("<th ") == source.count('<th scope="col">')


def test_cautions_and_title_block_are_there(source: str) -> None:
    text = flat(Page(source).text)
    for said in (*GENERAL, "TQ-2041 Tern Quay boatyard", "draft", "calcbook 0.1.0", "power factor 0.87 is assumed"):
        assert said in text


@pytest.mark.parametrize(
    "said", ["<script>alert(1)</script>", '" onload="x', "a & b &lt; c", "{{ 7*7 }} {% x %}", "🚤 מספנה $ # \\"]
)
def test_text_of_users_is_text(said: str) -> None:
    block = TitleBlock(number="1", title=said, client=said, state=said)
    line = datum("C-1", "P_2", 45.0, document=said, remark=said, tag=said)
    made = sheet_html(
        sheet_view(notebook("C-1", said, [markdown(f"# {said}\n\n{said}"), code(line)]), Context(block)),
        in_package=True,
    )
    page = Page(made)
    assert page.text.count(said) >= 6
    assert "script" not in page.tags
    assert "onload" not in [word for tag in page.tags for word in tag.split()]


def test_a_failed_sheet_says_so_and_shows_what_was_made() -> None:
    made = sheet_html(sheet_view(hoist(), CONTEXT, Failure("SheetFault", "I_Z: <no> value", 3, "")), in_package=True)
    text = flat(Page(made).text)
    assert "failed, not for issue" in text
    assert "SheetFault: I_Z: <no> value" in text
    assert "shaft power of the motor" in text
    assert "all criteria met" not in text


def test_alone_there_is_no_link_to_another_page() -> None:
    page = Page(sheet_html(sheet_view(hoist(), Context()), in_package=False))
    assert {href for href, _ in page.links if not href.startswith("#")} == set()


def chromium(*arguments: str, profile: Path) -> bytes:
    quiet = ("--disable-background-networking", "--disable-component-update", "--disable-sync", "--no-first-run")
    command = [program("chromium"), "--headless", "--no-sandbox", "--disable-gpu", "--disable-quic", *quiet]
    done = subprocess.run(
        [*command, f"--user-data-dir={profile}", *arguments], capture_output=True, timeout=120, check=True
    )
    return done.stdout


@pytest.mark.slow
def test_a_browser_sets_the_formulas(tmp_path: Path) -> None:
    path = tmp_path / "D.html"
    path.write_text(sheet_html(sheet_view(derivations(), CONTEXT), in_package=False), encoding="utf-8")
    shot = tmp_path / "D.png"
    dom = chromium(
        f"--screenshot={shot}", "--dump-dom", "--window-size=1000,1200", path.as_uri(), profile=tmp_path / "profile"
    ).decode("utf-8")  # fmt: skip
    assert "<msqrt>" in dom
    assert "solved for the current" in dom
    assert shot.stat().st_size > 20_000
