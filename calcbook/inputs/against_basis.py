"""What a circuit's row says against the basis."""

from __future__ import annotations

from collections.abc import Mapping

from calcbook.inputs.fill import is_line_to_neutral
from calcbook.inputs.rows import Row
from calcbook.records.project import Datum

_TOLERANCE = 0.10  # IEC 60038: service voltages lie within 10 % of the nominal one


def report_against_basis(row: Row, basis: Mapping[str, Datum]) -> None:
    """Report a rated voltage that does not go with the system, and a supplement to a limit that is the basis's own."""
    _report_supplement(row, basis)
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


def _report_supplement(row: Row, basis: Mapping[str, Datum]) -> None:
    limit = f"drop_limits.{row.text('kind')}"
    if row.text("length_supplement") and limit in basis and not row.text("drop_limit"):
        found = f'[basis] has {limit} "{basis[limit].text}"'
        row.fault("length_supplement", f"{found}: the supplement goes with the limits of Table G.52.1 only")
