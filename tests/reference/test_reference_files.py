"""Every table file reads, says where its values come from, and returns each of its rows."""

from __future__ import annotations

from pathlib import Path

import pytest

from calcbook.errors import LookUpFault
from calcbook.records.notation import within
from calcbook.records.project import SignOff
from calcbook.records.quantity import Quantity
from calcbook.records.units import UNITS
from calcbook.reference.table import Key, Table, read_table, table, tables

ALL = pytest.mark.parametrize("table", tables().values(), ids=lambda table: table.key)
# how a value was obtained; the one cell is 0.8 A off the coefficients of Annex D
STATUSES = {"public", "public+formula", "formula", "formula(dev 0.8 A)", "memory", "definition"}

GOOD = """# standard: IEC 1
# edition: 2020
# table: 3
# title: an invented table
# obtained: invented
# value: C_a
# row: ambient
insulation,ambient [degC],value,status
PVC70,30,1.00,memory
"""


def arguments_of(table: Table, row: dict[str, str]) -> dict[str, Key]:
    """The keys that a row answers to."""
    found: dict[str, Key] = {}
    for name, unit in table.keys.items():
        text = row[f"{name} [{unit}]" if unit else name]
        found[name] = Quantity(float(text), unit, UNITS[unit].kinds[0]) if unit else text
    return found


@ALL
def test_a_table_says_what_it_is_and_how_its_values_were_obtained(table: Table) -> None:
    for entry in ("standard", "edition", "table", "title", "conditions", "obtained"):
        assert table.header[entry], entry
    assert table.title == f"{table.header['standard']}:{table.header['edition']}, {table.header['table']}"
    assert table.header["row"] in table.keys
    assert {unit for unit in table.keys.values() if unit} <= set(UNITS)


@ALL
def test_every_row_is_found_by_its_own_keys_with_its_citation(table: Table) -> None:
    for row in table.rows:
        found = table.look_up(arguments_of(table, dict(row)))
        assert found.value == Quantity(float(row["value"]), table.value_name.unit, table.value_name.kind)
        assert found.status == row["status"]
        assert found.remark == ""
        unit = table.keys[table.header["row"]]
        own = row[f"{table.header['row']} [{unit}]" if unit else table.header["row"]]
        assert found.row.split("\N{NO-BREAK SPACE}")[0] == own
        for name in table.keys:
            assert (name in found.column) == (name != table.header["row"])


@ALL
def test_values_lie_in_the_range_of_their_notation_and_statuses_are_known(table: Table) -> None:
    for row in table.rows:
        assert within(table.value_name.range, float(row["value"])), row
        assert row["status"] in STATUSES, row


@ALL
def test_no_two_rows_answer_to_the_same_keys(table: Table) -> None:
    keys = [tuple(arguments_of(table, dict(row)).values()) for row in table.rows]
    assert len(keys) == len(set(keys))


def test_titles_are_unique_because_a_sign_off_names_a_table_by_its_title() -> None:
    titles = [table.title for table in tables().values()]
    assert len(titles) == len(set(titles))


def test_a_table_prints_whole_with_its_sign_off() -> None:
    by = SignOff("AB", "2026-03-02", "TQ-Q-7")
    printed = table("iec-60364-5-52-b.52.14").printed(by)
    assert len(printed.rows) == len(table("iec-60364-5-52-b.52.14").rows)
    assert (printed.standard, printed.edition, printed.table) == ("IEC 60364-5-52", "2009", "B.52.14")
    assert printed.signed_off == by
    assert table("iec-60364-5-52-b.52.14").printed().signed_off is None


def test_an_unknown_table_offers_the_nearest() -> None:
    with pytest.raises(LookUpFault) as caught:
        table("iec-60364-5-52-b.52.41")
    assert 'there is no such table; did you mean "iec-60364-5-52-b.52.' in str(caught.value)


def test_a_good_file_reads(tmp_path: Path) -> None:
    path = tmp_path / "invented.csv"
    path.write_text(GOOD, "utf-8")
    assert read_table(path).title == "IEC 1:2020, 3"


@pytest.mark.parametrize("missing", ["standard", "edition", "table", "title", "obtained", "value", "row"])
def test_a_file_without_a_header_line_is_refused(tmp_path: Path, missing: str) -> None:
    path = tmp_path / "invented.csv"
    path.write_text("\n".join(line for line in GOOD.splitlines() if not line.startswith(f"# {missing}:")), "utf-8")
    with pytest.raises(LookUpFault) as caught:
        read_table(path)
    assert str(caught.value) == f'table invented.csv: the header line "# {missing}: ..." is missing'


@pytest.mark.parametrize("text", [GOOD.replace("status", "state"), GOOD.replace("PVC70,30,1.00,memory\n", "")])
def test_a_file_without_status_or_rows_is_refused(tmp_path: Path, text: str) -> None:
    path = tmp_path / "invented.csv"
    path.write_text(text, "utf-8")
    with pytest.raises(LookUpFault, match=r"invented\.csv: needs the columns value and status, and rows"):
        read_table(path)
