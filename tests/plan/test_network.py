"""The network is a tree from the origin downwards; whatever makes it none is refused with the tags named."""

from __future__ import annotations

import pytest

from calcbook.errors import InputFaults
from calcbook.plan.network import read_network
from calcbook.records.project import Board, Circuit, Datum, Origin, Project, Source, TitleBlock

Way = tuple[str, str, str, str]  # tag, from, to, phases
SOUND: tuple[Way, ...] = (
    ("F-1", "TX1", "MB", "L1L2L3N"),
    ("F-2", "MB", "SW", "L1L2L3"),
    ("C-1", "MB", "", "L1N"),
    ("C-2", "SW", "", "L1L2"),
)


def datum(text: str) -> Datum:
    return Datum(text, None, Origin("circuits.csv", "x", "x"))


def circuit(tag: str, above: str, to: str, phases: str) -> Circuit:
    texts = {"from": above, "to": to, "phases": phases}
    return Circuit(tag, tag, {name: datum(text) for name, text in texts.items() if text})


def project(*ways: Way, boards: tuple[str, ...] = ("MB", "SW"), origin: str = "TX1") -> Project:
    return Project(
        folder="",
        title=TitleBlock("", ""),
        basis={"drop_origin": datum(origin)},
        editions={},
        boards=tuple(Board(tag) for tag in boards),
        circuits=tuple(circuit(*way) for way in ways),
        sources=(Source("TX1"),),
    )


def faults(*ways: Way, boards: tuple[str, ...] = ("MB", "SW"), origin: str = "TX1") -> list[str]:
    with pytest.raises(InputFaults) as caught:
        read_network(project(*ways, boards=boards, origin=origin))
    return str(caught.value).splitlines()


def test_a_tree_is_read_from_the_origin_downwards() -> None:
    network = read_network(project(*reversed(SOUND)))
    assert network.origin == "TX1"
    assert network.boards == ("MB", "SW")
    assert {board: feed.tag for board, feed in network.feed.items()} == {"MB": "F-1", "SW": "F-2"}
    assert [way.tag for way in network.ways["MB"]] == ["C-1", "F-2"]
    assert (network.phases("MB"), network.phases("SW")) == ("L1L2L3N", "L1L2L3")


def test_a_board_may_be_the_origin() -> None:
    network = read_network(project(*SOUND[1:], origin="MB"))
    assert network.boards == ("MB", "SW")
    assert network.phases("MB") == "L1L2L3N"


@pytest.mark.parametrize(
    ("ways", "message"),
    [
        (
            (*SOUND, ("F-3", "MB", "SW", "L1L2L3")),
            "circuits.csv, F-3, to: board SW has two feeds, F-2 and F-3; one is allowed",
        ),
        (
            (SOUND[0], *SOUND[2:]),
            "inputs.toml, [boards.SW]: board SW has no feed: no circuit leads to it; "
            "name it in the column to of its feeder",
        ),
        (
            (*SOUND[:3], ("C-2", "SW", "", "L1N")),
            'circuits.csv, C-2, phases: "L1N" needs N; board SW has L1L2L3 from F-2',
        ),
        (
            (SOUND[0], ("F-2", "MB", "SW", "L2N"), *SOUND[2:]),
            'circuits.csv, C-2, phases: "L1L2" needs L1; board SW has L2N from F-2',
        ),
        (SOUND[:3], "inputs.toml, [boards.SW]: board SW feeds nothing: no circuit has it in the column from"),
        (
            (*SOUND, ("C-3", "TX1", "", "L1L2L3")),
            "circuits.csv, C-3, from: TX1 is a source, and a source feeds boards only",
        ),
    ],
)
def test_one_fault_of_the_network_is_named_with_its_tags(ways: tuple[Way, ...], message: str) -> None:
    assert faults(*ways) == [message]


def test_a_loop_is_named_with_its_boards() -> None:
    ways = (*SOUND, ("F-3", "SW", "PS", "L1L2L3"), ("F-4", "PS", "SW", "L1L2L3"))
    found = faults(*ways, boards=("MB", "SW", "PS"))
    assert "circuits.csv, from, to: a loop: SW to PS to SW; each board is fed from one side" in found
    assert "circuits.csv, F-4, to: board SW has two feeds, F-2 and F-4; one is allowed" in found


def test_boards_that_feed_each_other_only() -> None:
    ways = (*SOUND, ("F-3", "SX", "SY", "L1L2L3"), ("F-4", "SY", "SX", "L1L2L3"))
    found = faults(*ways, boards=("MB", "SW", "SX", "SY"))
    assert found == ["circuits.csv, from, to: a loop: SX to SY to SX; each board is fed from one side"]


def test_a_board_whose_feed_hangs_in_the_air() -> None:
    ways = (*SOUND, ("F-3", "SX", "SY", "L1L2L3"), ("C-3", "SY", "", "L1L2"))
    found = faults(*ways, boards=("MB", "SW", "SX", "SY"))
    assert found == [
        "inputs.toml, [boards.SX]: board SX has no feed: no circuit leads to it; "
        "name it in the column to of its feeder",
        "inputs.toml, [boards.SY]: board SY has no feed: its feed F-3 does not lead back to TX1; "
        "name it in the column to of its feeder",
    ]


def test_an_origin_that_is_fed() -> None:
    assert "circuits.csv, F-1, to: board MB is the origin; nothing feeds it" in faults(*SOUND, origin="MB")


def test_an_unknown_origin_offers_the_nearest() -> None:
    found = faults(*SOUND, origin="TX2")
    assert found[0] == 'inputs.toml, [basis], drop_origin: "TX2" is no source or board; did you mean "TX1"?'
