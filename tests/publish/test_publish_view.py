from __future__ import annotations

import pytest
from publish_sample import CONTEXT, code, datum, derivations, hoist, markdown, notebook, step, table_value

from calcbook.publish import anchors
from calcbook.publish.cautions import numbered
from calcbook.publish.rows import prose
from calcbook.publish.sheet_view import Context, sheet_view
from calcbook.publish.view import Formula, SheetView, Span, WorkRow
from calcbook.records.line import Binding, StepLine
from calcbook.records.project import Origin


def rows_of(view: SheetView) -> dict[str, WorkRow]:
    return {row.anchor: row for section in view.sections for row in section.work if isinstance(row, WorkRow)}


def words(paragraphs: tuple[tuple[Span, ...], ...]) -> list[str]:
    return ["".join(span.text for span in paragraph) for paragraph in paragraphs]


@pytest.fixture(scope="module")
def view() -> SheetView:
    return sheet_view(hoist(), CONTEXT)


def test_every_heading_opens_a_section_with_its_text_data_and_working(view: SheetView) -> None:
    titles = [(words((section.title,))[0], section.level) for section in view.sections]
    assert titles == [("Three-phase power", 1), ("Cable current", 1), ("Capacity", 2), ("Criteria", 2)]
    first = view.sections[0]
    assert words(first.opening) == ["Line current of the motor from its shaft power."]
    assert [row.label for row in first.data] == ["P_2", "U_r", "eta", "cos_phi"]
    assert isinstance(first.work[0], tuple)
    assert first.work[0][1] == Span("U_r", symbol=True)


def test_every_datum_of_a_section_stands_in_its_table_in_the_order_of_the_workbook(view: SheetView) -> None:
    labels = [row.label or "".join(span.text for span in row.description) for row in view.sections[1].data]
    assert labels == ["method of installation", "insulation of the conductor", "size", "theta_a", "I_r"]
    assert [row.label for row in view.sections[2].data] == ["n", "theta_ref"]


def test_a_datum_shows_place_document_and_status(view: SheetView) -> None:
    row = view.sections[0].data[0]
    assert (row.place, row.document, row.status) == (
        "circuits.csv, C-014, shaft_power",
        "TQ-E-101, rev. C, p. 2",
        "confirmed",
    )
    assert row.value == Span("45\N{NO-BREAK SPACE}kW", "inputs.html#circuits.csv/C-014/shaft_power")


def test_values_in_a_formula_link_to_their_lines(view: SheetView) -> None:
    second = rows_of(view)["I_L"].equations[1]
    assert second.left is None
    assert isinstance(second.right, Formula)
    assert second.right.links == {name: f"#{name}" for name in ("P_2", "U_r", "eta", "cos_phi")}


def test_an_adopted_step_shows_both_values_and_why(view: SheetView) -> None:
    row = rows_of(view)["I_B"]
    assert words(row.result) == ["calculated I_B = 78.4\N{NO-BREAK SPACE}A", "adopted I_B = 82.0 A"]
    assert words(row.notes)[-1] == (
        "adopted I_B = 82.0 A in place of 78.4\N{NO-BREAK SPACE}A: "
        "allowance for the tail winch, letter 12 of the maker (AB, 2026-03-02)"
    )


def test_a_step_names_where_its_formula_is_derived(view: SheetView) -> None:
    assert rows_of(view)["I_L"].reference == (
        (Span("derived: "), Span("D-three-phase", "D-three-phase.html#line-current")),
    )


def test_a_table_value_names_its_cell_and_whether_it_was_compared(view: SheetView) -> None:
    rows = rows_of(view)
    assert words(rows["I_t"].reference) == ["IEC 60364-5-52:2009", "Table B.52.12"]
    assert words(rows["I_t"].notes) == [
        "row 25 mm², column E, XLPE, copper, 3 loaded; from memory of the standard, not compared with a licensed copy",
        "for method E, insulation XLPE90, size 25\N{NO-BREAK SPACE}mm², loaded 3",
    ]
    assert words(rows["C_a"].notes)[0].split("; ")[-1] == "compared with licensed copy 7 by AB, 2026-02-01"


def test_the_caution_names_each_table_that_is_not_signed_off_once(view: SheetView) -> None:
    tables = "; ".join(f"IEC 60364-5-52:2009, Table {table}" for table in ("B.52.12", "B.52.17", "52.1"))
    assert view.caution == f"Values not compared with a licensed copy: {tables}."


def test_criteria_say_which_governs(view: SheetView) -> None:
    rows = rows_of(view)
    assert words(rows["setting"].result) == ["met", "utilisation 0.965", "governs"]
    assert words(rows["capacity"].result) == ["met", "utilisation 0.892"]
    assert view.summary is not None
    assert [row.governs for row in view.summary.criteria] == ["governs", "does not govern", "does not govern"]
    assert words((view.summary.governing,)) == [
        "setting not below the design current: 82.0\N{NO-BREAK SPACE}A ≤ 85\N{NO-BREAK SPACE}A, utilisation 0.965"
    ]


def test_alone_a_sheet_is_a_draft_without_links_to_other_pages() -> None:
    view = sheet_view(hoist(), Context())
    assert view.block.state == "draft"
    assert {row.value.link for section in view.sections for row in section.data} == {""}
    spans = [
        span for row in rows_of(view).values() for line in (*row.result, *row.reference, *row.notes) for span in line
    ]
    assert all(not span.link or span.link.startswith("#") for span in spans)


def test_a_derivation_shows_premise_and_proof() -> None:
    row = rows_of(sheet_view(derivations(), CONTEXT))["line-current"]
    assert words(row.result) == ["proven", "the difference of both sides simplifies to zero"]
    assert "".join(span.text for span in row.description) == "solved for the current"


def test_a_sheet_without_criteria_says_so() -> None:
    cells = hoist()["cells"]
    conclusion = cells[-1]["outputs"][-1]
    record = next(value for key, value in conclusion["data"].items() if key.startswith("application/"))
    record.update(order=[], governing="", headrooms=[])
    view = sheet_view({"metadata": {}, "cells": cells}, CONTEXT)
    assert view.summary is not None
    assert (view.summary.verdict, view.summary.governing) == ("this sheet has no criteria", ())


def test_a_failed_cell_makes_the_sheet_failed() -> None:
    broken = code(datum("C-014", "P_2", 45.0))
    broken["outputs"].append({"output_type": "error", "ename": "SheetFault", "evalue": "no value", "traceback": []})
    view = sheet_view(notebook("C-014", "hoist", [markdown("# Power"), broken]), CONTEXT)
    assert view.failure is not None
    assert (view.failure.error, view.failure.message, view.failure.cell) == ("SheetFault", "no value", 1)


def test_the_terms_of_a_sum_are_listed_with_links() -> None:
    single = step("MB", "P", 20.0, "sum(P_1)", {})
    labels = ("P_1[C-011]", "P_1[C-012]")
    keyed = StepLine(
        **{**single.__dict__, "bindings": (Binding(symbol="P_1", rests_on=labels, texts=("8 kW", "12 kW")),)}
    )
    row = rows_of(sheet_view(notebook("MB", "board", [code(keyed)]), CONTEXT))["P"]
    assert words(row.notes) == ["terms: P_1[C-011] = 8 kW, P_1[C-012] = 12 kW"]
    assert row.notes[0][3] == Span("8 kW", "#P_1~5BC-011~5D")


def test_source_lists_of_lines_read_like_one_text() -> None:
    cell = markdown("")
    cell["source"] = ["# Power of `U_n`\n", "\n", "One sentence,\n", "in two lines.\n", "## Below"]
    above, below = sheet_view(notebook("C-1", "", [cell]), CONTEXT).sections
    assert above.title == (Span("Power of "), Span("U_n", symbol=True))
    assert words(above.opening) == ["One sentence, in two lines."]
    assert (words((below.title,)), below.opening, below.data, below.work) == (["Below"], (), (), ())


def test_names_of_the_notation_in_our_own_sentences_are_set_as_symbols() -> None:
    assert prose("greatest I_2 that fits, my_word") == (
        Span("greatest "),
        Span("I_2", symbol=True),
        Span(" that fits, "),
        Span("my_word"),
    )


def test_a_table_value_without_a_column_prints_none() -> None:
    line = table_value("C-1", "k_2", 1.2, "1", ("relay", ""))
    row = rows_of(sheet_view(notebook("C-1", "", [code(line)]), CONTEXT))["k_2"]
    assert words(row.notes)[0].split("; ")[0] == "row relay"


def test_only_numbers_of_tables_get_the_word_before_them() -> None:
    names = ("B.52.12", "52.1", "7", "523.6 (clause)", "overload relays, conventional operation")
    assert [numbered(name) for name in names] == ["Table B.52.12", "Table 52.1", "Table 7", *names[3:]]


def test_a_workbook_that_does_not_say_its_version_prints_so() -> None:
    assert sheet_view(hoist(), CONTEXT).version == "calcbook 0.1.0"
    assert sheet_view({"metadata": {}, "cells": []}, CONTEXT).version == "calcbook, version not recorded"


def test_anchors_are_ascii_and_distinct() -> None:
    assert anchors.anchor("P[C-014]") == "P~5BC-014~5D"
    assert anchors.anchor("a/b") != anchors.anchor("a", "b")
    assert anchors.to_datum(Origin("x y.csv", "é", "c")) == "inputs.html#x~20y.csv/~C3~A9/c"
    assert anchors.to_source("MB/demand/P[C-014]") == "MB.html#P~5BC-014~5D"
