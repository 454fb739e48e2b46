"""Least squares in kelvin against scipy's on the same errors, in the coefficients and in the fitted temperatures.

scipy's unknowns are the fitted temperatures at a few of the points; the coefficients are those of the curve through
them. `least_squares` finds the minimum but stops near 1e-8, where the sum of squares is flat to its last digit, so
`root` then takes its answer to where the gradient is zero.
"""

import numpy as np
import pytest
from scipy.optimize import least_squares, root

from builder.fits import BValue, fit

# Real ceramics, every 10 K from −25 °C: Zephyr RTOS, drivers/sensor/ntc_thermistor/ntc_thermistor.c, table 3
# (Apache-2.0).
T_C = np.arange(-25.0, 126.0, 10.0)
R_OHM = np.array(
    [86560, 53460, 33930, 22070, 14700, 10000, 6942, 4911, 3536, 2588, 1924, 1451, 1110, 860, 674, 534], float
)
ZERO_C_K = 273.15
SPANS_C = [(-25, 125), (0, 100), (0, 60)]


def cubic_through(powers):
    def coefficients(t_c, ln_r):
        return np.linalg.solve(ln_r[:, None] ** np.array(powers), 1 / (t_c + ZERO_C_K))

    def temperatures_c(p, ln_r):
        return 1 / (ln_r[:, None] ** np.array(powers) @ p) - ZERO_C_K

    return len(powers), coefficients, temperatures_c


def hyperbola_through(t_c, ln_r):
    """ln a, b and c, from t·ln R = t·ln a − c·ln R + (b + c·ln a)."""
    ln_a, c, rest = np.linalg.solve(np.column_stack([t_c, -ln_r, np.ones(3)]), t_c * ln_r)
    return np.array([ln_a, rest - c * ln_a, c])


MODELS = {
    "b-value": cubic_through([0, 1]),
    "steinhart-hart": cubic_through([0, 1, 3]),
    "four-term": cubic_through([0, 1, 2, 3]),
    "offset-exponential": (3, hyperbola_through, lambda p, ln_r: p[1] / (ln_r - p[0]) - p[2]),
}


def scipys(equation, t_c, r_ohm):
    """Coefficients and fitted temperatures."""
    count, coefficients, temperatures_c = MODELS[equation]
    nodes = np.linspace(0, len(t_c) - 1, count).astype(int)
    ln_r = np.log(r_ohm)

    def errors_k(nodes_c):
        return temperatures_c(coefficients(nodes_c, ln_r[nodes]), ln_r) - t_c

    def gradient(nodes_c):
        steps = [errors_k(nodes_c + 1e-30j * direction).imag / 1e-30 for direction in np.eye(count)]
        return np.array(steps) @ errors_k(nodes_c)

    near = least_squares(errors_k, t_c[nodes], jac="cs", xtol=1e-15, ftol=1e-15, gtol=1e-15).x
    best = root(gradient, near, tol=1e-15).x
    np.testing.assert_allclose(best, near, atol=1e-6)
    return coefficients(best, ln_r[nodes]), errors_k(best) + t_c


def plain(coefficients):
    """Our coefficients as scipy's model has them."""
    if "at_c" in coefficients:
        inverse = 1 / coefficients["b_k"]
        at_zero = 1 / (coefficients["at_c"] + ZERO_C_K) - inverse * np.log(coefficients["resistance_ohm"])
        return np.array([at_zero, inverse])
    return np.array(list(coefficients.values()))


@pytest.mark.parametrize("span_c", SPANS_C, ids=str)
@pytest.mark.parametrize("equation", MODELS)
def test_coefficients_and_temperatures_equal_scipys(equation, span_c):
    inside = (span_c[0] <= T_C) & (span_c[1] >= T_C)
    fitted = fit(equation, T_C, R_OHM, between_c=span_c)
    expected, expected_c = scipys(equation, T_C[inside], R_OHM[inside])
    if equation == "offset-exponential":
        expected[0] = np.exp(expected[0])
    np.testing.assert_allclose(plain(fitted.coefficients), expected, rtol=1e-9)
    np.testing.assert_allclose(fitted.temperature_c(R_OHM[inside]), expected_c, rtol=1e-9, atol=1e-9)


@pytest.mark.parametrize("reference_c", [-50.0, 25.0, 200.0])
def test_reference_temperature_moves_the_resistance_along_the_same_curve(reference_c):
    usual = fit("b-value", T_C, R_OHM)
    moved = fit(BValue(reference_c), T_C, R_OHM)
    assert moved.coefficients["at_c"] == reference_c
    assert moved.coefficients["b_k"] == pytest.approx(usual.coefficients["b_k"], rel=1e-12)
    assert moved.coefficients["resistance_ohm"] == pytest.approx(float(usual.resistance_ohm(reference_c)), rel=1e-12)
