"""What cannot be where a cable lies: method, construction, arrangement, soil, sizes that the tables lack."""

from __future__ import annotations

from pathlib import Path

import pytest
from project_files import TOML, circuit, faults_of, read

from calcbook.inputs.fields import fields_of
from calcbook.inputs.installation import _DRIEST_SOIL, _HOTTEST_AMBIENT, _SMALLEST_SIZE, ARRANGEMENTS
from calcbook.reference import choose
from calcbook.reference.table import table, tables

GROUND = TOML.replace('ambient_air = "35 degC"', 'ambient_air = "35 degC"\nambient_ground = "20 degC"')
BURIED = {"method": "D2", "grouping": "buried"}
DUCTS = {"method": "D1", "grouping": "ducts"}
FLAT = {"method": "F", "construction": "single_flat"}
TRAY = {"grouping": "perforated_tray", "trays": "1"}

PLACES = [
    ({"method": ""}, "method: is empty; it is needed in every row of a circuit that has no parts in routes.csv"),
    ({"grouping": ""}, "grouping: is empty; it is needed in every row of a circuit that has no parts in routes.csv"),
    (
        {"circuits_in_group": ""},
        "circuits_in_group: is empty; it is needed in every row of a circuit that has no parts in routes.csv",
    ),
    ({"method": "F"}, 'construction: "multicore" does not go with method F; allowed: single_trefoil, single_flat'),
    (
        {"method": "G"},
        'construction: "multicore" does not go with method G; allowed: single_spaced, single_spaced_horizontal',
    ),
    ({"method": "A1"}, 'construction: "multicore" does not go with method A1; allowed: insulated_in_conduit'),
    (
        {"method": "G", "construction": "single_spaced", "phases": "L1L2"},
        "method: G is for three spaced single-core cables (Tables B.52.10 to B.52.13); phases L1L2",
    ),
    (
        {**FLAT, "size": "16"},
        'size [mm2]: size "16 mm2" is not in the tables for method F, Cu; they begin at 25 mm2',
    ),
    (
        {**DUCTS, "method": "D2", "grouping": "buried", "conductor": "Al", "size": "10"},
        'size [mm2]: size "10 mm2" is not in the tables for method D2, Al; they begin at 16 mm2',
    ),
    (
        {"soil_resistivity": "2.5 K.m/W"},
        "soil_resistivity: goes with methods D1 and D2 only; method E is not in the ground",
    ),
    ({"depth": "0.7 m"}, "depth: goes with methods D1 and D2 only; method E is not in the ground"),
    (
        {**BURIED, "soil_resistivity": "3.5 K.m/W"},
        'soil_resistivity: "3.5 K.m/W" is above the last row of Table B.52.16, 3 K.m/W',
    ),
    (
        {**BURIED, "ambient": "65 degC", "insulation": "PVC70"},
        'ambient: "65 degC" is above the last row of Table B.52.15 for PVC70, 60 degC',
    ),
    (
        {"ambient": "70 degC"},
        'ambient: "70 degC" leaves no rise up to the terminal_temperature: 70 degC, as none is stated',
    ),
    (
        {"ambient": "60 degC", "terminal_temperature": "55 degC"},
        'ambient: "60 degC" leaves no rise up to the terminal_temperature: 55 degC',
    ),
    ({"grouping": "buried"}, 'grouping: "buried" goes with method D2 (Table B.52.18), not E'),
    ({"grouping": "ducts"}, 'grouping: "ducts" goes with method D1 (Table B.52.19), not E'),
    (
        {**BURIED, "grouping": "bunched"},
        'grouping: "bunched" goes with method A1 or A2 or B1 or B2 or C or E or F (Table B.52.17), not D2',
    ),
    (
        {**FLAT, "grouping": "perforated_tray_spaced", "trays": "1"},
        'grouping: "perforated_tray_spaced" goes with method E, multicore (Table B.52.20) and with method F, '
        "single_trefoil (Table B.52.21), not F, single_flat",
    ),
    (
        {**FLAT, "grouping": "unperforated_tray", "trays": "1"},
        'grouping: "unperforated_tray" goes with method E, multicore (Table B.52.20), not F, single_flat',
    ),
    (
        {**TRAY, "circuits_in_group": "8", "runs": "3"},
        "circuits_in_group: circuits_in_group 8 and runs 3 make 10 circuits; Table B.52.20 ends at 9 perforated_tray "
        "circuits",
    ),
    (
        {**FLAT, **TRAY, "circuits_in_group": "4"},
        "circuits_in_group: circuits_in_group 4 and runs 1 make 4 circuits; Table B.52.21 ends at 3 perforated_tray "
        "circuits",
    ),
    ({**TRAY, "trays": "7"}, 'trays: "7" is above the last row of Table B.52.20, 6'),
    ({**TRAY, "trays": ""}, 'trays: is empty; grouping "perforated_tray" needs it: write 1 for one tray or ladder'),
    (
        {"grouping": "single_layer_tray", "trays": "2"},
        'trays: goes with the arrangements of Tables B.52.20 and B.52.21 only, not "single_layer_tray"',
    ),
    (
        {"grouping": "single_layer_tray", "spacing": "50 mm"},
        'spacing: goes with buried and ducts only, not "single_layer_tray"; of cables on trays the arrangements that '
        "end in _spaced are clear of each other",
    ),
]


@pytest.mark.parametrize(("changes", "message"), PLACES)
def test_one_wrong_place_gives_one_fault(tmp_path: Path, changes: dict[str, str], message: str) -> None:
    assert faults_of(tmp_path, circuit(**changes), toml=GROUND) == [f"circuits.csv, row 2, {message}"]


def test_a_cable_in_the_ground_needs_a_ground_temperature(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, circuit(**BURIED))
    assert wrong == ["circuits.csv, row 2, ambient: is empty, and [basis] has no valid ambient_ground"]


def test_the_ground_is_filled_with_what_annex_b_refers_to(tmp_path: Path) -> None:
    data = read(tmp_path, circuit(**BURIED), toml=GROUND).circuits[0].data
    assert (data["ambient"].text, data["ambient"].origin.column) == ("20 degC", "ambient_ground")
    filled = {name: (data[name].text, data[name].origin.status) for name in ("soil_resistivity", "depth", "spacing")}
    assert filled == {
        "soil_resistivity": ("2.5 K.m/W", "assumed"),
        "depth": ("0.7 m", "assumed"),
        "spacing": ("0 mm", "assumed"),
    }
    assert data["terminal_temperature"].text == "70 degC"


def test_another_depth_is_said_to_have_no_factor(tmp_path: Path) -> None:
    data = read(tmp_path, circuit(**BURIED, depth="1.2 m"), toml=GROUND).circuits[0].data
    assert data["depth"].origin.remark == "Annex B has no factor for another depth than 0.7 m."


NOTES = "tag,column,document,revision,page,status,remark\n*,*,TQ-1,A,1,confirmed,\n"
OWN_NOTE = "C-1,soil_resistivity,TQ-G-3,A,7,confirmed,Measured in August\n"


@pytest.mark.parametrize(
    ("soil", "own_note", "status", "remark"),
    [
        ("2.5 K.m/W", "", "confirmed", ""),
        ("3 K.m/W", "", "confirmed", ""),
        ("1 K.m/W", "", "to be confirmed", "Lower than 2.5 K·m/W, the reference of Annex B: it needs a measurement."),
        ("1 K.m/W", OWN_NOTE, "confirmed", "Measured in August"),
    ],
)
def test_a_soil_better_than_the_reference_needs_a_status_of_its_own(
    tmp_path: Path, soil: str, own_note: str, status: str, remark: str
) -> None:
    row = circuit(**BURIED, soil_resistivity=soil)
    origin = read(tmp_path, row, toml=GROUND, notes=NOTES + own_note).circuits[0].data["soil_resistivity"].origin
    assert (origin.status, origin.remark) == (status, remark)


def test_a_better_soil_of_the_basis_needs_a_status_of_its_own_too(tmp_path: Path) -> None:
    toml = GROUND.replace("ambient_ground", 'soil_resistivity = "1.2 K.m/W"\nambient_ground')
    notes = NOTES + "basis,*,TQ-2,A,1,confirmed,\n"
    origin = read(tmp_path, circuit(**BURIED), toml=toml, notes=notes).circuits[0].data["soil_resistivity"].origin
    assert (origin.column, origin.status) == ("soil_resistivity", "to be confirmed")
    noted = notes + "basis,soil_resistivity,TQ-G-3,A,7,confirmed,\n"
    origin = read(tmp_path, circuit(**BURIED), toml=toml, notes=noted).circuits[0].data["soil_resistivity"].origin
    assert (origin.document, origin.status) == ("TQ-G-3", "confirmed")


def test_the_limits_kept_here_are_those_of_the_tables() -> None:
    for insulation, hottest in _HOTTEST_AMBIENT.items():
        for key in (choose.AMBIENT_FACTOR, choose.GROUND_TEMPERATURE_FACTOR):
            rows = [row for row in table(key).rows if row["insulation"] == insulation]
            assert max(float(row["ambient [degC]"]) for row in rows) == hottest
    assert max(float(row["soil_resistivity [K.m/W]"]) for row in table(choose.SOIL_FACTOR).rows) == _DRIEST_SOIL
    for (method, metal), smallest in _SMALLEST_SIZE.items():
        for found in tables().values():
            if found.value_name.name == "I_t":
                of_metal = metal in (*found.header["fixed"].split("="), *(row.get("conductor") for row in found.rows))
                sizes = [
                    float(row["size [mm2]"])
                    for row in found.rows
                    if row["method"].partition("_")[0] == method and row.get("conductor", metal) == metal
                ]
                assert not sizes or not of_metal or min(sizes) == smallest, (found.key, method)


@pytest.mark.parametrize("grouping", ARRANGEMENTS)
def test_an_arrangement_ends_where_its_table_ends(grouping: str) -> None:
    for option in ARRANGEMENTS[grouping]:
        construction = (option.constructions or ("multicore",))[0]
        found = table(choose.grouping_table(grouping, construction))
        assert found.header["table"] == option.table
        rows = [row for row in found.rows if row.get("arrangement", "ducts") == grouping]
        last = max(rows, key=lambda row: float(row["circuits [1]"]))
        assert last.get("beyond") or float(last["circuits [1]"]) == option.most_circuits
        if option.most_trays:
            assert max(float(row["trays [1]"]) for row in rows) == option.most_trays
        assert (choose.grouping_needs(grouping) == "trays") == bool(option.most_trays)


def test_every_arrangement_of_the_inputs_is_known() -> None:
    for place in ("circuits", "routes"):
        assert set(fields_of(place)["grouping"].choices) == {"none", *ARRANGEMENTS}
