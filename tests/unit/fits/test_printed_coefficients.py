"""Coefficients as text."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from builder.fits import EQUATIONS, fit, printed_coefficients


@st.composite
def curves(draw):
    """Points of a bent ceramic over some span, a little rough."""
    low_c = draw(st.floats(-55, 60))
    t_c = np.linspace(low_c, low_c + draw(st.floats(20, 180)), draw(st.integers(6, 40)))
    d = 1 / (t_c + 273.15) - 1 / 298.15
    ln_r = np.log(draw(st.floats(10, 1e6))) + draw(st.floats(2500, 5000)) * d - draw(st.floats(5e4, 3e5)) * d**2
    return t_c, np.exp(ln_r + draw(st.sampled_from([0, 1e-4])) * np.cos(7 * np.arange(len(t_c))))


def cost_mk(fitted, texts):
    """What the texts cost, on a grid that shares only its ends with the one in use."""
    r_ohm = np.geomspace(*fitted.span_ohm, 2000)
    rounded = replace(fitted, coefficients={name: float(text) for name, text in texts.items()})
    return np.abs(rounded.temperature_c(r_ohm) - fitted.temperature_c(r_ohm)).max() * 1e3


def significant_digits(text):
    return len(text.split("e")[0].replace("-", "").replace(".", "").lstrip("0"))


@pytest.mark.parametrize("equation", EQUATIONS)
@settings(derandomize=True, max_examples=100, deadline=None)
@given(curve=curves())
def test_rounding_costs_less_than_a_millikelvin_and_as_much_as_it_says(equation, curve):
    fitted = fit(equation, *curve)
    printed = printed_coefficients(fitted)
    found_mk = cost_mk(fitted, printed.texts)
    assert found_mk < 1
    assert printed.cost_mk == pytest.approx(found_mk, rel=2e-4, abs=1e-7)


@pytest.mark.parametrize("equation", EQUATIONS)
@settings(derandomize=True, max_examples=50, deadline=None)
@given(curve=curves())
def test_one_digit_less_of_any_coefficient_costs_a_millikelvin(equation, curve):
    fitted = fit(equation, *curve)
    texts = printed_coefficients(fitted).texts
    for name, text in texts.items():
        digits = significant_digits(text)
        if digits > 1:
            shorter = texts | {name: f"{fitted.coefficients[name]:.{digits - 1}g}"}
            assert not cost_mk(fitted, shorter) < 0.999


def test_four_digits_of_steinhart_hart_cost_some_fifty_millikelvin():
    """Common practice prints four; their cost is known to lie between 0.02 and 0.06 K."""
    t_c = np.linspace(-40, 125, 34)
    coefficients = {"a": 1.129241e-3, "b": 2.341077e-4, "c": 8.775468e-8}
    r_ohm = EQUATIONS["steinhart-hart"].resistance_ohm(coefficients, t_c, 1e4)
    fitted = fit("steinhart-hart", t_c, r_ohm)
    four = {name: f"{value:.4g}" for name, value in fitted.coefficients.items()}
    assert 20 < cost_mk(fitted, four) < 60
