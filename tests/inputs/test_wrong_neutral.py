"""Neutrals that are too small or that third harmonics would overload, and overload protection left out."""

from __future__ import annotations

from pathlib import Path

import pytest
from project_files import circuit, faults_of, read

NEUTRAL = {"phases": "L1L2L3N", "cores": "5", "size": "35", "third_harmonic": "10 %"}
SINGLE = {"phases": "L1N", "cores": "3", "size": "35"}
NO_RELAY = {"overload_device": "", "overload_setting": ""}

WRONG = [
    ({"neutral_size": "25 mm2"}, "neutral_size: goes with a circuit that has a neutral; phases L1L2L3"),
    ({"cores": "3.5"}, 'cores: "3.5" is a cable with a smaller neutral; phases L1L2L3 has no neutral'),
    (
        {**SINGLE, "neutral_size": "25 mm2"},
        'neutral_size: "25 mm2" is smaller than the line, 35 mm2; a single-phase circuit has a neutral equal to the '
        "line (524.2.1)",
    ),
    (
        {**NEUTRAL, "neutral_size": "10 mm2"},
        'neutral_size: "10 mm2" is smaller than the line, 35 mm2, and than 524.2 allows; allowed from 16 mm2 Cu',
    ),
    (
        {**NEUTRAL, "conductor": "Al", "neutral_size": "16 mm2"},
        'neutral_size: "16 mm2" is smaller than the line, 35 mm2, and than 524.2 allows; allowed from 25 mm2 Al',
    ),
    (
        {**NEUTRAL, "size": "16", "neutral_size": "10 mm2"},
        'neutral_size: "10 mm2" is smaller than the line, 16 mm2, and than 524.2 allows; allowed from 16 mm2 Cu',
    ),
    (
        {**NEUTRAL, "neutral_size": "16 mm2", "third_harmonic": ""},
        "third_harmonic: is empty; a neutral smaller than the line is allowed up to 15 % only (524.2.3)",
    ),
    (
        {**NEUTRAL, "cores": "3.5"},
        "neutral_size: is needed with 3.5 cores, and smaller than size: the size of the smaller core",
    ),
    (
        {**NEUTRAL, "third_harmonic": "20 %", "neutral_size": "25 mm2"},
        'third_harmonic: "20 %" is above 15 %: Annex E has factors for multicore cables of 4 or 5 equal cores only; '
        "neutral_size is 25 mm2",
    ),
    (
        {**NEUTRAL, "third_harmonic": "20 %", "method": "F", "construction": "single_flat"},
        'third_harmonic: "20 %" is above 15 %: Annex E has factors for multicore cables of 4 or 5 equal cores only; '
        "construction is single_flat",
    ),
    (
        {"overload_omitted": "433.3.3", **NO_RELAY},
        "reason: is empty; overload protection is omitted only for a reason, which the sheet prints",
    ),
    (
        {"overload_omitted": "433.3.3", "reason": "fire pump"},
        'overload_omitted: overload_device is "relay60947": what trips on overload does not go with overload_omitted',
    ),
    (
        {**NO_RELAY, "overload_omitted": "433.3.3", "reason": "x", "device": "breaker60947", "setting_Ir": "90 A"},
        'overload_omitted: setting_Ir is "90 A": what trips on overload does not go with overload_omitted',
    ),
    (
        {**NO_RELAY, "overload_omitted": "because", "reason": "fire pump"},
        'overload_omitted: "because" is not allowed; allowed: 433.3.1, 433.3.2, 433.3.3',
    ),
]


@pytest.mark.parametrize(("changes", "message"), WRONG)
def test_one_wrong_cell_gives_one_fault_of_the_neutral(tmp_path: Path, changes: dict[str, str], message: str) -> None:
    assert faults_of(tmp_path, circuit(**changes)) == [f"circuits.csv, row 2, {message}"]


@pytest.mark.parametrize(
    "changes",
    [
        {**NEUTRAL, "neutral_size": "16 mm2", "cores": "3.5"},
        {**NEUTRAL, "third_harmonic": "40 %"},
        {**NEUTRAL, "neutral_size": "50 mm2"},
        {**NO_RELAY, "overload_omitted": "433.3.3", "reason": "fire pump", "device": "breaker60947"},
    ],
)
def test_what_the_rules_allow_is_taken(tmp_path: Path, changes: dict[str, str]) -> None:
    assert read(tmp_path, circuit(**changes)).circuits[0].tag == "C-1"


@pytest.mark.parametrize(
    ("kind", "text", "status"), [("motor", "0 %", "assumed"), ("other", "15 %", "to be confirmed")]
)
def test_an_unknown_third_harmonic_is_no_silent_nothing(tmp_path: Path, kind: str, text: str, status: str) -> None:
    row = circuit(phases="L1L2L3N", cores="5", kind=kind, starter="direct" if kind == "motor" else "")
    datum = read(tmp_path, row).circuits[0].data["third_harmonic"]
    assert (datum.text, datum.origin.status) == (text, status)
    assert datum.origin.remark.endswith("as none was stated.") or "none was stated" in datum.origin.remark
