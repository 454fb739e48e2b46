"""The monotone cubic where tables are at their worst."""

import numpy as np
import pytest

from builder.curves import Curve, monotone_cubic

# Flat beside steep: Newton's method alone does not get through the middle piece.
ROUGH_X, ROUGH_Y = np.array([0.0, 1.0, 2.0, 3.0, 4.0]), np.array([0.0, 1e-6, 1.0, 1.000001, 9.0])


def test_inverse_comes_back_on_pieces_that_newtons_method_does_not_solve():
    cubic = monotone_cubic(ROUGH_X, ROUGH_Y)
    x = np.linspace(1, 2, 101)
    assert cubic.ln_resistance(cubic.inverse_temperature(cubic.ln_resistance(x))) == pytest.approx(cubic.ln_resistance(x), rel=1e-12, abs=1e-15)  # fmt: skip


def test_inverse_of_a_scalar_is_that_of_the_array():
    cubic = monotone_cubic(ROUGH_X, ROUGH_Y)
    y = np.linspace(0, 9, 301)
    assert [float(cubic.inverse_temperature(value)) for value in y] == cubic.inverse_temperature(y).tolist()


def test_two_points_make_a_straight_line():
    cubic = monotone_cubic(np.array([1.0, 3.0]), np.array([2.0, 8.0]))
    assert cubic.ln_resistance(np.array([1.5, 2.0, 2.5])).tolist() == [3.5, 5.0, 6.5]
    assert cubic.slope_k(np.array([1.0, 2.0, 3.0])).tolist() == [3.0, 3.0, 3.0]


@pytest.mark.parametrize(("x", "y"), [([0, 1, 1], [0, 1, 2]), ([0, 1, 2], [0, 1, 1]), ([0, 1, 2], [0, 2, 1]), ([2, 1, 0], [0, 1, 2])])  # fmt: skip
def test_points_that_do_not_rise_are_refused(x, y):
    with pytest.raises(ValueError, match=r"^the points of a monotone cubic must rise$"):
        monotone_cubic(np.array(x, dtype=float), np.array(y, dtype=float))


def test_the_points_given_may_change_afterwards():
    x, y = np.array([0.0, 1.0, 2.0]), np.array([0.0, 1.0, 3.0])
    cubic = monotone_cubic(x, y)
    y[:] = 0
    assert cubic.ln_resistance(x).tolist() == [0.0, 1.0, 3.0]


def test_a_nearly_flat_end_still_falls_when_extrapolated_and_comes_back():
    # The last row was typed nearly equal to the one before.
    t_c = np.array([0.0, 25.0, 50.0, 75.0])
    r_ohm = np.array([32650.0, 10000.0, 3602.0, 3590.0])
    law = monotone_cubic(1 / (t_c[::-1] + 273.15), np.log(r_ohm[::-1]))
    curve = Curve("table", law, (0.0, 75.0))
    beyond_c = np.array([-20.0, 30.0, 75.0, 90.0, 120.0])
    found_ohm = curve.resistance_ohm(beyond_c)
    assert (np.diff(found_ohm) < 0).all()
    assert curve.temperature_c(found_ohm) == pytest.approx(beyond_c, abs=1e-6)
