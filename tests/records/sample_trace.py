"""A trace with a line of every form, made by hand: the travelling hoist of the Tern Quay boatyard."""

from __future__ import annotations

from calcbook.records.dimension import coherent_number
from calcbook.records.line import (
    Argument,
    Binding,
    BroughtForwardLine,
    ChoiceLine,
    Citation,
    ConclusionLine,
    DatumLine,
    DerivationLine,
    Headroom,
    InequalityLine,
    RuleLine,
    StepLine,
    TableLine,
)
from calcbook.records.printed import print_calculated, print_given
from calcbook.records.project import Adopted, Origin, SignOff
from calcbook.records.quantity import Quantity
from calcbook.records.trace import SCHEMA_VERSION, Trace

POWER = Quantity(45, "kW", "active_power")
SIZE = Quantity(25, "mm2", "area")
CAPACITY = Quantity(101, "A", "run_current")
CALCULATED = Quantity(80.7123456789012, "A", "line_current")
ADOPTED = Quantity(81, "A", "line_current")
LIMIT = Quantity(0.1, "A", "line_current")

DATUM = DatumLine(
    sheet="C-001", template="three-phase-power", name="P_2", description='shaft power "as built" <45>', value=POWER,
    si=coherent_number(POWER), text=print_given(POWER), parameter="shaft_power",
    origin=Origin("circuits.csv", "C-001", "shaft_power", "confirmed", "TQ-M-7", "B", "3", "עברית 🙂"),
)  # fmt: skip
CHOICE = ChoiceLine(
    sheet="C-001", template="cable-current", name="method", description="method of installation", parameter="method",
    text="E", origin=Origin("circuits.csv", "C-001", "method"),
)  # fmt: skip
TABLE = TableLine(
    sheet="C-001", template="cable-current", name="I_t", key="run-1", description="tabulated capacity", value=CAPACITY,
    si=101.0, text=print_given(CAPACITY), table="iec-60364-5-52-b.52.10",
    arguments=(
        Argument(name="method", rests_on="method", text="E"),
        Argument(name="size", rests_on="size", text="25 mm²", quantity=SIZE),
    ),
    citation=Citation(
        standard="IEC 60364-5-52", edition="2009", table="B.52.10", title="capacities", row="25 mm²",
        column="method E, loaded 3", status="public", signed_off=SignOff("AB", "2026-03-02", "TQ-Q-7"), remark="exact",
    ),
)  # fmt: skip
BROUGHT = BroughtForwardLine(
    sheet="C-001", template="three-phase-power", name="U_n", description="nominal voltage",
    value=Quantity(400, "V", "line_to_line_voltage"), si=400.0, text="400 V", source="MB/three-phase-power/U_n",
)  # fmt: skip
STEP = StepLine(
    sheet="C-001", template="three-phase-power", name="I_L", description="line current", value=ADOPTED, si=81.0,
    text="81 A", formula="current_of_motor", written="P_2/(sqrt(3)*U_n)",
    bindings=(
        Binding(symbol="P_2", rests_on=("P_2",), texts=("45 kW",)),
        Binding(symbol="U_n", rests_on=("U_n",), texts=("400 V",)),
    ),
    reference="line current", second=80.7123456789012, calculated=CALCULATED,
    calculated_text=print_calculated(CALCULATED),
    adopted=Adopted("C-001/three-phase-power/I_L", ADOPTED, "nameplate", "AB", "2026-03-02"),
)  # fmt: skip
INEQUALITY = InequalityLine(
    sheet="C-001", template="cable-current", name="I_B <= I_r", description="design current", operator="<=",
    left="I_L", right="I_t[run-1]", left_text="81 A", right_text="101 A", utilisation=81 / 101,
    utilisation_text="0.802", verdict="met", reference="IEC 60364-4-43, 433.1", headroom_of="P_2",
)  # fmt: skip
RULE = RuleLine(
    sheet="C-001", template="cable-current", name="overload", description="overload protection",
    requirement="an overload device is stated", rests_on="method", found="", allowed=("relay60947", "gG"),
    verdict="not shown", reference="IEC 60364-4-43, 433",
)  # fmt: skip
DERIVATION = DerivationLine(
    sheet="C-001", template="three-phase-power", name="S_1", description="", left="S_1", right="P_1/cos_phi",
    standing="proven", reason="P = S cos φ solved for S", proof="simplified to 0", formula="apparent_power",
)  # fmt: skip
CONCLUSION = ConclusionLine(
    sheet="C-001", template="cable-current", name="conclusion", verdict="not shown", governing="I_B <= I_r",
    order=("I_B <= I_r", "overload"),
    headrooms=(
        Headroom(
            criterion="I_B <= I_r", datum="P_2", present_text="45 kW", limit=LIMIT, limit_text="0.1 A", solved=0.1
        ),
        Headroom(criterion="overload", datum="P_2", present_text="45 kW", limit=None, limit_text="", solved=None),
    ),
    open_items=("device is to be confirmed",), cautions=("not compared",),
)  # fmt: skip

TRACE = Trace(
    schema=SCHEMA_VERSION,
    sheet="C-001",
    title="Travelling hoist",
    templates=("three-phase-power", "cable-current"),
    lines=(DATUM, CHOICE, TABLE, BROUGHT, STEP, INEQUALITY, RULE, DERIVATION, CONCLUSION),
)
