"""Every wrong cell of circuits.csv is named with row, column, the value found and what is allowed."""

from __future__ import annotations

from pathlib import Path

import pytest
from project_files import circuit, faults_of, read

LOADS = "shaft_power, active_power, apparent_power, current"

CELLS = [
    ({"shaft_power": "12O"}, 'row 2, shaft_power [kW]: "12O" is not a number'),
    ({"shaft_power": "5*3"}, 'row 2, shaft_power [kW]: "5*3" is not a number'),
    ({"shaft_power": "NaN"}, 'row 2, shaft_power [kW]: "NaN" is not a number'),
    ({"shaft_power": "inf"}, 'row 2, shaft_power [kW]: "inf" is not a number'),
    ({"shaft_power": "1e999"}, 'row 2, shaft_power [kW]: "1e999" is too large'),
    ({"shaft_power": "４５"}, 'row 2, shaft_power [kW]: "４５" is not a number'),
    ({"shaft_power": "-45"}, 'row 2, shaft_power [kW]: "-45" is out of range; allowed is more than 0'),
    ({"shaft_power": "0"}, 'row 2, shaft_power [kW]: "0" is out of range; allowed is more than 0'),
    (
        {"shaft_power": "1,5"},
        'row 2, shaft_power [kW]: "1,5" has a decimal comma; write "1.5"; where a whole file has decimal commas, '
        'inputs.toml says so: [files."circuits.csv"] decimal = ","',
    ),
    (
        {"shaft_power": "45 kVA"},
        'row 2, shaft_power [kW]: "kVA" is a unit of apparent power; active power takes "W", "kW", "MW", '
        '"hp_imperial" or "hp_metric"',
    ),
    (
        {"shaft_power": "60 hp"},
        'row 2, shaft_power [kW]: "hp" names two units; write "hp_imperial" or "hp_metric"',
    ),
    ({"shaft_power": "45kW"}, 'row 2, shaft_power [kW]: "45kW": write a space between number and unit, "45 kW"'),
    (
        {"power_factor": "0"},
        'row 2, power_factor: "0" is out of range; allowed is above 0 to 1 (80 % is written 0.80)',
    ),
    (
        {"power_factor": "1.01"},
        'row 2, power_factor: "1.01" is out of range; allowed is above 0 to 1 (80 % is written 0.80)',
    ),
    (
        {"efficiency": "92"},
        'row 2, efficiency: "92" is out of range; allowed is above 0 to 1 (92 % is written 0.92)',
    ),
    (
        {"efficiency": "92 %"},
        'row 2, efficiency: "%" is a unit of per cent; ratio takes a plain number (92 % is written 0.92)',
    ),
    (
        {"phases": "L4"},
        'row 2, phases: "L4" is not allowed; allowed: L1L2L3, L1L2L3N, L1N, L2N, L3N, L1L2, L2L3, L1L3',
    ),
    ({"conductor": "cu"}, 'row 2, conductor: "cu" is not allowed; did you mean "Cu"? Allowed: Cu, Al'),
    (
        {"size": "30"},
        'row 2, size [mm2]: "30" is not a standard value; allowed: 1.5, 2.5, 4, 6, 10, 16, 25, 35, 50, 70, 95, 120, '
        "150, 185, 240, 300 mm2",
    ),
    (
        {"size": "1.5", "conductor": "Al"},
        'row 2, size [mm2]: "1.5 mm2" is not in the tables for Al; they begin at 2.5 mm2',
    ),
    ({"from": "MDB"}, 'row 2, from: "MDB" is not one of the boards or sources; did you mean "MB"?'),
    ({"from": ""}, "row 2, from: is empty; it is needed in every row"),
    ({"circuits_in_group": "2.5"}, 'row 2, circuits_in_group: "2.5" is not a whole number'),
    ({"cores": "7"}, 'row 2, cores: "7" is not a standard value; allowed: 2, 3, 3.5, 4, 5'),
    ({"cores": "2"}, 'row 2, cores: "2" is too few; phases L1L2L3 has 3 live conductors'),
    (
        {"cores": "3", "protective_conductor": "core"},
        'row 2, cores: "3" is too few; phases L1L2L3 has 3 live conductors and a protective core',
    ),
    ({"ambient": "35 K"}, 'row 2, ambient: "K" is a unit of temperature difference; temperature takes "degC"'),
    ({"ambient": "35"}, 'row 2, ambient: "35" has no unit; temperature takes "degC"'),
    (
        {"ambient": "95 degC"},
        'row 2, ambient: "95 degC" is out of range; allowed is from -50 to 80 degC',
    ),
    (
        {"ambient": "65 degC", "insulation": "PVC70"},
        'row 2, ambient: "65 degC" is above the last row of Table B.52.14 for PVC70, 60 degC',
    ),
    ({"standby_of": "C-9"}, 'row 2, standby_of: "C-9" is not one of the circuits; did you mean "C-1"?'),
    ({"in_cases": "mains"}, 'row 2, in_cases: "mains" is not one of the cases; there are none'),
]

NO_LOAD = {"shaft_power": "", "power_factor": "", "efficiency": "", "starter": ""}
TOGETHER = [
    ({"shaft_power": ""}, f"row 2: the circuit has no load; give exactly one of {LOADS}"),
    (
        {"active_power": "48 kW"},
        f'row 2, active_power: shaft_power "45 kW" and active_power "48 kW": a circuit has exactly one of {LOADS}',
    ),
    (
        {"power_factor": ""},
        "row 2, power_factor: is empty; a load given as shaft_power needs it, and there is no safe value to assume",
    ),
    ({"efficiency": ""}, "row 2, efficiency: is empty; a load given as shaft_power needs it"),
    (
        {"shaft_power": "", "active_power": "48 kW"},
        "row 2, efficiency: goes with shaft_power only: the other loads are what the circuit takes",
    ),
    (
        {"shaft_power": "", "efficiency": "", "current": "80 A", "power_factor": ""},
        "row 2, power_factor: is empty; a load given as current needs it, and there is no safe value to assume",
    ),
    (
        {"kind": "feeder", "starter": ""},
        "row 2, to: is empty; a circuit of kind feeder leads to a board: name it, or state the kind of the load",
    ),
    (
        {**NO_LOAD, "kind": "heating", "to": "MB"},
        'row 2, kind: "heating" goes with a load; a circuit that leads to a board is of kind feeder',
    ),
    (
        {**NO_LOAD, "kind": "feeder", "to": "MB", "active_power": "9 kW"},
        "row 2, active_power: goes with a load; this circuit leads to board MB and carries what that asks",
    ),
    (
        {**NO_LOAD, "kind": "feeder", "to": "SW"},
        'row 2, to: "SW" is not one of the boards; allowed: MB',
    ),
    ({"length": ""}, "row 2, length [m]: is empty; it is needed in every row"),
    ({"length_basis": "guessed"}, 'row 2, length_basis: "guessed" is not allowed; allowed: estimated, measured'),
    ({"starter": ""}, "row 2, starter: is empty; a motor needs it: direct or soft"),
    ({"kind": "heating"}, "row 2, starter: goes with kind motor only; this circuit is of kind heating"),
    (
        {"overload_setting": ""},
        "row 2, overload_setting [A]: is empty; the overload device relay60947 is judged by it",
    ),
    (
        {"overload_device": ""},
        "row 2, overload_setting [A]: goes with an overload_device; name the device that has this setting",
    ),
    (
        {"device": "breaker60947", "overload_device": "", "overload_setting": ""},
        "row 2, setting_Ir: is empty; a breaker60947 that protects against overload is judged at its setting",
    ),
    (
        {"device": "breaker60947", "setting_Ir": "170 A"},
        'row 2, setting_Ir: "170 A" is above the rating of the device, 160 A',
    ),
    ({"setting_Ir": "82 A"}, "row 2, setting_Ir: goes with device breaker60947 only; this device is gG"),
    (
        {"method": "B1"},
        'row 2, construction: "multicore" does not go with method B1; allowed: insulated_in_conduit',
    ),
    (
        {"construction": "single_flat"},
        'row 2, construction: "single_flat" does not go with method E; allowed: multicore',
    ),
    (
        {"circuits_in_group": "3"},
        'row 2, grouping: "none" goes with one circuit of one run only; circuits_in_group is 3 and runs is 1',
    ),
    (
        {"runs": "2"},
        'row 2, grouping: "none" goes with one circuit of one run only; circuits_in_group is 1 and runs is 2',
    ),
    (
        {"grouping": "single_layer_wall"},
        'row 2, grouping: "single_layer_wall" goes with method C (Table B.52.17), not E',
    ),
    (
        {"grouping": "bunched", "circuits_in_group": "19", "runs": "3"},
        "row 2, circuits_in_group: circuits_in_group 19 and runs 3 make 21 circuits; Table B.52.17 ends at 20 bunched "
        "circuits",
    ),
]

UNSAFE = "is not covered yet, and leaving it out would be unsafe"
NEUTRAL = {"phases": "L1L2L3N", "cores": "5"}
NOT_COVERED = [
    (
        {"runs_at_most": "3"},
        'row 2, runs_at_most: size is "25 mm2": it goes with size and runs left empty, which are then chosen',
    ),
    (
        {"phases": "L1L2L3N", "cores": "5", "third_harmonic": "0 %", "size": "", "neutral_size": "16 mm2"},
        "row 2, neutral_size: goes with a given size; with the size left to choose, the neutral equals the line",
    ),
    ({"starter": "star_delta"}, f"row 2, starter: star-delta starting {UNSAFE}: six conductors, reclosing peak"),
    ({"starter": "converter"}, f"row 2, starter: a converter {UNSAFE}: its input current and its harmonics"),
    ({"insulation_covered": "0.1 m"}, f"row 2, insulation_covered: thermal insulation around a cable {UNSAFE}"),
    (
        {"current": "20 A", "shaft_power": "", "efficiency": "", "rated_current": "20 A", "rated_voltage": ""},
        'row 2, rated_current: current "20 A" and rated_current "20 A": a load given by its current has no second one; '
        "write the one that counts",
    ),
    (
        {"rated_voltage": "690 V"},
        'row 2, rated_voltage: "690 V" does not go with 400 V between lines (phases L1L2L3); allowed is 360 to 440 V',
    ),
    (
        {"phases": "L1N", "rated_voltage": "400 V"},
        'row 2, rated_voltage: "400 V" does not go with 230 V line to neutral (phases L1N); allowed is 207 to 253 V',
    ),
    (
        {"device": "gG", "rating": "35 A", "setting_Ir": "", "overload_device": "", "overload_setting": ""},
        'row 2, rating [A]: "35 A" is no rated current of a gG fuse-link; allowed: 2, 4, 6, 8, 10, 12, 16, 20, 25, 32, '
        "40, 50, 63, 80, 100, 125, 160, 200, 250, 315, 400, 500, 630, 800, 1000, 1250 A",
    ),
    ({"kind": "capacitor", "starter": ""}, f"row 2, kind: the overcurrent of a capacitor {UNSAFE}"),
]

TAGS = [
    ("C/1", '"C/1" is not a tag; a tag has letters A to Z, digits, "-", "." and "_" and begins with a letter or digit'),
    ("Ü-1", '"Ü-1" is not a tag; a tag has letters A to Z, digits, "-", "." and "_" and begins with a letter or digit'),
    ("-1", '"-1" is not a tag; a tag has letters A to Z, digits, "-", "." and "_" and begins with a letter or digit'),
    ("C..1", '"C..1" is not a tag; a tag has no two dots in a row and none at its end'),
    ("C-1.", '"C-1." is not a tag; a tag has no two dots in a row and none at its end'),
    ("Index", '"Index" is a name that calcbook keeps for itself; choose another tag'),
    ("d-1", '"d-1" is a name that calcbook keeps for itself; choose another tag'),
    ("boards.MB", '"boards.MB" is a name that calcbook keeps for itself; choose another tag'),
    ("COM1.x", '"COM1.x" is the name of a device in some operating systems; choose another tag'),
    ("MB", '"MB" is used twice, first in [boards.MB]; capitals make no difference'),
    ("x" * 33, f'"{"x" * 33}" has 33 characters; allowed are 32'),
    ("x" * 10_000, f'"{"x" * 37}..." has 10000 characters; allowed are 32'),
]


@pytest.mark.parametrize(("changes", "message"), CELLS + TOGETHER + NOT_COVERED)
def test_one_wrong_cell_gives_one_fault(tmp_path: Path, changes: dict[str, str], message: str) -> None:
    assert faults_of(tmp_path, circuit(**changes)) == [f"circuits.csv, {message}"]


@pytest.mark.parametrize(("tag", "message"), TAGS)
def test_tags_that_cannot_name_a_sheet(tmp_path: Path, tag: str, message: str) -> None:
    assert faults_of(tmp_path, circuit(tag=tag)) == [f"circuits.csv, row 2, tag: {message}"]


def test_a_tag_is_used_once_ignoring_case(tmp_path: Path) -> None:
    for first, second in (("C-1", "C-1"), ("C-1", "c-1"), ("c-1", "C-1")):
        message = f'"{second}" is used twice, first in row 2; capitals make no difference'
        assert faults_of(tmp_path, circuit(tag=first), circuit(tag=second)) == [f"circuits.csv, row 3, tag: {message}"]


@pytest.mark.parametrize(
    ("character", "name"),
    [
        ("\x07", "U+0007 (control character)"),
        ("\n", "U+000A (control character)"),
        ("\x85", "U+0085 (control character)"),
        ("\u202e", "U+202E (right-to-left override)"),
        ("\u2066", "U+2066 (left-to-right isolate)"),
        ("\u200f", "U+200F (right-to-left mark)"),
        ("\u2028", "U+2028 (line separator)"),
        ("\ufdd0", "U+FDD0 (no character)"),
        ("\U0010ffff", "U+10FFFF (no character)"),
    ],
)
def test_control_and_direction_characters_are_refused(tmp_path: Path, character: str, name: str) -> None:
    code = name.split(" ", maxsplit=1)[0]
    message = (
        f'"Hoist<{code}>" holds {name} as character 6; control, direction and line-separating characters '
        "are not allowed"
    )
    wrong = faults_of(tmp_path, circuit(description="Hoist" + character))
    assert wrong == [f"circuits.csv, row 2, description: {message}"]


def test_text_that_can_be_printed_is_kept(tmp_path: Path) -> None:
    text = 'Kran ⚓ <b> $x$ # \\ "מנוף" 吊 👩‍🔧'
    assert read(tmp_path, circuit(description=text)).circuits[0].description == text


def test_long_texts(tmp_path: Path) -> None:
    rows = circuit(description="d" * 121, drawing="w" * 201)
    assert faults_of(tmp_path, rows) == [
        f'circuits.csv, row 2, description: "{"d" * 37}..." has 121 characters; allowed are 120',
        f'circuits.csv, row 2, drawing: "{"w" * 37}..." has 201 characters; allowed are 200',
    ]


def test_all_faults_of_all_files_in_one_pass(tmp_path: Path) -> None:
    wrong = faults_of(
        tmp_path,
        circuit(shaft_power="12O", phases="L4"),
        circuit(tag="C-2", size="30", efficiency="92 %"),
        toml=TOML_WITH_FAULT,
        notes="tag,column,status\nC-9,*,confirmed\n",
        adopted="tag,line,value,reason,by,date\nC-1,I_X,82 A,r,AM,2026-01-01\n",
    )
    places = [fault.split(": ", maxsplit=1)[0] for fault in wrong]
    assert places == [
        "inputs.toml, [basis], frequency",
        "adopted.csv, row 2, line",
        "circuits.csv, row 2, phases",
        "circuits.csv, row 2, shaft_power [kW]",
        "circuits.csv, row 3, efficiency",
        "circuits.csv, row 3, size [mm2]",
        "notes.csv, row 2, tag",
    ]


TOML_WITH_FAULT = """
[project]
number = "TQ-1"
title = "Tern Quay boatyard"
[basis]
practice = "iec"
frequency = "50 kW"
nominal_voltage = "400 V"
line_to_earth_voltage = "230 V"
ambient_air = "35 degC"
drop_origin = "MB"
supply_is = "public"
editions = {"IEC 60364-4-43" = "2008", "IEC 60364-5-52" = "2009"}
[boards.MB]
"""


def test_a_number_far_from_any_value(tmp_path: Path) -> None:
    for number in ("1e308", "1e-300", "-1e13"):
        wrong = faults_of(tmp_path, circuit(shaft_power=number))
        assert wrong == [f'circuits.csv, row 2, shaft_power [kW]: "{number}" is far from any value of an installation']


def test_what_cannot_be_seen_is_shown_as_its_code_point(tmp_path: Path) -> None:
    assert faults_of(tmp_path, circuit(conductor="C\u200bu"))[0].startswith(
        'circuits.csv, row 2, conductor: "C<U+200B>u" is not allowed; did you mean "Cu"?'
    )


def test_the_hint_on_decimal_commas_is_for_numbers_only(tmp_path: Path) -> None:
    assert faults_of(tmp_path, circuit(starter="0,88")) == [
        'circuits.csv, row 2, starter: "0,88" is not allowed; allowed: direct, star_delta, soft, converter'
    ]
