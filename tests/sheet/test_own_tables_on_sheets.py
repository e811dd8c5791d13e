"""A table of the project reaches the sheet, its citation, its headroom, and the choice of size."""

from __future__ import annotations

import re
from importlib.resources import files

import pytest
from sheet_samples import motor_circuit, quiet_sheet

from calcbook.errors import LookUpFault
from calcbook.records.headroom import headroom
from calcbook.records.line import ConclusionLine, InequalityLine, TableLine
from calcbook.records.quantity import Quantity
from calcbook.reference import choose
from calcbook.reference.table import table
from calcbook.sheet import Sheet, look_up

CAPACITY = "iec-60364-5-52-b.52.12"
AMBIENT = choose.AMBIENT_FACTOR


def packaged(key: str) -> str:
    return files("calcbook.reference").joinpath(f"{key}.csv").read_text("utf-8")


def own_tables() -> dict[str, str]:
    """Capacities as in calcbook but for one cell, and 0.45 as ambient factor above 40 degC."""
    capacity = packaged(CAPACITY).replace("edition: 2009", "edition: 2011")
    capacity = "\n".join("E,3,25,126,invented" if row.startswith("E,3,25,") else row for row in capacity.splitlines())
    hot = re.compile(r"^(XLPE90,(?:4[5-9]|[5-9]\d),).*$", re.MULTILINE)
    return {CAPACITY: capacity, AMBIENT: hot.sub(r"\g<1>0.45,invented", packaged(AMBIENT))}


@pytest.fixture
def sheet(monkeypatch: pytest.MonkeyPatch) -> Sheet:
    return motor_circuit(quiet_sheet(monkeypatch, {"tables": own_tables()}))


def line_of(sheet: Sheet, label: str) -> TableLine:
    return next(line for line in sheet.lines if line.label == label and isinstance(line, TableLine))


def test_a_replaced_value_reaches_the_sheet_with_its_citation(sheet: Sheet, monkeypatch: pytest.MonkeyPatch) -> None:
    line = line_of(sheet, "I_t")
    assert (line.value.number, line.citation.edition, line.citation.status) == (126, "2011", "invented")
    assert line.citation.remark == f"table of the project, tables/{CAPACITY}.csv"
    assert line_of(sheet, "C_g").citation.remark.find("table of the project") == -1
    plain = line_of(motor_circuit(quiet_sheet(monkeypatch)), "I_t")
    assert plain.value.number == 127
    assert plain.citation.remark == ""


def test_headroom_is_worked_out_with_the_tables_of_the_project(sheet: Sheet) -> None:
    setting = next(line for line in sheet.lines if isinstance(line, InequalityLine) and line.label == "setting")
    conclusion = sheet.lines[-1]
    assert isinstance(conclusion, ConclusionLine)
    own = own_tables()
    before = sheet.lines[:-1]
    with_own = headroom(before, setting, lambda key, arguments: look_up(key, arguments, own))
    with_packaged = headroom(before, setting, look_up)
    assert with_own in conclusion.headrooms
    assert with_own != with_packaged


def test_an_added_table_is_looked_up_and_a_missing_one_is_not(monkeypatch: pytest.MonkeyPatch) -> None:
    added = packaged(AMBIENT).replace("table: B.52.14", "table: 1").replace("IEC 60364-5-52", "TQ 1")
    sheet = quiet_sheet(monkeypatch, {"tables": {"paint-shop": added}})
    insulation, ambient = sheet.choice("insulation", "insulation"), sheet.datum("ambient")
    found = sheet.table_value("C_a", "paint-shop", insulation=insulation, ambient=ambient)
    assert found.quantity == Quantity(0.91, "1", "ratio")
    with pytest.raises(LookUpFault, match='there is no such table; did you mean "paint-shop"'):
        table("paint-shap", {"paint-shop": added})
