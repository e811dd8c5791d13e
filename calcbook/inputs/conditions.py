"""What a circuit needs under a condition, and what must fit together within one row."""

from __future__ import annotations

from collections.abc import Callable

from calcbook.inputs.rows import Row

LOADS = ("shaft_power", "active_power", "apparent_power", "current")
_CONSTRUCTION_OF_METHOD = {"B1": "insulated_in_conduit", "B2": "multicore", "C": "multicore", "E": "multicore"}
# IEC 60364-5-52 Table B.52.17: the methods of installation that each arrangement goes with
_METHODS_OF_GROUPING = {
    "single_layer_wall": ("C",),
    "single_layer_ceiling": ("C",),
    "single_layer_tray": ("E", "F"),
    "single_layer_ladder": ("E", "F"),
}
# the last rows of IEC 60364-5-52 Tables B.52.14 and B.52.17 (item 1; the other items end with a general value)
HOTTEST_AMBIENT = {"PVC70": 60.0, "XLPE90": 80.0}
_MOST_BUNCHED = 20
_SMALLEST_ALUMINIUM = 2.5
# IEC 60269-1, 5.3.1
_GG_RATINGS = (
    2, 4, 6, 8, 10, 12, 16, 20, 25, 32, 40, 50, 63, 80, 100, 125, 160, 200, 250, 315, 400, 500, 630, 800, 1000, 1250,
)  # fmt: skip


def _one_load(row: Row) -> None:
    given = [name for name in LOADS if name in row.values]
    if len(given) > 1:
        found = " and ".join(f'{name} "{row.text(name)}"' for name in given)
        row.fault(given[1], f"{found}: a circuit has exactly one of {', '.join(LOADS)}")
    elif all(row.lacks(name) for name in LOADS):
        row.fault("", f"the circuit has no load; give exactly one of {', '.join(LOADS)}")


def _factors_of_load(row: Row) -> None:
    power = next((name for name in LOADS[:3] if name in row.values), "")
    if power and row.lacks("power_factor"):
        row.fault("power_factor", f"is empty; a load given as {power} needs it, and there is no safe value to assume")
    if power == "shaft_power" and row.lacks("efficiency"):
        row.fault("efficiency", "is empty; a load given as shaft_power needs it")
    if power != "shaft_power" and (power or "current" in row.values) and row.text("efficiency"):
        row.fault("efficiency", "goes with shaft_power only: the other loads are what the circuit takes")


def _current_and_nameplate(row: Row) -> None:
    if row.text("current") and row.text("rated_current"):
        found = f'current "{row.text("current")}" and rated_current "{row.text("rated_current")}"'
        row.fault("rated_current", f"{found}: a load given by its current has no second one; write the one that counts")


def _third_harmonic(row: Row) -> None:
    if row.text("phases") == "L1L2L3N" and row.lacks("third_harmonic"):
        row.fault("third_harmonic", "is empty; a circuit on L1L2L3N needs it, for it loads the neutral (0 where none)")


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
    if device == "breaker60947" and row.lacks("setting_Ir") and row.lacks("overload_device"):
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


def _construction(row: Row) -> None:
    method, construction = row.text("method"), row.text("construction")
    wanted = _CONSTRUCTION_OF_METHOD.get(method)
    if wanted and construction and construction != wanted:
        row.fault("construction", f'"{construction}" does not go with method {method}; allowed: {wanted}')


def _grouping(row: Row) -> None:
    grouping, method = row.text("grouping"), row.text("method")
    circuits, runs = row.number("circuits_in_group", "1"), row.number("runs", "1") or 1
    if grouping == "none" and circuits is not None and (circuits > 1 or runs > 1):
        found = f"circuits_in_group is {circuits:g} and runs is {runs:g}"
        row.fault("grouping", f'"none" goes with one circuit of one run only; {found}')
    methods = _METHODS_OF_GROUPING.get(grouping, ())
    if methods and method and method not in methods:
        row.fault("grouping", f'"{grouping}" goes with method {" or ".join(methods)} (Table B.52.17), not {method}')
    if grouping == "bunched" and circuits is not None and circuits + runs - 1 > _MOST_BUNCHED:
        found = f"circuits_in_group {circuits:g} and runs {runs:g} make {circuits + runs - 1:g} circuits"
        row.fault("circuits_in_group", f"{found}; Table B.52.17 ends at {_MOST_BUNCHED} bunched circuits")


def _cores(row: Row) -> None:
    cores, phases = row.number("cores", "1"), row.text("phases")
    if cores is None or not phases:
        return
    live = phases.count("L") + phases.count("N")
    own = row.text("protective_conductor") == "core"
    if cores < live + own:
        needed = f"{live} live conductors" + (" and a protective core" if own else "")
        row.fault("cores", f'"{row.text("cores")}" is too few; phases {phases} has {needed}')


def _size_of_aluminium(row: Row) -> None:
    size = row.number("size", "mm2")
    if row.text("conductor") == "Al" and size is not None and size < _SMALLEST_ALUMINIUM:
        row.fault("size", f'"{row.text("size")}" is not in the tables for Al; they begin at {_SMALLEST_ALUMINIUM} mm2')


def _ambient(row: Row) -> None:
    ambient, hottest = row.number("ambient", "degC"), HOTTEST_AMBIENT.get(row.text("insulation"))
    if ambient is not None and hottest is not None and ambient > hottest:
        found, insulation = row.text("ambient"), row.text("insulation")
        row.fault("ambient", f'"{found}" is above the last row of Table B.52.14 for {insulation}, {hottest:g} degC')


_CONDITIONS: tuple[Callable[[Row], None], ...] = (
    _one_load,
    _factors_of_load,
    _current_and_nameplate,
    _third_harmonic,
    _rating_of_fuse,
    _starter,
    _setting_of_breaker,
    _setting_of_overload_device,
    _construction,
    _grouping,
    _cores,
    _size_of_aluminium,
    _ambient,
)


def report_conditions(row: Row) -> None:
    """Report what a circuit lacks and what does not fit together."""
    for check in _CONDITIONS:
        check(row)
