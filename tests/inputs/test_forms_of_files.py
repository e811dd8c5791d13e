"""Forms that spreadsheets export give the same Project; random text gives faults and nothing else."""

from __future__ import annotations

import codecs
import time
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from project_files import CIRCUIT, TOML, as_csv, circuit, faults_in, read, write

from calcbook.errors import InputFaults
from calcbook.inputs.fields import fields_of
from calcbook.inputs.project import read_project
from calcbook.records.project import Project
from calcbook.records.quantity import read_quantity
from calcbook.reference.table import tables

ROOT = Path(__file__).resolve().parent.parent.parent
COMMAS = TOML + '[files."circuits.csv"]\ndecimal = ","\n'


def with_table(folder: Path, data: bytes, toml: str = TOML) -> Project:
    write(folder, toml=toml)
    (folder / "circuits.csv").write_bytes(data)
    return read_project(folder)


def test_separator_byte_order_mark_and_line_ends_make_no_difference(tmp_path: Path) -> None:
    row = circuit(description="Hoist, travelling; 45 kW")
    wanted = read(tmp_path, row)
    for separator in ",;":
        text = as_csv(row, separator=separator)
        for mark in (b"", codecs.BOM_UTF8):
            for end in ("\n", "\r\n", "\r"):
                assert with_table(tmp_path, mark + text.replace("\n", end).encode()) == wanted
    (tmp_path / "inputs.toml").write_bytes(codecs.BOM_UTF8 + TOML.encode())
    assert read_project(tmp_path) == wanted


def test_a_comment_that_a_spreadsheet_put_in_quotes(tmp_path: Path) -> None:
    wanted = read(tmp_path)
    comment = '"# One circuit a row; units in the heads"' + "," * 20 + "\n"
    assert with_table(tmp_path, (comment + as_csv(CIRCUIT)).encode()) == wanted
    assert with_table(tmp_path, (comment + as_csv(CIRCUIT, separator=";")).encode()) == wanted


def test_declared_decimal_commas_make_no_difference(tmp_path: Path) -> None:
    wanted = read(tmp_path, circuit(shaft_power="45.5 kW", ambient="35.5 degC"))
    row = circuit(shaft_power="45,5 kW", power_factor="0,86", efficiency="0,94", ambient="35,5 degC")
    for separator in ",;":
        assert with_table(tmp_path, as_csv(row, separator=separator).encode(), COMMAS) == wanted


def test_a_decimal_point_in_a_file_with_decimal_commas(tmp_path: Path) -> None:
    write(tmp_path, circuit(power_factor="0,86", efficiency="1.234"), toml=COMMAS)
    assert faults_in(tmp_path) == [
        'circuits.csv, row 2, efficiency: "1.234" has a decimal point, but inputs.toml says that this file has decimal '
        "commas"
    ]


def test_the_unit_stands_in_the_head_or_in_the_cell(tmp_path: Path) -> None:
    rows = [circuit(), {**circuit(shaft_power=None), "shaft_power": "45 kW"}, circuit(shaft_power="45 kW")]
    texts = {read(tmp_path, row).circuits[0].data["shaft_power"].text for row in rows}
    assert texts == {"45 kW"}
    assert read(tmp_path, circuit(shaft_power="60 hp_metric")).circuits[0].data["shaft_power"].text == "60 hp_metric"
    assert read(tmp_path, {**circuit(power_factor=None), "power_factor [-]": "0.86"}) == read(tmp_path)


def test_an_inserted_row_moves_no_origin(tmp_path: Path) -> None:
    one = read(tmp_path, circuit()).circuits[0]
    assert read(tmp_path, circuit(tag="C-0"), circuit()).circuits[1] == one


@given(st.floats(min_value=1e-9, max_value=1e9, allow_nan=False))
def test_numbers_come_through_unchanged(tmp_path_factory: pytest.TempPathFactory, number: float) -> None:
    folder = tmp_path_factory.mktemp("numbers")
    datum = read(folder, circuit(shaft_power=repr(number))).circuits[0].data["shaft_power"]
    assert datum.text == f"{number!r} kW"
    assert datum.quantity is not None
    assert datum.quantity.number == number
    assert read_quantity(datum.text, "active_power") == datum.quantity


@settings(max_examples=200, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(
    data=st.fixed_dictionaries(
        {},
        optional={
            "inputs.toml": st.one_of(st.text(), st.text().map(lambda text: TOML + text)),
            "circuits.csv": st.one_of(st.text(), st.text().map(lambda text: as_csv(CIRCUIT) + text)),
            "notes.csv": st.text().map(lambda text: "tag,column,status\n" + text),
            "adopted.csv": st.text().map(lambda text: "tag,line,value,reason,by,date\n" + text),
        },
    )
)
def test_random_text_gives_faults_and_nothing_else(tmp_path: Path, data: dict[str, str]) -> None:
    for name in ("notes.csv", "adopted.csv"):
        (tmp_path / name).unlink(missing_ok=True)
    write(tmp_path)
    for name, text in data.items():
        (tmp_path / name).write_bytes(text.encode("utf-8", "surrogatepass"))
    try:
        read_project(tmp_path)
    except InputFaults as faults:
        assert str(faults).isprintable() or "\n" in str(faults)


@settings(max_examples=200, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(head=st.sampled_from(list(CIRCUIT)), cell=st.text(max_size=60))
def test_random_cells_give_faults_and_nothing_else(tmp_path: Path, head: str, cell: str) -> None:
    write(tmp_path, {**CIRCUIT, head: cell})
    try:
        read_project(tmp_path)
    except InputFaults as faults:
        assert all(fault.file in {"circuits.csv", ""} for fault in faults.faults)


@settings(max_examples=200, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(
    item=st.recursive(
        st.one_of(st.integers(), st.floats(), st.booleans(), st.dates(), st.datetimes(), st.just("'a'")),
        lambda inner: st.one_of(st.lists(inner).map(str), inner.map(lambda item: f"{{x = {item}}}")),
        max_leaves=5,
    ),
    key=st.sampled_from(sorted(fields_of("boards"))),
)
def test_random_items_of_toml_give_faults_and_nothing_else(tmp_path: Path, item: object, key: str) -> None:
    text = str(item).lower() if isinstance(item, bool) else str(item)
    write(tmp_path, toml=f"{TOML}{key} = {text}\n")
    try:
        read_project(tmp_path)
    except InputFaults as faults:
        assert all(fault.file == "inputs.toml" for fault in faults.faults)


def test_thousands_of_rows_are_read_in_seconds(tmp_path: Path) -> None:
    rows = [circuit(tag=f"C-{number}") for number in range(3_000)]
    write(tmp_path, *rows)
    start = time.process_time()
    assert len(read_project(tmp_path).circuits) == len(rows)
    assert time.process_time() - start < 5


def test_more_rows_than_allowed(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("calcbook.inputs.rows.MOST_ROWS", 2)
    write(tmp_path, *(circuit(tag=f"C-{number}") for number in range(3)))
    assert faults_in(tmp_path) == ["circuits.csv, row 4: more than 2 rows; the rest was not read"]


def test_sizes_are_those_of_the_tables() -> None:
    choices = {float(choice) for choice in fields_of("circuits")["size"].choices}
    for table in tables().values():
        if table.value_name.name != "I_t":
            continue
        for conductor, smallest in (("Cu", 1.5), ("Al", 2.5)):
            covered = [row for row in table.rows if row.get("conductor") == conductor]
            sizes = {float(row["size [mm2]"]) for row in covered if row["method"] in {"B1", "B2", "C", "E"}}
            assert not sizes or sizes == {size for size in choices if size >= smallest}


@pytest.mark.parametrize(("name", "count"), [("tern_quay", 28), ("tern_quay_failing", 7)])
def test_examples_are_sound(name: str, count: int) -> None:
    project = read_project(ROOT / "examples" / name)
    assert len(project.circuits) == count
    statuses = [datum.origin.status for found in project.circuits for datum in found.data.values()]
    assert statuses.count("assumed") == (1 if name == "tern_quay" else 0)
    assert "to be confirmed" not in statuses
    assert sum(len(found.adopted) for found in project.circuits) == (1 if name == "tern_quay" else 0)
