"""The true temperatures between which a threshold of the firmware acts."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.circuit.chain import Chain
from builder.curves.curve import Mask
from builder.part_curve import whole_steps_c
from builder.records.position import Trip
from builder.units import Array

_GRID_K = 2.0
# How far beyond the range, and beyond the thresholds, a threshold is looked for.
_BEYOND_K = 20.0
# A step of the grid in twelve parts, three times: 1.2 mK, and within that a straight line.
_PARTS, _TIMES = 12, 3


@dataclass(frozen=True)
class TripSpan:
    """Where one trip acts: nowhere colder than `acts_from_c`, nowhere hotter than `acts_to_c`."""

    trip: Trip
    acts_from_c: float
    acts_to_c: float

    @property
    def off_k(self) -> float:
        """How far from its threshold it may act; not a number where one end was not found. [K]"""
        return float(np.max(np.abs(np.array([self.acts_from_c, self.acts_to_c]) - self.trip.at_c)))


def trip_spans(chain: Chain) -> tuple[TripSpan, ...]:
    """The span of every trip of a position, well within 1 mK.

    Parameters
    ----------
    chain : Chain
        The position with its thermistor; no unit.

    Returns
    -------
    tuple of TripSpan
        In the position's order; an end that is not found within 20 K of the range and the thresholds is not a number.

    Notes
    -----
    On the way of the temperature a trip acts first where the reading farthest ahead passes the threshold, and has acted
    at the latest where the reading farthest behind does. Both are first crossings, along that way.
    """
    trips = chain.position.trips
    if not trips:
        return ()
    crossed_c = _first_crossings_c(chain, trips * 2, np.repeat([[True], [False]], len(trips), axis=0))
    ends_c = np.sort(crossed_c.reshape(2, len(trips)), axis=0)
    return tuple(TripSpan(trip, float(low), float(high)) for trip, low, high in zip(trips, *ends_c, strict=True))


def _first_crossings_c(chain: Chain, trips: tuple[Trip, ...], highest: Mask) -> Array:
    """True temperatures at which each trip's threshold is passed first, by the highest reading or by the lowest."""
    at_c = np.array([[trip.at_c] for trip in trips])
    way = np.array([[1.0 if trip.when == "rising" else -1.0] for trip in trips])

    def passed_k(t_c: Array) -> Array:
        low, high = (signal.reading_c.reshape(t_c.shape) for signal in chain.extremes(t_c.ravel()))
        past_k: Array = (np.where(highest, high, low) - at_c) * way
        return past_k

    grid_c = _grid_c(chain.position.range_c, at_c)
    t_c = np.where(way > 0, grid_c, grid_c[::-1])
    before_c, after_c, before_k, after_k = _first_step(t_c, passed_k(t_c))
    for _ in range(_TIMES):
        t_c = np.linspace(before_c, after_c, _PARTS + 1, axis=-1)
        before_c, after_c, before_k, after_k = _first_step(t_c, passed_k(t_c))
    return before_c + (after_c - before_c) * before_k / (before_k - after_k)


def _grid_c(range_c: tuple[float, float], at_c: Array) -> Array:
    span_c = min(range_c[0], at_c.min()) - _BEYOND_K, max(range_c[1], at_c.max()) + _BEYOND_K
    return whole_steps_c(span_c, _GRID_K)


def _first_step(t_c: Array, passed_k: Array) -> tuple[Array, Array, Array, Array]:
    """The ends of the first step of each row that leads past its threshold, and how far past they are."""
    leads = (passed_k[:, :-1] < 0) & (passed_k[:, 1:] >= 0)
    rows, first = np.arange(len(t_c)), leads.argmax(axis=1)
    t_c = np.where(leads.any(axis=1, keepdims=True), t_c, np.nan)
    return t_c[rows, first], t_c[rows, first + 1], passed_k[rows, first], passed_k[rows, first + 1]
