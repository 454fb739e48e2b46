from __future__ import annotations

import numpy as np
import pytest

from builder.misprints.outliers import settled
from builder.misprints.smoothness import Smooth, refitted, smooth

T_C = np.arange(-40.0, 126.0, 5.0)
X_PER_K = 1 / (T_C + 273.15)
# ln R of a common 10 kΩ set of Steinhart–Hart coefficients, inverted here by bisection, not by the builder
A, B, C = 1.129241e-3, 2.341077e-4, 8.775468e-8


def steinhart_hart_ln_r() -> np.ndarray:
    low, high = np.zeros(T_C.size), np.full(T_C.size, 20.0)
    for _ in range(80):
        middle = (low + high) / 2
        too_cold = A + B * middle + C * middle**3 < X_PER_K
        low, high = np.where(too_cold, middle, low), np.where(too_cold, high, middle)
    return low


def curve_through(y: np.ndarray, half: float = 5e-5) -> Smooth:
    every = np.ones(y.size, dtype=bool)
    return smooth(X_PER_K, y, np.full(y.size, half), every, slope_per_k=3900 * X_PER_K**2)


def test_the_curve_follows_steinhart_hart_to_ten_millikelvin() -> None:
    curve = curve_through(steinhart_hart_ln_r())
    assert np.abs((curve.points.y - curve.fitted) / curve.points.slope_per_k).max() < 0.01


def test_what_is_expected_of_a_row_is_what_the_others_alone_give() -> None:
    curve = curve_through(steinhart_hart_ln_r() + 1e-3 * np.random.default_rng(1).normal(size=T_C.size))
    for row in (0, 1, 15, 33):
        others = refitted(curve, np.arange(T_C.size) != row)
        assert curve.expected[row] == pytest.approx(others.fitted[row], abs=1e-7)


def test_rows_that_were_left_out_have_the_same_expectation() -> None:
    y = steinhart_hart_ln_r()
    y[7] += 1.0
    without = refitted(curve_through(y), np.arange(T_C.size) != 7)
    assert without.off[7] == pytest.approx(1.0, abs=1e-3)


@pytest.mark.parametrize("rows", [(), (0,), (33,), (12,), (3, 20), (10, 11), (5, 6, 7), (2, 9, 17, 30)])
def test_rows_out_of_line_are_left_out_and_no_others(rows: tuple[int, ...]) -> None:
    y = steinhart_hart_ln_r()
    y[list(rows)] += np.array([0.05, -0.4, 0.11, 2.3])[: len(rows)]
    assert np.flatnonzero(~settled(curve_through(y)).kept).tolist() == list(rows)


def test_a_small_jump_of_the_slope_is_not_a_bad_row() -> None:
    y = steinhart_hart_ln_r() + 0.02 * 3900 * np.abs(X_PER_K - X_PER_K[15]) / 2
    assert settled(curve_through(y)).kept.all()


@pytest.mark.parametrize("row", [0, 14, 33])
def test_four_hundredths_of_a_kelvin_are_the_roughness_of_a_real_table(row: int) -> None:
    y = steinhart_hart_ln_r()
    y[row] += 0.045 * 3900 * X_PER_K[row] ** 2
    assert settled(curve_through(y)).kept.all()
