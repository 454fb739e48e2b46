"""The power in a part, held to the largest that its record allows."""

import numpy as np
import pytest
from circuit_records import SIDES, Board, plain_thermistor, real_position

from builder.circuit import budget
from builder.circuit.chain import Chain
from builder.circuit.power import can_overload, overload_text


def warm_part(max_power_mw=None, dissipation_mw_per_k=1.5):
    limits = {"dissipation_mw_per_k": dissipation_mw_per_k, "max_power_mw": max_power_mw}
    return plain_thermistor(tolerance_pct=1, b_tolerance_pct=1, limits=limits)


def overload_of(max_power_mw, **fields):
    part = warm_part(max_power_mw)
    return budget(real_position(range_c=[0, 60], limit_k=9, **fields), part, part.made)


@pytest.mark.parametrize("side", SIDES.values(), ids=SIDES)
def test_power_is_the_current_through_the_part_times_the_voltage_across_it(side):
    place, t_c = real_position(range_c=[0, 60], **side), np.linspace(0, 60, 13)
    part = warm_part()
    power_mw = Chain(place, part, part.made.curve, 10e3).signal(t_c).power_mw
    circuit = place.circuit
    board = Board(
        mw_per_k=1.5,
        wire_ohm=circuit.wire_ohm or 0,
        parallel_ohm=circuit.parallel.resistance_ohm if circuit.parallel else 1e30,
        high_side=circuit.thermistor == "high side",
    )
    r_ohm = board.r_ohm(board.body_c(t_c))
    junction_v = board.junction_v(r_ohm)
    over_v = 3.3 - junction_v if board.high_side else junction_v
    current_a = over_v / (r_ohm + board.wire_ohm)
    assert power_mw == pytest.approx(current_a * (current_a * r_ohm) * 1e3, rel=1e-6)
    # Its own power is what warms it.
    assert power_mw == pytest.approx((board.body_c(t_c) - t_c) * 1.5, rel=1e-6)


def test_largest_power_is_that_of_the_worst_board():
    # Of the resistance that it sees itself a part takes the most, V²/4R (maximum power transfer): 5.5 V and what leaks, over
    # 10 kΩ less 0.5 % and the drift of 35 K at 50 ppm/K. It has that at 25.2 °C, ±1 %, and is warmed by 0.5 K.
    found = overload_of(0.7, circuit={"supply_v": 5, "supply_tolerance_pct": 10})
    fixed_ohm = 10e3 * (1 - 0.005) * (1 - 35 * 50e-6)
    most_mw = (5.5 + 50e-9 * fixed_ohm) ** 2 / (4 * fixed_ohm) * 1e3
    assert f"{most_mw:.3g}" == "0.762"
    assert found.overload == "takes up to 0.762 mW at 24.5 °C, at most 0.7 mW is allowed"
    assert "The part takes up to 0.762 mW at 24.5 °C, at most 0.7 mW is allowed." in found.notes


@pytest.mark.parametrize("max_power_mw", [0.77, None])
def test_power_that_is_allowed_or_not_limited_is_not_told(max_power_mw):
    found = overload_of(max_power_mw, circuit={"supply_v": 5, "supply_tolerance_pct": 10})
    assert (found.overload, found.notes) == (None, ())


def test_power_just_above_what_is_allowed_is_not_told_as_that():
    part = warm_part(10.0)
    assert overload_text(part, np.array([25.0, 30.0]), np.array([10.0004, np.nan])) == (
        "takes up to 10.0004 mW at 25 °C, at most 10 mW is allowed"
    )


@pytest.mark.parametrize("side", SIDES.values(), ids=SIDES)
def test_no_part_takes_more_than_its_circuit_can_give(side):
    place, t_c = real_position(range_c=[-40, 120], **side), np.linspace(-40, 120, 161)
    part = warm_part()
    most_mw = float(np.nanmax(Chain(place, part, part.made.curve, 10e3).extremes(t_c)[1].power_mw))
    for allowed_mw, can in ((most_mw * 0.999, True), (most_mw * 1.5, False), (None, False)):
        part = warm_part(allowed_mw)
        assert can_overload(Chain(place, part, part.made.curve, 10e3)) is can
