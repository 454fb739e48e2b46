"""Trips against a root search by scipy's brentq: the extreme boards, by Kirchhoff's laws, at every corner."""

import itertools

import numpy as np
import pytest
from circuit_records import REAL_SOURCES, SIDES, real_board, real_position, real_thermistor
from scipy.optimize import brentq

from builder.circuit import budget

CORNERS = np.array(list(itertools.product((-1.0, 1.0), repeat=len(REAL_SOURCES)))).T
OFF = dict(zip(REAL_SOURCES, CORNERS, strict=True))
TRIPS = [
    {"name": "warm", "at_c": 40, "when": "rising", "within_k": 1},
    {"name": "cold", "at_c": -12.5, "when": "falling", "within_k": 0.5},
    {"name": "hot", "at_c": 70, "when": "rising"},
]


@pytest.mark.parametrize("changes", SIDES.values(), ids=SIDES)
def test_trip_acts_between_the_roots_of_the_extreme_boards(changes):
    place, fitted = real_position(range_c=[-20, 80], limit_k=2, trips=TRIPS, **changes), real_thermistor()
    board = real_board(place, OFF)
    for trip, found in zip(TRIPS, budget(place, fitted, fitted.made).trips, strict=True):
        at_c = trip["at_c"]
        highest = brentq(lambda t, at=at_c: board.reading_c(t).max() - at, at_c - 10, at_c + 10, xtol=1e-7)
        lowest = brentq(lambda t, at=at_c: board.reading_c(t).min() - at, at_c - 10, at_c + 10, xtol=1e-7)
        assert found.acts_from_c == pytest.approx(highest, abs=1e-3)
        assert found.acts_to_c == pytest.approx(lowest, abs=1e-3)
        off_k = max(at_c - highest, lowest - at_c)
        assert found.ok is bool(off_k <= trip.get("within_k", 2))


def test_the_three_trips_are_not_all_near_enough():
    place, fitted = real_position(range_c=[-20, 80], limit_k=2, trips=TRIPS), real_thermistor()
    assert {trip.ok for trip in budget(place, fitted, fitted.made).trips} == {True, False}
