"""What a circuit needs under a condition, and what must fit together within one row."""

from __future__ import annotations

from collections.abc import Callable

from calcbook.inputs.rows import Row

LOADS = ("shaft_power", "active_power", "apparent_power", "current")
_NAMEPLATE = ("power_factor", "efficiency", "rated_current", "rated_voltage", "third_harmonic", "starter")
_OF_LOADS = (*LOADS, *_NAMEPLATE, "length_supplement")
_SMALLEST_ALUMINIUM = 2.5
# IEC 60269-1, 5.3.1
_GG_RATINGS = (
    2, 4, 6, 8, 10, 12, 16, 20, 25, 32, 40, 50, 63, 80, 100, 125, 160, 200, 250, 315, 400, 500, 630, 800, 1000, 1250,
)  # fmt: skip


def _feeder(row: Row) -> None:
    kind, board = row.text("kind"), row.text("to")
    if board and kind not in {"", "feeder"}:
        row.fault("kind", f'"{kind}" goes with a load; a circuit that leads to a board is of kind feeder')
    if kind == "feeder" and row.lacks("to"):
        row.fault("to", "is empty; a circuit of kind feeder leads to a board: name it, or state the kind of the load")
    for column in _OF_LOADS if board else ():
        if row.text(column):
            row.fault(column, f"goes with a load; this circuit leads to board {board} and carries what that asks")


def _one_load(row: Row) -> None:
    if row.text("to") or row.text("kind") == "feeder":
        return
    given = [name for name in LOADS if name in row.values]
    if len(given) > 1:
        found = " and ".join(f'{name} "{row.text(name)}"' for name in given)
        row.fault(given[1], f"{found}: a circuit has exactly one of {', '.join(LOADS)}")
    elif all(row.lacks(name) for name in LOADS):
        row.fault("", f"the circuit has no load; give exactly one of {', '.join(LOADS)}")


def _factors_of_load(row: Row) -> None:
    if row.text("to"):
        return
    load = next((name for name in LOADS if name in row.values), "")
    power = load if load in LOADS[:3] else ""
    if load and row.lacks("power_factor"):
        row.fault("power_factor", f"is empty; a load given as {load} needs it, and there is no safe value to assume")
    if power == "shaft_power" and row.lacks("efficiency"):
        row.fault("efficiency", "is empty; a load given as shaft_power needs it")
    if power != "shaft_power" and (power or "current" in row.values) and row.text("efficiency"):
        row.fault("efficiency", "goes with shaft_power only: the other loads are what the circuit takes")


def _current_and_nameplate(row: Row) -> None:
    if row.text("current") and row.text("rated_current"):
        found = f'current "{row.text("current")}" and rated_current "{row.text("rated_current")}"'
        row.fault("rated_current", f"{found}: a load given by its current has no second one; write the one that counts")


def _rating_of_fuse(row: Row) -> None:
    for device, rating in (("device", "rating"), ("overload_device", "overload_setting")):
        number = row.number(rating, "A")
        if row.text(device) == "gG" and number is not None and number not in _GG_RATINGS:
            allowed = ", ".join(f"{value:g}" for value in _GG_RATINGS)
            row.fault(rating, f'"{row.text(rating)}" is no rated current of a gG fuse-link; allowed: {allowed} A')


def _starter(row: Row) -> None:
    if row.text("kind") == "motor" and row.lacks("starter"):
        row.fault("starter", "is empty; a motor needs it: direct or soft")
    if row.text("kind") not in {"", "motor"} and row.text("starter"):
        row.fault("starter", f"goes with kind motor only; this circuit is of kind {row.text('kind')}")


def _setting_of_breaker(row: Row) -> None:
    device, setting, rating = row.text("device"), row.number("setting_Ir", "A"), row.number("rating", "A")
    omitted = row.text("overload_omitted")
    if device == "breaker60947" and row.lacks("setting_Ir") and row.lacks("overload_device") and not omitted:
        row.fault("setting_Ir", "is empty; a breaker60947 that protects against overload is judged at its setting")
    if device not in {"", "breaker60947"} and setting is not None:
        row.fault("setting_Ir", f"goes with device breaker60947 only; this device is {device}")
    elif setting is not None and rating is not None and setting > rating:
        row.fault("setting_Ir", f'"{row.text("setting_Ir")}" is above the rating of the device, {row.text("rating")}')


def _setting_of_overload_device(row: Row) -> None:
    if row.text("overload_device") and row.lacks("overload_setting"):
        row.fault("overload_setting", f"is empty; the overload device {row.text('overload_device')} is judged by it")
    if row.lacks("overload_device") and row.text("overload_setting"):
        row.fault("overload_setting", "goes with an overload_device; name the device that has this setting")


def _cores(row: Row) -> None:
    cores, phases = row.number("cores", "1"), row.text("phases")
    if cores is None or not phases:
        return
    cores = 4 if cores == 3.5 else cores  # the fourth core is the smaller one
    live = phases.count("L") + phases.count("N")
    own = row.text("protective_conductor") == "core"
    if cores < live + own:
        needed = f"{live} live conductors" + (" and a protective core" if own else "")
        row.fault("cores", f'"{row.text("cores")}" is too few; phases {phases} has {needed}')


def _size_of_aluminium(row: Row) -> None:
    size = row.number("size", "mm2")
    if row.text("conductor") == "Al" and size is not None and size < _SMALLEST_ALUMINIUM:
        row.fault("size", f'"{row.text("size")}" is not in the tables for Al; they begin at {_SMALLEST_ALUMINIUM} mm2')


def _runs_at_most(row: Row) -> None:
    for column in ("size", "runs"):
        if row.text("runs_at_most") and row.text(column):
            found = f'{column} is "{row.text(column)}"'
            row.fault("runs_at_most", f"{found}: it goes with size and runs left empty, which are then chosen")


def _overload_omitted(row: Row) -> None:
    if not row.text("overload_omitted"):
        return
    if row.lacks("reason"):
        row.fault("reason", "is empty; overload protection is omitted only for a reason, which the sheet prints")
    for column in ("overload_device", "setting_Ir"):
        if row.text(column):
            found = f'{column} is "{row.text(column)}"'
            row.fault("overload_omitted", f"{found}: what trips on overload does not go with overload_omitted")


def _supplement_of_drop(row: Row) -> None:
    if row.text("length_supplement") and row.text("drop_limit"):
        found = f'drop_limit is "{row.text("drop_limit")}"'
        row.fault("length_supplement", f"{found}: the supplement goes with the limits of Table G.52.1 only")


_CONDITIONS: tuple[Callable[[Row], None], ...] = (
    _feeder,
    _one_load,
    _factors_of_load,
    _current_and_nameplate,
    _rating_of_fuse,
    _starter,
    _setting_of_breaker,
    _setting_of_overload_device,
    _overload_omitted,
    _cores,
    _size_of_aluminium,
    _runs_at_most,
    _supplement_of_drop,
)


def report_conditions(row: Row) -> None:
    """Report what a circuit lacks and what does not fit together."""
    for check in _CONDITIONS:
        check(row)
