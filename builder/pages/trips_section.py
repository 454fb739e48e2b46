"""Where a position's trips act."""

from __future__ import annotations

from typing import Any

import numpy as np

from builder.circuit import Budget, TripBudget
from builder.pages.figures.trips import WORDS, trip_rows, trips_line
from builder.pages.html import Html, joined, table, tag
from builder.records.position import Trip
from builder.units import number_text, range_text, temperature_text


def trips_section(budget: Budget, *, figures: bool) -> Html:
    """A line with every trip, and the table of its figures."""
    position = budget.position
    if not position.trips:
        return tag("p", "The firmware acts on no threshold here.")
    lead = "True temperatures between which a trip acts, on any board within its limits, as the temperature passes it."
    drawn = Html(trips_line(trip_rows({"": budget}), position.range_c)) if figures else ""
    rows = [_row(trip, found, position.limit_k) for trip, found in zip(position.trips, budget.trips, strict=True)]
    headings = ("trip", "acts at", "when", "may act within", "acts between", "off by at most", "near enough")
    shown = table(headings, rows, caption="Thresholds that the firmware acts on")
    return joined([tag("p", lead), drawn, tag("div", shown, class_="bd-dense")])


def acts_text(found: TripBudget) -> str:
    """Between which true temperatures a trip acts, in words where one of them was not found."""
    low_c, high_c = found.acts_from_c, found.acts_to_c
    if np.isnan(low_c + high_c):
        return "not on every board"
    return range_text((round(low_c, 2), round(high_c, 2)))


def _row(trip: Trip, found: TripBudget, limit_k: float) -> tuple[Any, ...]:
    ends_c = (found.acts_from_c, found.acts_to_c)
    farthest_k = float(np.max(np.abs(np.array(ends_c) - trip.at_c)))
    within = f"±{number_text(trip.within_k)} K" if trip.within_k else f"not stated: limit, ±{number_text(limit_k)} K"
    return (
        trip.name,
        temperature_text(trip.at_c),
        trip.when,
        within,
        tag("span", acts_text(found), class_="bd-whole"),
        "–" if np.isnan(farthest_k) else f"{number_text(farthest_k, 3)} K",
        WORDS[found.ok],
    )
