"""Laws of a position's chain: corners, bias, bands, trips and other fixed resistors, on circuits drawn at random."""

import dataclasses
import itertools

import numpy as np
from circuit_records import plain_thermistor, position
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from builder.circuit import Chain, budget
from builder.part_curve import whole_steps_c

LAWS = settings(derandomize=True, deadline=None, max_examples=40, database=None)
RANGE_C = (-20.0, 70.0)
T_C = whole_steps_c(RANGE_C, 5.0)
FIRMWARES = [
    {"method": "curve"},
    {"method": "table", "step_k": 5},
    {"method": "b-value", "resistance_ohm": "10k", "b_k": 3900},
    {"method": "steinhart-hart", "a": 1.129241e-3, "b": 2.341077e-4, "c": 8.775468e-8},
]


def _place(side, fixed_ohm, parallel_ohm, own, supply_v, firmware, scale):
    circuit = {"thermistor": side, "supply_v": supply_v, "supply_tolerance_pct": 3 * scale, "wire_ohm": 1.0}
    if parallel_ohm:
        circuit["parallel"] = {"resistance_ohm": parallel_ohm, "tolerance_pct": 2 * scale}
    return position(
        range_c=list(RANGE_C),
        circuit=circuit,
        fixed={"resistance_ohm": fixed_ohm, "tolerance_pct": scale, "tempco_ppm_per_k": 100},
        adc={"bits": 12, "offset_lsb": 3 * scale, "gain_pct": scale / 4, "nonlinearity_lsb": 2, "leakage_na": 300},
        reference={"volts": 1.3 * supply_v, "tolerance_pct": scale} if own else "ratiometric",
        firmware=firmware,
        trips=[{"name": "up", "at_c": 40, "when": "rising"}, {"name": "down", "at_c": 5, "when": "falling"}],
    )


places = st.builds(
    _place,
    st.sampled_from(["low side", "high side"]),
    st.floats(2e3, 40e3),
    st.sampled_from([None, 22e3, 100e3]),
    st.booleans(),
    st.floats(1, 5),
    st.sampled_from(FIRMWARES),
    st.floats(0, 1),
)
fitteds = st.builds(
    plain_thermistor,
    r_ohm=st.just(10e3),
    b_k=st.floats(3800, 4000),
    tolerance_pct=st.floats(0, 5),
    b_tolerance_pct=st.floats(0, 3),
    dissipation_mw_per_k=st.floats(0.8, 10),
)


def chain_of(place, fitted) -> Chain:
    return Chain(place, fitted, fitted.made.curve, place.circuit.fixed.resistance_ohm)


@given(places, fitteds)
@LAWS
def test_extremes_are_those_of_every_corner_there_is(place, fitted):
    chain = chain_of(place, fitted)
    signs = np.array(list(itertools.product((-1.0, 1.0), repeat=len(chain.sources))))
    off = {source.name: source.limit * signs[:, [i]] for i, source in enumerate(chain.sources)}
    t_c = T_C[::6]
    reading_c = chain.signal(t_c, off).reading_c
    lowest, highest = chain.extremes(t_c)
    np.testing.assert_allclose(lowest.reading_c, reading_c.min(axis=0), atol=1e-6)
    np.testing.assert_allclose(highest.reading_c, reading_c.max(axis=0), atol=1e-6)


@given(places, fitteds)
@LAWS
def test_worst_case_holds_the_nominal_reading_and_every_source_alone(place, fitted):
    rows = budget(place, fitted, fitted.made).rows
    for low_k, high_k in (*rows.sources_k.values(), (0 * T_C, 0 * T_C)):
        alone_k = np.array([rows.bias_k + low_k, rows.bias_k + high_k])
        assume(np.isfinite(alone_k + rows.worst_min_k + rows.worst_max_k).all())
        assert (rows.worst_min_k <= alone_k + 1e-6).all()
        assert (alone_k <= rows.worst_max_k + 1e-6).all()


@given(places, fitteds)
@LAWS
def test_trip_acts_from_where_an_extreme_board_reads_its_threshold(place, fitted):
    chain = chain_of(place, fitted)
    for trip in budget(place, fitted, fitted.made).trips:
        assume(np.isfinite(trip.acts_from_c + trip.acts_to_c))
        lowest, highest = chain.extremes(np.array([trip.acts_from_c, trip.acts_to_c]))
        # A reading follows the temperature within some per cent.
        assert abs(highest.reading_c[0] - trip.at_c) < 1e-3
        assert abs(lowest.reading_c[1] - trip.at_c) < 1e-3
        assert trip.acts_from_c < trip.acts_to_c


@given(places, fitteds)
@LAWS
def test_other_fixed_resistors_side_by_side_are_each_its_own(place, fitted):
    fixed_ohm = np.array([3.3e3, 10e3, 33e3])
    side_by_side = dataclasses.replace(chain_of(place, fitted), fixed_ohm=fixed_ohm[:, None, None]).extremes(T_C)
    for i, ohm in enumerate(fixed_ohm):
        alone = dataclasses.replace(chain_of(place, fitted), fixed_ohm=float(ohm)).extremes(T_C)
        for together, single in zip(side_by_side, alone, strict=True):
            np.testing.assert_allclose(together.reading_c[i], single.reading_c, atol=1e-9)
            np.testing.assert_allclose(together.code[i], single.code, atol=1e-9)
