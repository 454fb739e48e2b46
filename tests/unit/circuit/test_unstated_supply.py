"""A ratiometric circuit whose supply has no stated tolerance: it decides where the body is warmed by much."""

import pytest
from circuit_records import plain_thermistor, real_position

from builder.circuit import budget

TRIP = {"name": "warm", "at_c": 30, "when": "rising", "within_k": 2.9}


def budget_of(tolerance_pct, limit_k=2.9, dissipation_mw_per_k=0.3, trip=TRIP):
    fitted = plain_thermistor(tolerance_pct=1, b_tolerance_pct=1, dissipation_mw_per_k=dissipation_mw_per_k)
    circuit = {"supply_v": 5, "supply_tolerance_pct": tolerance_pct}
    return budget(real_position(range_c=[0, 60], limit_k=limit_k, circuit=circuit, trips=[trip]), fitted, fitted.made)


def test_supply_that_may_warm_the_body_past_the_limit_leaves_it_open():
    # ±10 % is what a plain 5 V rail has: 3.05 K where no tolerance gives 2.62 K.
    unstated, stated = budget_of(None), budget_of(10)
    assert (unstated.worst_k, stated.worst_k) == (pytest.approx(2.62, abs=0.005), pytest.approx(3.05, abs=0.005))
    assert (unstated.meets_limit, stated.meets_limit) == (None, False)
    assert (unstated.trips[0].ok, unstated.missing) == (None, ("circuit.supply_tolerance_pct",))


@pytest.mark.parametrize(("share", "meets"), [(0.099, True), (0.101, None)])
def test_supply_decides_from_a_tenth_of_the_limit_on(share, meets):
    warmest_k = max(budget_of(None, dissipation_mw_per_k=2).rows.biases_k["self-heating"])
    found = budget_of(None, warmest_k / share, 2, TRIP | {"within_k": 9})
    assert (found.meets_limit, found.trips[0].ok) == (meets, True)


def test_supply_decides_about_a_trip_by_what_the_trip_allows():
    found = budget_of(None, 9, 2, TRIP | {"within_k": 1.5})
    assert (found.meets_limit, found.trips[0].ok) == (True, None)
