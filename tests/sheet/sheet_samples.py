"""A sheet made in this process, for tests that look at its lines."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import pytest

import calcbook.sheet
from calcbook.formulas import cable_current, three_phase
from calcbook.reference import choose
from calcbook.sheet import Sheet

MOTOR: dict[str, str] = {
    "shaft_power": "45 kW",
    "efficiency": "0.936",
    "power_factor": "0.86",
    "rated_voltage": "400 V",
    "overload_setting": "81 A",
    "rating": "160 A",
    "insulation": "XLPE90",
    "ambient": "40 degC",
    "size": "25 mm2",
    "runs": "1",
    "method": "E",
    "phases": "L1L2L3",
    "overload_device": "relay60947",
}


def quiet_sheet(monkeypatch: pytest.MonkeyPatch, given: Mapping[str, Any] | None = None, /, **changes: str) -> Sheet:
    """A sheet whose displays go nowhere: what is displayed is tested on the templates."""
    monkeypatch.setattr(calcbook.sheet, "display", lambda *_, **__: None)
    return Sheet("test", {**MOTOR, **changes}, {"sheet": "C-001", **(given or {})})


def motor_circuit(sheet: Sheet) -> Sheet:
    """A short motor circuit: load, capacity, three criteria."""
    P_2, U_r = sheet.datum("shaft_power"), sheet.datum("rated_voltage", "U_r")
    eta, cos_phi = sheet.datum("efficiency"), sheet.datum("power_factor")
    theta_a, size = sheet.datum("ambient"), sheet.datum("size")
    insulation, method = sheet.choice("insulation", "insulation"), sheet.choice("method", "method")
    phases = sheet.choice("phases", "phases")
    I_B = sheet.step("I_B", three_phase.CURRENT_OF_MOTOR, P_2=P_2, U_r=U_r, eta=eta, cos_phi=cos_phi)
    n_l = sheet.table_value("n_l", choose.LOADED_CONDUCTORS, phases=phases)
    I_t = sheet.table_value("I_t", "iec-60364-5-52-b.52.12", method=method, loaded=n_l, size=size)
    C_a = sheet.table_value("C_a", choose.AMBIENT_FACTOR, insulation=insulation, ambient=theta_a)
    C_g = sheet.table_value("C_g", choose.GROUPING_FACTOR, arrangement="single_layer_tray", circuits=n_l)
    I_Z = sheet.step("I_Z", cable_current.CAPACITY, n=sheet.datum("runs"), I_t=I_t, C_a=C_a, C_g=C_g)
    I_r = sheet.datum("overload_setting")
    sheet.criterion("design current", I_r >= I_B, cite="433.1 (1)", headroom=["shaft_power"])
    sheet.criterion("setting", I_r <= I_Z, cite="433.1 (1)", headroom=["ambient"])
    sheet.rule(
        "device", sheet.choice("overload_device", "device"), allowed=["relay60947"], requirement="overload", cite="433"
    )
    sheet.conclude()
    return sheet
