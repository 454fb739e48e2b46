"""What a fit reports, and which points it refuses."""

import numpy as np
import pytest

from builder.fits import EQUATIONS, fit

T_C = np.array([-40.0, -20.0, 0.0, 25.0, 50.0, 85.0, 125.0])
R_OHM = np.array([336000.0, 97000.0, 32600.0, 10000.0, 3600.0, 1070.0, 338.0])


@pytest.mark.parametrize("equation", EQUATIONS)
def test_worst_error_is_the_largest_residual_and_says_where(equation):
    fitted = fit(equation, T_C, R_OHM)
    largest = np.abs(fitted.residuals_k).max()
    assert fitted.worst_k == largest
    assert abs(fitted.residuals_k[list(T_C).index(fitted.at_c)]) == largest
    assert (fitted.equation, fitted.span_c, fitted.span_ohm) == (equation, (-40.0, 125.0), (338.0, 336000.0))


@pytest.mark.parametrize("equation", EQUATIONS)
def test_residuals_are_fitted_minus_given_temperatures(equation):
    fitted = fit(equation, T_C, R_OHM)
    np.testing.assert_array_equal(fitted.residuals_k, fitted.temperature_c(R_OHM) - T_C)


@pytest.mark.parametrize("equation", EQUATIONS)
def test_order_of_the_points_does_not_matter(equation):
    there, back = fit(equation, T_C, R_OHM), fit(equation, T_C[::-1], R_OHM[::-1])
    assert back.coefficients == pytest.approx(there.coefficients, rel=1e-9)


def test_points_outside_the_range_are_left_out():
    inner = fit("steinhart-hart", T_C, R_OHM, between_c=(-20, 85))
    assert inner.span_c == (-20.0, 85.0)
    assert inner.coefficients == fit("steinhart-hart", T_C[1:-1], R_OHM[1:-1]).coefficients


@pytest.mark.parametrize("equation", EQUATIONS)
def test_points_made_by_an_equation_give_its_coefficients_back(equation):
    first = fit(equation, T_C, R_OHM)
    again = fit(equation, first.temperature_c(R_OHM), R_OHM)
    assert again.coefficients == pytest.approx(first.coefficients, rel=1e-9)
    assert again.worst_k < 1e-9


@pytest.mark.parametrize("width_k", [0.1, 1.0, 10.0, 300.0])
@pytest.mark.parametrize("equation", ["steinhart-hart", "four-term"])
def test_a_curve_of_its_own_kind_is_met_on_narrow_and_wide_ranges(equation, width_k):
    t_c = np.linspace(25 - width_k / 2, 25 + width_k / 2, 31)
    source = fit("steinhart-hart", T_C, R_OHM)
    assert fit(equation, t_c, source.resistance_ohm(t_c)).worst_k < 1e-9


@pytest.mark.parametrize(
    ("arguments", "options", "message"),
    [
        (("cubic", T_C, R_OHM), {},
         "cubic is no equation here; there are b-value, steinhart-hart, four-term, offset-exponential"),
        (("b-value", T_C, R_OHM), {"minimise": "ohm"}, "b-value is fitted in kelvin, not in ohm"),
        (("offset-exponential", T_C, R_OHM), {"minimise": "volt"},
         "offset-exponential is fitted in kelvin or ohm, not in volt"),
        (("b-value", T_C, R_OHM[1:]), {}, "7 temperatures and 6 resistances do not make points"),
        (("b-value", [0, 25, 50], [3, 0, 1]), {}, "0 Ω at 25 °C is no point of a thermistor"),
        (("b-value", [0, 25, 50], [3, -2, 1]), {}, "−2 Ω at 25 °C is no point of a thermistor"),
        (("b-value", [0, 25, 50], [3, 2, np.nan]), {}, "– Ω at 50 °C is no point of a thermistor"),
        (("b-value", [-300, 25, 50], [3, 2, 1]), {}, "3 Ω at −300 °C is no point of a thermistor"),
        (("b-value", T_C, R_OHM), {"between_c": (130, 150)}, "there are no points in 130 to 150 °C"),
        (("b-value", [], []), {}, "b-value needs 2 different points or more, not 0"),
        (("steinhart-hart", T_C, R_OHM), {"between_c": (0, 30)},
         "steinhart-hart needs 3 different points or more, not 2"),
        (("four-term", [0, 25, 50, 50], [3, 2, 1, 1]), {}, "four-term needs 4 different points or more, not 3"),
        (("b-value", [0, 25, 50], [1, 2, 3]), {},
         "b-value: the fitted resistance does not fall all the way over 0 to 50 °C"),
        (("four-term", [0, 25, 50, 75], [90, 20, 21, 5]), {},
         "four-term: the fitted resistance does not fall all the way over 0 to 75 °C"),
        (("b-value", [0, 25, 50], [3, np.inf, 1]), {}, "inf Ω at 25 °C is no point of a thermistor"),
        (("b-value", [0, 25, np.inf], [3, 2, 1]), {}, "1 Ω at inf °C is no point of a thermistor"),
        (("b-value", [0, 10, 20], [1, 2, 1]), {}, "b-value: these points lead to no finite coefficients"),
        # R = 1 Ω·exp(−t/10 K): t is a straight line of ln R, which the hyperbola only nears.
        (("offset-exponential", [0, 10, 20, 30], np.exp([0, -1, -2, -3])), {},
         "offset-exponential: these points lead to no finite coefficients"),
    ],
)  # fmt: skip
def test_impossible_requests_say_what_is_wrong(arguments, options, message):
    with pytest.raises(ValueError) as caught:
        fit(*arguments, **options)
    assert str(caught.value) == message
