from __future__ import annotations

import json
import re
import subprocess
from dataclasses import replace
from pathlib import Path

import pytest
from publish_sample import BLOCK, code, criterion, datum, hoist, hoist_lines, markdown, notebook, quantity, result_of
from publish_tools import Page, flat, pdf_text
from test_publish_html import chromium
from test_publish_package import TABLE, failed, project

from calcbook.formulas.register import formulas
from calcbook.publish.bound import bound
from calcbook.publish.front.cables import cable_schedule
from calcbook.publish.front.contents import basis
from calcbook.publish.front.cover import cover
from calcbook.publish.front.criteria import compliance, nearest
from calcbook.publish.front.front import front
from calcbook.publish.front.front_pdf import front_pdf
from calcbook.publish.front.listing import Cell, Listing, Pages, Part
from calcbook.publish.front.material import Material
from calcbook.publish.front.open_items import adopted_values, open_items
from calcbook.publish.front.symbols import symbols
from calcbook.publish.front.where_used import table_status, where_used
from calcbook.publish.results import results
from calcbook.publish.view import Paragraph
from calcbook.records.line import ConclusionLine, InequalityLine, Line, RuleLine, StepLine
from calcbook.records.project import Circuit, Datum, Origin, Project, SignOff, Source
from calcbook.records.result import SheetResult

_NBSP = "\N{NO-BREAK SPACE}"


def rows(part: Part, caption: str = "") -> list[list[str]]:
    """The rows of a listing as texts."""
    listing = next(it for it in part.listings if caption in it.caption)
    return [["".join(span.text for span in spans(cell)) for cell in row] for row in listing.rows]


def spans(cell: Cell) -> Paragraph:
    assert not isinstance(cell, Pages)
    return cell


def heads(listing: Listing) -> list[str]:
    return ["".join(span.text for span in column.head) for column in listing.columns]


def word(text: str, tag: str, column: str, **origin: str) -> Datum:
    return Datum(text, None, Origin("circuits.csv", tag, column, "confirmed", **origin))


def installation() -> Project:
    """A circuit with every column of the schedule that the sample's sheet can fill."""
    texts = {"from": "MB", "conductor": "Cu", "insulation": "XLPE90", "construction": "multicore", "method": "E"}
    texts |= {"device": "gG", "overload_device": "relay60947", "drawing": "TQ-E-201"}
    data = {column: word(text, "C-014", column) for column, text in texts.items()}
    data["cores"] = replace(word("4", "C-014", "cores"), quantity=quantity("n", 4.0))
    data["rating"] = replace(word("100 A", "C-014", "rating"), quantity=quantity("I_n", 100.0))
    stated = Origin("inputs.toml", "basis", "nominal_voltage", "confirmed", "TQ-BOD-001", "A", "2")
    assumed = Origin("inputs.toml", "basis", "ambient_air", "assumed", remark="no records")
    basis_data = {
        "nominal_voltage": Datum("400 V", quantity("U_n", 400.0), stated),
        "ambient_air": Datum("40 degC", quantity("theta_a", 40.0), assumed),
    }
    source = Source("T1", {"kind": Datum("transformer", None, Origin("inputs.toml", "sources.T1", "kind"))})
    return replace(
        project(),
        basis=basis_data,
        editions={"IEC 60364-4-43": "2023"},
        circuits=(Circuit("C-014", "Travelling hoist", data),),
        sources=(source,),
    )


def material(*more: SheetResult) -> Material:
    derived = {"three_phase.motor_current": ("D-three-phase", "line-current")}
    return Material(installation(), (result_of(hoist()), *more), (TABLE,), derived, {"C-014": 2})


def judged(sheet: str, *lines: Line) -> SheetResult:
    last = hoist_lines(sheet)[-1]
    assert isinstance(last, ConclusionLine)
    conclusion = replace(last, order=tuple(line.label for line in lines), headrooms=())
    data = hoist_lines(sheet)[:17]
    return result_of(notebook(sheet, f"circuit {sheet}", [markdown("# Sheet"), code(*data, *lines, conclusion)]))


def inequality(sheet: str, name: str, utilisation: float) -> InequalityLine:
    return criterion(sheet, name, ("I_B", "I_r"), (f"82.0{_NBSP}A", f"85{_NBSP}A"), utilisation)


def test_the_basis_has_every_datum_with_value_document_and_status() -> None:
    part = basis(material())
    said = rows(part, "Basis")
    assert said[0] == ["nominal voltage between lines U_n", f"400{_NBSP}V", "TQ-BOD-001, rev. A, p. 2", "confirmed", ""]
    assert said[1][1:] == [f"40{_NBSP}°C", "", "assumed", "no records"]
    assert rows(part, "Sources and boards")[0] == ["T1", "kind", "transformer", "", "to be confirmed", ""]
    assert rows(part, "Editions") == [["IEC 60364-4-43", "2023"]]


def test_what_is_not_confirmed_is_listed_once_with_the_sheets_that_use_it() -> None:
    again = replace(datum("C-020", "cos_phi", 0.87, "assumed", tag="C-014"))
    second = result_of(notebook("C-020", "Second", [code(again)]))
    part = open_items(material(second))
    used, unused = rows(part, "Used"), rows(part, "Not used")
    factor = next(row for row in used if row[1] == "power factor")
    assert factor[0] == "assumed"
    assert factor[2:] == [
        "0.87",
        "circuits.csv, C-014, power_factor",
        "",
        "maker's value not yet received",
        "C-014, C-020",
    ]
    assert [row[3] for row in unused] == [
        "inputs.toml, basis, ambient_air", "inputs.toml, sources.T1, kind", "inputs.toml, boards.MB, nominal_voltage",
    ]  # fmt: skip


def test_adopted_values_stand_beside_the_calculated_ones() -> None:
    (row,) = rows(adopted_values(material()))
    assert row == [
        "C-014", "I_B", "design current", f"78.4{_NBSP}A", "82.0 A",
        "allowance for the tail winch, letter 12 of the maker", "AB", "2026-03-02",
    ]  # fmt: skip


def test_the_matrix_has_each_sheet_against_each_criterion() -> None:
    over = judged("C-016", inequality("C-016", "setting", 1.25), inequality("C-016", "drop", 0.5))
    part = compliance(material(over, failed()))
    meanings = rows(part, "Criteria")
    assert [row[0] for row in meanings] == ["setting", "capacity", "overload_device", "drop"]
    assert meanings[0][1:] == [
        "setting not below the design current", "IEC 60364-4-43:2023, 433.1 (1)", "2", "1 met, 1 not met"
    ]  # fmt: skip
    assert [row[0] for row in rows(part, "Matrix")] == ["C-014", "C-016", "C-015"]
    assert rows(part, "Matrix")[0][2:] == ["0.965 met", "0.892 met", "met", "–", "met"]
    assert rows(part, "Matrix")[1][2:6] == ["1.250 not met", "–", "–", "0.500 met"]
    assert rows(part, "Matrix")[2][2:] == ["–", "–", "–", "–", "failed, not for issue"]


def test_repeated_criteria_show_the_worst_and_say_how_many() -> None:
    keyed = [
        replace(inequality("MB", "drop", number), key=key) for key, number in (("C-1", 0.2), ("C-2", 0.9), ("C-3", 0.4))
    ]
    assert rows(compliance(material(judged("MB", *keyed))), "Matrix")[1][-2] == "0.900 met (worst of 3)"


def test_many_criteria_are_laid_on_several_matrices() -> None:
    lines = [inequality("C-016", f"criterion {index}", 0.5) for index in range(9)]
    part = compliance(material(judged("C-016", *lines)))
    assert [it.caption for it in part.listings] == ["Criteria", "Matrix, part 1 of 2", "Matrix, part 2 of 2"]
    assert sum(len(it.columns) - 3 for it in part.listings[1:]) == 12


def test_the_nearest_ten_stand_in_order_and_what_is_not_met_stands_first() -> None:
    lines = [inequality("C-016", f"criterion {index}", 0.5 + index / 100) for index in range(12)]
    rule = replace(
        next(line for line in hoist_lines("C-016") if isinstance(line, RuleLine)), verdict="not shown", found=""
    )
    part = nearest(material(judged("C-016", *lines, inequality("C-016", "over", 1.01), rule)))
    failing, close = rows(part, "Not met"), rows(part, "nearest to failing")
    assert [(row[2], row[4]) for row in failing] == [
        ("nothing stated", "not shown"), (f"82.0{_NBSP}A ≤ 85{_NBSP}A", "not met")
    ]  # fmt: skip
    numbers = [float(row[3]) for row in close]
    assert len(numbers) == 10
    assert numbers == sorted(numbers, reverse=True)
    assert close[1][6] == f"theta_a at present 40{_NBSP}°C, limit 50.3{_NBSP}°C"


def test_the_cable_schedule_takes_inputs_and_results_and_leaves_out_what_nobody_fills() -> None:
    (listing,) = cable_schedule(material()).listings
    assert heads(listing) == [
        "Cable, sheet", "From", "To", "Type", "Cores", "Size", "Runs", "Method", "I_B", "Device", "I_n", "I_r", "C_a",
        "C_g", "I_t", "I_Z", "Governing criterion", "Drawing",
    ]  # fmt: skip
    (row,) = rows(cable_schedule(material()))
    assert row[:5] == ["C-014", "MB", "Travelling hoist", "Cu XLPE90 multicore", "4"]
    assert row[8:12] == ["82.0 A", "gG, relay60947", f"100{_NBSP}A", f"85{_NBSP}A"]
    assert row[16:] == ["setting not below the design current", "TQ-E-201"]


def test_the_greatest_of_lines_repeated_for_each_conductor_stands_in_the_schedule() -> None:
    first = hoist_lines()[5]
    assert isinstance(first, StepLine)
    drops = [
        replace(first, name="du", key=key, si=number, text=f"{number} %", adopted=None)
        for key, number in (("L1", 0.2), ("L2", 0.4), ("L3", 0.3))
    ]
    sheet = result_of(notebook("C-014", "x", [code(*hoist_lines()[:5], *drops)]))
    (listing,) = cable_schedule(replace(material(), sheets=(sheet,))).listings
    assert rows(cable_schedule(replace(material(), sheets=(sheet,))))[0][heads(listing).index("du")] == "0.4 % L2"


def test_a_value_adopted_on_a_circuit_and_repeated_by_its_board_counts_once() -> None:
    first = hoist_lines("MB")[5]
    repeated = replace(first, template="demand", key="C-014")
    other = replace(first, template="demand", key="C-099")
    whole = material(result_of(notebook("MB", "x", [code(repeated, other)])))
    assert [(row[0], row[1]) for row in rows(adopted_values(whole))] == [("C-014", "I_B"), ("MB", "I_B[C-099]")]
    assert "2 calculated values replaced by adopted ones; see Adopted values." in cover(whole).cautions


def test_where_sheets_failed_nothing_is_said_of_all_criteria() -> None:
    whole = replace(material(), sheets=(failed(),))
    assert [listing.empty for listing in nearest(whole).listings] == ["None on the 0 sheets executed."] * 2
    assert nearest(material()).listings[0].empty == "None."
    assert cover(whole).flag[-1] == "1 sheet failed, not for issue: C-015"


def test_sizes_that_are_met_are_not_near_to_failing() -> None:
    sizes = replace(inequality("C-016", "neutral size", 1.0), governs=False)
    close = rows(nearest(material(judged("C-016", sizes, inequality("C-016", "drop", 0.5)))), "nearest to failing")
    assert "1.000" not in [row[3] for row in close]
    over = replace(inequality("C-016", "neutral size", 1.5), governs=False)
    assert rows(nearest(material(judged("C-016", over))), "Not met")[0][3] == "1.500"


def test_a_failed_circuit_keeps_its_line_in_the_cable_schedule() -> None:
    circuit = Circuit("C-015", "Bilge pump", {})
    whole = replace(material(failed()), project=replace(installation(), circuits=(circuit,)))
    assert rows(cable_schedule(whole)) == [["C-015", "Bilge pump", "failed, not for issue"]]


def test_each_table_says_how_it_was_obtained_and_whether_it_is_signed_off() -> None:
    part = table_status(material())
    by_number = {row[2]: row for row in rows(part)}
    assert by_number["B.52.12"][4:] == ["from memory", "not compared with a licensed copy"]
    assert by_number["B.52.14"][5] == "compared with licensed copy 7 by AB, 2026-02-01"
    signed = replace(TABLE, signed_off=SignOff("RT", "2026-03-01", "TQ-QA-7"))
    assert cover(replace(material(), tables=(signed,))).cautions[3] == (
        "1 calculated value replaced by an adopted one; see Adopted values."
    )


def test_where_used_leads_from_tables_and_formulas_to_sheets() -> None:
    part = where_used(material())
    assert ["IEC 60364-5-52:2009, Table B.52.12", "C-014"] in rows(part, "Tables")
    found = {row[0]: row for row in rows(part, "Formulas")}
    assert found["three phase.motor current"][2:] == ["derived: D-three-phase", "no published example", "C-014"]


def test_where_used_leads_from_documents_and_drawings_to_sheets() -> None:
    found = rows(where_used(material()), "Documents")
    assert found == [
        ["TQ-E-001", "", "C-014"], ["TQ-E-101", "C", "C-014"], ["TQ-E-201", "", "C-014"],
        ["motor data sheet 4711", "", "C-014"],
    ]  # fmt: skip


def test_where_used_tells_source_and_published_examples_of_our_formulas() -> None:
    formula = next(it for it in formulas().values() if it.derivation and it.published)
    lines = [
        replace(line, formula=formula.name) if isinstance(line, StepLine) and line.label == "I_L" else line
        for line in hoist_lines("C-016")
    ]
    sheet = result_of(notebook("C-016", "x", [code(*lines)]))
    found = {row[0]: row for row in rows(where_used(replace(material(), sheets=(sheet,))), "Formulas")}
    row = found[formula.name.replace("_", " ")]
    assert row[1:] == [formula.purpose, f"derived: D-{formula.derivation}", "; ".join(formula.published), "C-016"]


def test_the_notation_lists_the_symbols_used_and_no_others() -> None:
    names = {row[1] for row in rows(symbols(material()))}
    assert {"I_B", "I_Z", "theta_max", "I_2"} - names == {"I_2"}
    assert ["C_a", "C_a", "factor for ambient temperature", "1"] in rows(symbols(material()))


def test_a_package_with_nothing_open_says_so() -> None:
    confirmed = result_of(notebook("C-1", "x", [code(datum("C-1", "P_2", 45.0))]))
    assert cover(replace(material(), sheets=(confirmed,))).flag == ()
    assert cover(material()).flag == ("1 datum to be confirmed", "1 assumed datum")


def test_every_number_of_compliance_and_schedule_is_that_of_the_results() -> None:
    sheets = results("", [result_of(hoist())])["sheets"]
    sheet = json.loads(json.dumps(sheets))["C-014"]
    values = {value["text"] for value in sheet["values"].values()}
    utilisations = {it["utilisation_text"] for it in sheet["criteria"].values() if "utilisation_text" in it}
    (row,) = cable_schedule(material()).listings[0].rows
    worked = {span.text: span.link for cell in row for span in spans(cell) if re.match(r"C-014\.html#", span.link)}
    assert len(worked) >= 7
    assert set(worked) - values == set()
    for text, link in worked.items():
        assert sheet["values"][link.partition("#")[2]]["text"] == text
    matrix = compliance(material()).listings[1].rows[0]
    shown = {span.text for cell in matrix for span in spans(cell) if re.fullmatch(r"\d\.\d+", span.text)}
    assert shown == utilisations


@pytest.mark.parametrize("said", ["<b>&</b> <script>x</script>", '#panic() $x$ "quoted" \\u{41}', "boat 🚤", "W" * 300])
def test_hostile_texts_are_printed_as_they_are(said: str, tmp_path: Path) -> None:
    block = replace(BLOCK, number=said, title=said, client=said, approved=said)
    origin = {"document": said, "remark": said, "column": said}
    sheet = result_of(notebook("C-014", said, [code(datum("C-014", "P_2", 45.0, "assumed", **origin))]))
    circuit = Circuit(
        "C-014", said, {"device": word(said, "C-014", "device"), "drawing": word(said, "C-014", "drawing")}
    )
    hostile = replace(
        installation(),
        title=block,
        circuits=(circuit,),
        editions={said: said},
        basis={said: word(said, said, said, remark=said)},
    )
    pdf, html = bound(Material(hostile, (sheet,), (TABLE,)), {}, ())
    page = Page(html)
    assert "script" not in page.tags
    assert page.text.count(said) >= 12
    printed = said.replace("🚤", "[U+1F6A4]") if len(said) < 100 else "W" * 12
    assert pdf_text(pdf, tmp_path).replace("\N{ZERO WIDTH SPACE}", "").count(printed) >= 12


def test_a_schedule_with_every_column_stays_on_the_page(tmp_path: Path) -> None:
    names = ("size", "I_B", "I_n", "I_r", "C_a", "C_g", "I_t", "I_Z")
    columns = ("from", "to", "conductor", "insulation", "construction", "cores", "size", "neutral_size",
               "protective_size", "runs", "length", "method", "device",
               "overload_device", "rating", "drawing", "cable_tag")  # fmt: skip
    circuit = Circuit(
        "C-014",
        "Shore-power pillars 1 to 4 on the long quay",
        {it: word(f"{it} 120{_NBSP}mm²", "C-014", it) for it in columns},
    )
    assert set(names) <= {line.label for line in hoist_lines()} | {"I_n"}
    whole = replace(material(), project=replace(installation(), circuits=(circuit,) * 40))
    (tmp_path / "wide.pdf").write_bytes(front_pdf(front(whole)))
    done = subprocess.run(
        ["pdftotext", "-bbox", str(tmp_path / "wide.pdf"), "-"], capture_output=True, text=True, check=True
    )
    for page in done.stdout.split("<page ")[1:]:
        width = float(page.split('width="')[1].split('"')[0])
        assert max(float(edge) for edge in re.findall(r'xMax="([\d.]+)"', page)) < width - 40


@pytest.mark.slow
def test_the_page_shows_in_a_browser(tmp_path: Path) -> None:
    _, html = bound(material(), {}, ())
    (tmp_path / "package.html").write_text(html, "utf-8")
    picture = tmp_path / "package.png"
    address = (tmp_path / "package.html").as_uri()
    chromium(f"--screenshot={picture}", "--window-size=1200,1600", address, profile=tmp_path / "profile")
    assert picture.stat().st_size > 40_000
    assert flat(Page(html).text).count("Compliance matrix") == 2
