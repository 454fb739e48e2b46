"""Which curve and band a record stands for."""

import numpy as np
import pytest

from builder.part_curve import fixed_points, part_curve, steps_from_c, whole_steps_c

HEAD = "part: X1\nmaker: Maker\nbody: {form: bead}\n"
RATED = "rated: {resistance_ohm: 10k, tolerance_pct: 1}\n"
ONE_B = "b_values: [{between_c: [25, 85], b_k: 3435, tolerance_pct: 1}]\n"
TWO_B = "b_values: [{between_c: [25, 85], b_k: 3435}, {between_c: [50, 25], b_k: 3380, tolerance_pct: 1}]\n"
COEFFICIENTS = "steinhart_hart: {a: 1.129241e-3, b: 2.341077e-4, c: 8.775468e-8, span_c: [-30, 105]}\n"
TABLE = "r_t_table: {rows: [[0, 32000], [25, 10000], [50, 4000]]}\n"
OPERATING = "limits: {operating_c: [-55, 150]}\n"


@pytest.fixture
def made(records):
    def make(*texts, rated=RATED):
        catalog = records({"x.yaml": HEAD + rated + "".join(texts)})
        assert [str(problem) for problem in catalog.problems] == []
        return part_curve(catalog.part("X1"))

    return make


@pytest.mark.parametrize(
    ("texts", "basis"),
    [
        ((ONE_B,), "b-value"),
        ((TWO_B,), "b-values"),
        ((TWO_B, COEFFICIENTS), "steinhart-hart"),
        ((TWO_B, COEFFICIENTS, TABLE), "table"),
        ((TWO_B, COEFFICIENTS, TABLE, "curve_from: b-values\n"), "b-values"),
        ((TWO_B, TABLE, "curve_from: b-value\n"), "b-value"),
        (("b_values: [{between_c: [25, 85], b_k: 3435}, {between_c: [50, 85], b_k: 3480}]\n",), "b-value"),
    ],
)
def test_curve_is_made_from_the_first_source_or_the_one_asked_for(made, texts, basis):
    assert made(*texts).curve.basis == basis


@pytest.mark.parametrize(
    ("texts", "operating_c", "span_c"),
    [
        ((TABLE,), (0, 50), (0, 50)),
        ((TABLE, OPERATING), (-55, 150), (0, 50)),
        ((COEFFICIENTS,), (-30, 105), (-30, 105)),
        ((COEFFICIENTS, OPERATING), (-55, 150), (-30, 105)),
        ((ONE_B,), (-40, 125), (-40, 125)),
        ((ONE_B, OPERATING), (-55, 150), (-55, 150)),
        ((TWO_B, "limits: {operating_c: [-12.5, 60]}\n"), (-12.5, 60), (-12.5, 85)),
    ],
)
def test_range_and_span_of_each_source(made, texts, operating_c, span_c):
    part = made(*texts)
    assert (part.operating_c, part.curve.span_c) == (operating_c, span_c)


def test_table_in_falling_order_gives_the_same_curve(made):
    rising = made("r_t_table: {rows: [[0, 32000], [25, 10000], [50, 4000]]}\n").curve
    falling = made("r_t_table: {rows: [[50, 4000], [25, 10000], [0, 32000]]}\n").curve
    t_c = np.linspace(-20, 70, 10)
    assert falling.resistance_ohm(t_c).tolist() == rising.resistance_ohm(t_c).tolist()
    assert falling.span_c == (0, 50)


def test_table_of_ratios_is_times_the_rated_resistance(made):
    curve = made("r_t_table: {columns: [t_c, ratio], rows: [[0, 3.2], [25, 1], [50, 0.4]]}\n").curve
    assert curve.resistance_ohm([0, 25, 50]) == pytest.approx([32000, 10000, 4000], rel=1e-12)


def test_columns_of_a_table_are_the_band_and_not_where_the_curve_is_from_something_else(made):
    table = "r_t_table: {columns: [t_c, r_min_ohm, r_ohm, r_max_ohm], rows: [[0, 31000, 32000, 33500], [50, 3900, 4000, 4150]]}\n"
    low_ohm, high_ohm = made(table, ONE_B).band.edges_ohm([0, 50])
    assert [*low_ohm, *high_ohm] == pytest.approx([31000, 3900, 33500, 4150], rel=1e-12)
    assert made(table, ONE_B, "curve_from: b-value\n").band.edges_ohm(25)[0] == pytest.approx(9900, rel=1e-12)


def test_two_b_values_fix_three_points_in_whatever_order_and_direction(made):
    part = made(TWO_B)
    # R25·exp(B·(1/T − 1/298.15)), the definition in IEC 60539-1
    points_ohm = [10000, 10000 * np.exp(-3380 / 3853.8869), 10000 * np.exp(-3435 / 1779.7070)]
    assert part.curve.fixed_c == (25, 50, 85)
    assert part.curve.resistance_ohm([25, 50, 85]) == pytest.approx(points_ohm, rel=1e-7)


def test_fixed_points_are_those_of_the_pairs_at_the_rated_temperature(records):
    text = "b_values: [{between_c: [0, 50], b_k: 3400}, {between_c: [0, 100], b_k: 3450}, {between_c: [25, 85], b_k: 3435}]\n"
    part = records({"x.yaml": HEAD + "rated: {resistance_ohm: 10k, at_c: 0}\n" + text}).part("X1").part
    t_c, r_ohm = fixed_points(part)
    assert t_c.tolist() == [0, 50, 100]
    assert r_ohm == pytest.approx([10000, 10000 * np.exp(-3400 / 1765.3684), 10000 * np.exp(-3450 / 1019.2592)], rel=1e-6)  # fmt: skip


def test_equal_b_values_are_the_plain_law_all_over_the_operating_range(made):
    curve = made("b_values: [{between_c: [25, 50], b_k: 3950}, {between_c: [25, 85], b_k: 3950}]\n", OPERATING).curve
    t_c = np.linspace(-55, 150, 42)
    assert curve.resistance_ohm(t_c) == pytest.approx(10000 * np.exp(3950 * (1 / (t_c + 273.15) - 1 / 298.15)), rel=1e-9)  # fmt: skip
    assert not curve.extrapolated(t_c).any()


def test_b_values_in_the_wrong_order_are_trusted_between_their_points_only(made):
    curve = made("b_values: [{between_c: [25, 50], b_k: 3435}, {between_c: [25, 85], b_k: 3380}]\n", OPERATING).curve
    t_c = np.linspace(-55, 150, 42)
    assert curve.span_c == (25, 85)
    assert (np.diff(curve.resistance_ohm(t_c)) < 0).all()
    assert curve.temperature_c(curve.resistance_ohm(t_c)) == pytest.approx(t_c, abs=1e-6)


def test_low_resistances_bend_as_high_ones_do(made):
    t_c = np.linspace(-40, 125, 12)
    high = made(TWO_B).curve.resistance_ohm(t_c)
    low = made(TWO_B, rated="rated: {resistance_ohm: 5, tolerance_pct: 1}\n").curve.resistance_ohm(t_c)
    assert low / 5 == pytest.approx(high / 10000, rel=1e-10)


def test_pair_away_from_the_rated_temperature_fixes_that_temperature_only(made):
    away = made("b_values: [{between_c: [50, 85], b_k: 3500}]\n").curve
    at_rated = made("b_values: [{between_c: [85, 25], b_k: 3500}]\n").curve
    assert (away.fixed_c, at_rated.fixed_c) == ((25,), (25, 85))


def test_single_b_value_does_not_bend_back_in_a_cold_operating_range(made):
    cold = "limits: {operating_c: [-250, 60]}\n"
    curve = made("b_values: [{between_c: [25, 85], b_k: 2000}]\n", cold).curve
    t_c = np.linspace(-240, 60, 61)
    assert (np.diff(curve.resistance_ohm(t_c)) < 0).all()
    assert curve.temperature_c(curve.resistance_ohm(t_c)) == pytest.approx(t_c, abs=1e-6)
    assert curve.extrapolated([-240, 0]).tolist() == [True, False]


@pytest.mark.parametrize("rated_c", [0, 80, 120])
def test_rated_temperature_other_than_25_is_where_the_rated_resistance_stands(made, rated_c):
    part = made(ONE_B, rated=f"rated: {{resistance_ohm: 820R, at_c: {rated_c}, tolerance_pct: 2}}\n")
    sample = part.sample(rated_c)
    assert [float(v) for v in (sample.r_ohm,)] == pytest.approx([820], rel=1e-12)
    assert part.curve.b_value_k(25, 85) == pytest.approx(3435, rel=1e-9)


def test_coefficients_without_bend_are_not_extrapolated(made):
    part = made("steinhart_hart: {a: 1.02e-3, b: 2.5e-4, c: 0, span_c: [0, 70]}\n", OPERATING)
    assert np.isnan(part.sample([-10.0, 0.0, 70.0, 80.0]).r_ohm).tolist() == [True, False, False, True]


@pytest.mark.parametrize(
    ("span_c", "step_k", "expected_c"),
    [
        ((-12.3, 11.0), 5, [-12.3, -10, -5, 0, 5, 10, 11]),
        ((-40, -40), 5, [-40]),
        ((-0.2, 0.4), 5, [-0.2, 0, 0.4]),
        ((0, 0.3), 0.1, [0, 0.1, 0.2, 0.3]),
        ((1, 4), 50, [1, 4]),
    ],
)
def test_whole_steps_and_both_ends(span_c, step_k, expected_c):
    assert whole_steps_c(span_c, step_k).tolist() == expected_c
    assert "-0.0" not in str(whole_steps_c(span_c, step_k).tolist())


@pytest.mark.parametrize(
    ("span_c", "step_k", "expected_c"),
    [
        ((-12.3, 11.0), 5, [-12.3, -7.3, -2.3, 2.7, 7.7, 11]),
        ((-40, -40), 5, [-40]),
        ((1, 1.3), 0.1, [1, 1.1, 1.2, 1.3]),
        ((-10, 0), 5, [-10, -5, 0]),
        ((1, 4), 50, [1, 4]),
    ],
)
def test_steps_from_the_first_temperature_and_the_last(span_c, step_k, expected_c):
    assert steps_from_c(span_c, step_k).tolist() == expected_c


def test_rated_temperature_is_that_of_a_pair_within_a_hundredth_of_a_kelvin(made):
    near = made(TWO_B, rated="rated: {resistance_ohm: 10k, at_c: 25.0001}\n")
    assert near.curve.basis == "b-values"
    assert near.curve.fixed_c == (25.0001, 50, 85)
    single = made(ONE_B, rated="rated: {resistance_ohm: 10k, at_c: 25.0001}\n")
    assert single.curve.fixed_c == (25.0001, 85)
    assert made(ONE_B, rated="rated: {resistance_ohm: 10k, at_c: 25.02}\n").curve.fixed_c == (25.02,)
