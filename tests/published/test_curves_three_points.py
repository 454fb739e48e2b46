"""Steinhart–Hart coefficients through three points, against solutions with 50-digit arithmetic."""

import json
from pathlib import Path

import numpy as np
import pytest
from click.testing import CliRunner
from curve_record import answered, curve_of, written

from builder.cli import main
from builder.curves import through_points

SETS = json.loads((Path(__file__).parent / "data" / "three_point_steinhart_hart.json").read_text(encoding="utf-8"))[
    "sets"
]
BENDS_BACK = next(points for points in SETS if points["abc"][2] < 0)


def _stated(points):
    (low_c, _), (t_c, r_ohm), (high_c, _) = points["points"]
    abc = dict(zip("abc", points["abc"], strict=True))
    return {"resistance_ohm": r_ohm, "at_c": t_c}, {**abc, "span_c": [low_c, high_c]}


@pytest.mark.parametrize("points", SETS, ids=lambda points: points["id"])
def test_coefficients_agree_to_twelve_digits(points):
    law = through_points(*np.array(points["points"], dtype=float).T)
    assert [law.a, law.b, law.c] == pytest.approx(points["abc"], rel=1e-12, abs=0)


@pytest.mark.parametrize("points", SETS, ids=lambda points: points["id"])
def test_record_with_the_coefficients_goes_through_the_points(tmp_path, points):
    rated, stated = _stated(points)
    curve = curve_of(tmp_path, rated, steinhart_hart=stated).curve
    t_c, r_ohm = np.array(points["points"], dtype=float).T
    assert curve.resistance_ohm(t_c) == pytest.approx(r_ohm, rel=1e-9)
    assert curve.temperature_c(r_ohm) == pytest.approx(t_c, abs=1e-6)


def test_set_that_bends_back_is_warned_about(tmp_path):
    rated, stated = _stated(BENDS_BACK)
    folder = written(tmp_path, rated, steinhart_hart=stated)
    result = CliRunner().invoke(main, ["check", "--records", str(folder), "--format", "json"])
    assert result.exit_code == 0
    (found,) = [p for p in json.loads(result.stdout)["problems"] if p["rule"] == "bends-back"]
    assert (found["severity"], found["field"]) == ("warning", "steinhart_hart.c")


def test_set_that_bends_back_gives_no_number_outside_its_span(tmp_path):
    rated, stated = _stated(BENDS_BACK)
    written(tmp_path, rated, steinhart_hart=stated)
    rows = answered(tmp_path, "curve", "--from", "-40", "--to", "120", "--step", "10")["rows"]
    for row in rows:
        outside = not -30 <= row["t_c"] <= 110
        assert row["extrapolated"] == outside
        figures = [row[name] for name in ("r_ohm", "r_min_ohm", "r_max_ohm", "alpha_pct_per_k", "reads_min_k", "reads_max_k")]  # fmt: skip
        assert [figure is None for figure in figures] == [outside] * 6
    beyond = answered(tmp_path, "temperature", "200000", "4025", "200")["rows"]
    assert [row["t_c"] for row in beyond] == [None, pytest.approx(20, abs=1e-6), None]
    assert [row["extrapolated"] for row in beyond] == [True, False, True]
