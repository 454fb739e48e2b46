"""Figures that the records do not state."""

import pytest
from circuit_records import plain_thermistor, position

from builder.circuit import budget

PARALLEL, OWN = {"resistance_ohm": "47k"}, {"volts": 3.0}
# What is left out, the field that is named, and whether a limit that is met as computed stays open.
LEFT_OUT = {
    "fixed": ({"fixed": {"tolerance_pct": None}}, "circuit.fixed.tolerance_pct", True),
    "tempco": ({"fixed": {"tempco_ppm_per_k": None}}, "circuit.fixed.tempco_ppm_per_k", True),
    "parallel": ({"circuit": {"parallel": PARALLEL}}, "circuit.parallel.tolerance_pct", True),
    "reference": ({"reference": OWN}, "reference.tolerance_pct", True),
    "leakage": ({"adc": {"leakage_na": None}}, "adc.leakage_na", True),
    "offset": ({"adc": {"offset_lsb": None}}, "adc.offset_lsb", True),
    "gain": ({"adc": {"gain_pct": None}}, "adc.gain_pct", True),
    "nonlinearity": ({"adc": {"nonlinearity_lsb": None}}, "adc.nonlinearity_lsb", True),
    "supply": ({"circuit": {"supply_tolerance_pct": None}}, "circuit.supply_tolerance_pct", False),
}


def budget_of(fitted=None, limit_k=5.0, **changes):
    fitted = fitted or plain_thermistor()
    trips = [{"name": "warm", "at_c": 40, "when": "rising"}]
    return budget(position(range_c=[0, 70], limit_k=limit_k, trips=trips, **changes), fitted, fitted.made)


def test_nothing_is_missing_where_all_is_stated():
    found = budget_of()
    assert (found.missing, found.meets_limit, found.trips[0].ok) == ((), True, True)


@pytest.mark.parametrize(("changes", "field", "decides"), LEFT_OUT.values(), ids=LEFT_OUT)
def test_figure_left_out_is_named_and_leaves_the_verdict_open_where_it_decides(changes, field, decides):
    found = budget_of(**changes)
    expected = None if decides else True
    assert (found.missing, found.meets_limit, found.trips[0].ok) == ((field,), expected, expected)


def test_source_whose_limit_is_missing_has_no_band():
    assert "leakage" not in budget_of(adc={"leakage_na": None}).rows.sources_k


def test_supply_decides_where_the_reference_is_not_the_supply():
    found = budget_of(circuit={"supply_tolerance_pct": None}, reference={"volts": 3.0, "tolerance_pct": 0})
    assert (found.missing, found.meets_limit) == (("circuit.supply_tolerance_pct",), None)


def test_limit_exceeded_already_stays_exceeded_whatever_else_is_missing():
    found = budget_of(plain_thermistor(tolerance_pct=5), limit_k=0.5, adc={"leakage_na": None})
    assert (found.meets_limit, found.trips[0].ok) == (False, False)


def test_missing_dissipation_leaves_every_verdict_open():
    # Self-heating reads high: it may also bring back what reads too low.
    for limit_k in (0.5, 5.0):
        found = budget_of(plain_thermistor(tolerance_pct=5, dissipation_mw_per_k=None), limit_k)
        assert (found.missing, found.meets_limit) == (("limits.dissipation_mw_per_k",), None)


@pytest.mark.parametrize(
    ("rated", "b_tolerance_pct", "fields"),
    [
        ({"resistance_ohm": "10k"}, 1, ("rated.tolerance_pct",)),
        ({"resistance_ohm": "10k", "tolerance_pct": 1}, None, ("b_values.tolerance_pct",)),
        ({"resistance_ohm": "10k"}, None, ("rated.tolerance_pct", "b_values.tolerance_pct")),
    ],
)
def test_parts_own_tolerances_are_missed(rated, b_tolerance_pct, fields):
    found = budget_of(plain_thermistor(rated=rated, b_tolerance_pct=b_tolerance_pct))
    assert (found.missing, found.meets_limit) == (fields, None)


def test_parts_tolerances_are_not_missed_where_kelvin_are_stated():
    stated = plain_thermistor(rated={"resistance_ohm": "10k"}, accuracy=[{"between_c": [0, 70], "within_k": 0.5}])
    assert budget_of(stated).missing == ()


def test_trip_outside_what_kelvin_are_stated_for_stays_open_and_the_limit_does_not():
    stated = plain_thermistor(rated={"resistance_ohm": "10k"}, accuracy=[{"between_c": [0, 70], "within_k": 0.5}])
    trips = [{"name": "hot", "at_c": 90, "when": "rising"}, {"name": "warm", "at_c": 40, "when": "rising"}]
    found = budget(position(range_c=[0, 70], limit_k=5.0, trips=trips), stated, stated.made)
    assert found.missing == ("rated.tolerance_pct",)
    assert (found.meets_limit, [trip.ok for trip in found.trips]) == (True, [None, True])


def test_body_warmed_beyond_what_kelvin_are_stated_for_keeps_that_tolerance():
    # 0.27 K of self-heating at 70 °C, where the stated kelvin end.
    stated = plain_thermistor(
        rated={"resistance_ohm": "10k"}, accuracy=[{"between_c": [0, 70], "within_k": 0.5}], dissipation_mw_per_k=0.5
    )
    rows = budget(position(range_c=[0, 70]), stated, stated.made).rows
    assert rows.worst_max_k[-1] - rows.bias_k[-1] > 0.5
    assert rows.worst_min_k[-1] - rows.bias_k[-1] < -0.5
