"""The table's curve against scipy's monotone cubic, and its inverse against scipy's root finding."""

import numpy as np
import pytest
from scipy.interpolate import PchipInterpolator
from scipy.optimize import brentq

from builder.curves import monotone_cubic

# °C and ohm: a real ceramic from −25 to 125 °C (Zephyr RTOS, drivers/sensor/ntc_thermistor, Apache-2.0, table 2).
ZEPHYR = np.array([[-25, 655802], [-15, 360850], [-5, 206463], [5, 122259], [15, 74730], [25, 47000], [35, 30334], [45, 20048], [55, 13539], [65, 9328], [75, 6544], [85, 4674], [95, 3388], [105, 2494], [115, 1860], [125, 1406]], dtype=float)  # fmt: skip
# Steps of any size, a nearly flat piece and a steep one beside it: no table is worse.
ROUGH = np.array([[0.0, 1.0, 1.5, 4.0, 4.2, 9.0, 10.0], [0.0, 2.0, 2.001, 3.0, 9.0, 9.5, 10.5]])


def _points(name):
    if name == "rough":
        return ROUGH
    t_c, r_ohm = ZEPHYR[::-1].T
    return np.array([1 / (t_c + 273.15), np.log(r_ohm)])


@pytest.mark.parametrize("name", ["zephyr", "rough"])
def test_cubic_and_its_slope_equal_scipys(name):
    x, y = _points(name)
    ours, theirs = monotone_cubic(x, y), PchipInterpolator(x, y)
    at = np.linspace(x[0], x[-1], 4001)
    assert ours.ln_resistance(at) == pytest.approx(theirs(at), rel=1e-12, abs=1e-12)
    assert ours.slope_k(at) == pytest.approx(theirs.derivative()(at), rel=1e-9, abs=1e-9)


@pytest.mark.parametrize("name", ["zephyr", "rough"])
def test_inverse_equals_scipys_root(name):
    x, y = _points(name)
    ours, theirs = monotone_cubic(x, y), PchipInterpolator(x, y)
    for value in np.linspace(y[0], y[-1], 101)[1:-1]:
        root = brentq(lambda at, value=value: float(theirs(at)) - value, x[0], x[-1], xtol=1e-16, rtol=1e-14)
        assert float(ours.inverse_temperature(value)) == pytest.approx(root, rel=1e-10, abs=0)
