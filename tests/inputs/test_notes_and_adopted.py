"""notes.csv and adopted.csv: the most specific note counts, filled data keep theirs, unknown names are faults."""

from __future__ import annotations

from pathlib import Path

import pytest
from project_files import TOML, circuit, faults_of, read

from calcbook.records.project import Adopted, Origin
from calcbook.records.quantity import Quantity

NOTE_HEADS = "tag,column,document,revision,page,status,remark\n"
ADOPTED_HEADS = "tag,line,value,reason,by,date\n"


def origin_of(folder: Path, column: str, notes: str, **changes: str | None) -> Origin:
    return read(folder, circuit(**changes), notes=NOTE_HEADS + notes).circuits[0].data[column].origin


def test_without_notes_everything_is_to_be_confirmed(tmp_path: Path) -> None:
    project = read(tmp_path)
    assert project.circuits[0].data["size"].origin == Origin("circuits.csv", "C-1", "size", "to be confirmed")
    assert project.basis["frequency"].origin == Origin("inputs.toml", "basis", "frequency", "to be confirmed")


NOTES = [
    "*,*,every circuit every column,,,confirmed,\n",
    "*,size,every circuit,,,confirmed,\n",
    "C-1,*,every column,,,confirmed,\n",
    "C-1,size,this one,B,4,confirmed,read on site\n",
]


@pytest.mark.parametrize("count", [1, 2, 3, 4])
def test_the_most_specific_note_counts(tmp_path: Path, count: int) -> None:
    wanted = ["every circuit every column", "every circuit", "every column", "this one"]
    for notes in (NOTES[:count], reversed(NOTES[:count])):
        assert origin_of(tmp_path, "size", "".join(notes)).document == wanted[count - 1]


def test_all_parts_of_a_note(tmp_path: Path) -> None:
    wanted = Origin("circuits.csv", "C-1", "size", "confirmed", "this one", "B", "4", "read on site")
    assert origin_of(tmp_path, "size", NOTES[3]) == wanted


def test_a_note_without_status_leaves_it_to_be_confirmed(tmp_path: Path) -> None:
    assert origin_of(tmp_path, "size", "C-1,size,D-1,,,,\n").status == "to be confirmed"


def test_a_star_stands_for_circuits_and_not_for_the_basis(tmp_path: Path) -> None:
    project = read(tmp_path, notes=NOTE_HEADS + "*,*,D-1,,,confirmed,\nboards.MB,*,D-2,,,confirmed,\n")
    assert project.basis["frequency"].origin.status == "to be confirmed"


def test_notes_on_toml(tmp_path: Path) -> None:
    notes = NOTE_HEADS + "basis,frequency,D-1,,,confirmed,\nboards.MB,location,D-2,,,assumed,\n"
    project = read(tmp_path, toml=TOML + 'location = "Pump house"\n', notes=notes)
    assert project.basis["frequency"].origin.document == "D-1"
    assert project.boards[0].data["location"].origin.status == "assumed"


def test_one_run_is_assumed_when_none_is_stated(tmp_path: Path) -> None:
    wanted = Origin("default", "C-1", "runs", "assumed", remark="One run, as none was stated.")
    assert origin_of(tmp_path, "runs", "*,*,D-1,,,confirmed,\n") == wanted
    assert origin_of(tmp_path, "runs", "C-1,runs,D-1,,,confirmed,\n").status == "confirmed"
    assert origin_of(tmp_path, "runs", "", runs="1").file == "circuits.csv"


@pytest.mark.parametrize(
    ("tag", "key", "text", "remark"),
    [
        ("boards.MB", "diversity", "1", "1, the greatest, as none was stated."),
        ("basis", "length_tolerance", "10 %", "10 %, as none was stated."),
        (
            "basis",
            "resistance_for_drop",
            "theta_max",
            "The greatest temperature in service, the warmest, as none was stated.",
        ),
    ],
)
def test_a_note_that_names_a_filled_key_speaks_of_it(
    tmp_path: Path, tag: str, key: str, text: str, remark: str
) -> None:
    wanted = {
        f"{tag},*,D-1,,,confirmed,\n": Origin("default", tag, key, "assumed", remark=remark),
        f"{tag},{key},D-1,A,3,confirmed,agreed\n": Origin("default", tag, key, "confirmed", "D-1", "A", "3", "agreed"),
    }
    for notes, origin in wanted.items():
        project = read(tmp_path, notes=NOTE_HEADS + notes)
        datum = (project.basis if tag == "basis" else project.boards[0].data)[key]
        assert (datum.text, datum.origin) == (text, origin)


def test_ambient_of_the_basis_keeps_its_own_status(tmp_path: Path) -> None:
    found = origin_of(tmp_path, "ambient", "*,*,D-1,,,assumed,\nbasis,ambient_air,D-2,,,confirmed,\n")
    assert found == Origin("inputs.toml", "basis", "ambient_air", "confirmed", "D-2")


@pytest.mark.parametrize(
    ("phases", "cores", "key", "text"),
    [
        ("L1L2L3", "4", "nominal_voltage", "400 V"),
        ("L1L2", "3", "nominal_voltage", "400 V"),
        ("L2N", "3", "line_to_earth_voltage", "230 V"),
    ],
)
def test_rated_voltage_of_a_motor_is_taken_as_nominal(
    tmp_path: Path, phases: str, cores: str, key: str, text: str
) -> None:
    notes = NOTE_HEADS + "basis,*,D-2,A,3,confirmed,\n"
    datum = read(tmp_path, circuit(phases=phases, cores=cores), notes=notes).circuits[0].data["rated_voltage"]
    remark = "The rated voltage is taken as the nominal voltage, as none was stated."
    assert datum.text == text
    assert datum.origin == Origin("inputs.toml", "basis", key, "assumed", "D-2", "A", "3", remark)


def test_rated_voltage_is_not_filled_beside_a_nameplate_current(tmp_path: Path) -> None:
    assert "rated_voltage" not in read(tmp_path, circuit(rated_current="81 A")).circuits[0].data


@pytest.mark.parametrize(("phases", "kind"), [("L1L2L3", "line_to_line_voltage"), ("L3N", "line_to_neutral_voltage")])
def test_kind_of_a_rated_voltage_follows_the_phases(tmp_path: Path, phases: str, kind: str) -> None:
    rated = 400.0 if phases == "L1L2L3" else 230.0
    project = read(tmp_path, circuit(phases=phases, rated_voltage=f"{rated:g} V"))
    assert project.circuits[0].data["rated_voltage"].quantity == Quantity(rated, "V", kind)


@pytest.mark.parametrize(
    ("row", "message"),
    [
        ("C-2,*,D,,,,", 'row 2, tag: "C-2" is no tag of the inputs; did you mean "C-1"?'),
        ("C-1,sise,D,,,,", 'row 2, column: "sise" is not known here; did you mean "size"?'),
        ("C-1,drawing,D,,,,", "row 2, column: C-1 has no drawing: the note speaks of nothing"),
        ("basis,sise,D,,,,", None),
        ("basis,c_max,D,,,,", "row 2, column: basis has no c_max: the note speaks of nothing"),
        ("boards.MB,location,D,,,,", "row 2, column: boards.MB has no location: the note speaks of nothing"),
        ("C-1,size,D,,,sure,", 'row 2, status: "sure" is not allowed; allowed: confirmed, assumed, to be confirmed'),
        ("C-1,,D,,,,", "row 2, column: is empty; it is needed in every row"),
        ("C-1,size,D,,,,\nC-1,size,E,,,,", 'row 3: a second note on "C-1", "size"; write one'),
        (f"C-1,size,{'d' * 201},,,,", f'row 2, document: "{"d" * 37}..." has 201 characters; allowed are 200'),
    ],
)
def test_wrong_notes(tmp_path: Path, row: str, message: str | None) -> None:
    wrong = faults_of(tmp_path, notes=NOTE_HEADS + row + "\n")
    assert [f"notes.csv, {message}"] == wrong if message else wrong[0].startswith("notes.csv, row 2, column")


def test_a_note_on_a_faulty_circuit_is_not_a_second_fault(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, circuit(size="30"), notes=NOTE_HEADS + "C-1,size,D,,,,\n")
    assert [fault.split(",")[0] for fault in wrong] == ["circuits.csv"]


def test_a_note_on_a_faulty_key_is_not_a_second_fault(tmp_path: Path) -> None:
    toml = TOML.replace('"50 Hz"', '"50 kW"')
    wrong = faults_of(tmp_path, toml=toml, notes=NOTE_HEADS + "basis,frequency,D,,,,\n")
    assert [fault.split(",")[0] for fault in wrong] == ["inputs.toml"]


def test_adopted_values(tmp_path: Path) -> None:
    rows = 'C-1,I_B,82 A,"Letter, item 4",AM,2026-02-26\nC-1,C_a_f,0.7,Measured,AM,2026-02-26\n'
    project = read(tmp_path, adopted=ADOPTED_HEADS + rows)
    assert project.circuits[0].adopted == (
        Adopted("I_B", Quantity(82.0, "A", "line_current"), "Letter, item 4", "AM", "2026-02-26"),
        Adopted("C_a_f", Quantity(0.7, "1", "ratio"), "Measured", "AM", "2026-02-26"),
    )


@pytest.mark.parametrize(
    ("row", "message"),
    [
        ("C-2,I_B,82 A,r,AM,2026-02-26", 'row 2, tag: "C-2" is no circuit of circuits.csv; did you mean "C-1"?'),
        ("C-1,I_b,82 A,r,AM,2026-02-26", None),
        (
            "C-1,I_B,82 V,r,AM,2026-02-26",
            'row 2, value: "V" is a unit of line-to-line voltage; line current takes "mA", "A" or "kA"',
        ),
        ("C-1,I_B,82,r,AM,2026-02-26", 'row 2, value: "82" has no unit; line current takes "mA", "A" or "kA"'),
        ("C-1,C_a_f,0,r,AM,2026-02-26", "row 2, value: C_a_f is 0; allowed is more than 0"),
        (
            "C-1,C_g,0.5,r,AM,2026-02-26",
            'row 2, line: "C_g" is not calculated; no value is adopted for it, change it where it is given',
        ),
        ("C-1,I_B,82 A,,AM,2026-02-26", "row 2, reason: is empty; it is needed in every row"),
        ("C-1,I_B,82 A,r,,2026-02-26", "row 2, by: is empty; it is needed in every row"),
        ("C-1,I_B,82 A,r,AM,", "row 2, date: is empty; it is needed in every row"),
        ("C-1,I_B,82 A,r,AM,2026-02-30", None),
        (
            "C-1,I_B,82 A,r,AM,2026-02-26\nC-1,I_B,83 A,r,AM,2026-02-26",
            "row 3: a second value adopted for C-1, I_B; write one",
        ),
    ],
)
def test_wrong_adopted_values(tmp_path: Path, row: str, message: str | None) -> None:
    wrong = faults_of(tmp_path, adopted=ADOPTED_HEADS + row + "\n")
    assert len(wrong) == 1
    if message:
        assert wrong == [f"adopted.csv, {message}"]


def test_an_adopted_line_offers_the_nearest(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, adopted=ADOPTED_HEADS + "C-1,I_ZZ,82 A,r,AM,2026-02-26\n")
    assert wrong == ['adopted.csv, row 2, line: "I_ZZ" is not a line of the notation list; did you mean "I_Z"?']


def test_an_adopted_date_that_is_none(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, adopted=ADOPTED_HEADS + "C-1,I_B,82 A,r,AM,2026-02-30\n")
    assert wrong == ['adopted.csv, row 2, date: "2026-02-30" is not a date; write year-month-day, such as 2026-03-31']
