"""What a circuit's row says against the basis: its rated voltage and the ambient temperature it takes from there."""

from __future__ import annotations

from collections.abc import Mapping

from calcbook.inputs.conditions import HOTTEST_AMBIENT
from calcbook.inputs.fill import is_line_to_neutral
from calcbook.inputs.rows import Row
from calcbook.records.project import Datum

_TOLERANCE = 0.10  # IEC 60038: service voltages lie within 10 % of the nominal one


def report_against_basis(row: Row, basis: Mapping[str, Datum]) -> None:
    """Report a rated voltage that does not go with the system, and an ambient that the insulation does not bear."""
    _rated_voltage(row, basis)
    _ambient_of_basis(row, basis)


def _rated_voltage(row: Row, basis: Mapping[str, Datum]) -> None:
    rated, phases = row.number("rated_voltage", "V"), row.text("phases")
    if rated is None or not phases:
        return
    key = "line_to_earth_voltage" if is_line_to_neutral(phases) else "nominal_voltage"
    nominal = basis[key].quantity
    if nominal is None:
        return
    low, high = nominal.number * (1 - _TOLERANCE), nominal.number * (1 + _TOLERANCE)
    if not low <= rated <= high:
        between = "line to neutral" if is_line_to_neutral(phases) else "between lines"
        row.fault(
            "rated_voltage",
            f'"{row.text("rated_voltage")}" does not go with {basis[key].text} {between} (phases {phases}); '
            f"allowed is {low:g} to {high:g} V",
        )


def _ambient_of_basis(row: Row, basis: Mapping[str, Datum]) -> None:
    ambient = basis.get("ambient_air")
    hottest = HOTTEST_AMBIENT.get(row.text("insulation"))
    if not row.lacks("ambient") or ambient is None or ambient.quantity is None or hottest is None:
        return
    if ambient.quantity.number > hottest:
        found = f"is empty, and ambient_air of [basis], {ambient.text}, is above the last row of Table B.52.14"
        row.fault("ambient", f"{found} for {row.text('insulation')}, {hottest:g} degC")
