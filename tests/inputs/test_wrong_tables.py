"""Heads that are not known, rows that do not fit them and files that cannot be read on: each reported once."""

from __future__ import annotations

from pathlib import Path

import pytest
from project_files import CIRCUIT, as_csv, circuit, faults_in, faults_of, write


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ("tag", "tog", 'row 1, column 1: "tog" is not known here; did you mean "to"?'),
        ("tag", "tag [m]", 'row 1, column 1: "tag [m]": tag has no unit; write the head without brackets'),
        (
            "[mm2]",
            "[mm",
            'row 1, column 14: "size [mm" is not a head; write a name and, in brackets, its unit: length [m]',
        ),
        (
            "[kW]",
            "[kVA]",
            'row 1, column 6: "shaft_power [kVA]": "kVA" is a unit of apparent power; active power takes "W", "kW", '
            '"MW", "hp_imperial" or "hp_metric"',
        ),
        ("starter", "efficiency", 'row 1, efficiency: the column stands twice, first as "efficiency"'),
        ("starter", "size [mm2]", 'row 1, size [mm2]: the column stands twice, first as "size [mm2]"'),
        ("construction", "", 'row 1: the column "construction" is missing'),
        (
            "starter",
            "adopted_I_B",
            'row 1, column 9: "adopted_I_B": adopted values stand in adopted.csv (tag, line, value, reason, by, date)',
        ),
    ],
)
def test_heads(tmp_path: Path, old: str, new: str, message: str) -> None:
    folder = write(tmp_path)
    text = (folder / "circuits.csv").read_text("utf-8")
    (folder / "circuits.csv").write_text(text.replace(old, new, 1), "utf-8")
    assert f"circuits.csv, {message}" in faults_in(folder)


def test_unknown_column_offers_the_nearest(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, {**CIRCUIT, "lenght [m]": "20"})
    assert wrong == ['circuits.csv, row 1, column 24: "lenght" is not known here; did you mean "length"?']


def test_missing_column_is_named_once(tmp_path: Path) -> None:
    rows = [circuit(tag=f"C-{number}", device=None) for number in range(3)]
    assert faults_of(tmp_path, *rows) == ['circuits.csv, row 1: the column "device" is missing']


def test_too_many_cells(tmp_path: Path) -> None:
    folder = write(tmp_path)
    with (folder / "circuits.csv").open("a") as file:
        file.write("C-2" + ",1" * 24 + "\n")
    assert faults_in(folder) == [
        'circuits.csv, row 3: 25 cells under 23 heads, the last is "1"; a comma or semicolon within a number or a '
        "text splits a cell, unless the cell stands in quotation marks"
    ]


def test_a_comma_that_pushes_empty_cells_over_the_end(tmp_path: Path) -> None:
    """One fault, not one for each cell that came to stand under the next head."""
    text = as_csv(circuit(description="Hoist; travelling", starter=None, to="")).replace('"', "")
    folder = write(tmp_path)
    (folder / "circuits.csv").write_text(text.replace("Hoist;", "Hoist,"), "utf-8")
    assert faults_in(folder)[0].startswith('circuits.csv, row 2: 24 cells under 23 heads, the last is "82"; a comma or')
    assert len(faults_in(folder)) == 1


def test_a_refused_head_is_reported_once(tmp_path: Path) -> None:
    folder = write(tmp_path)
    text = (folder / "circuits.csv").read_text("utf-8")
    (folder / "circuits.csv").write_text(text.replace("[kW]", "[KW]").replace("size [mm2]", "sise [mm2]"), "utf-8")
    assert faults_in(folder) == [
        'circuits.csv, row 1, column 6: "shaft_power [KW]": "KW" is not a unit calcbook knows; did you mean "kW"?',
        'circuits.csv, row 1, column 14: "sise" is not known here; did you mean "size"?',
    ]


@pytest.mark.parametrize("first", ["sep=;\n", "Circuits of the workshop\n", "one\ttwo\n", "\0\n"])
def test_a_first_row_without_any_head_ends_the_reading(tmp_path: Path, first: str) -> None:
    folder = write(tmp_path, notes="tag,column,document\nC-9,size,D\n")
    text = (folder / "circuits.csv").read_text("utf-8")
    (folder / "circuits.csv").write_text(first + text, "utf-8")
    found = first.strip().replace("\t", "<U+0009>").replace("\0", "<U+0000>")
    found = "sep=" if found == "sep=;" else found
    assert faults_in(folder) == [
        f'circuits.csv, row 1: "{found}" begins a row without a head of a column; the first row that is no comment '
        "holds them (tag, description, from, ...), separated by commas or semicolons"
    ]


def test_rows_are_counted_as_an_editor_counts_them(tmp_path: Path) -> None:
    text = as_csv(circuit(), circuit(tag="C-2", shaft_power="12O"))
    head, first, second = text.splitlines()
    folder = write(tmp_path)
    (folder / "circuits.csv").write_text(f"# a comment\n\n{head}\n,,,\n{first}\n# another\n{second}\n", "utf-8")
    assert faults_in(folder) == ['circuits.csv, row 7, shaft_power [kW]: "12O" is not a number']


def test_a_quotation_mark_that_is_not_closed(tmp_path: Path) -> None:
    folder = write(tmp_path)
    with (folder / "circuits.csv").open("a") as file:
        file.write('C-2,"Bilge pump,MB\nC-3,b\n')
    (folder / "notes.csv").write_text("tag,column,document\nC-3,size,D\n", "utf-8")
    (fault,) = faults_in(folder)
    assert fault.startswith("circuits.csv, row 3: text follows a closed quotation mark, or")


def test_reading_stops_at_a_thousand_faults(tmp_path: Path) -> None:
    rows = [circuit(tag=f"C-{number}", phases=f"L{number}") for number in range(1500)]
    wrong = faults_of(tmp_path, *rows)
    assert len(wrong) == 1001
    assert wrong[-1] == "circuits.csv: more than 1000 faults; the rest was not read"
