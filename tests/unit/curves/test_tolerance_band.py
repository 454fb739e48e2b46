"""Which tolerance applies where."""

import numpy as np
import pytest

from builder.curves import AccuracyRange, Band, BentExponential, BTolerance, Curve, monotone_cubic

LN_10K = float(np.log(10e3))
PLAIN = Curve("b-value", BentExponential(LN_10K, 25.0, (25.0, 85.0), 3950.0, 0.0), (-40.0, 125.0))
TYPICAL = Curve("b-value", BentExponential(LN_10K, 25.0, (25.0, 85.0), 3950.0, -1.7e5), (-40.0, 125.0))
TWO_B = (BTolerance(50.0, 3900.0, 1.0), BTolerance(85.0, 3950.0, 3.0))


def _half_width_k(band, t_c):
    """b·B of the band at a temperature: what exp's argument holds beside 1/T − 1/T1. [K]"""
    low_ohm, high_ohm = band.edges_ohm(t_c)
    return np.log(high_ohm / low_ohm) / 2 / np.abs(1 / (np.asarray(t_c) + 273.15) - 1 / 298.15)


def test_b_tolerance_is_that_of_the_pair_nearest_to_the_temperature():
    t_c = [-40.0, 0.0, 50.0, 67.0, 68.0, 125.0]
    assert _half_width_k(Band(PLAIN, 25.0, 0.0, TWO_B), t_c) == pytest.approx([39, 39, 39, 39, 118.5, 118.5], rel=1e-9)


def test_order_of_the_b_values_does_not_matter():
    t_c = np.linspace(-40, 125, 12)
    there, back = Band(PLAIN, 25.0, 1.0, TWO_B), Band(PLAIN, 25.0, 1.0, TWO_B[::-1])
    assert there.edges_ohm(t_c)[1] == pytest.approx(back.edges_ohm(t_c)[1], rel=1e-15)


def test_rated_resistance_alone_counts_at_the_rated_temperature():
    for rated_c in (0.0, 25.0, 100.0):
        low_ohm, high_ohm = Band(PLAIN, rated_c, 2.0, TWO_B).edges_ohm(rated_c)
        nominal_ohm = PLAIN.resistance_ohm(rated_c)
        assert [low_ohm, high_ohm] == pytest.approx([0.98 * nominal_ohm, 1.02 * nominal_ohm], rel=1e-12)


def test_accuracy_counts_inside_its_range_the_other_tolerances_outside():
    band = Band(PLAIN, 25.0, 1.0, TWO_B, (AccuracyRange((0.0, 70.0), 0.2),))
    without = Band(PLAIN, 25.0, 1.0, TWO_B)
    low_k, high_k = band.reads_k([0.0, 35.0, 70.0])
    assert low_k == pytest.approx([-0.2] * 3, abs=1e-9)
    assert high_k == pytest.approx([0.2] * 3, abs=1e-9)
    assert band.reads_k([-0.1, 70.1])[1].tolist() == without.reads_k([-0.1, 70.1])[1].tolist()


@pytest.mark.parametrize("order", [1, -1])
def test_the_tightest_of_overlapping_accuracies_counts(order):
    stated = (AccuracyRange((0.0, 70.0), 0.2), AccuracyRange((-40.0, 125.0), 0.5), AccuracyRange((20.0, 45.0), 0.1))
    high_k = Band(PLAIN, 25.0, None, (), stated[::order]).reads_k([-40.0, 0.0, 10.0, 30.0, 70.0, 90.0])[1]
    assert high_k == pytest.approx([0.5, 0.2, 0.2, 0.1, 0.2, 0.5], abs=1e-9)


def test_accuracy_reaches_over_the_end_of_a_curve_that_is_not_extrapolated():
    ends_here = Curve("steinhart-hart", PLAIN.law, (0.0, 70.0), extends=False)
    band = Band(ends_here, 25.0, 1.0, (), (AccuracyRange((-10.0, 80.0), 0.3),))
    low_k, high_k = band.reads_k([-10.0, 0.0, 70.0, 80.0])
    assert np.isnan(low_k).tolist() == np.isnan(high_k).tolist() == [True, False, False, True]
    assert high_k[1:3] == pytest.approx([0.3, 0.3], abs=1e-9)


def _table(factor):
    t_c = np.array([40.0, 60.0, 80.0])
    r_ohm = PLAIN.resistance_ohm(t_c) * factor
    return Curve("table", monotone_cubic(1 / (t_c[::-1] + 273.15), np.log(r_ohm[::-1])), (40.0, 80.0))


def test_columns_come_before_accuracy_and_tolerances():
    columns = _table(np.array([0.97, 0.96, 0.95])), _table(np.array([1.03, 1.04, 1.05]))
    nominal = _table(1.0)
    band = Band(nominal, 25.0, 1.0, TWO_B, (AccuracyRange((0.0, 70.0), 0.2),), columns)
    low_ohm, high_ohm = band.edges_ohm([40.0, 60.0, 80.0])
    assert low_ohm / nominal.resistance_ohm([40.0, 60.0, 80.0]) == pytest.approx([0.97, 0.96, 0.95], rel=1e-12)
    assert high_ohm / nominal.resistance_ohm([40.0, 60.0, 80.0]) == pytest.approx([1.03, 1.04, 1.05], rel=1e-12)


def test_columns_that_close_in_stay_as_wide_as_at_the_tables_end():
    nominal = _table(1.0)
    band = Band(
        nominal, 25.0, None, (), (), (_table(np.array([0.99, 0.97, 0.95])), _table(np.array([1.01, 1.03, 1.05])))
    )
    low_ohm, high_ohm = band.edges_ohm([10.0, 120.0])
    ratios = np.array([low_ohm, high_ohm]) / nominal.resistance_ohm([10.0, 120.0])
    assert ratios[:, 0] == pytest.approx([0.99, 1.01], rel=1e-9)  # their own slopes would have crossed at 30 °C
    assert ratios[0, 1] < 0.93 and ratios[1, 1] > 1.07


@pytest.mark.parametrize(
    ("band", "lacking"),
    [
        (Band(PLAIN, 25.0, 1.0, TWO_B), [False, False, False]),
        (Band(PLAIN, 25.0, None, TWO_B), [True, True, True]),
        (Band(PLAIN, 25.0, 1.0), [True, True, True]),
        (Band(PLAIN, 25.0, 1.0, (), (AccuracyRange((0.0, 70.0), 0.2),)), [True, False, True]),
        (Band(PLAIN, 25.0, None, (), (), (PLAIN, PLAIN)), [False, False, False]),
    ],
)
def test_band_is_incomplete_where_a_tolerance_it_needs_is_not_stated(band, lacking):
    assert band.incomplete([-20.0, 35.0, 90.0]).tolist() == lacking


def test_shape_allowance_is_nothing_at_the_pair_and_for_the_plain_law():
    for curve in (PLAIN, TYPICAL):
        low_ohm, high_ohm = Band(curve, 25.0, 0.0).edges_ohm([25.0, 85.0])
        assert low_ohm == pytest.approx(high_ohm, rel=1e-12)
    low_ohm, high_ohm = Band(PLAIN, 25.0, 0.0).edges_ohm([-40.0, 125.0])
    assert low_ohm == pytest.approx(high_ohm, rel=1e-15)


# c from −2.75e5 to −1.3e5 K² colder than the pair and −2.1e5 to −0.3e5 K² hotter (fourteen public tables), typical −1.7e5.
@pytest.mark.parametrize(("t_c", "bends_k2"), [(-40.0, (-2.75e5, -1.3e5)), (125.0, (-2.1e5, -0.3e5)), (50.0, (-0.3e5, -2.75e5))])  # fmt: skip
def test_shape_allowance_reaches_to_the_bends_of_each_side(t_c, bends_k2):
    d, d2 = 1 / (t_c + 273.15) - 1 / 298.15, 1 / 358.15 - 1 / 298.15
    edges_ohm = [10e3 * np.exp(3950 * d + c * (d**2 - d * d2)) for c in bends_k2]
    assert list(Band(TYPICAL, 25.0, 0.0).edges_ohm(t_c)) == pytest.approx(edges_ohm, rel=1e-12)


def test_tolerance_in_kelvin_is_no_division_by_alpha():
    low_k, _ = Band(PLAIN, 25.0, 10.0).reads_k(25.0)
    exact_k = 1 / (1 / 298.15 + np.log(1.1) / 3950) - 298.15
    assert low_k == pytest.approx(exact_k, abs=1e-9)
    assert abs(low_k + 10 / 4.4435) > 0.1  # ±10 % over 4.44 %/K


def test_a_column_without_a_number_beyond_a_steep_end_leaves_the_band_as_wide_as_there():
    x = 1 / (np.array([60.0, 50.0, 25.0]) + 273.15)
    nominal, highest = _through(x, [2400.0, 3600.0, 10e3]), _through(x, [2450.0, 3700.0, 10.1e3])
    steep = _through(1 / (np.array([60.0, 59.9, 25.0]) + 273.15), [1.0, 2390.0, 9.9e3])
    low_ohm, _ = Band(nominal, 25.0, 1.0, columns=(steep, highest)).edges_ohm(200.0)
    assert low_ohm == pytest.approx(nominal.resistance_ohm(200.0) / 2400, rel=1e-12)


def _through(x, ohms):
    return Curve("table", monotone_cubic(x, np.log(ohms)), (25.0, 60.0))
