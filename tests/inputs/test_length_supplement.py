"""The supplement of the drop's limit for length: claimed by a circuit with a load, and only to the table's limit."""

from __future__ import annotations

from pathlib import Path

import pytest
from project_files import TOML, circuit, faults_of, read

ONLY = "the supplement goes with the limits of Table G.52.1 only"
LIMIT = TOML.replace("[basis.editions]", 'drop_limits.motor = "4 %"\n[basis.editions]')


def test_a_claim_is_a_datum_of_the_circuit(tmp_path: Path) -> None:
    datum = read(tmp_path, circuit(length_supplement="claimed")).circuits[0].data["length_supplement"]
    assert (datum.text, datum.origin.column) == ("claimed", "length_supplement")
    assert "length_supplement" not in read(tmp_path, circuit(length_supplement="")).circuits[0].data


@pytest.mark.parametrize(
    ("changes", "toml", "message"),
    [
        ({"length_supplement": "yes"}, TOML, '"yes" is not allowed; allowed: claimed'),
        ({"length_supplement": "claimed", "drop_limit": "3 %"}, TOML, f'drop_limit is "3 %": {ONLY}'),
        ({"length_supplement": "claimed"}, LIMIT, f'[basis] has drop_limits.motor "4 %": {ONLY}'),
        ({"length_supplement": "claimed", "drop_limit": "3 %"}, LIMIT, f'drop_limit is "3 %": {ONLY}'),
    ],
)
def test_wrong_claims(tmp_path: Path, changes: dict[str, str], toml: str, message: str) -> None:
    wrong = faults_of(tmp_path, circuit(**changes), toml=toml)
    assert wrong == [f"circuits.csv, row 2, length_supplement: {message}"]


def test_a_feeder_claims_none(tmp_path: Path) -> None:
    load = dict.fromkeys(("shaft_power", "power_factor", "efficiency", "starter"))
    feeder = circuit(**load, kind="feeder", to="SB", length_supplement="claimed")
    wrong = faults_of(tmp_path, feeder, toml=TOML + "[boards.SB]\n")
    assert wrong == [
        "circuits.csv, row 2, length_supplement: goes with a load; this circuit leads to board SB and carries what "
        "that asks"
    ]
