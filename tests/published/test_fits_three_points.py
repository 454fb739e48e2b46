"""Steinhart–Hart through three points, against solutions with 50-digit arithmetic."""

import json
from pathlib import Path

import pytest

from builder.fits import fit

SETS = json.loads((Path(__file__).parent / "data" / "three_point_steinhart_hart.json").read_text(encoding="utf-8"))[
    "sets"
]


@pytest.mark.parametrize("points", SETS, ids=lambda points: points["id"])
def test_three_points_give_the_exact_coefficients(points):
    fitted = fit("steinhart-hart", *zip(*points["points"], strict=True))
    assert list(fitted.coefficients.values()) == pytest.approx(points["abc"], rel=1e-9)
    assert fitted.worst_k < 1e-9


def test_one_of_the_sets_bends_the_wrong_way():
    assert [points["id"] for points in SETS if points["abc"][2] < 0] == ["q18"]
