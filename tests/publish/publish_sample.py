"""A workbook made by hand, as run would hand it over: the travelling hoist of the Tern Quay boatyard."""

from __future__ import annotations

import json
import math
from typing import Any

from calcbook.publish.sheet_view import Context
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
    Line,
    RuleLine,
    StepLine,
    TableLine,
)
from calcbook.records.notation import named
from calcbook.records.printed import print_calculated, print_given
from calcbook.records.project import Adopted, Origin, SignOff, Status, TitleBlock
from calcbook.records.quantity import Quantity
from calcbook.records.result import Failure, SheetResult
from calcbook.records.trace import LINE_MIME, canonical_json, line_to_json, trace_of_notebook

BLOCK = TitleBlock(
    number="TQ-2041",
    title="Tern Quay boatyard, low-voltage installation",
    client="Tern Quay Harbour Trust",
    date="2026-03-14",
    prepared="AB",
    checked="CD",
    revision="A",
    state="draft",
)
CONTEXT = Context(BLOCK, in_package=True, derivations={"three_phase.motor_current": ("D-three-phase", "line-current")})
CURRENT, POWER = "cable-current", "three-phase-power"


def quantity(name: str, number: float, unit: str = "") -> Quantity:
    entry = named(name)
    return Quantity(number, unit or entry.unit, entry.kind)


def datum(sheet: str, name: str, number: float, status: Status = "confirmed", **origin: str) -> DatumLine:
    value = quantity(name, number)
    column = named(name).parameter
    place = {"file": "circuits.csv", "tag": sheet, "column": column, **origin}
    return DatumLine(
        sheet=sheet,
        template=POWER,
        name=name,
        description=named(name).description,
        value=value,
        si=coherent_number(value),
        text=print_given(value),
        parameter=column,
        origin=Origin(status=status, **place),
    )


def choice(sheet: str, name: str, text: str, description: str) -> ChoiceLine:
    origin = Origin("circuits.csv", sheet, name, "confirmed", "TQ-E-101", "C", "2")
    return ChoiceLine(
        sheet=sheet, template=CURRENT, name=name, description=description, parameter=name, text=text, origin=origin
    )


def table_value(
    sheet: str, name: str, number: float, table: str, cell: tuple[str, str], *, arguments: tuple[Argument, ...] = ()
) -> TableLine:
    value = quantity(name, number)
    signed = SignOff("AB", "2026-02-01", "licensed copy 7") if table == "B.52.14" else None
    return TableLine(
        sheet=sheet,
        template=CURRENT,
        name=name,
        description=named(name).description,
        value=value,
        si=coherent_number(value),
        text=print_given(value),
        table=f"iec60364_5_52_{table}",
        arguments=arguments,
        citation=Citation(
            standard="IEC 60364-5-52",
            edition="2009",
            table=table,
            title="current-carrying capacities",
            row=cell[0],
            column=cell[1],
            status="from memory of the standard",
            signed_off=signed,
            remark="less favourable of two rows" if table == "B.52.17" else "",
        ),
    )


def step(
    sheet: str, name: str, number: float, written: str, texts: dict[str, str], *, reference: str = "", formula: str = ""
) -> StepLine:
    value = quantity(name, number)
    return StepLine(
        sheet=sheet,
        template=CURRENT,
        name=name,
        description=named(name).description,
        value=value,
        si=coherent_number(value),
        text=print_calculated(value),
        formula=formula or f"cable.{name}",
        written=written,
        bindings=tuple(Binding(symbol=symbol, rests_on=(symbol,), texts=(text,)) for symbol, text in texts.items()),
        reference=reference,
        second=coherent_number(value),
        calculated=value,
        calculated_text=print_calculated(value),
    )


def criterion(
    sheet: str, name: str, sides: tuple[str, str], texts: tuple[str, str], utilisation: float
) -> InequalityLine:
    return InequalityLine(
        sheet=sheet,
        template=CURRENT,
        name=name,
        description={"setting": "setting not below the design current"}.get(name, "setting not above the capacity"),
        operator="<=",
        left=sides[0],
        right=sides[1],
        left_text=texts[0],
        right_text=texts[1],
        utilisation=utilisation,
        utilisation_text=f"{utilisation:.3f}",
        verdict="met" if utilisation <= 1 else "not met",
        reference="IEC 60364-4-43:2023, 433.1 (1)",
        headroom_of="ambient",
    )


def hoist_lines(sheet: str = "C-014") -> list[Line]:
    adopted = Adopted(
        "I_B", quantity("I_B", 82.0), "allowance for the tail winch, letter 12 of the maker", "AB", "2026-03-02"
    )
    design = step(sheet, "I_B", 78.4, "I_L", {"I_L": "78.4 A"}, reference="IEC 60364-4-43:2023, 433.1")
    design = StepLine(**{**design.__dict__, "value": adopted.value, "si": 82.0, "text": "82.0 A", "adopted": adopted})
    capacity = 119.0 * 0.91 * 0.88
    return [
        datum(sheet, "P_2", 45.0, document="TQ-E-101", revision="C", page="2"),
        datum(sheet, "U_r", 400.0, document="TQ-E-101", revision="C", page="2"),
        datum(sheet, "eta", 0.936, document="motor data sheet 4711"),
        datum(sheet, "cos_phi", 0.87, "assumed", remark="maker's value not yet received"),
        step(
            sheet,
            "I_L",
            45000 / (math.sqrt(3) * 400 * 0.936 * 0.87),
            "P_2/(sqrt(3)*U_r*eta*cos_phi)",
            {"P_2": "45\N{NO-BREAK SPACE}kW", "U_r": "400\N{NO-BREAK SPACE}V", "eta": "0.936", "cos_phi": "0.87"},
            formula="three_phase.motor_current",
        ),
        design,
        choice(sheet, "method", "E", "method of installation"),
        choice(sheet, "insulation", "XLPE90", "insulation of the conductor"),
        datum(sheet, "size", 25.0, document="TQ-E-101", revision="C", page="2"),
        datum(sheet, "theta_a", 40.0, file="inputs.toml", tag="basis", column="ambient_air", document="TQ-E-001"),
        datum(sheet, "I_r", 85.0, "to be confirmed"),
        BroughtForwardLine(
            sheet=sheet,
            template=CURRENT,
            name="n_c",
            description=named("n_c").description,
            value=quantity("n_c", 3.0),
            si=3.0,
            text="3",
            source="MB/demand/n_g",
        ),
        table_value(
            sheet,
            "I_t",
            119.0,
            "B.52.12",
            ("25 mm²", "E, XLPE, copper, 3 loaded"),
            arguments=(
                Argument(name="method", rests_on="method", text="E"),
                Argument(name="insulation", rests_on="insulation", text="XLPE90"),
                Argument(name="size", rests_on="size", text="25\N{NO-BREAK SPACE}mm²"),
                Argument(name="loaded", rests_on="", text="3"),
            ),
        ),
        table_value(sheet, "C_a", 0.91, "B.52.14", ("40 °C", "XLPE")),
        table_value(sheet, "C_g", 0.88, "B.52.17", ("3 circuits", "single layer on tray")),
        step(
            sheet,
            "I_Z",
            capacity,
            "n*I_t*C_a*C_g",
            {"n": "1", "I_t": "119\N{NO-BREAK SPACE}A", "C_a": "0.91", "C_g": "0.88"},
            reference="IEC 60364-5-52:2009, 523.1",
        ),
        datum(sheet, "n", 1.0),
        step(
            sheet,
            "theta_B",
            40 + 50 * (82 / capacity) ** 2,
            "theta_a + (theta_max - theta_a)*(I_B/I_Z)^2",
            {
                "theta_a": "40\N{NO-BREAK SPACE}°C",
                "theta_max": "90\N{NO-BREAK SPACE}°C",
                "I_B": "82.0\N{NO-BREAK SPACE}A",
                "I_Z": "95.3\N{NO-BREAK SPACE}A",
            },
        ),
        datum(sheet, "theta_ref", 30.0),
        table_value(sheet, "theta_max", 90.0, "52.1", ("XLPE", "greatest temperature")),
        criterion(sheet, "setting", ("I_B", "I_r"), ("82.0\N{NO-BREAK SPACE}A", "85\N{NO-BREAK SPACE}A"), 82 / 85),
        criterion(
            sheet, "capacity", ("I_r", "I_Z"), ("85\N{NO-BREAK SPACE}A", "95.3\N{NO-BREAK SPACE}A"), 85 / capacity
        ),
        RuleLine(
            sheet=sheet,
            template=CURRENT,
            name="overload_device",
            description="overload protection is present",
            requirement="a motor circuit has a device that judges overload",
            rests_on="method",
            found="E",
            allowed=("E", "F"),
            verdict="met",
            reference="IEC 60364-4-43:2023, 433.1",
        ),
        ConclusionLine(
            sheet=sheet,
            template=CURRENT,
            name="conclusion",
            verdict="met",
            governing="setting",
            order=("setting", "capacity", "overload_device"),
            headrooms=(
                Headroom(
                    criterion="capacity",
                    datum="theta_a",
                    present_text="40\N{NO-BREAK SPACE}°C",
                    limit=Quantity(50.3, "degC", "temperature"),
                    limit_text="50.3\N{NO-BREAK SPACE}°C",
                    solved=50.3,
                    remark="tabulated factor between rows taken from the less favourable row",
                ),
            ),
            open_items=("power factor 0.87 is assumed", "setting of the overload relay is to be confirmed"),
        ),
    ]


def derivation_lines(sheet: str = "D-three-phase") -> list[Line]:
    def line(name: str, sides: tuple[str, str], reason: str, proof: str = "", formula: str = "") -> Line:
        return DerivationLine(
            sheet=sheet,
            template="derivations",
            name=name,
            description="",
            left=sides[0],
            right=sides[1],
            standing="proven" if proof else "premise",
            reason=reason,
            proof=proof,
            formula=formula,
        )

    return [
        line("voltage-1", ("u_1", "sqrt(2)*U_ph*cos(omega*t)"), "sinusoidal phase voltage"),
        line("current-1", ("i_1", "sqrt(2)*I_ph*cos(omega*t - phi)"), "current lags by the phase angle"),
        line("sum", ("u_1*i_1 + u_2*i_2 + u_3*i_3", "3*U_ph*I_ph*cos_phi"), "sum of the phases", "difference 0"),
        line("mean", ("P", "integral(p, t, 0, T)/T"), "mean over a period"),
        line("line-current", ("I_L", "P_2/(sqrt(3)*U_r*eta*cos_phi)"), "solved for the current",
             "the difference of both sides simplifies to zero", "three_phase.motor_current"),
    ]  # fmt: skip


def markdown(source: str) -> dict[str, Any]:
    return {"cell_type": "markdown", "id": "m", "metadata": {}, "source": source}


def code(*lines: Line) -> dict[str, Any]:
    outputs = [
        {
            "output_type": "display_data",
            "metadata": {},
            "data": {LINE_MIME: line_to_json(line), "text/plain": line.label},
        }
        for line in lines
    ]
    source = "sheet.datum('shaft_power')"
    return {
        "cell_type": "code", "id": "c", "metadata": {}, "source": source, "execution_count": 1, "outputs": outputs
    }  # fmt: skip


def notebook(number: str, title: str, cells: list[dict[str, Any]]) -> dict[str, Any]:
    for index, cell in enumerate(cells):
        cell["id"] = f"cell-{index}"
    about = {"sheet": number, "title": title, "schema": 1, "version": "0.1.0"}
    return {"nbformat": 4, "nbformat_minor": 5, "metadata": {"calcbook": about}, "cells": cells}


def hoist(sheet: str = "C-014", title: str = "Travelling hoist, 45 kW, direct on line") -> dict[str, Any]:
    lines = hoist_lines(sheet)
    return notebook(
        sheet,
        title,
        [
            markdown("# Three-phase power\n\nLine current of the motor from its shaft power."),
            code(*lines[:4]),
            markdown("The current is worked out at the motor's rated voltage `U_r`, and not at `U_n`."),
            code(*lines[4:6]),
            markdown("# Cable current\n\nCapacity as installed, and the devices against it."),
            code(*lines[6:11]),
            markdown("## Capacity"),
            code(*lines[11:16]),
            code(lines[16]),
            code(lines[17]),
            code(lines[18]),
            code(lines[19]),
            markdown("## Criteria\n\nThe overload device is judged, not the short-circuit device."),
            code(*lines[20:]),
        ],
    )


def derivations(sheet: str = "D-three-phase") -> dict[str, Any]:
    lines = derivation_lines(sheet)
    cells = [markdown("# Power of three phases\n\nFrom sinusoidal quantities to the sum."), code(*lines[:4])]
    return notebook(sheet, "Three-phase power", [*cells, markdown("# Current of a motor"), code(lines[4])])


def result_of(workbook: dict[str, Any], failure: Failure | None = None) -> SheetResult:
    trace = trace_of_notebook(workbook)
    return SheetResult(
        number=trace.sheet,
        title=trace.title,
        outcome="failed" if failure else "executed",
        workbook=canonical_json(workbook),
        trace=trace,
        failure=failure,
    )


def from_text(text: str) -> dict[str, Any]:
    loaded: dict[str, Any] = json.loads(text)
    return loaded
