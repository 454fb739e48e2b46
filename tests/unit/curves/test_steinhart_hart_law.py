"""The Steinhart–Hart law on its branch: where there is a number, and where there is none."""

import numpy as np
import pytest
from scipy.optimize import brentq

from builder.curves import SteinhartHartLaw, through_points

T_C = np.array([-40.0, 0.0, 25.0, 60.0, 125.0])
X = 1 / (T_C + 273.15)


# Textbook set (c > 0), the same without bend, one that bends back, and c as small as rounding leaves it.
@pytest.mark.parametrize("c", [8.775468e-8, 0.0, -2e-8, 1e-21, -1e-21])
def test_law_and_its_inverse_agree_with_scipys_root(c):
    law = SteinhartHartLaw(1.129241e-3, 2.341077e-4, c)
    for x, ln_r in zip(X, law.ln_resistance(X), strict=True):
        root = brentq(lambda y, x=x: 1.129241e-3 + 2.341077e-4 * y + c * y**3 - x, 0, 25, xtol=1e-14)
        assert ln_r == pytest.approx(root, rel=1e-12)
    assert law.inverse_temperature(law.ln_resistance(X)) == pytest.approx(X, rel=1e-14, abs=0)


@pytest.mark.parametrize("c", [8.775468e-8, 0.0, -2e-8])
def test_slope_is_the_numerical_derivative(c):
    law = SteinhartHartLaw(1.129241e-3, 2.341077e-4, c)
    step = 1e-8
    assert law.slope_k(X) == pytest.approx((law.ln_resistance(X + step) - law.ln_resistance(X - step)) / (2 * step), rel=1e-7)  # fmt: skip


def test_law_that_bends_back_has_no_number_beyond_its_turning_point():
    law = SteinhartHartLaw(1e-3, 3e-4, -4e-7)
    turning_ln_r = np.sqrt(3e-4 / (3 * 4e-7))  # where b + 3·c·y² = 0
    turning_x = float(law.inverse_temperature(np.array(turning_ln_r)))
    at = law.ln_resistance(np.array([turning_x * (1 - 1e-9), turning_x * (1 + 1e-9)]))
    assert at[0] == pytest.approx(turning_ln_r, rel=1e-3)
    assert np.isnan(at[1])


@pytest.mark.parametrize("b", [0.0, -2e-4])
def test_law_whose_b_is_not_above_zero_has_no_number(b):
    with np.errstate(all="raise"):
        assert np.isnan(SteinhartHartLaw(1e-3, b, 1e-7).ln_resistance(X)).all()


def test_unit_of_the_logarithm_scales_the_resistance_alone():
    law, in_kiloohm = SteinhartHartLaw(1e-3, 2.3e-4, 9e-8), SteinhartHartLaw(1e-3, 2.3e-4, 9e-8, 1000.0)
    assert in_kiloohm.ln_resistance(X) == pytest.approx(law.ln_resistance(X) + np.log(1000), rel=1e-14)
    assert in_kiloohm.slope_k(X) == pytest.approx(law.slope_k(X), rel=1e-14)
    assert in_kiloohm.inverse_temperature(in_kiloohm.ln_resistance(X)) == pytest.approx(X, rel=1e-14, abs=0)


def test_more_points_than_three_get_the_least_squares_in_kelvin():
    law = SteinhartHartLaw(1.129241e-3, 2.341077e-4, 8.775468e-8)
    r_ohm = np.exp(law.ln_resistance(X)) * np.array([1.002, 0.999, 1.0, 1.001, 0.998])

    def missed_k(a, b, c):
        y = np.log(r_ohm)
        return np.sum((1 / (a + b * y + c * y**3) - T_C - 273.15) ** 2)

    made = through_points(T_C, r_ohm)
    least = missed_k(made.a, made.b, made.c)
    for i in range(3):
        for step in (-1e-5, 1e-5):
            moved = np.array([made.a, made.b, made.c])
            moved[i] *= 1 + step
            assert missed_k(*moved) > least


def test_two_points_are_refused():
    with pytest.raises(ValueError, match=r"^Steinhart–Hart coefficients need three points$"):
        through_points(np.array([0.0, 25.0]), np.array([32650.0, 10000.0]))
