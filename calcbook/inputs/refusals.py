"""What is not covered yet and is refused, because a sheet that left it out would be unsafe.

A subject that covers one of these deletes its entry.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from pathlib import Path

from calcbook.inputs.faults import FaultList
from calcbook.inputs.rows import Row
from calcbook.inputs.value import Value

UNSAFE = "is not covered yet, and leaving it out would be unsafe"
COVERED_METHODS = ("B1", "B2", "C", "E")

REFUSED_FILES = {"routes.csv": f"a route in several parts {UNSAFE}; give the most adverse part as method and ambient"}
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


def _method_not_covered(row: Row) -> bool:
    return bool(row.text("method")) and row.text("method") not in COVERED_METHODS


def _neutral_loaded(row: Row) -> bool:
    return row.text("phases") == "L1L2L3N"


def _harmonics_in_neutral(row: Row) -> bool:
    return _neutral_loaded(row) and (row.number("third_harmonic", "%") or 0) > 15


def _neutral_smaller(row: Row) -> bool:
    line, neutral = row.number("size", "mm2"), row.number("neutral_size", "mm2")
    return line is not None and neutral is not None and neutral < line


REFUSALS = (
    Refusal("kind", _says("kind", "capacitor"), f"the overcurrent of a capacitor {UNSAFE}"),
    Refusal("size", lambda row: row.lacks("size"), "choice of size is not covered yet; give a size"),
    Refusal(
        "method",
        _method_not_covered,
        "method {method} is not covered yet; covered are " + ", ".join(COVERED_METHODS),
    ),
    Refusal("starter", _says("starter", "star_delta"), f"star-delta starting {UNSAFE}: six conductors, reclosing peak"),
    Refusal("starter", _says("starter", "converter"), f"a converter {UNSAFE}: its input current and its harmonics"),
    Refusal("insulation_covered", _above("insulation_covered", 0, "m"), f"thermal insulation around a cable {UNSAFE}"),
    Refusal(
        "overload_omitted", lambda row: bool(row.text("overload_omitted")), f"omitted overload protection {UNSAFE}"
    ),
    Refusal("third_harmonic", _harmonics_in_neutral, f"a third harmonic above 15 % with a neutral {UNSAFE}"),
    Refusal("neutral_size", _neutral_smaller, f"a neutral smaller than the line {UNSAFE}"),
    Refusal("cores", _says("cores", "3.5"), f"a neutral smaller than the line (3.5 cores) {UNSAFE}"),
    Refusal("trays", _above("trays", 1, "1"), f"a stack of trays (Table B.52.20) {UNSAFE}"),
)


def report_refusals(row: Row) -> None:
    """Report what a circuit has that is not covered yet."""
    for refusal in REFUSALS:
        if refusal.meets(row):
            row.fault(refusal.column, refusal.sentence.format(method=row.text("method"), kind=row.text("kind")))


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


def report_refused_files(folder: Path, faults: FaultList) -> None:
    """Report files in the project's folder that hold what is not covered yet."""
    for name, sentence in REFUSED_FILES.items():
        if (folder / name).exists():
            faults.add(name, "", sentence)
