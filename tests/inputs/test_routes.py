"""routes.csv: parts of a route, and what does not fit together in them."""

from __future__ import annotations

from pathlib import Path

from project_files import TOML, circuit, faults_of, read

HEADS = "circuit,part,length [m],method,ambient [degC],grouping,circuits_in_group,trays,spacing [mm],soil_resistivity"
WHOLE = circuit(method="", grouping="", circuits_in_group="", **{"length [m]": "85"})
DUCT = "C-1,P1,60,D1,20,ducts,2,,250,"
TRAY = "C-1,P2,20,E,,perforated_tray,4,1,,"


def routes(*rows: str) -> str:
    return "\n".join((HEADS, *rows)) + "\n"


def test_the_parts_are_data_of_the_circuit(tmp_path: Path) -> None:
    data = read(tmp_path, WHOLE, routes=routes(DUCT, TRAY)).circuits[0].data
    assert {name: data[f"method[{name}]"].text for name in ("P1", "P2")} == {"P1": "D1", "P2": "E"}
    assert data["ambient[P1]"].text == "20 degC"
    assert data["ambient[P2]"].text == "35 degC"
    assert data["part_length[P2]"].text == "20 m"
    assert data["soil_resistivity[P1]"].text == "2.5 K.m/W"
    assert "soil_resistivity[P2]" not in data
    origin = data["grouping[P1]"].origin
    assert (origin.file, origin.tag, origin.column) == ("routes.csv", "C-1", "P1, grouping")


def test_notes_speak_of_columns_of_the_parts(tmp_path: Path) -> None:
    notes = "tag,column,document,status\nC-1,method,TQ-E-ROU-003,confirmed\n"
    origin = read(tmp_path, WHOLE, routes=routes(DUCT, TRAY), notes=notes).circuits[0].data["method[P2]"].origin
    assert (origin.document, origin.status) == ("TQ-E-ROU-003", "confirmed")


def test_parts_longer_together_than_the_circuit(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, WHOLE, routes=routes(DUCT, TRAY.replace(",20,", ",26,")))
    assert wrong == ["routes.csv, row 3, length [m]: the parts are 86 m long together, the circuit is 85 m"]


def test_what_stands_in_the_parts_does_not_stand_in_the_circuit(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, {**WHOLE, "method": "E"}, routes=routes(DUCT, TRAY))
    message = "stands in routes.csv for this circuit, part by part; leave it empty here"
    assert wrong == [f"circuits.csv, row 2, method: {message}"]


def test_every_part_is_checked_as_a_place(tmp_path: Path) -> None:
    rows = (DUCT.replace(",D1,", ",B1,").replace("ducts", "bunched").replace(",250,", ",,"), TRAY + "2.5 K.m/W")
    assert faults_of(tmp_path, WHOLE, routes=routes(*rows)) == [
        'routes.csv, row 2, method: "multicore" does not go with method B1; allowed: insulated_in_conduit',
        "routes.csv, row 3, soil_resistivity: goes with methods D1 and D2 only; method E is not in the ground",
    ]


def test_a_part_in_the_ground_needs_a_ground_temperature(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, WHOLE, routes=routes(DUCT.replace(",20,", ",,", 1), TRAY))
    assert wrong == ["routes.csv, row 2, ambient [degC]: is empty, and [basis] has no valid ambient_ground"]


def test_a_part_stands_once_and_belongs_to_a_circuit(tmp_path: Path) -> None:
    wrong = faults_of(tmp_path, WHOLE, routes=routes(DUCT, DUCT, TRAY.replace("C-1", "C-2")))
    assert wrong == [
        'routes.csv, row 3, part: "P1" of C-1 stands twice, first in row 2',
        'routes.csv, row 4, circuit: "C-2" is not one of the circuits; did you mean "C-1"?',
    ]


def test_a_route_has_at_most_eight_parts(tmp_path: Path) -> None:
    rows = [TRAY.replace("P2", f"P{number}").replace(",20,", ",1,") for number in range(9)]
    wrong = faults_of(tmp_path, WHOLE, routes=routes(*rows))
    assert wrong == ["routes.csv, row 10, part: C-1 has more than 8 parts; join those that lie alike"]


def test_a_circuit_with_wrong_parts_is_not_taken_and_its_notes_are_not_judged(tmp_path: Path) -> None:
    notes = "tag,column,document\nC-1,ambient,TQ-1\n"
    wrong = faults_of(tmp_path, WHOLE, routes=routes(DUCT.replace("D1", "D3"), TRAY), notes=notes)
    assert wrong == [
        'routes.csv, row 2, method: "D3" is not allowed; allowed: A1, A2, B1, B2, C, D1, D2, E, F, G',
    ]


def test_decimal_commas_are_read_where_inputs_toml_says_so(tmp_path: Path) -> None:
    toml = TOML + '[files."routes.csv"]\ndecimal = ","\n'
    rows = routes(DUCT.replace(",60,", ',"60,5",'), TRAY)
    assert read(tmp_path, WHOLE, toml=toml, routes=rows).circuits[0].data["part_length[P1]"].text == "60.5 m"
