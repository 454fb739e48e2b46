"""Steinhart–Hart curves, tabulated as makers do, come back from their tables."""

import json
import math
from pathlib import Path

import numpy as np
import pytest
from curve_record import curve_of
from scipy.optimize import brentq

POINT_SETS = json.loads(
    (Path(__file__).parent / "data" / "three_point_steinhart_hart.json").read_text(encoding="utf-8")
)
# 1/T = a + b·ln R + c·(ln R)³: the set of Kaw's textbook, and four through published points with 50-digit arithmetic.
SETS = {
    "kaw": (1.129241e-3, 2.341077e-4, 8.775468e-8),
    **{s["id"]: tuple(s["abc"]) for s in POINT_SETS["sets"] if s["id"] in ("q10", "q17", "q21", "q22")},
}


@pytest.mark.parametrize("abc", SETS.values(), ids=SETS)
def test_table_of_five_digits_every_5_k_comes_back_within_2_mk(tmp_path, abc):
    a, b, c = abc

    def r_ohm(t_c):
        return math.exp(brentq(lambda y: a + b * y + c * y**3 - 1 / (t_c + 273.15), -5, 40, xtol=1e-14))

    rows = [[t_c, float(f"{r_ohm(t_c):.5g}")] for t_c in range(-40, 126, 5)]
    curve = curve_of(tmp_path, {"resistance_ohm": round(r_ohm(25), 3)}, r_t_table={"rows": rows}).curve
    t_c = np.arange(-40, 125.01, 0.25)
    missed_k = curve.temperature_c([r_ohm(t) for t in t_c]) - t_c
    assert np.abs(missed_k).max() < 0.002
