"""The radial network: which circuit feeds which board, checked, in the order from the origin downwards."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import networkx

from calcbook.errors import Fault, InputFaults, nearest
from calcbook.records.project import Circuit, Project

_ALL_PHASES = "L1L2L3N"
_CIRCUITS, _SETTINGS = "circuits.csv", "inputs.toml"


@dataclass(frozen=True)
class Network:
    """The tree of one project.

    `origin` is the source or board that drops are counted from; `boards` in order downwards; `feed` the circuit that
    leads to a board; `ways` the circuits that leave a board or the origin, in the order of the file.
    """

    origin: str
    boards: tuple[str, ...]
    feed: Mapping[str, Circuit]
    ways: Mapping[str, tuple[Circuit, ...]]

    def phases(self, board: str) -> str:
        """The phases that a board has: those of its feed, all of them at the origin."""
        return _text(self.feed[board], "phases") if board in self.feed else _ALL_PHASES


def read_network(project: Project) -> Network:
    """The network of a project.

    Raises InputFaults naming the tags: an origin that is neither source nor board, a board with two feeds or none, a
    loop, a board that the origin does not reach or that feeds nothing, phases that a board lacks, a load at a source.
    """
    faults: list[Fault] = []
    tags = [board.tag for board in project.boards]
    origin = project.basis["drop_origin"].text
    if origin not in [*tags, *(source.tag for source in project.sources)]:
        known = [*tags, *(source.tag for source in project.sources)]
        faults.append(
            Fault(_SETTINGS, "[basis], drop_origin", f'"{origin}" is no source or board; {nearest(origin, known)}')
        )
    feed = _feeds(project, origin, faults)
    loop = _loop(project)
    if loop:
        way = " to ".join([*loop, loop[0]])
        faults.append(Fault(_CIRCUITS, "from, to", f"a loop: {way}; each board is fed from one side"))
    ways = {tag: tuple(c for c in project.circuits if _text(c, "from") == tag) for tag in [origin, *tags]}
    boards = () if loop else _downwards(origin, tags, ways)
    if not loop:
        faults += [_not_reached(tag, origin, feed) for tag in tags if tag not in boards and tag != origin]
    faults += [_without_circuits(tag) for tag in boards if not ways[tag]]
    faults += [fault for source in project.sources for fault in _loads_of(source.tag, project)]
    network = Network(origin, boards, feed, ways)
    faults += [fault for tag in boards for circuit in ways[tag] for fault in _lacking_phases(network, tag, circuit)]
    if faults:
        raise InputFaults(tuple(faults))
    return network


def is_feeder(circuit: Circuit) -> bool:
    """Whether a circuit leads to a board."""
    return "to" in circuit.data


def board_of(circuit: Circuit) -> str:
    """The board or source that a circuit leaves."""
    return _text(circuit, "from")


def _text(circuit: Circuit, column: str) -> str:
    return circuit.data[column].text if column in circuit.data else ""


def _feeds(project: Project, origin: str, faults: list[Fault]) -> dict[str, Circuit]:
    feed: dict[str, Circuit] = {}
    for circuit in filter(is_feeder, project.circuits):
        board = _text(circuit, "to")
        if board in feed:
            message = f"board {board} has two feeds, {feed[board].tag} and {circuit.tag}; one is allowed"
            faults.append(Fault(_CIRCUITS, f"{circuit.tag}, to", message))
        elif board == origin:
            faults.append(Fault(_CIRCUITS, f"{circuit.tag}, to", f"board {board} is the origin; nothing feeds it"))
        feed.setdefault(board, circuit)
    return feed


def _loop(project: Project) -> list[str]:
    graph = networkx.DiGraph(
        [(_text(circuit, "from"), _text(circuit, "to")) for circuit in project.circuits if is_feeder(circuit)]
    )
    try:
        return [start for start, *_ in networkx.find_cycle(graph)]
    except networkx.NetworkXNoCycle:
        return []


def _downwards(origin: str, tags: list[str], ways: Mapping[str, tuple[Circuit, ...]]) -> tuple[str, ...]:
    found = [origin] if origin in tags else []
    queue = [origin]
    while queue:
        below = [_text(circuit, "to") for circuit in ways.get(queue.pop(0), ()) if is_feeder(circuit)]
        new = [tag for tag in dict.fromkeys(below) if tag not in found]
        found += new
        queue += new
    return tuple(found)


def _not_reached(tag: str, origin: str, feed: Mapping[str, Circuit]) -> Fault:
    why = f"its feed {feed[tag].tag} does not lead back to {origin}" if tag in feed else "no circuit leads to it"
    return Fault(
        _SETTINGS, f"[boards.{tag}]", f"board {tag} has no feed: {why}; name it in the column to of its feeder"
    )


def _without_circuits(tag: str) -> Fault:
    return Fault(_SETTINGS, f"[boards.{tag}]", f"board {tag} feeds nothing: no circuit has it in the column from")


def _loads_of(source: str, project: Project) -> list[Fault]:
    """A source feeds boards: the voltage of a load is counted from a board."""
    found = [circuit.tag for circuit in project.circuits if board_of(circuit) == source and not is_feeder(circuit)]
    return [Fault(_CIRCUITS, f"{tag}, from", f"{source} is a source, and a source feeds boards only") for tag in found]


def _lacking_phases(network: Network, board: str, circuit: Circuit) -> list[Fault]:
    has, asked = network.phases(board), _text(circuit, "phases")
    lacking = [name for name in ("L1", "L2", "L3", "N") if name in asked and name not in has]
    if not lacking:
        return []
    message = f'"{asked}" needs {", ".join(lacking)}; board {board} has {has} from {network.feed[board].tag}'
    return [Fault(_CIRCUITS, f"{circuit.tag}, phases", message)]
