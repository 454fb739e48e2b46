"""A curve where there is no number, and how it says so."""

import numpy as np
import pytest

from builder.curves import BentExponential, Curve, SteinhartHartLaw, b_value_k, monotone_cubic

LN_10K = float(np.log(10e3))
PLAIN = Curve("b-value", BentExponential(LN_10K, 25.0, (25.0, 85.0), 3950.0, 0.0), (-40.0, 125.0))
TYPICAL = Curve("b-value", BentExponential(LN_10K, 25.0, (25.0, 85.0), 3950.0, -1.7e5), (-40.0, 125.0))
BENDS_BACK = Curve("steinhart-hart", SteinhartHartLaw(8.0e-4, 2.8e-4, -2e-8), (0.0, 70.0), extends=False)


@pytest.mark.parametrize("curve", [PLAIN, TYPICAL, BENDS_BACK])
@pytest.mark.parametrize("r_ohm", [0.0, -5.0, np.nan, np.inf, -np.inf])
def test_what_is_no_resistance_has_no_temperature(curve, r_ohm):
    assert np.isnan(curve.temperature_c(r_ohm))
    assert curve.extrapolated(curve.temperature_c(r_ohm))


@pytest.mark.parametrize("curve", [PLAIN, TYPICAL, BENDS_BACK])
@pytest.mark.parametrize("t_c", [-273.15, -300.0, np.nan])
def test_what_is_no_temperature_has_no_resistance(curve, t_c):
    assert np.isnan(curve.resistance_ohm(t_c))
    assert np.isnan(curve.alpha_pct_per_k(t_c))


def test_values_beyond_a_float_are_no_numbers_and_nothing_is_said_about_them():
    with np.errstate(all="raise"):
        assert np.isnan(PLAIN.resistance_ohm([-273.0, -270.0])).all()
        assert np.isfinite(PLAIN.resistance_ohm(-260.0))


def test_a_steep_end_leads_to_no_resistance_rather_than_to_zero_or_infinity():
    x = 1 / (np.array([25.01, 25.0, 24.0]) + 273.15)
    steep = Curve("table", monotone_cubic(x, np.log([100.0, 10e3, 10.4e3])), (24.0, 25.01))
    with np.errstate(all="raise"):
        ohms = steep.resistance_ohm([-273.0, 25.0, 25.3, 85.0, 300.0])
        assert np.isnan(ohms).tolist() == [True, False, False, True, True]
        assert np.isnan(steep.b_value_k(25, 85))


def test_b_value_is_a_number_where_the_ratio_of_its_resistances_is_beyond_a_float():
    # ln R falls by 20 for each kelvin: exp(509) Ω at 25 °C, exp(−680) Ω at 85 °C.
    steep = Curve("b-value", BentExponential(LN_10K, 50.0, (50.0, 85.0), 2e6, 0.0), (25.0, 85.0))
    with np.errstate(all="raise"):
        assert steep.b_value_k(25, 85) == pytest.approx(2e6, rel=1e-12)


def test_coefficient_is_a_number_only_where_the_resistance_is():
    t_c = np.array([-273.14, -273.0, -200.0, 25.0])
    assert np.isnan(PLAIN.alpha_pct_per_k(t_c)).tolist() == np.isnan(PLAIN.resistance_ohm(t_c)).tolist()
    assert np.isnan(PLAIN.alpha_pct_per_k(t_c)).tolist() == [True, True, False, False]


@pytest.mark.parametrize("law", [(1e300, 1e300, 1e300), (1e-3, 1e-320, 1e300), (1e-3, 2e-4, 1e308), (-1e308, 1e308, -1e308), (1e-3, -2e-4, 1e-7)])  # fmt: skip
def test_absurd_coefficients_are_passed_without_a_word(law):
    curve = Curve("steinhart-hart", SteinhartHartLaw(*law), (-40.0, 125.0))
    with np.errstate(all="raise"):
        ohms = curve.resistance_ohm([-60.0, 25.0, 150.0])
        curve.alpha_pct_per_k([-60.0, 25.0, 150.0])
        curve.temperature_c([1.0, 1e4, 1e9])
    assert not np.isinf(ohms).any()


def test_resistance_below_every_temperature_is_extrapolated_and_has_no_number():
    # R·exp(−B/T1) is the plain law's limit at infinite temperature.
    limit_ohm = 10e3 * np.exp(-3950 / 298.15)
    assert np.isnan(PLAIN.temperature_c(limit_ohm * 0.999))
    assert PLAIN.temperature_c(limit_ohm * 1.5) > 1000
    assert PLAIN.extrapolated(PLAIN.temperature_c([limit_ohm / 2, limit_ohm * 1.5])).all()


def test_one_bad_value_leaves_the_others_alone():
    t_c = PLAIN.temperature_c([10e3, -1.0, 1e-9, 1e5])
    assert np.isnan(t_c).tolist() == [False, True, True, False]
    assert t_c[0] == pytest.approx(25, abs=1e-9)


def test_curve_that_bends_back_has_no_number_outside_its_span_and_all_inside():
    t_c = np.array([-1.0, 0.0, 35.0, 70.0, 71.0])
    for values in (BENDS_BACK.resistance_ohm(t_c), BENDS_BACK.alpha_pct_per_k(t_c)):
        assert np.isnan(values).tolist() == [True, False, False, False, True]
    ends_ohm = BENDS_BACK.resistance_ohm([0.0, 70.0])
    assert np.isnan(BENDS_BACK.temperature_c([ends_ohm[0] * 1.01, ends_ohm[1] * 0.99])).all()
    assert BENDS_BACK.temperature_c(ends_ohm) == pytest.approx([0, 70], abs=1e-9)
    assert np.isnan(BENDS_BACK.b_value_k(25, 85))


def test_ends_of_the_span_are_not_extrapolated():
    assert PLAIN.extrapolated([-40.001, -40.0, 125.0, 125.001]).tolist() == [True, False, False, True]


def test_b_value_of_a_plain_law_is_its_own_between_any_two_temperatures():
    assert [PLAIN.b_value_k(*pair) for pair in [(25, 85), (85, 25), (-40, 0), (100, 300)]] == pytest.approx([3950.0] * 4, rel=1e-12)  # fmt: skip


def test_b_value_takes_arrays():
    assert b_value_k(np.array([np.e, np.e**2]), 25.0, 1.0, 85.0) == pytest.approx([1779.7070, 3559.4140], abs=1e-4)


def test_bend_stops_before_it_turns_the_curve_back():
    law = BentExponential(LN_10K, 25.0, (25.0, 85.0), 2000.0, -1.7e5)
    coldest_x = 1 / (law.coldest_c + 273.15)
    slopes_k = law.slope_k(np.array([1 / 298.15, coldest_x]))
    assert slopes_k[1] == pytest.approx(slopes_k[0] / 2, rel=1e-12)
    assert BentExponential(LN_10K, 25.0, (25.0, 85.0), 2000.0, 0.0).coldest_c == -273.15
