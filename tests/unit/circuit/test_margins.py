"""Codes between real temperatures and a faulty sensor."""

import pytest
from circuit_records import plain_thermistor, position

from builder.circuit import budget


def margins(**changes):
    fitted = plain_thermistor()
    found = budget(position(range_c=[25, 50], **changes), fitted, fitted.made)
    return found.open_margin_codes, found.short_margin_codes


# At 25 °C half of full scale; at 50 °C 3588.1826 Ω of 13588.1826 Ω. Open is the highest code, short is 0.
HOT = 4096 * 3588.1826 / 13588.1826


def test_low_side_is_open_at_the_top_and_shorted_at_the_bottom():
    assert margins() == (int(4094.5 + 0.5 - 2048.5), int(HOT - 0.5 - 0.5))


def test_high_side_is_the_other_way_round():
    assert margins(circuit={"thermistor": "high side"}) == (int(2047.5 - 0.5), int(4095 - (4096 - HOT + 0.5)))


def test_limits_of_the_converter_take_from_both_sides():
    open_codes, short_codes = margins(adc={"offset_lsb": 10})
    assert (open_codes, short_codes) == (int(4096 - 10.5 - 2058.5), int(HOT - 10.5 - 10.5))


def test_parallel_resistor_leaves_less_room_for_an_open_sensor():
    parallel = {"resistance_ohm": "20k", "tolerance_pct": 0}
    open_codes, _ = margins(circuit={"parallel": parallel})
    # Open: 20 kΩ over 10 kΩ; real at 25 °C: 6.6667 kΩ over 10 kΩ.
    assert open_codes == int(4096 * 2 / 3 - 0.5 - (4096 * 0.4 + 0.5))


def test_nothing_is_left_where_an_open_sensor_looks_like_a_cold_one():
    parallel = {"resistance_ohm": 1e3, "tolerance_pct": 20}
    assert margins(circuit={"parallel": parallel})[0] < 0


@pytest.mark.parametrize("full_scale", [4095, 4096])
def test_margins_are_whole_codes(full_scale):
    assert all(codes == int(codes) for codes in margins(adc={"full_scale": full_scale}))
