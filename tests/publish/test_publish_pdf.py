from __future__ import annotations

import io
import json
import os
import re
import subprocess
import sys
from pathlib import Path

import pikepdf
import pytest
from publish_sample import BLOCK, CONTEXT, code, datum, derivations, hoist, markdown, notebook, result_of, step
from publish_tools import flat, pdf_text

from calcbook.errors import SheetFault
from calcbook.publish.cautions import GENERAL
from calcbook.publish.results import results
from calcbook.publish.sheet_pdf import sheet_pdf
from calcbook.publish.sheet_view import Context, sheet_view
from calcbook.records.project import TitleBlock
from calcbook.records.result import Failure

_HERE = Path(__file__).resolve().parent
_SCRIPT = f"""
import hashlib, sys
sys.path.insert(0, {str(_HERE)!r})
from publish_sample import CONTEXT, hoist
from calcbook.publish.sheet_html import sheet_html
from calcbook.publish.sheet_pdf import sheet_pdf
from calcbook.publish.sheet_view import sheet_view
view = sheet_view(hoist(), CONTEXT)
for made in (sheet_pdf(view), sheet_html(view, in_package=True).encode()):
    print(hashlib.sha256(made).hexdigest())
"""


@pytest.fixture(scope="module")
def pdf() -> bytes:
    return sheet_pdf(sheet_view(hoist(), CONTEXT))


@pytest.fixture(scope="module")
def text(pdf: bytes, tmp_path_factory: pytest.TempPathFactory) -> str:
    return pdf_text(pdf, tmp_path_factory.mktemp("pdf"))


def number_texts(data: object) -> set[str]:
    """Every text of a number in results.json."""
    if isinstance(data, dict):
        own = {str(data[key]) for key in ("text", "utilisation_text") if key in data}
        return own.union(*(number_texts(part) for part in data.values()))
    return set()


def test_every_number_of_the_results_stands_on_paper(text: str) -> None:
    texts = number_texts(results("", [result_of(hoist())]))
    assert len(texts) > 20
    assert [number for number in texts if flat(number) not in text] == []


def test_the_title_block_and_the_cautions_stand_on_every_page(pdf: bytes, text: str) -> None:
    pages = len(pikepdf.open(io.BytesIO(pdf)).pages)
    assert pages == 2
    for number in range(1, pages + 1):
        assert f"page {number} of {pages} of C-014" in text
    for said in (
        *GENERAL,
        BLOCK.title,
        BLOCK.client,
        BLOCK.date,
        "calcbook 0.1.0",
        "Values not compared with a licensed copy",
    ):
        assert text.count(said) >= pages, said


def test_the_same_sheet_has_the_same_bytes_anywhere(tmp_path: Path) -> None:
    seen = set()
    for folder, zone, language in (("a", "UTC", "C"), ("b/c", "Pacific/Auckland", "tr_TR.UTF-8")):
        (tmp_path / folder).mkdir(parents=True)
        environment = {
            **os.environ,
            "TZ": zone,
            "LANG": language,
            "LC_ALL": language,
            "PYTHONHASHSEED": str(len(zone)),
        }
        done = subprocess.run(
            [sys.executable, "-c", _SCRIPT],
            cwd=tmp_path / folder,
            env=environment,
            capture_output=True,
            text=True,
            check=True,
        )
        seen.add(done.stdout)
    assert len(seen) == 1


def test_it_is_pdf_a_3b_untagged_and_dated_by_the_project(pdf: bytes) -> None:
    with pikepdf.open(io.BytesIO(pdf)) as document:
        with document.open_metadata() as metadata:
            assert (metadata["pdfaid:part"], metadata["pdfaid:conformance"]) == ("3", "B")
            assert metadata["dc:title"] == "C-014 Travelling hoist, 45 kW, direct on line"
        assert len(document.Root.OutputIntents) == 1
        assert "/StructTreeRoot" not in document.Root
        assert str(document.docinfo["/CreationDate"]).startswith("D:20260314")
        boxes = {tuple(round(float(side)) for side in page.mediabox) for page in document.pages}
        assert boxes == {(0, 0, 595, 842)}


def test_a_sheet_without_a_date_never_takes_the_clock() -> None:
    made = sheet_pdf(sheet_view(hoist(), Context()))
    with pikepdf.open(io.BytesIO(made)) as document:
        assert str(document.docinfo["/CreationDate"]).startswith("D:19700101")


@pytest.mark.parametrize(
    ("said", "printed"),
    [
        ("<b>bold</b> & more", "<b>bold</b> & more"),
        ("$x^2$ #panic() *a* _b_", "$x^2$ #panic() *a* _b_"),
        ('back\\slash "quoted" `raw`', 'back\\slash "quoted" `raw`'),
        ("boat 🚤 ahead", "boat [U+1F6A4] ahead"),
        ("#include(\"x\") \\u{41} //not", "#include(\"x\") \\u{41} //not"),
    ],
)  # fmt: skip
def test_text_of_users_prints_as_it_is(said: str, printed: str, tmp_path: Path) -> None:
    block = TitleBlock(number="1", title=said, client=said)
    line = datum("C-1", "P_2", 45.0, document=said, remark=said, tag=said)
    view = sheet_view(notebook("C-1", said, [markdown("# Data"), code(line)]), Context(block))
    assert pdf_text(sheet_pdf(view), tmp_path).count(printed) >= 3


def test_right_to_left_text_is_set(tmp_path: Path) -> None:
    line = datum("C-1", "P_2", 45.0, remark="מספנה")
    text = pdf_text(sheet_pdf(sheet_view(notebook("C-1", "", [code(line)]), Context())), tmp_path)
    assert sorted("מספנה") == sorted(re.findall("[א-ת]", text))


def test_long_texts_stay_on_the_page(tmp_path: Path) -> None:
    long = "W" * 400
    block = TitleBlock(number="1", title=long, client=long, prepared=long, state=long)
    line = datum("C-1", "P_2", 45.0, document=long, remark=long, column=long)
    made = sheet_pdf(sheet_view(notebook("C-1", long, [markdown(f"# {long}"), code(line)]), Context(block)))
    (tmp_path / "long.pdf").write_bytes(made)
    done = subprocess.run(
        ["pdftotext", "-bbox", str(tmp_path / "long.pdf"), "-"], capture_output=True, text=True, check=True
    )
    right = [float(edge) for edge in re.findall(r'xMax="([\d.]+)"', done.stdout)]
    assert len(right) > 50
    assert max(right) < 595 - 40
    assert min(float(edge) for edge in re.findall(r'yMin="([\d.]+)"', done.stdout)) > 0


def test_a_formula_too_wide_for_its_column_breaks_at_its_operators(tmp_path: Path) -> None:
    names = ("P_1", "Q_1", "S_1", "P", "Q", "S", "P_2")
    texts = {name: f"123456{index} kW" for index, name in enumerate(names)}
    line = step("C-1", "I_Z", 5.0, " + ".join(names), texts)
    (tmp_path / "wide.pdf").write_bytes(sheet_pdf(sheet_view(notebook("C-1", "", [code(line)]), Context())))
    done = subprocess.run(
        ["pdftotext", "-bbox", str(tmp_path / "wide.pdf"), "-"], capture_output=True, text=True, check=True
    )
    places = re.findall(r'xMax="([\d.]+)" yMax="([\d.]+)">123456\d<', done.stdout)
    assert len(places) == len(names)
    assert max(float(x) for x, _ in places) < 595 - 17 / 25.4 * 72 - 38 / 25.4 * 72
    assert len({y for _, y in places}) == 2


def test_a_derivation_sheet_is_printed(tmp_path: Path) -> None:
    text = pdf_text(sheet_pdf(sheet_view(derivations(), CONTEXT)), tmp_path)
    assert "proven" in text
    assert "simplifies to zero" in text
    assert "page 1 of 1 of D-three-phase" in text


def test_a_failed_sheet_has_no_pdf() -> None:
    view = sheet_view(hoist(), CONTEXT, Failure("SheetFault", "I_B: no value", 3, ""))
    with pytest.raises(SheetFault, match=r"^sheet C-014: failed, not for issue: I_B: no value$"):
        sheet_pdf(view)


def test_json_of_the_results_is_finite_and_plain() -> None:
    data = results("Tern Quay", [result_of(hoist())])
    assert json.loads(json.dumps(data, allow_nan=False)) == data
