"""Laws that every part's curve and band keep, whatever its record holds."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.testing import assert_array_equal

from builder.curves import AccuracyRange
from builder.part_curve import PartCurve, part_curve
from builder.records import Part, PartRecord, Source
from builder.records.table import TableData

settings.register_profile("curves", derandomize=True, deadline=None, max_examples=100, database=None)
CURVES = settings.get_profile("curves")
T0_K = 273.15
# °C, from a span's cold end to its hot end and 60 K further on both sides
PLACES = np.linspace(-1, 2, 61)


def _made(table: TableData | None = None, **fields) -> PartCurve:
    fields = {"part": "X1", "maker": "Maker", "body": {"form": "bead"}, **fields}
    return part_curve(PartRecord(Part.model_validate(fields), Source("X1.yaml", "X1.yaml", {}), table))


def _ceramic_ohm(t_c, r25_ohm, b_k, bend_k2):
    d = 1 / (np.asarray(t_c) + T0_K) - 1 / 298.15
    return r25_ohm * np.exp(b_k * d + bend_k2 * d**2)


@st.composite
def operating(draw):
    return [draw(st.floats(-80, 0)), draw(st.floats(60, 250))]


@st.composite
def tolerances(draw):
    return {"tolerance_pct": draw(st.one_of(st.none(), st.floats(0.05, 20)))}


# Ceramics of usual B and bend; tables print some digits of them, at even or uneven steps.
ceramics = st.tuples(st.floats(1, 2e6), st.floats(2500, 5000), st.floats(-2.5e5, -0.5e5))


@st.composite
def tables(draw):
    r25_ohm, b_k, bend_k2 = draw(ceramics)
    steps_k = draw(st.lists(st.floats(1, 20), min_size=1, max_size=25))
    t_c = np.round(draw(st.floats(-55, 60)) + np.cumsum([0, *steps_k]), 2)
    digits = draw(st.integers(4, 7))
    r_ohm = np.array([float(f"{r:.{digits}g}") for r in _ceramic_ohm(t_c, r25_ohm, b_k, bend_k2)])
    spread = draw(st.floats(0.01, 0.1)) + 0.001 * np.abs(t_c - 25) * draw(st.floats(0, 1))
    columns = (r_ohm * (1 - spread), r_ohm * (1 + spread)) if draw(st.booleans()) else (None, None)
    for column in (r_ohm, *columns):
        if column is not None:
            column.flags.writeable = False
    table = TableData("X1.yaml", tuple(range(len(t_c))), t_c, r_ohm, *columns)
    rated = {"resistance_ohm": max(r25_ohm, 0.01), **draw(tolerances())}
    accuracy = [{"between_c": [0.0, 70.0], "within_k": draw(st.floats(0.05, 2))}] if draw(st.booleans()) else []
    rows = {"rows": [[0, 1], [1, 0.5]]}
    return _made(table, rated=rated, accuracy=accuracy, r_t_table=rows, limits={"operating_c": draw(operating())})


@st.composite
def steinhart_harts(draw):
    x1_per_k, ln_r1 = 1 / 298.15, draw(st.floats(1, 15))
    b, c = draw(st.floats(1.5e-4, 3.5e-4)), draw(st.floats(3e-8, 4e-7))
    a = x1_per_k - b * ln_r1 - c * ln_r1**3
    stated = {"a": a, "b": b, "c": c, "span_c": draw(operating())}
    rated = {"resistance_ohm": float(np.exp(ln_r1)), **draw(tolerances())}
    return _made(rated=rated, steinhart_hart=stated)


@st.composite
def b_values(draw):
    """Two or three B-values of a real ceramic, at a rated temperature of any kind, each pair either way round."""
    r25_ohm, b_k, bend_k2 = draw(ceramics)
    others_c = draw(st.permutations([-20.0, 0.0, 25.0, 50.0, 85.0, 100.0]))
    rated_c, *others_c = others_c[: draw(st.integers(3, 4))]
    at = _ceramic_ohm([rated_c, *others_c], r25_ohm, b_k, bend_k2)
    stated = []
    for other_c, r_ohm in zip(others_c, at[1:], strict=True):
        b = float(np.log(at[0] / r_ohm) / (1 / (rated_c + T0_K) - 1 / (other_c + T0_K)))
        pair = draw(st.permutations([rated_c, other_c]))
        stated.append({"between_c": pair, "b_k": b, **draw(tolerances())})
    rated = {"resistance_ohm": max(float(at[0]), 0.01), "at_c": rated_c, **draw(tolerances())}
    return _made(rated=rated, b_values=stated, limits={"operating_c": draw(operating())})


@st.composite
def single_b_values(draw):
    rated_c = draw(st.sampled_from([0.0, 25.0, 50.0, 80.0, 100.0, 120.0]))
    pair = draw(st.sampled_from([[25.0, 85.0], [85.0, 25.0], [0.0, 50.0], [25.0, 100.0], [50.0, 120.0]]))
    stated = {"between_c": pair, "b_k": draw(st.floats(2000, 5000)), **draw(tolerances())}
    rated = {"resistance_ohm": draw(st.floats(1, 1e6)), "at_c": rated_c, **draw(tolerances())}
    shape = draw(st.sampled_from(["typical", "plain"]))
    return _made(rated=rated, b_values=[stated], shape=shape, limits={"operating_c": draw(operating())})


parts = st.one_of(tables(), steinhart_harts(), b_values(), single_b_values())


def _everywhere_c(made: PartCurve):
    low_c, high_c = made.curve.span_c
    return np.where(PLACES < 0, low_c + 60 * PLACES, np.where(PLACES > 1, high_c + 60 * (PLACES - 1), low_c + (high_c - low_c) * PLACES))  # fmt: skip


@given(parts)
@settings(CURVES)
def test_resistance_falls_strictly_inside_the_span_and_beyond(made):
    r_ohm = made.curve.resistance_ohm(_everywhere_c(made))
    assert (r_ohm > 0).all()
    assert (np.diff(r_ohm) < 0).all()


@given(parts)
@settings(CURVES)
def test_temperature_of_a_resistance_is_within_a_microkelvin_everywhere(made):
    t_c = _everywhere_c(made)
    assert np.abs(made.curve.temperature_c(made.curve.resistance_ohm(t_c)) - t_c).max() < 1e-6


@given(parts)
@settings(CURVES)
def test_resistance_of_a_temperature_comes_back(made):
    r_ohm = np.geomspace(*made.curve.resistance_ohm(made.curve.span_c), 50)
    assert made.curve.resistance_ohm(made.curve.temperature_c(r_ohm)) == pytest.approx(r_ohm, rel=1e-9)


@given(parts)
@settings(CURVES)
def test_band_holds_the_nominal_in_ohm_and_in_kelvin(made):
    sample = made.sample(_everywhere_c(made))
    assert (sample.r_min_ohm <= sample.r_ohm * (1 + 1e-12)).all()
    assert (sample.r_max_ohm >= sample.r_ohm * (1 - 1e-12)).all()
    assert (sample.reads_min_k <= 1e-9).all()
    assert (sample.reads_max_k >= -1e-9).all()


@given(parts)
@settings(CURVES)
def test_reading_an_edge_of_the_band_is_the_error_in_kelvin(made):
    t_c = _everywhere_c(made)
    (low_ohm, high_ohm), (low_k, high_k) = made.band.edges_ohm(t_c), made.band.reads_k(t_c)
    assert made.curve.resistance_ohm(t_c + high_k) == pytest.approx(low_ohm, rel=1e-9)
    assert made.curve.resistance_ohm(t_c + low_k) == pytest.approx(high_ohm, rel=1e-9)


@given(parts)
@settings(CURVES)
def test_alpha_is_the_numerical_derivative(made):
    # Between the span's ends: at them, and at a table's rows, the slope may turn.
    low_c, high_c = made.curve.span_c
    t_c, step_k = low_c + (high_c - low_c) * np.array([0.013, 0.21, 0.37, 0.611, 0.79, 0.987]), 1e-4
    left, right = (np.log(made.curve.resistance_ohm(t_c + step)) for step in (-step_k, step_k))
    assert made.curve.alpha_pct_per_k(t_c) == pytest.approx(100 * (right - left) / (2 * step_k), rel=1e-4)


@given(st.one_of(single_b_values(), b_values()))
@settings(CURVES)
def test_extrapolation_keeps_the_local_b_value_of_the_spans_end(made):
    for end_c, beyond_c in zip(made.curve.span_c, (-1, 1), strict=True):
        t_k = end_c + T0_K
        local_b_k = -float(made.curve.alpha_pct_per_k(end_c)) / 100 * t_k**2
        assert made.curve.b_value_k(end_c, end_c + 40 * beyond_c) == pytest.approx(local_b_k, rel=1e-9)


@given(parts)
@settings(CURVES)
def test_shapes_of_scalars_rows_and_grids_are_kept(made):
    grid_c = _everywhere_c(made)[:60].reshape(5, 12)
    grid_ohm = made.curve.resistance_ohm(grid_c)
    assert grid_ohm.shape == (5, 12)
    assert made.curve.temperature_c(grid_ohm).shape == (5, 12)
    one = made.sample(float(grid_c[2, 3]))
    assert {np.shape(getattr(one, name)) for name in one.__dataclass_fields__} == {()}
    assert np.shape(made.curve.temperature_c(float(grid_ohm[2, 3]))) == ()
    whole, row = made.sample(grid_c), made.sample(grid_c[2])
    for name in one.__dataclass_fields__:
        assert getattr(whole, name).shape == (5, 12)
        assert_array_equal(getattr(whole, name)[2], getattr(row, name))
        assert getattr(row, name)[3] == pytest.approx(getattr(one, name), rel=1e-12, abs=1e-12)


@given(parts)
@settings(CURVES)
def test_arrays_of_a_law_cannot_be_written(made):
    for value in vars(made.curve.law).values():
        assert not (isinstance(value, np.ndarray) and value.flags.writeable)
    t_c = _everywhere_c(made)
    first = made.curve.resistance_ohm(t_c)
    first[:] = 0
    assert (made.curve.resistance_ohm(t_c) > 0).all()


B_SOURCES = st.tuples(st.floats(1, 1e6), st.floats(2500, 5000), st.floats(0.2, 2.5))


@given(B_SOURCES, st.sampled_from([("typical", 0), ("plain", 0), ("typical", 1)]), st.booleans())
@settings(CURVES)
def test_stated_b_values_are_exact_one_or_two(source, kind, hot_to_cold):
    r25_ohm, b_k, more_pct = source
    shape, second = kind
    pairs = [([25.0, 50.0], b_k), ([25.0, 85.0], b_k * (1 + more_pct / 100))][: 1 + second]
    stated = [{"between_c": pair[::-1] if hot_to_cold else pair, "b_k": b} for pair, b in pairs]
    made = _made(rated={"resistance_ohm": r25_ohm}, b_values=stated, shape=shape)
    assert made.curve.basis == ("b-values" if second else "b-value")
    assert float(made.curve.resistance_ohm(25.0)) == pytest.approx(r25_ohm, rel=1e-10)
    for pair, b in pairs:
        assert made.curve.b_value_k(*pair) == pytest.approx(b, rel=1e-9)


@given(st.sampled_from([0.0, 25.0, 100.0]), st.floats(2000, 5000), st.sampled_from([[50.0, 85.0], [85.0, 50.0], [-20.0, 40.0]]))  # fmt: skip
@settings(CURVES)
def test_b_value_of_a_pair_without_the_rated_temperature_is_exact(rated_c, b_k, pair):
    stated = [{"between_c": pair, "b_k": b_k}]
    curve = _made(rated={"resistance_ohm": 10e3, "at_c": rated_c}, b_values=stated).curve
    assert curve.b_value_k(*pair) == pytest.approx(b_k, rel=1e-9)
    assert float(curve.resistance_ohm(rated_c)) == pytest.approx(10e3, rel=1e-12)


@given(parts, st.floats(0.05, 2))
@settings(CURVES)
def test_accuracy_in_kelvin_reads_exactly_that_within_its_range(made, within_k):
    band = replace(made.band, columns=None, accuracy=(AccuracyRange((-20.0, 70.0), within_k),))
    low_k, high_k = band.reads_k(np.linspace(-20, 70, 19))
    assert low_k == pytest.approx(np.full(19, -within_k), abs=1e-8)
    assert high_k == pytest.approx(np.full(19, within_k), abs=1e-8)
