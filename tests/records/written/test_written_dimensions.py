"""Dimensions of written forms: what fits, and what is said to what does not."""

from __future__ import annotations

import pytest

from calcbook.errors import DimensionFault
from calcbook.records.written.dimensions import check_dimensions
from calcbook.records.written.tree import parse

UNITS = {
    "P": "kW", "Q": "kvar", "U": "V", "V": "kV", "I": "A", "J": "kA", "R": "ohm", "L": "km", "r": "ohm/km",
    "eta": "1", "d": "%", "phi": "deg", "t": "s", "omega": "rad/s", "theta_a": "degC", "theta_b": "degC", "dT": "K",
    "alpha": "1/K", "S": "mm2", "E": "A2s",
}  # fmt: skip


@pytest.mark.parametrize(
    ("form", "unit"),
    [
        ("P/(sqrt(3)*U*eta)", "A"),
        ("hypot(P, Q)", "kVA"),
        ("I + J", "A"),
        ("max(I, J)", "kA"),
        ("r*L", "ohm"),
        ("R*I^2", "W"),
        ("sqrt((U/I)^2)", "mohm"),
        ("I^2*t", "A2s"),
        ("sqrt(E/t)", "A"),
        ("theta_a + dT", "degC"),
        ("theta_a - theta_b", "K"),
        ("theta_a + (theta_b - theta_a)*(I/J)^2", "degC"),
        ("R*(1 + alpha*(theta_a - theta_b))", "ohm"),
        ("cos(omega*t - phi)", "1"),
        ("atan2(P, Q)", "rad"),
        ("exp(-t*omega)", "1"),
        ("eta^eta", "1"),
        ("choose(I <= J, U, V)", "V"),
        ("sum(P)", "kW"),
        ("integral(U*I, t, 0, t)", "J"),
        ("-abs(U)*d", "V"),
        ("E^0.5/t^0.5", "A"),
    ],
)
def test_what_fits_passes(form: str, unit: str) -> None:
    check_dimensions(parse(form), UNITS, unit)


@pytest.mark.parametrize(
    ("form", "unit", "message"),
    [
        ("U*I", "A", "U*I: the result has dimension"),
        ("U + I", "V", "U + I: "),
        ("U + I", "V", "cannot be added"),
        ("U - 1", "V", "U - 1: "),
        ("max(U, I)", "V", "max(U, I): its parts have different dimensions"),
        ("hypot(R, U)", "ohm", "hypot(R, U): its parts have different dimensions"),
        ("choose(U <= I, U, U)", "V", "U <= I: its parts have different dimensions"),
        ("choose(U <= V, U, I)", "V", "its parts have different dimensions"),
        ("cos(U)", "1", "cos(U): cos takes a pure number"),
        ("ln(P)", "1", "ln(P): ln takes a pure number"),
        ("atan2(U, I)", "rad", "atan2(U, I): its parts have different dimensions"),
        ("U^eta", "V", "U^eta: only a number may be raised to a power that is not written out"),
        ("eta^U", "1", "only a number may be raised to a power that is not written out"),
        ("theta_a + theta_b", "degC", "theta_a + theta_b: two temperatures on their scale cannot be added"),
        ("dT - theta_a", "degC", "dT - theta_a: a temperature cannot be taken from a difference"),
        ("2*theta_a", "degC", "theta_a: a temperature on its scale stands in differences only"),
        ("sqrt(theta_a)", "1", "theta_a: a temperature on its scale stands in differences only"),
        ("theta_a/theta_b", "1", "theta_a: a temperature on its scale stands in differences only"),
        ("theta_a - theta_b", "degC", "the result has dimension"),
        ("theta_a", "K", "the result has dimension"),
        ("r*I", "V", "the result has dimension"),
    ],
)
def test_what_does_not_fit_is_named(form: str, unit: str, message: str) -> None:
    with pytest.raises(DimensionFault) as caught:
        check_dimensions(parse(form), UNITS, unit)
    assert message in str(caught.value)
