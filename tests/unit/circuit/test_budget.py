"""The budget as a whole."""

from pathlib import Path

import numpy as np
import pytest
from circuit_records import plain_thermistor, position, real_position, real_thermistor

from builder.circuit import Thermistor, budget, firmware_part, thermistor
from builder.part_curve import PartCurve, part_curve
from builder.records import read_catalog

CATALOG = read_catalog(Path(__file__).parents[3] / "parts")
TABLE = {"method": "table", "step_k": 10}


def budget_of(place, fitted: Thermistor | None = None, made_for: PartCurve | None = None, **options):
    fitted = fitted or plain_thermistor()
    return budget(place, fitted, made_for or fitted.made, **options)


def test_rows_stand_at_whole_steps_and_both_ends():
    assert budget_of(position(range_c=[-12, 3])).rows.t_c.tolist() == [-12, -10, -5, 0, 3]
    assert budget_of(position(range_c=[0, 5]), step_k=2).rows.t_c.tolist() == [0, 2, 4, 5]


def test_biases_add_up_to_the_nominal_error():
    warm, other = plain_thermistor(dissipation_mw_per_k=1.0), plain_thermistor(b_k=3900)
    firmware = {"method": "b-value", "resistance_ohm": "10k", "b_k": 3800}
    rows = budget_of(position(range_c=[-20, 80], firmware=firmware), warm, other.made).rows
    assert list(rows.biases_k) == ["curve", "firmware", "self-heating"]
    d_per_k = 1 / (rows.t_c + 273.15) - 1 / 298.15
    as_other_c, as_firmware_c = (1 / (1 / 298.15 + 3950 / b_k * d_per_k) - 273.15 for b_k in (3900, 3800))
    np.testing.assert_allclose(rows.biases_k["curve"], as_other_c - rows.t_c, atol=1e-9)
    np.testing.assert_allclose(rows.biases_k["firmware"], as_firmware_c - as_other_c, atol=1e-9)
    # 3.3 V over twice 10 kΩ: 0.27 mW at the most, into 1 mW/K, and the firmware's law stretches it by 4 %.
    assert 0.27 < rows.biases_k["self-heating"].max() < 0.29
    np.testing.assert_allclose(rows.bias_k, sum(rows.biases_k.values()))


def test_own_curve_gives_no_bias_of_its_own():
    # Made twice from one record, as a command does.
    curve_k = budget_of(position(), made_for=plain_thermistor().made).rows.biases_k["curve"]
    assert np.abs(curve_k).max() < 1e-9


def test_statistical_sum_is_of_rectangular_half_widths_about_the_middles():
    rows = budget_of(real_position(range_c=[-20, 80]), real_thermistor()).rows
    ends_k = np.array(list(rows.sources_k.values()))
    half_k, middle_k = np.ptp(ends_k, axis=1) / 2, ends_k.mean(axis=1)
    np.testing.assert_allclose(rows.expanded_k, 2 * np.sqrt((half_k**2 / 3).sum(axis=0)))
    np.testing.assert_allclose(rows.shift_k, middle_k.sum(axis=0))


def test_resolution_is_what_one_code_means():
    rows = budget_of(position(range_c=[0, 50])).rows
    # 4096·R/(R + 10 kΩ): at 25 °C a quarter of full scale times α.
    assert rows.codes_per_k[5] == pytest.approx(1024 * 3950 / 298.15**2, rel=1e-4)
    assert rows.resolution_k[5] == pytest.approx(298.15**2 / 3950 / 1024, rel=1e-4)


def test_supply_cancels_where_it_is_the_reference():
    circuit = {"supply_tolerance_pct": 5}
    low_k, high_k = budget_of(position(circuit=circuit)).rows.sources_k["supply"]
    assert max(np.abs(low_k).max(), np.abs(high_k).max()) < 1e-4
    own = position(circuit=circuit, range_c=[0, 50], reference={"volts": 3.6, "tolerance_pct": 0})
    assert np.abs(budget_of(own).rows.sources_k["supply"]).min() > 1


def test_worst_is_looked_for_between_the_rows():
    # Every row of the budget is a row of the table, where the table errs by its rounding only.
    found = budget_of(position(range_c=[0, 60], adc={"bits": 16, "full_scale": 65536}, firmware=TABLE), step_k=10)
    rows = found.rows
    assert max(-rows.worst_min_k.min(), rows.worst_max_k.max()) < 0.1 < found.worst_k
    assert found.worst_at_c % 10 == pytest.approx(5, abs=1)


def test_reading_at_an_end_of_the_converter_is_no_number():
    # The code is the top one from R/(R + 100 Ω) = 4094.5/4096 on: 273 kΩ, which some boards have at 4 °C.
    cold = position(range_c=[-40, 60], limit_k=50, fixed={"resistance_ohm": 100})
    found = budget_of(cold, plain_thermistor(100e3, tolerance_pct=1))
    assert np.isnan(found.rows.worst_max_k[0])
    assert np.isfinite(found.rows.worst_max_k[-1])
    assert np.isnan(found.worst_k)
    assert found.meets_limit is False
    assert found.notes == (
        "Some boards have no reading at −40 to 4 °C: the code reaches an end of the converter, or the curve or the "
        "firmware's conversion ends.",
    )


def test_range_beyond_the_curve_is_marked():
    # Its coefficients are stated from −40 to 105 °C.
    fitted = CATALOG.part("OSP4-103W")
    found = budget_of(position(range_c=[90, 120]), thermistor(fitted), part_curve(fitted))
    assert found.rows.extrapolated.tolist() == [False] * 4 + [True] * 3
    assert found.notes == ("The part's curve is extrapolated at 105.5 to 120 °C.",)


def test_curve_of_the_firmware_beyond_its_span_is_marked_too():
    other = thermistor(CATALOG.part("OSP4-103W")).made
    place = position(range_c=[90, 110])
    found = budget_of(place, made_for=other)
    assert found.rows.extrapolated.tolist() == [False] * 4 + [True]
    assert found.notes == ("The firmware's curve is extrapolated at 105.5 to 110 °C.",)
    # Coefficients in the code are nobody's curve.
    firmware = {"method": "b-value", "resistance_ohm": "10k", "b_k": 3950}
    assert budget_of(position(range_c=[90, 110], firmware=firmware), made_for=other).notes == ()


def test_trip_outside_the_range_is_computed_and_said():
    trips = [{"name": "frost", "at_c": -15, "when": "falling"}]
    found = budget_of(position(range_c=[0, 60], trips=trips))
    (trip,) = found.trips
    assert -15.1 < trip.acts_from_c < -15 < trip.acts_to_c < -14.9
    assert trip.ok
    assert found.notes == ("frost acts at −15 °C, outside the range 0 to 60 °C.",)


def test_trip_at_the_end_of_the_range_is_followed_beyond_it():
    trips = [{"name": "hot", "at_c": 60, "when": "rising"}]
    found = budget_of(position(range_c=[0, 60], trips=trips), plain_thermistor(tolerance_pct=10))
    # 10 % of resistance at α = B/T²: 3.5 % a kelvin.
    expected_c = [1 / (1 / 333.15 - np.log(ratio) / 3950) - 273.15 for ratio in (0.9, 1.1)]
    assert [found.trips[0].acts_from_c, found.trips[0].acts_to_c] == pytest.approx(expected_c, abs=0.03)


def test_trip_that_some_boards_never_reach_is_not_near_enough():
    trips = [{"name": "frost", "at_c": -39, "when": "falling"}]
    found = budget_of(position(range_c=[30, 60], fixed={"resistance_ohm": 10}, trips=trips))
    assert found.trips[0].ok is False
    assert np.isnan(found.trips[0].acts_from_c)
    assert found.notes[-1] == "frost does not act on every board."


def test_trip_without_its_own_limit_takes_the_positions():
    trips = [{"name": "a", "at_c": 40, "when": "rising"}, {"name": "b", "at_c": 40, "when": "rising", "within_k": 0.1}]
    found = budget_of(position(range_c=[0, 60], limit_k=1, trips=trips), plain_thermistor(tolerance_pct=1))
    assert [trip.ok for trip in found.trips] == [True, False]


DEMO = {record.position.position: record.position for record in CATALOG.positions}


@pytest.mark.parametrize("name", DEMO)
def test_demo_position_meets_its_limit_with_nothing_missing(name):
    place = DEMO[name]
    made_for = part_curve(CATALOG.part(firmware_part(place)))
    found = budget_of(place, thermistor(CATALOG.part(place.fitted)), made_for)
    assert (found.meets_limit, found.missing, found.notes) == (True, (), ())
    # The choke's trip is written to miss.
    assert [trip.name for trip in found.trips if not trip.ok] == (["choke hot"] if name == "charger-dc/RT3" else [])
    assert min(found.open_margin_codes, found.short_margin_codes) > 0
