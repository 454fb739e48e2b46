"""Rules about a position's range: against the fitted part, and against the trips."""

from __future__ import annotations

from collections.abc import Iterator

from builder.problems import Problem, clipped
from builder.records import Catalog, PositionRecord, UnknownPart
from builder.units import range_text, temperature_text


def position_findings(catalog: Catalog) -> Iterator[Problem]:
    """What is doubtful in the ranges of a catalog's positions."""
    for record in catalog.positions:
        yield from _position_outside_part(record, catalog)
        yield from _trip_outside_range(record)


def _position_outside_part(record: PositionRecord, catalog: Catalog) -> Iterator[Problem]:
    place = record.position
    try:
        fitted = catalog.part(place.fitted)
    except UnknownPart:
        return
    made_for_c = fitted.part.limits.operating_c
    if made_for_c is not None and not (made_for_c[0] <= place.range_c[0] and place.range_c[1] <= made_for_c[1]):
        message = (
            f"{range_text(place.range_c)} reaches outside what the fitted {clipped(fitted.part.part)} operates in, "
            f"{range_text(made_for_c)}. Fit another part, or narrow the range to what matters."
        )
        yield record.source.problem(("range_c",), "position-outside-part", message, "warning")


def _trip_outside_range(record: PositionRecord) -> Iterator[Problem]:
    low_c, high_c = record.position.range_c
    for i, trip in enumerate(record.position.trips):
        if not low_c <= trip.at_c <= high_c:
            message = (
                f"{temperature_text(trip.at_c)} lies outside the range, {range_text((low_c, high_c))}, so the error limit "
                "says nothing about this trip. Widen range_c, or correct the trip."
            )
            yield record.source.problem(("trips", i, "at_c"), "trip-outside-range", message, "warning")
