"""What is not covered yet and is refused, because a sheet that left it out would be unsafe.

A subject that covers one of these deletes its entry.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from calcbook.inputs.faults import FaultList
from calcbook.inputs.rows import Row
from calcbook.inputs.value import Value

UNSAFE = "is not covered yet, and leaving it out would be unsafe"
_FREQUENCIES = (50.0, 60.0)
_REFUSED_BOARDS: tuple[tuple[str, Callable[[Value], bool], str], ...] = (
    ("derating", lambda value: value.quantity is not None and value.quantity.number < 1,
     f"the derating of devices in a warm enclosure {UNSAFE}"),
    ("ambient", lambda value: True, "is not taken over by circuits yet; state ambient in each circuit, or ambient_air"),
)  # fmt: skip
REFUSED_BASIS = {("practice", "nec"): 'practice "nec" is not covered yet; covered is "iec"'}


@dataclass(frozen=True)
class Refusal:
    """One refusal: the column it is reported at, when a row meets it, and the sentence."""

    column: str
    meets: Callable[[Row], bool]
    sentence: str


def _says(column: str, *words: str) -> Callable[[Row], bool]:
    return lambda row: row.text(column) in words


def _above(column: str, limit: float, unit: str) -> Callable[[Row], bool]:
    return lambda row: (row.number(column, unit) or 0) > limit


REFUSALS = (
    Refusal("kind", _says("kind", "capacitor"), f"the overcurrent of a capacitor {UNSAFE}"),
    Refusal("starter", _says("starter", "star_delta"), f"star-delta starting {UNSAFE}: six conductors, reclosing peak"),
    Refusal("starter", _says("starter", "converter"), f"a converter {UNSAFE}: its input current and its harmonics"),
    Refusal("insulation_covered", _above("insulation_covered", 0, "m"), f"thermal insulation around a cable {UNSAFE}"),
)


def report_refusals(row: Row) -> None:
    """Report what a circuit has that is not covered yet."""
    for refusal in REFUSALS:
        if refusal.meets(row):
            row.fault(refusal.column, refusal.sentence.format(kind=row.text("kind")))


def report_refused_basis(basis: Mapping[str, Value], faults: FaultList) -> None:
    """Report what the basis asks for that is not covered yet."""
    for (key, word), sentence in REFUSED_BASIS.items():
        if key in basis and basis[key].text == word:
            faults.add("inputs.toml", f"[basis], {key}", sentence)
    frequency = basis["frequency"].quantity if "frequency" in basis else None
    if frequency is not None and frequency.number not in _FREQUENCIES:
        found = f'"{basis["frequency"].text}" {UNSAFE}: the tables are for 50 and 60 Hz'
        faults.add("inputs.toml", "[basis], frequency", found)


def report_refused_boards(boards: Mapping[str, Mapping[str, Value]], faults: FaultList) -> None:
    """Report what a board asks for that is not covered yet and would make its circuits less safe."""
    for tag, values in boards.items():
        for key, meets, sentence in _REFUSED_BOARDS:
            if key in values and meets(values[key]):
                faults.add("inputs.toml", f"[{tag}], {key}", sentence)
