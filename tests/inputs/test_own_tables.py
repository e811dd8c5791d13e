"""Tables of the project: a sound one is handed on as text, every wrong one has its message and nothing is written."""

from __future__ import annotations

import re
from importlib.resources import files
from pathlib import Path

import pytest
from project_files import TOML, circuit, faults_in, read, write

from calcbook.errors import InputFaults
from calcbook.flow import run_project
from calcbook.inputs.faults import FaultList
from calcbook.inputs.own_tables import LARGEST_TABLE, read_own_tables
from calcbook.inputs.project import read_project
from calcbook.reference import choose
from calcbook.reference.table import tables

CAPACITY = "iec-60364-5-52-b.52.12"
ADDED = """# standard: TQ 1
# edition: 2026
# table: 1
# title: Factors for the paint shop
# obtained: invented
# value: C_a
# row: ambient
# between: ambient up
insulation,ambient [degC],value,status
PVC70,30,1.00,invented
PVC70,40,0.80,invented
"""


def packaged(key: str) -> str:
    return files("calcbook.reference").joinpath(f"{key}.csv").read_text("utf-8")


def put(folder: Path, text: str, key: str = "paint-shop") -> Path:
    (folder / "tables").mkdir(parents=True, exist_ok=True)
    (folder / "tables" / f"{key}.csv").write_bytes(text.encode())
    return folder


def test_the_texts_of_the_tables_are_handed_on(tmp_path: Path) -> None:
    replaced = packaged(CAPACITY).replace("edition: 2009", "edition: 2011")
    put(put(tmp_path, replaced, CAPACITY), ADDED)
    toml = TOML + '[signed_off."IEC 60364-5-52:2011, B.52.12"]\nby = "AM"\ndate = "2026-03-02"\ndocument = "TQ-Q-7"\n'
    project = read(tmp_path, toml=toml)
    assert project.tables == {CAPACITY: replaced, "paint-shop": ADDED}
    assert project.signed_off["IEC 60364-5-52:2011, B.52.12"].by == "AM"


def test_a_project_without_tables_has_none(tmp_path: Path) -> None:
    assert read(tmp_path).tables == {}


def test_every_table_of_calcbook_may_be_copied_into_a_project(tmp_path: Path) -> None:
    for key in tables():
        put(tmp_path, packaged(key), key)
    faults = FaultList()
    assert read_own_tables(tmp_path, faults).texts.keys() == tables().keys()
    faults.raise_if_any()


WRONG = [
    (("# title: Factors for the paint shop\n", ""), 'the header line "# title: ..." is missing or empty'),
    (("# title:", "# titel:"), 'line 4: "titel" is no header line; did you mean "title"?'),
    (
        ("# title:", "#title:"),
        'line 4: "#title: Factors for the paint shop" is not a header line; write "# key: value"',
    ),
    (("# table: 1", "# table: 1\n# table: 2"), 'line 4: "# table:" stands twice; write it once'),
    (("# table: 1", "# table: 1 "), 'line 3: "1 " has a space at its end'),
    (("value: C_a", "value: C_aa"), 'line 6: "C_aa" is not a name of the notation list; did you mean "C_a"?'),
    (("row: ambient", "row: ambiant"), 'line 7: "ambiant" is not a key of the table; did you mean "ambient"?'),
    (
        ("ambient up", "ambient upwards"),
        'line 8: "ambient upwards" is not allowed; allowed: a key with a unit, then up, down or in bands',
    ),
    (
        ("# row", "# fixed: use power\n# row"),
        'line 7: "use power" is not key=value; several are parted by a semicolon',
    ),
    ((",status", ",state"), 'line 9: the column "status" is missing'),
    (
        (",value", ",value [A]"),
        'line 9: the head "value [A]" has a unit; values are in the unit of the notation list',
    ),
    (("[degC]", "[degCC]"), 'line 9: "degCC" of the column "ambient" is not a unit; did you mean "degC"?'),
    (("value,status", "value,value,status"), 'line 9: the column "value" stands twice; write it once'),
    (("30,1.00,", "30,1.00,,"), "line 10: has 5 cells; the heads are 4, parted by commas"),
    (
        ("1.00", "nan"),
        'line 10, value: "nan" is not a number; write digits, with a decimal point where one is needed',
    ),
    (
        ("30,", "30 degC,"),
        'line 10, ambient [degC]: "30 degC" is not a number; write digits, with a decimal point where one is needed',
    ),
    (("1.00", "0"), "line 10, value: C_a is 0; allowed is more than 0"),
    (("PVC70,30", ",30"), "line 10, insulation: is empty; it is needed in every row"),
    (("PVC70,30", "PVC70 ,30"), 'line 10, insulation: "PVC70 " has a space at its end'),
    (("PVC70,30", '"PVC70,30'), "line 10: a quotation mark is not closed, or text follows a closed one"),
    (("PVC70,40", "PVC70,30.0"), "line 11: has the same keys as line 10; write one"),
    (
        ("0.80", "1.1"),
        "line 11, value: C_a is 1.1 at ambient 40 degC, and 1 at 30 degC (line 10); it must not rise with ambient",
    ),
    (("PVC70,30,1.00,invented\nPVC70,40,0.80,invented\n", ""), "has no rows; rows of values are needed"),
    (
        ("paint", "paint\x07"),
        'line 4: "# title: Factors for the paint<U+0007> shop" holds U+0007 (control character) as character 31; '
        "control, direction and line-separating characters are not allowed",
    ),
]


@pytest.mark.parametrize(("change", "message"), WRONG)
def test_wrong_tables(tmp_path: Path, change: tuple[str, str], message: str) -> None:
    assert change[0] in ADDED
    put(write(tmp_path), ADDED.replace(*change, 1))
    wrong = faults_in(tmp_path)
    separator = ": " if not message.startswith("line") else ", "
    assert f"tables/paint-shop.csv{separator}{message}" in wrong, wrong


REPLACED = [
    (
        CAPACITY,
        ("method,loaded [1],size", "method,size"),
        'the column "loaded [1]" is missing; the table that it replaces has: '
        "method, loaded [1], size [mm2], value, status",
    ),
    (
        CAPACITY,
        ("size [mm2]", "size [m2]"),
        'the column "size [m2]" is not in the table that it replaces: method, loaded [1], size [mm2], value, status',
    ),
    (CAPACITY, ("value: I_t", "value: I_b"), None),
    (CAPACITY, ("value: I_t", "value: I_B"), '"# value:" says "I_B"; the table that it replaces says "I_t"'),
    (
        CAPACITY,
        ("conductor=Cu", "conductor=Al"),
        '"# fixed:" says "insulation=XLPE90; conductor=Al"; the table that it replaces says '
        '"insulation=XLPE90; conductor=Cu"',
    ),
    (
        choose.GROUPING_FACTOR,
        ("circuits up", "circuits down"),
        '"# between:" says "circuits down"; the table that it replaces says "circuits up"',
    ),
    (
        choose.GROUPING_FACTOR,
        ("bunched,3,0.70", "bunched,3,0.90"),
        "C_g is 0.9 at circuits 3, and 0.8 at 2 (line 13); it must not rise with circuits",
    ),
]


@pytest.mark.parametrize(("key", "change", "message"), REPLACED)
def test_wrong_replacements(tmp_path: Path, key: str, change: tuple[str, str], message: str | None) -> None:
    text = packaged(key)
    assert change[0] in text
    wrong = faults_in(put(write(tmp_path), text.replace(*change, 1), key))
    assert all(fault.startswith(f"tables/{key}.csv, line ") for fault in wrong), wrong
    assert message is None or any(fault.endswith(f": {message}") for fault in wrong), wrong


def test_capacities_rise_with_size_and_factors_do_not_rise_with_soil(tmp_path: Path) -> None:
    lines = packaged(CAPACITY).splitlines()
    number, line = next((n, line) for n, line in enumerate(lines, 1) if line.startswith("E,3,25,"))
    lines[number - 1] = "E,3,25,50,invented"
    put(write(tmp_path), "\n".join(lines), CAPACITY)
    soil = packaged(choose.SOIL_FACTOR).splitlines()
    method = soil[-1].split(",")[0]
    put(tmp_path, "\n".join([*soil, f"{method},9,5,invented"]), choose.SOIL_FACTOR)
    first, second = faults_in(tmp_path)
    assert line != lines[number - 1]
    assert first.startswith(f"tables/{CAPACITY}.csv, line {number}, value: I_t is 50 at size 25 mm2, and ")
    assert first.endswith("; it must rise with size")
    assert second.startswith(f"tables/{choose.SOIL_FACTOR}.csv, line {len(soil) + 1}, value: C_s is 5 at ")
    assert second.endswith("; it must not rise with soil_resistivity")


def test_names_of_files(tmp_path: Path) -> None:
    put(put(write(tmp_path), ADDED, "Paint"), packaged(CAPACITY), "copy")
    (tmp_path / "tables" / "folder.csv").mkdir()
    put(tmp_path, ADDED + " " * LARGEST_TABLE, "long")
    assert faults_in(tmp_path) == [
        'tables: "Paint.csv" is not the name of a table; a name has 1 to 60 small letters a to z, digits, "-", "." '
        'and "_", then .csv',
        "tables/folder.csv: is not a file",
        f"tables/long.csv: has {len(ADDED) + LARGEST_TABLE} bytes; allowed are {LARGEST_TABLE}",
        f"tables/copy.csv: is IEC 60364-5-52, B.52.12, as is {CAPACITY}; "
        f"to replace that one name the file {CAPACITY}.csv",
    ]


def test_a_file_in_place_of_the_folder(tmp_path: Path) -> None:
    (write(tmp_path) / "tables").write_text("")
    assert faults_in(tmp_path) == ["tables: cannot be read as a folder of tables (Not a directory)"]


def test_every_fault_in_one_pass_and_nothing_is_written(tmp_path: Path) -> None:
    put(write(tmp_path, toml=TOML.replace('"50 Hz"', '"50 kW"')), ADDED.replace("1.00", "x").replace("0.80", "y"))
    before = sorted(tmp_path.rglob("*"))
    with pytest.raises(InputFaults) as caught:
        run_project(tmp_path)
    assert [fault.file for fault in caught.value.faults] == ["tables/paint-shop.csv"] * 2 + ["inputs.toml"]
    assert sorted(tmp_path.rglob("*")) == before
    put(tmp_path, ADDED)
    (tmp_path / "inputs.toml").write_text(TOML, "utf-8")
    assert read_project(tmp_path).tables == {"paint-shop": ADDED}


def test_a_run_chooses_the_size_by_the_table_of_the_project_and_prints_it(tmp_path: Path) -> None:
    plain = write(tmp_path / "plain", circuit(size=""))
    lowered = re.sub(r"^(E,3,[\d.]+,)(\d+),.*$", lambda row: f"{row[1]}{int(row[2]) / 2},invented",
                     packaged(CAPACITY), flags=re.MULTILINE)  # fmt: skip
    own = put(write(tmp_path / "own", circuit(size="")), lowered, CAPACITY)
    chosen = [run_project(folder).project.circuits[0].data["size"].quantity for folder in (plain, own)]
    # 70 degC at the terminals needs 80.4 A / 0.798 / 0.96 = 105 A of one run: 127 A at 25 mm2; 246 A / 2 at 70 mm2
    assert [size and size.number for size in chosen] == [25, 70]
    page = (own / "sheets" / "tables.html").read_text("utf-8")
    assert "<td>invented</td>" in page
    assert f"table of the project, tables/{CAPACITY}.csv" in (own / "sheets" / "C-1.html").read_text("utf-8")
