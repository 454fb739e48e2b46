"""A curve's rows: plain numbers, and text as people read it."""

import numpy as np
import pytest

from builder.curves import Band, BentExponential, Curve
from builder.exports.curve_rows import COLUMNS, NAMES, TEMPERATURE_COLUMNS, curve_rows, temperature_rows
from builder.part_curve import PartCurve

LAW = BentExponential(float(np.log(10e3)), 25.0, (25.0, 85.0), 3950.0, 0.0)
ENDS = Curve("steinhart-hart", LAW, (0.0, 70.0), extends=False)
TEXTS = {column.name: column.text for column in COLUMNS}


def test_rows_hold_plain_values_under_the_names_of_the_columns():
    first, last = curve_rows(PartCurve(ENDS, Band(ENDS, 25.0, 1.0), (0, 80)).sample(np.array([25.0, 80.0])))
    assert list(first) == list(NAMES)
    assert {type(value) for value in first.values()} == {float, bool}
    assert [first[name] for name in ("t_c", "r_ohm", "r_min_ohm", "r_max_ohm")] == [25, 10000, 9900, 10100]
    assert list(last.values()) == [80.0, None, None, None, None, None, None, True]


@pytest.mark.parametrize(
    ("r_ohm", "text"),
    [
        (5872.27, "5872.270"),
        (5782.215, "5782.215"),
        (10000.0, "10000.00"),
        (0.5, "0.5000000"),
        (1234567.0, "1234567"),
        (21345678.4, "21345678"),
        (4.2e-5, "4.200000e−05"),
        (3e12, "3.000000e+12"),
        (0.0, "0.000000e+00"),
        (None, "–"),
    ],
)
def test_resistance_keeps_seven_digits_and_its_zeros(r_ohm, text):
    assert TEXTS["r_ohm"](r_ohm) == text


@pytest.mark.parametrize(("value", "text"), [(-4.3361, "−4.336"), (-0.0001, "0.000"), (None, "–")])
def test_coefficient_keeps_three_decimals(value, text):
    assert TEXTS["alpha_pct_per_k"](value) == text


@pytest.mark.parametrize(("value", "text"), [(0.2, "+0.200"), (-1.72, "−1.720"), (0.0, "0.000"), (None, "–")])
def test_band_in_kelvin_keeps_three_decimals_and_its_sign(value, text):
    assert TEXTS["reads_min_k"](value) == text


def test_temperature_rows_say_where_the_curve_does_not_reach():
    rows = temperature_rows(ENDS, (10000.0, 1000000.0, 1e-9))
    assert rows == [
        {"r_ohm": 10000.0, "t_c": 25.0, "extrapolated": False},
        {"r_ohm": 1000000.0, "t_c": None, "extrapolated": True},
        {"r_ohm": 1e-9, "t_c": None, "extrapolated": True},
    ]
    assert [column.text(rows[1][column.name]) for column in TEMPERATURE_COLUMNS] == ["1000000", "–", "extrapolated"]
