"""Both directions of every equation, and where they end."""

import numpy as np
import pytest

from builder.fits import EQUATIONS, fit

T_C = np.linspace(-40.0, 125.0, 34)
# A common 10 kΩ set in open textbooks (Kaw, Numerical Methods), with resistances solved from it elsewhere.
TEXTBOOK = {"a": 1.129241e-3, "b": 2.341077e-4, "c": 8.775468e-8}
TEXTBOOK_T_C = np.array([-40.0, 0.0, 19.0, 25.0, 100.0])
TEXTBOOK_R_OHM = np.array([336049.695, 32649.91892, 13072.48310, 9999.98626, 678.416487])
R_OHM = EQUATIONS["steinhart-hart"].resistance_ohm(TEXTBOOK, T_C, 1e4)


def steinhart_hart(c, about_ohm):
    """Both directions of an equation with the textbook's a and b and another c."""
    equation, coefficients = EQUATIONS["steinhart-hart"], TEXTBOOK | {"c": c}
    return (
        lambda r_ohm: equation.temperature_c(coefficients, np.asarray(r_ohm), about_ohm),
        lambda t_c: equation.resistance_ohm(coefficients, np.asarray(t_c), about_ohm),
    )


def test_steinhart_hart_gives_the_textbook_resistances_and_temperatures():
    temperature_c, resistance_ohm = steinhart_hart(TEXTBOOK["c"], 1e4)
    half_a_last_digit_ohm = np.array([5e-4, 5e-6, 5e-6, 5e-6, 5e-7])
    assert (np.abs(resistance_ohm(TEXTBOOK_T_C) - TEXTBOOK_R_OHM) <= half_a_last_digit_ohm).all()
    np.testing.assert_allclose(temperature_c(TEXTBOOK_R_OHM), TEXTBOOK_T_C, atol=1e-7)


@pytest.mark.parametrize("equation", EQUATIONS)
def test_resistance_and_temperature_undo_each_other(equation):
    fitted = fit(equation, T_C, R_OHM)
    np.testing.assert_allclose(fitted.temperature_c(fitted.resistance_ohm(T_C)), T_C, atol=1e-9)
    np.testing.assert_allclose(fitted.resistance_ohm(fitted.temperature_c(R_OHM)), R_OHM, rtol=1e-11)


@pytest.mark.parametrize("equation", EQUATIONS)
def test_answers_have_the_shape_of_the_question(equation):
    fitted = fit(equation, T_C, R_OHM)
    assert fitted.temperature_c(R_OHM.reshape(2, 17)).shape == (2, 17)
    assert fitted.resistance_ohm(T_C.reshape(17, 2)).shape == (17, 2)
    assert float(fitted.temperature_c(fitted.resistance_ohm(25.0))) == pytest.approx(25.0, abs=1e-9)
    assert fitted.resistance_ohm([]).shape == (0,)


@pytest.mark.parametrize("equation", EQUATIONS)
def test_impossible_resistances_and_temperatures_have_no_answer(equation):
    fitted = fit(equation, T_C, R_OHM)
    with np.errstate(all="raise"):
        assert np.isnan(fitted.temperature_c([0.0, -1.0, np.nan])).all()
        assert np.isnan(fitted.resistance_ohm([-500.0, np.nan])).all()


@pytest.mark.parametrize("equation", EQUATIONS)
def test_resistance_falls_wherever_there_is_one(equation):
    fitted = fit(equation, T_C, R_OHM)
    r_ohm = fitted.resistance_ohm(np.linspace(-270.0, 2000.0, 20001))
    finite = r_ohm[np.isfinite(r_ohm)]
    assert len(finite) > 10000
    assert (np.diff(finite) < 0).all()


@pytest.mark.parametrize("equation", ["b-value", "steinhart-hart", "four-term"])
def test_resistances_below_that_of_infinite_temperature_have_no_answer(equation):
    assert np.isnan(fit(equation, T_C, R_OHM).temperature_c(1e-30))


def test_search_for_a_resistance_does_not_leave_its_curve():
    # Slope of 1/T is 3·d·(ln R − 1)·(ln R − 13): starting beside one turn, Newton's first step leaps over the other.
    d = -1e-6
    coefficients = {"a": 3e-3, "b": 39 * d, "c": -21 * d, "d": d}
    equation, about_ohm, r_ohm = EQUATIONS["four-term"], np.exp(1.001), np.exp(np.linspace(1.01, 12.99, 99))
    t_c = equation.temperature_c(coefficients, r_ohm, about_ohm)
    np.testing.assert_allclose(equation.resistance_ohm(coefficients, t_c, about_ohm), r_ohm, rtol=1e-7)


def test_steinhart_hart_with_negative_c_ends_where_it_turns():
    # b + 3·c·(ln R)² = 0 at ln R = 13.
    temperature_c, resistance_ohm = steinhart_hart(-TEXTBOOK["b"] / (3 * 13**2), 1e4)
    turn_ohm = np.exp(13.0)
    coldest_c = temperature_c(turn_ohm * (1 - 1e-6))
    np.testing.assert_array_equal(
        np.isnan(temperature_c(turn_ohm * np.array([0.99, 1.01, 100.0]))), [False, True, True]
    )
    np.testing.assert_array_equal(np.isnan(resistance_ohm(coldest_c + np.array([0.01, -0.01]))), [False, True])
    np.testing.assert_allclose(temperature_c(resistance_ohm(coldest_c + 0.01)), coldest_c + 0.01, atol=1e-6)


def test_a_resistance_inside_picks_one_of_two_falling_curves():
    # 1/T rises up to ln R = 3 and again from ln R = 5 on: slope 3·d·(ln R − 3)·(ln R − 5).
    d = 1e-5
    coefficients = {"a": 2e-3, "b": 45 * d, "c": -12 * d, "d": d}
    lower = EQUATIONS["four-term"].temperature_c(coefficients, np.exp([2.9, 4.0, 5.1]), np.exp(2.0))
    upper = EQUATIONS["four-term"].temperature_c(coefficients, np.exp([2.9, 4.0, 5.1]), np.exp(6.0))
    between = EQUATIONS["four-term"].temperature_c(coefficients, np.exp([2.9, 4.0, 5.1]), np.exp(4.0))
    np.testing.assert_array_equal(np.isnan(lower), [False, True, True])
    np.testing.assert_array_equal(np.isnan(upper), [True, True, False])
    assert np.isnan(between).all()
    for about, wanted in ((2.0, 2.9), (6.0, 5.1)):
        t_c = EQUATIONS["four-term"].temperature_c(coefficients, np.exp(np.array([wanted])), np.exp(about))
        back = EQUATIONS["four-term"].resistance_ohm(coefficients, t_c, np.exp(about))
        np.testing.assert_allclose(np.log(back), [wanted], atol=1e-9)


def test_offset_exponential_ends_at_its_pole_on_either_side():
    coefficients = {"a": 0.01, "b": 5000.0, "c": 340.0}
    equation = EQUATIONS["offset-exponential"]
    r_ohm, t_c = np.array([0.009, 0.011]), np.array([-341.0, -330.0])
    np.testing.assert_array_equal(np.isnan(equation.temperature_c(coefficients, r_ohm, 1e4)), [True, False])
    np.testing.assert_array_equal(np.isnan(equation.temperature_c(coefficients, r_ohm, 1e-3)), [False, True])
    np.testing.assert_array_equal(np.isnan(equation.resistance_ohm(coefficients, t_c, 1e4)), [True, False])
    np.testing.assert_array_equal(np.isnan(equation.resistance_ohm(coefficients, t_c, 1e-3)), [False, True])
    assert np.isnan(equation.temperature_c(coefficients | {"b": -5000.0}, r_ohm, 1e4)).all()
