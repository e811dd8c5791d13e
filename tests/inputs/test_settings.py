"""inputs.toml: what it takes, and every fault with its table, key, the value found and what is allowed."""

from __future__ import annotations

from pathlib import Path

import pytest
from project_files import TOML, circuit, faults_in, faults_of, read, write


def changed(old: str, new: str) -> str:
    assert old in TOML
    return TOML.replace(old, new)


WRONG = [
    (
        changed('"50 Hz"', "50"),
        '[basis], frequency: "50" has no unit; write it as text with its unit, such as "50 Hz"',
    ),
    (changed('"50 Hz"', '"50"'), '[basis], frequency: "50" has no unit; frequency takes "Hz"'),
    (changed('"50 Hz"', '"5 Hz"'), '[basis], frequency: "5 Hz" is out of range; allowed is from 16 to 400 Hz'),
    (
        changed('"230 V"', '"400 V"'),
        '[basis], line_to_earth_voltage: "400 V" does not go with nominal_voltage "400 V": their ratio is 1; in a '
        "three-phase system it is about 1.73, allowed is from 1.6 to 1.9",
    ),
    (
        changed('"400 V"', '"11 kV"'),
        '[basis], nominal_voltage: "11 kV" is out of range; allowed is above 0 to 1000 V (this is low voltage)',
    ),
    (changed('"400 V"', '"400 kW"'), None),
    (changed('practice = "iec"', ""), '[basis]: the key "practice" is missing'),
    (changed('"iec"', '"nec"'), '[basis], practice: practice "nec" is not covered yet; covered is "iec"'),
    (
        changed('"iec"', '"bs"'),
        '[basis], practice: "bs" is not allowed; allowed: iec, nec',
    ),
    (
        changed('[basis.editions]\n"IEC 60364-4-43" = "2008"\n"IEC 60364-5-52" = "2009"', ""),
        '[basis.editions]: is missing; it names the edition of each standard: "IEC 60364-5-52" = "2009"',
    ),
    (
        changed('"IEC 60364-4-43" = "2008"\n', ""),
        '[basis.editions]: "IEC 60364-4-43" is missing; sheets cite it with its edition',
    ),
    (
        changed('"50 Hz"', '"400 Hz"'),
        '[basis], frequency: "400 Hz" is not covered yet, and leaving it out would be unsafe: '
        "the tables are for 50 and 60 Hz",
    ),
    (
        changed("[boards.MB]", "[boards.MB]\nderating = 0.8"),
        "[boards.MB], derating: the derating of devices in a warm enclosure is not covered yet, and leaving it out "
        "would be unsafe",
    ),
    (
        changed("[boards.MB]", '[boards.MB]\nambient = "55 degC"'),
        "[boards.MB], ambient: is not taken over by circuits yet; state ambient in each circuit, or ambient_air",
    ),
    (
        changed('= "2009"', "= 2009"),
        '[basis.editions]: "2009" is not an edition; write it as text, in quotation marks',
    ),
    (changed('title = "Tern Quay boatyard"', ""), '[project]: the key "title" is missing'),
    (changed('"TQ-1"', "17"), '[project], number: "17" is a number; write it as text, in quotation marks'),
    (
        changed('number = "TQ-1"', 'number = "TQ-1"\ndate = "31.12.2026"'),
        '[project], date: "31.12.2026" is not a date; write year-month-day, such as 2026-03-31',
    ),
    (
        changed('number = "TQ-1"', 'number = "TQ-1"\nclent = "x"'),
        '[project]: "clent" is not known here; did you mean "client"?',
    ),
    (TOML + "[bords.X]\n", '[bords] is not known; did you mean "boards"?'),
    (
        TOML + "busbar_ratign = '400 A'\n",
        '[boards.MB]: "busbar_ratign" is not known here; did you mean "busbar_rating"?',
    ),
    (
        TOML + "[sources.T1]\nkind = 'generator'\nu_k = '4 %'\n",
        '[sources.T1], u_k: is not a key of a source of kind "generator"; it belongs to transformer',
    ),
    (TOML + "[sources.T1]\nrated_power = '400 kVA'\n", '[sources.T1]: the key "kind" is missing'),
    (
        TOML + "[sources.N]\nkind = 'network'\nfault_level_max = '9 kW'\n",
        '[sources.N], fault_level_max: "kW" is a unit of active power; prospective fault current takes "mA", "A" or '
        '"kA"',
    ),
    (
        TOML + "[cases.mains]\nsources = ['T9']\n",
        '[cases.mains], sources: "T9" is not one of the sources; there are none',
    ),
    (
        TOML + "[cases.mains]\nsources = 'T9'\n",
        '[cases.mains], sources: "T9" is not a list of texts, such as ["A", "B"]',
    ),
    (TOML + "[cases.mains]\nis_normal = 'yes'\n", '[cases.mains], is_normal: "yes"; write true or false'),
    (TOML + "[couplers.Q1]\nbetween = ['MB', 'MC']\n", None),
    (TOML + "[boards.mb]\n", '[boards]: "mb" differs from "MB" only in capital letters'),
    (
        TOML + '[boards."a/b"]\n',
        '[boards]: "a/b" is not a tag; a tag has letters A to Z, digits, "-", "." and "_" and begins with a letter or '
        "digit",
    ),
    (TOML + "spare_ways = 2.5\n", '[boards.MB], spare_ways: "2.5" is not a whole number'),
    (TOML + "spare_ways = -1\n", '[boards.MB], spare_ways: "-1" is out of range; allowed is 0 or more'),
    (TOML + "diversity = nan\n", '[boards.MB], diversity: "nan" is not a number'),
    (TOML + "diversity = true\n", '[boards.MB], diversity: "true" is not text; write the value in quotation marks'),
    (TOML + f"diversity = 0x{'f' * 5000}\n", "[boards.MB], diversity: a number far too large is not allowed"),
    (
        TOML + 'location = "a\\u202Eb"\n',
        '[boards.MB], location: "a<U+202E>b" holds U+202E (right-to-left override) as character 2; control, direction '
        "and line-separating characters are not allowed",
    ),
    (
        TOML + '[files."circuit.csv"]\ndecimal = ","\n',
        '[files]: "circuit.csv" is not a file of the inputs; did you mean "circuits.csv"?',
    ),
    (
        TOML + '[signed_off."IEC 60364-5-52:2009, B.52.44"]\nby = "RT"\ndate = 2026-03-09\ndocument = "QA-7"\n',
        '[signed_off]: "IEC 60364-5-52:2009, B.52.44" is not a table of calcbook; did you mean '
        '"IEC 60364-5-52:2009, B.52.4"?',
    ),
    (
        TOML + '[signed_off."IEC 60364-5-52:2009, B.52.4"]\nby = "RT"\ndate = 2026-03-09\n',
        '[signed_off."IEC 60364-5-52:2009, B.52.4"]: the key "document" is missing',
    ),
    (TOML.replace("[boards.MB]", ""), "no board; a project has at least one, such as [boards.MB]"),
    (TOML.replace("[boards.MB]", "boards = 5"), None),
]


@pytest.mark.parametrize(("toml", "message"), [(toml, message) for toml, message in WRONG if message])
def test_one_fault_in_the_toml_gives_its_message(tmp_path: Path, toml: str, message: str) -> None:
    wrong = [fault for fault in faults_of(tmp_path, toml=toml) if fault.startswith("inputs.toml")]
    assert wrong == [
        f"inputs.toml, {message}"
        if message.startswith("[") and "] is not known" not in message
        else f"inputs.toml: {message}"
    ]


@pytest.mark.parametrize("toml", [toml for toml, message in WRONG if not message])
def test_other_faults_are_faults_too(tmp_path: Path, toml: str) -> None:
    assert any(fault.startswith("inputs.toml") for fault in faults_of(tmp_path, toml=toml))


@pytest.mark.parametrize(
    ("toml", "place"),
    [
        ("[project\n", "line 1, column 9"),
        (TOML + "x = \n", "line 17, column 5"),
        (TOML + "[boards.MB]\n", "line 17, column 11"),
        ('a = """', "end of document"),
    ],
)
def test_bad_toml_names_the_line(tmp_path: Path, toml: str, place: str) -> None:
    assert faults_of(tmp_path, toml=toml)[0].startswith(f"inputs.toml, {place}: is not valid TOML: ")


@pytest.mark.parametrize(
    ("toml", "message"),
    [
        ("[basis\n", "line 1, column 7: is not valid TOML: Expected ']' at the end of a table declaration"),
        ("a = 1\na = 2\n", "line 2, column 6: is not valid TOML: a key stands twice in its table"),
    ],
)
def test_bad_toml_says_what_is_wrong(tmp_path: Path, toml: str, message: str) -> None:
    assert faults_of(tmp_path, toml=toml)[0] == f"inputs.toml, {message}"


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ('"50 Hz"', "inf", '[basis], frequency: "inf" is not a number'),
        (
            'title = "Tern',
            'date = 2026-03-02T10:00:00\ntitle = "Tern',
            '[project], date: "2026-03-02 10:00:00" is not a date; write year-month-day, such as 2026-03-31',
        ),
        (
            "[boards.MB]",
            '[boards.MB]\n[files."circuits.csv"]\ndecimal = ";"',
            '[files."circuits.csv"], decimal: ";" is not allowed; allowed: ".", ","',
        ),
        (
            "[boards.MB]",
            "[[boards]]",
            "[boards]: is not a table of tables; each is written [boards.NAME], its keys below",
        ),
    ],
)
def test_values_of_toml_that_are_no_text(tmp_path: Path, old: str, new: str, message: str) -> None:
    assert f"inputs.toml, {message}" in faults_of(tmp_path, toml=changed(old, new))


def test_toml_nested_too_deeply(tmp_path: Path) -> None:
    assert faults_of(tmp_path, toml="a = " + "[" * 100_000)[0] == "inputs.toml: is not valid TOML: nested too deeply"


def test_a_number_of_ten_thousand_digits(tmp_path: Path) -> None:
    assert faults_of(tmp_path, toml="a = " + "9" * 10_000)[0] == "inputs.toml: is not valid TOML: a number is too long"


def test_broken_toml_does_not_hide_the_faults_of_circuits(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, circuit(shaft_power="12O"), toml="[", notes="tag,column\nbasis,frequency\n")
    assert wrong[1:] == ['circuits.csv, row 2, shaft_power [kW]: "12O" is not a number']


def test_everything_the_trade_may_state_is_taken_and_listed_as_unused(tmp_path: Path) -> None:
    basis = changed("[basis.editions]", 'national_deviations = ["Form A", "Form B"]\n[basis.editions]')
    project = read(tmp_path, circuit(**{"cable_tag": "W-1"}), toml=basis + FULL)
    assert set(project.unused) == {
        "circuits.csv: cable_tag",
        "inputs.toml: basis.national_deviations",
        "inputs.toml: boards.*.busbar_rating",
        "inputs.toml: cases.*.is_normal",
        "inputs.toml: cases.*.sources",
        "inputs.toml: cases.*.used_for",
        "inputs.toml: couplers.*.between",
        "inputs.toml: sources.*.fault_level_max",
        "inputs.toml: sources.*.u_k",
        "inputs.toml: sources.*.vector_group",
    }
    assert project.basis["drop_limits.lighting"].text == "3 %"
    assert project.basis["national_deviations"].text == "Form A, Form B"
    assert [board.tag for board in project.boards] == ["MB", "MC"]
    assert project.boards[0].data["busbar_rating"].quantity is not None
    assert project.signed_off["IEC 60364-5-52:2009, B.52.4"].by == "RT"


FULL = """
busbar_rating = "400 A"
[boards.MC]
[basis.drop_limits]
lighting = "3 %"
[sources.T1]
kind = "transformer"
u_k = "4 %"
vector_group = "Dyn11"
[sources.NET]
kind = "network"
fault_level_max = "250 MVA"
[couplers.Q1]
between = ["MB", "MC"]
[cases.mains]
sources = ["T1", "NET"]
used_for = ["greatest", "least"]
is_normal = true
[signed_off."IEC 60364-5-52:2009, B.52.4"]
by = "RT"
date = 2026-03-09
document = "QA-7"
"""


@pytest.mark.parametrize("date", ["2026-03-02", '"2026-03-02"'])
def test_a_date_is_a_toml_date_or_text(tmp_path: Path, date: str) -> None:
    toml = changed('number = "TQ-1"', f'number = "TQ-1"\ndate = {date}\nprepared = "AM"')
    title = read(tmp_path, toml=toml).title
    assert (title.date, title.prepared, title.checked, title.state) == ("2026-03-02", "AM", "", "draft")


def test_missing_files(tmp_path: Path) -> None:
    hint = f"is missing; a project folder holds inputs.toml and circuits.csv (looked in {tmp_path})"
    assert faults_in(tmp_path) == [f"inputs.toml: {hint}", f"circuits.csv: {hint}"]


def test_missing_folder(tmp_path: Path) -> None:
    folder = tmp_path / "nowhere"
    assert faults_in(folder) == [f"{folder}: is not a folder; a project is a folder with inputs.toml in it"]


def test_a_folder_in_place_of_a_file(tmp_path: Path) -> None:
    folder = write(tmp_path)
    (folder / "notes.csv").mkdir()
    assert faults_in(folder) == ["notes.csv: cannot be read (Is a directory)"]


def test_wrong_encoding_names_the_byte(tmp_path: Path) -> None:
    folder = write(tmp_path, circuit(description="Kran Über"))
    text = (folder / "circuits.csv").read_text("utf-8")
    (folder / "circuits.csv").write_bytes(text.encode("latin-1"))
    place = text.index("Ü") + 1
    assert faults_in(folder) == [
        f"circuits.csv, row 2: is not UTF-8: byte {place} of the file is 0xDC; save the file with the encoding UTF-8"
    ]


def test_a_file_far_too_large(tmp_path: Path) -> None:
    folder = write(tmp_path)
    (folder / "inputs.toml").write_bytes(b"#" * (2**20 + 1))
    assert faults_in(folder)[0] == "inputs.toml: has 1048577 bytes; allowed are 1048576"


def test_devices_are_listed_as_unused(tmp_path: Path) -> None:
    assert read(tmp_path, devices="type\n").unused == ("devices.csv",)


@pytest.mark.parametrize("name", ["Notes.csv", "Adopted.CSV"])
def test_a_file_whose_name_has_capitals_is_not_passed_over(tmp_path: Path, name: str) -> None:
    folder = write(tmp_path)
    (folder / name).write_text("", "utf-8")
    assert f"{name}: is not read; its name is written {name.lower()}, in small letters" in faults_in(folder)


def test_a_link_to_nothing_is_not_passed_over(tmp_path: Path) -> None:
    folder = write(tmp_path)
    (folder / "notes.csv").symlink_to("nowhere.csv")
    assert faults_in(folder)[0].startswith("notes.csv: is missing; ")


def test_a_folder_that_cannot_be_looked_at(tmp_path: Path) -> None:
    wrong = faults_in(tmp_path / ("x" * 5000))
    assert len(wrong) == 1
    assert wrong[0].endswith("...: cannot be read (File name too long)")
