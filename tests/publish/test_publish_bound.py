from __future__ import annotations

import io
import json
import os
import re
import subprocess
import sys
from collections.abc import Iterator
from dataclasses import replace
from datetime import date
from pathlib import Path

import pikepdf
import pytest
from pdfa_rules import broken_rules, target
from publish_sample import derivations, hoist, result_of
from publish_tools import flat, program
from test_publish_package import TABLE, board, failed, plan, project

from calcbook.publish.joining import Attachment, join
from calcbook.publish.package import publish
from calcbook.records.trace import trace_to_json

_NUMBERS = ("MB", "C-014", "C-015", "D-three-phase")
_HERE = Path(__file__).resolve().parent
_SCRIPT = f"""
import hashlib, sys
from pathlib import Path
sys.path.insert(0, {str(_HERE)!r})
from test_publish_bound import make
make(Path.cwd())
for path in sorted((Path.cwd() / "sheets").iterdir()):
    print(path.name, hashlib.sha256(path.read_bytes()).hexdigest())
"""


def make(folder: Path) -> None:
    (folder / "inputs.toml").write_bytes(b"[project]\r\nnumber = 'TQ'\n")
    (folder / "circuits.csv").write_bytes("tag,description\nC-014,hoist \N{GREEK SMALL LETTER ETA}\n".encode())
    done = [board(), result_of(hoist()), failed(), result_of(derivations())]
    publish(replace(project(), folder=str(folder)), plan(*_NUMBERS), done, [TABLE], folder / "sheets")


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    made = tmp_path_factory.mktemp("bound")
    make(made)
    return made


@pytest.fixture(scope="module")
def pdf(folder: Path) -> bytes:
    return (folder / "sheets" / "package.pdf").read_bytes()


def page_texts(pdf: bytes, folder: Path) -> list[str]:
    (folder / "read.pdf").write_bytes(pdf)
    command = [program("pdftotext"), "-layout", str(folder / "read.pdf"), "-"]
    text = subprocess.run(command, capture_output=True, check=True).stdout.decode("utf-8")
    return [flat(page) for page in text.split("\f")[:-1]]


def test_pages_are_in_order_and_counted_right(pdf: bytes, folder: Path, tmp_path: Path) -> None:
    texts = page_texts(pdf, tmp_path)
    total = len(texts)
    front = next(index for index, text in enumerate(texts) if "of MB" in text)
    for index, text in enumerate(texts[:front], 1):
        assert f"package page {index} of {total}" in text
    assert not any("package page" in text for text in texts[front:])
    expected = []
    for number in ("MB", "C-014", "D-three-phase"):
        count = len(pikepdf.open(folder / "sheets" / f"{number}.pdf").pages)
        expected += [f"page {page} of {count} of {number}" for page in range(1, count + 1)]
    assert len(expected) == total - front == 4
    assert [text for text, said in zip(texts[front:], expected, strict=True) if said not in text] == []
    assert f"4 sheets, {total} pages" in texts[0]


def test_the_register_names_the_pages_where_the_sheets_stand(pdf: bytes, tmp_path: Path) -> None:
    texts = page_texts(pdf, tmp_path)
    register = next(text for text in texts[1:] if "Register of sheets" in text)
    places = {
        number: [index for index, text in enumerate(texts, 1) if re.search(rf"page \d+ of \d+ of {number}", text)]
        for number in ("MB", "C-014", "D-three-phase")
    }
    for sheet, pages in places.items():
        said = f"{pages[0]}–{pages[-1]}" if len(pages) > 1 else f"{pages[0]}"
        assert re.search(rf"{sheet} [^–]* {said} draft A ", register), (sheet, said, register)
    assert re.search(r"C-015 Bilge pump none draft A failed, not for issue", register)


def test_a_failed_sheet_is_named_on_the_cover_and_has_no_pages(pdf: bytes, tmp_path: Path) -> None:
    texts = page_texts(pdf, tmp_path)
    assert "1 sheet failed, not for issue: C-015" in texts[0]
    assert not any("of C-015" in text for text in texts)


def test_the_cover_tells_what_is_open_and_what_made_it(pdf: bytes, tmp_path: Path) -> None:
    cover = page_texts(pdf, tmp_path)[0]
    for said in (
        "TQ-2041",
        "Tern Quay Harbour Trust",
        "1 datum to be confirmed",
        "2 assumed data",
        "Results need review by a competent and, where required, licensed person.",
        "1 of 1 table used: values not compared with a licensed copy",
        "1 calculated value replaced by an adopted one",
        "calcbook 0.1.0",
        f"pikepdf {pikepdf.__version__}",
    ):
        assert said in cover, said


def outlined(document: pikepdf.Pdf) -> Iterator[tuple[str, int]]:
    order = {page.obj.objgen: index for index, page in enumerate(document.pages, 1)}
    with document.open_outline() as outline:
        for item in outline.root:
            for each in (item, *item.children):
                yield each.title, order[target(each).objgen]


def test_bookmarks_lead_to_their_pages(pdf: bytes, tmp_path: Path) -> None:
    texts = page_texts(pdf, tmp_path)
    with pikepdf.open(io.BytesIO(pdf)) as document:
        marks = dict(outlined(document))
    for part in ("Register of sheets", "Compliance matrix", "Cable schedule", "Notation"):
        assert part in texts[marks[part] - 1], part
    for number, title in (("MB", "Main board"), ("C-014", "Travelling hoist, 45 kW, direct on line")):
        assert f"page 1 of {2 if number == 'C-014' else 1} of {number}" in texts[marks[f"{number} {title}"] - 1]
    assert not any("C-015" in mark for mark in marks)


def test_attached_files_are_equal_to_those_beside(pdf: bytes, folder: Path) -> None:
    results = {each.number: each for each in (board(), result_of(hoist()), failed(), result_of(derivations()))}
    with pikepdf.open(io.BytesIO(pdf)) as document:
        attached = {name: document.attachments[name].get_file() for name in document.attachments}
        data = {name: file.read_bytes() for name, file in attached.items()}
        types = {name.rpartition(".")[2]: file.mime_type for name, file in attached.items()}
    traces = {f"{number}.trace.json" for number in _NUMBERS}
    assert set(data) == {"inputs.toml", "circuits.csv", "results.json", *traces, *(f"{it}.ipynb" for it in _NUMBERS)}
    for name in ("inputs.toml", "circuits.csv"):
        assert data[name] == (folder / name).read_bytes()
    for name in ("results.json", *(f"{it}.ipynb" for it in _NUMBERS)):
        assert data[name] == (folder / "sheets" / name).read_bytes()
    for number, result in results.items():
        assert data[f"{number}.trace.json"].decode("utf-8") == trace_to_json(result.trace)
    assert types == {
        "toml": "application/toml", "csv": "text/csv", "json": "application/json", "ipynb": "application/x-ipynb+json"
    }  # fmt: skip


def test_it_is_pdf_a_3b_as_far_as_joining_can_break_it(pdf: bytes) -> None:
    assert broken_rules(pdf) == []


def broken(pdf: bytes, how: str) -> bytes:
    """The package with one rule broken, to see that each check can fail."""
    with pikepdf.open(io.BytesIO(pdf)) as document:
        root, name = document.Root, pikepdf.Name
        match how:
            case "intents":
                root.OutputIntents.append(root.OutputIntents[0])
            case "script":
                root.OpenAction = pikepdf.Dictionary(S=name.JavaScript, JS=pikepdf.String("x"))
            case "font":
                fonts = (it for it in document.objects if isinstance(it, pikepdf.Dictionary) and "/FontFile3" in it)
                del next(fonts)["/FontFile3"]
            case "associated":
                del root.AF[0]
            case "title":
                document.docinfo["/Title"] = pikepdf.String("other")
            case "bookmark":
                with document.open_outline() as outline:
                    outline.root.append(pikepdf.OutlineItem("lost", pikepdf.Array([root, name.Fit])))
            case "tags":
                root.StructTreeRoot = pikepdf.Dictionary()
            case "print flag":
                document.pages[0].Annots[0].F = 0
            case "checksum":
                document.attachments["results.json"].obj.EF.F.Params.CheckSum = pikepdf.String("0123456789abcdef")
        written = io.BytesIO()
        document.save(written)
    return written.getvalue()


@pytest.mark.parametrize(
    ("how", "said"),
    [
        ("intents", "2 output intents"),
        ("script", "JavaScript"),
        ("font", "is not embedded"),
        ("associated", "the files of AF are not those attached"),
        ("title", "differs from /Title"),
        ("bookmark", "bookmark lost leads nowhere"),
        ("tags", "/StructTreeRoot in the catalog"),
        ("print flag", "an annotation with the flags 0"),
        ("checksum", "results.json: checksum"),
    ],
)
def test_each_rule_is_seen_when_it_is_broken(pdf: bytes, how: str, said: str) -> None:
    assert any(said in fault for fault in broken_rules(broken(pdf, how)))


def test_the_same_inputs_give_the_same_bytes_in_any_folder_zone_and_language(tmp_path: Path) -> None:
    seen = set()
    for place, zone, language in (("a", "UTC", "C"), ("b/c", "Pacific/Auckland", "tr_TR.UTF-8")):
        (tmp_path / place).mkdir(parents=True)
        environment = {
            **os.environ,
            "TZ": zone,
            "LANG": language,
            "LC_ALL": language,
            "PYTHONHASHSEED": str(len(zone)),
        }
        done = subprocess.run(
            [sys.executable, "-c", _SCRIPT], cwd=tmp_path / place, env=environment, capture_output=True, text=True,
            check=True,
        )  # fmt: skip
        seen.add(done.stdout)
    assert len(seen) == 1
    assert "package.pdf" in seen.pop()


def test_dates_are_those_of_the_project_and_never_the_clock(pdf: bytes) -> None:
    with pikepdf.open(io.BytesIO(pdf)) as document:
        dates = {str(document.docinfo[key]) for key in ("/CreationDate", "/ModDate")}
        for spec in document.attachments.values():
            dates |= {str(spec.obj.EF.F.Params[key]) for key in ("/CreationDate", "/ModDate")}
    assert dates == {"D:20260314000000Z"}


def test_a_title_with_marks_of_xml_is_data(folder: Path) -> None:
    sheet = (folder / "sheets" / "C-014.pdf").read_bytes()
    title = "<b> & ]]> \N{LATIN SMALL LETTER O WITH STROKE}"
    made = join(title, date(2026, 1, 2), sheet, {title: sheet}, [Attachment("a b.csv", title, "text/csv", "Data", b"")])
    assert broken_rules(made) == []
    with pikepdf.open(io.BytesIO(made)) as document, document.open_metadata() as metadata:
        assert metadata["dc:title"] == title
        assert dict(outlined(document))[title] == 3


def test_results_attached_are_the_results(pdf: bytes, folder: Path) -> None:
    with pikepdf.open(io.BytesIO(pdf)) as document:
        data = json.loads(document.attachments["results.json"].get_file().read_bytes())
    assert data == json.loads((folder / "sheets" / "results.json").read_text("utf-8"))
