"""The exercise of physics textbooks: R = R0·exp(B/T) through 7388 Ω at the ice point and 129 Ω at the steam point."""

import numpy as np
import pytest
from curve_record import answered, curve_of

from builder.curves import b_value_k

ICE_OHM, STEAM_OHM = 7388.0, 129.0
B_K, AT_37_OHM = 4125.757427, 1218.901263  # the exercise's answers, to ten digits
PLAIN = {"rated": {"resistance_ohm": ICE_OHM, "at_c": 0}, "b_values": [{"between_c": [0, 100], "b_k": B_K}], "shape": "plain"}  # fmt: skip


def test_b_value_of_the_exercise():
    assert float(b_value_k(ICE_OHM, 0.0, STEAM_OHM, 100.0)) == pytest.approx(B_K, abs=5e-7)


def test_plain_record_gives_the_resistance_of_the_exercise(tmp_path):
    curve_of(tmp_path, **PLAIN)
    rows = answered(tmp_path, "curve", "--from", "0", "--to", "100", "--step", "37")["rows"]
    assert [row["t_c"] for row in rows] == [0, 37, 74, 100]
    assert [rows[i]["r_ohm"] for i in (0, 1, 3)] == pytest.approx([ICE_OHM, AT_37_OHM, STEAM_OHM], rel=1e-9)


def test_typical_shape_keeps_both_points_and_lies_above_the_plain_law_between(tmp_path):
    curve = curve_of(tmp_path, **{**PLAIN, "shape": "typical"}).curve
    assert curve.resistance_ohm([0, 100]) == pytest.approx([ICE_OHM, STEAM_OHM], rel=1e-9)
    assert np.all(curve.resistance_ohm([20, 37, 60]) > ICE_OHM * np.exp(B_K * (1 / np.array([293.15, 310.15, 333.15]) - 1 / 273.15)))  # fmt: skip
