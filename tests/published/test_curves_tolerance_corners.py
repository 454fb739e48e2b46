"""The tolerance band against the corners of R25 and B, evaluated by three uncertainty libraries."""

import json
from pathlib import Path

import numpy as np
import pytest
from curve_record import answered, curve_of
from scipy.optimize import brentq

POINTS = json.loads((Path(__file__).parent / "data" / "curves_tolerance_corners.json").read_text(encoding="utf-8"))[
    "points"
]
STATED = {
    "rated": {"resistance_ohm": 10000, "tolerance_pct": 1},
    "b_values": [{"between_c": [25, 85], "b_k": 3950, "tolerance_pct": 1}],
    "shape": "plain",
}


@pytest.mark.parametrize(("t_c", "r_ohm", "corners_pct"), POINTS)
def test_band_is_the_corners_of_rated_resistance_and_b_value(tmp_path, t_c, r_ohm, corners_pct):
    edges_ohm = np.array(curve_of(tmp_path, **STATED).band.edges_ohm(t_c))
    assert 100 * (edges_ohm / r_ohm - 1) == pytest.approx(corners_pct, abs=1e-11)
    row = answered(tmp_path, "curve", "--from", str(t_c), "--to", str(t_c))["rows"][0]
    printed_ohm = [row["r_ohm"], row["r_min_ohm"], row["r_max_ohm"]]
    assert printed_ohm == pytest.approx([r_ohm, *edges_ohm], rel=5e-10)  # ten digits


@pytest.mark.parametrize(("t_c", "r_ohm", "corners_pct"), POINTS)
def test_band_in_kelvin_is_the_root_of_the_nominal_curve(tmp_path, t_c, r_ohm, corners_pct):
    reads_low_k, reads_high_k = curve_of(tmp_path, **STATED).band.reads_k(t_c)
    for corner_pct, reads_k in zip(corners_pct, (reads_high_k, reads_low_k), strict=True):
        edge_ohm = r_ohm * (1 + corner_pct / 100)
        root_c = brentq(lambda t, edge=edge_ohm: np.log(10000 / edge) + 3950 * (1 / (t + 273.15) - 1 / 298.15), -100, 300, xtol=1e-12)  # fmt: skip
        assert reads_k == pytest.approx(root_c - t_c, abs=1e-8)
