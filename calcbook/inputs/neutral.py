"""What must hold of the neutral of a circuit: its size by IEC 60364-5-52, 524.2, and Annex E for third harmonics."""

from __future__ import annotations

from calcbook.inputs.rows import Row

_REDUCED_FROM = {"Cu": 16.0, "Al": 25.0}
_MOST_HARMONICS = 15.0


def report_neutral(row: Row) -> None:
    """Report a neutral that the circuit does not have, that is too small, or that third harmonics would overload."""
    phases = row.text("phases")
    if phases and not phases.endswith("N"):
        if row.text("neutral_size"):
            row.fault("neutral_size", f"goes with a circuit that has a neutral; phases {phases}")
        if row.text("cores") == "3.5":
            row.fault("cores", f'"3.5" is a cable with a smaller neutral; phases {phases} has no neutral')
        return
    if not phases:
        return
    _harmonics(row)
    line, neutral = row.number("size", "mm2"), row.number("neutral_size", "mm2")
    if row.lacks("size") and row.text("neutral_size"):
        row.fault("neutral_size", "goes with a given size; with the size left to choose, the neutral equals the line")
        return
    if row.text("cores") == "3.5" and (neutral is None or (line is not None and neutral >= line)):
        if not row.wrong & {"neutral_size", "size"}:
            row.fault("neutral_size", "is needed with 3.5 cores, and smaller than size: the size of the smaller core")
    elif line is not None and neutral is not None and neutral < line:
        _smaller(row, line, neutral)


def _harmonics(row: Row) -> None:
    """Above 15 % Annex E speaks of four- and five-core cables whose neutral equals the line, and of no others."""
    if row.text("phases") != "L1L2L3N" or (row.number("third_harmonic", "%") or 0) <= _MOST_HARMONICS:
        return
    differs = row.text("neutral_size") and row.text("neutral_size") != row.text("size")
    found = ""
    if row.text("construction") not in ("", "multicore"):
        found = f"construction is {row.text('construction')}"
    elif row.text("cores") not in ("", "4", "5"):
        found = f"cores is {row.text('cores')}"
    elif differs:
        found = f"neutral_size is {row.text('neutral_size')}"
    if found:
        rule = "is above 15 %: Annex E has factors for multicore cables of 4 or 5 equal cores only"
        row.fault("third_harmonic", f'"{row.text("third_harmonic")}" {rule}; {found}')


def _smaller(row: Row, line: float, neutral: float) -> None:
    found = f'"{row.text("neutral_size")}" is smaller than the line, {row.text("size")}'
    if row.text("phases") != "L1L2L3N":
        row.fault("neutral_size", f"{found}; a single-phase circuit has a neutral equal to the line (524.2.1)")
        return
    metal = row.text("conductor")
    limit = _REDUCED_FROM.get(metal)
    if limit is not None and neutral < min(line, limit):
        least = f"allowed from {min(line, limit):g} mm2 {metal}"
        row.fault("neutral_size", f"{found}, and than 524.2 allows; {least}")
    elif row.lacks("third_harmonic") and row.lacks("to"):
        row.fault("third_harmonic", "is empty; a neutral smaller than the line is allowed up to 15 % only (524.2.3)")
