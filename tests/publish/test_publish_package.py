from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path

import pytest
from publish_sample import BLOCK, code, datum, derivations, hoist, hoist_lines, markdown, notebook, quantity, result_of
from publish_tools import Page, flat

from calcbook.publish.package import publish
from calcbook.records.printed_table import PrintedTable
from calcbook.records.project import Board, Circuit, Datum, Origin, Plan, Project, SheetPlan
from calcbook.records.result import Failure, SheetResult

TABLE = PrintedTable(
    key="iec60364_5_52_B.52.12",
    standard="IEC 60364-5-52",
    edition="2009",
    table="B.52.12",
    title="Current-carrying capacities, XLPE, copper",
    obtained="from memory",
    rows=({"size [mm2]": "16", "I_t [A]": "100"}, {"size [mm2]": "25", "I_t [A]": "119 <"}),
)


def project() -> Project:
    unused = Origin("circuits.csv", "C-014", "drawing", "confirmed")
    used = Origin("circuits.csv", "C-014", "shaft_power", "confirmed", "TQ-E-101", "C", "2")
    voltage = Datum("400 V", quantity("U_n", 400.0), Origin("inputs.toml", "boards.MB", "nominal_voltage"))
    data = {"drawing": Datum("TQ-<7>", None, unused), "shaft_power": Datum("45 kW", quantity("P_2", 45.0), used)}
    circuit = Circuit("C-014", "hoist", data)
    board = Board("MB", {"nominal_voltage": voltage})
    return Project("", BLOCK, {}, {}, (board,), (circuit,), unused=("circuits.csv: drawing",))


def plan(*numbers: str) -> Plan:
    return Plan(tuple(SheetPlan(number, f"title of {number}", (), {}, {}) for number in numbers))


def board() -> SheetResult:
    line = replace(datum("MB", "n_g", 3.0), template="demand")
    return result_of(notebook("MB", "Main board", [markdown("# Board"), code(line)]))


FAILURE = Failure("SheetFault", "sheet C-015, cable-current, I_t: table B.52.12 has no row 26 mm²", 7, "")


def failed() -> SheetResult:
    lines = hoist_lines("C-015")[:4]
    return result_of(notebook("C-015", "Bilge pump", [markdown("# Power"), code(*lines)]), FAILURE)


@pytest.fixture(scope="module")
def published(tmp_path_factory: pytest.TempPathFactory) -> Path:
    out = tmp_path_factory.mktemp("project") / "sheets"
    done = [board(), result_of(hoist()), failed(), result_of(derivations())]
    written = publish(project(), plan("MB", "C-014", "C-015", "D-three-phase"), done, [TABLE], out)
    assert sorted(path.name for path in written) == sorted(path.name for path in out.iterdir())
    return out


def test_what_is_written(published: Path) -> None:
    whole = [f"{number}.{ending}" for number in ("C-014", "D-three-phase", "MB") for ending in ("html", "pdf", "ipynb")]
    pages = ["index.html", "inputs.html", "tables.html", "results.json", "C-015.html", "C-015.ipynb"]
    pages += ["package.pdf", "package.html"]
    assert sorted(path.name for path in published.iterdir()) == sorted(whole + pages)


def test_every_link_of_the_package_leads_somewhere(published: Path) -> None:
    pages = {path.name: Page(path.read_text("utf-8")) for path in published.glob("*.html")}
    others = {path.name for path in published.iterdir()}
    dead = []
    for name, page in pages.items():
        assert len(page.ids) == len(set(page.ids)), name
        for href, _ in page.links:
            file, _, anchor = href.partition("#")
            if (file and file not in others) or (anchor and anchor not in pages[file or name].ids):
                dead.append((name, href))
    assert dead == []
    assert sum(len(page.links) for page in pages.values()) > 100


def test_the_register_tells_outcome_and_what_is_open(published: Path) -> None:
    text = flat(Page((published / "index.html").read_text("utf-8")).text)
    assert "all criteria met" in text
    assert f"failed, not for issue: {FAILURE.message}" in text
    assert "setting not below the design current: 82.0 A ≤ 85 A, utilisation 0.965" in text
    assert "power factor 0.87 is assumed" in text
    assert "circuits.csv: drawing" in text
    assert "Results need review by a competent and, where required, licensed person." in text


def test_the_inputs_page_has_every_datum_with_its_source_and_its_uses(published: Path) -> None:
    source = (published / "inputs.html").read_text("utf-8")
    page = Page(source)
    text = flat(page.text)
    assert "TQ-<7>" in text
    assert "400 V" in text
    assert ("C-014.html#P_2", "C-014") in page.links
    assert source.index('id="circuits.csv/C-014/shaft_power"') < source.index("C-014.html#P_2")


def test_the_tables_page_has_the_cells_cited_and_the_whole_table(published: Path) -> None:
    page = Page((published / "tables.html").read_text("utf-8"))
    text = flat(page.text)
    assert "IEC 60364-5-52:2009, Table B.52.12" in text
    assert "119 <" in text
    assert "compared with licensed copy 7 by AB, 2026-02-01" in text
    assert ("C-014.html#I_t", "C-014") in page.links


def test_results_have_values_criteria_and_failures(published: Path) -> None:
    sheets = json.loads((published / "results.json").read_text("utf-8"))["sheets"]
    adopted = sheets["C-014"]["values"]["I_B"]
    assert (adopted["number"], adopted["unit"], adopted["si"], adopted["text"]) == (82.0, "A", 82.0, "82.0 A")
    assert adopted["calculated"] == {"number": 78.4, "unit": "A", "text": "78.4\N{NO-BREAK SPACE}A"}
    assert adopted["adopted"] is True
    setting = sheets["C-014"]["criteria"]["setting"]
    assert setting["left"] == {"line": "I_B", "si": 82.0, "text": "82.0\N{NO-BREAK SPACE}A"}
    assert (setting["operator"], setting["utilisation_text"], setting["verdict"]) == ("<=", "0.965", "met")
    assert sheets["C-014"]["criteria"]["overload_device"] == {"allowed": ["E", "F"], "found": "E", "verdict": "met"}
    assert sheets["C-014"]["choices"]["method"] == "E"
    assert (sheets["C-014"]["verdict"], sheets["C-014"]["governing"]) == ("met", "setting")
    assert sheets["C-015"]["outcome"] == "failed"
    assert sheets["C-015"]["failure"] == {"error": "SheetFault", "message": FAILURE.message}


def test_a_second_run_writes_the_same_bytes_and_removes_what_is_gone(tmp_path: Path) -> None:
    first = [board(), result_of(hoist()), result_of(derivations())]
    publish(project(), plan("MB", "C-014", "D-three-phase"), first, [], tmp_path)
    before = {path.name: path.read_bytes() for path in tmp_path.iterdir()}
    publish(project(), plan("MB", "C-014", "D-three-phase"), first, [], tmp_path)
    assert {path.name: path.read_bytes() for path in tmp_path.iterdir()} == before
    (tmp_path / "notes.pdf").write_text("the engineer's own")
    broken = result_of(hoist(), Failure("SheetFault", "no value", 1, ""))
    publish(project(), plan("C-014", "D-three-phase"), [broken, result_of(derivations())], [], tmp_path)
    left = {path.name for path in tmp_path.iterdir()}
    assert {"notes.pdf", "C-014.html", "D-three-phase.pdf"} <= left
    assert left.isdisjoint({"C-014.pdf", "MB.html", "MB.pdf", "MB.ipynb"})


def test_a_results_file_of_another_make_removes_nothing_outside(tmp_path: Path) -> None:
    (tmp_path / "kept.pdf").write_text("x")
    out = tmp_path / "sheets"
    out.mkdir()
    (out / "results.json").write_text(json.dumps({"sheets": {"../kept": {}, "x": {}}}))
    publish(project(), plan(), [], [], out)
    assert (tmp_path / "kept.pdf").exists()


def test_a_sheet_that_failed_before_it_had_a_workbook_still_has_its_page(tmp_path: Path) -> None:
    early = replace(failed(), workbook="")
    publish(project(), plan("C-015"), [early], [], tmp_path)
    text = flat(Page((tmp_path / "C-015.html").read_text("utf-8")).text)
    assert "C-015 Bilge pump" in text
    assert FAILURE.message in text
    assert "shaft power of the motor" in text
    assert not (tmp_path / "C-015.ipynb").exists()
