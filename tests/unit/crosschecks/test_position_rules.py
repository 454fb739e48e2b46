"""Rules about a position's range: against the fitted part, and against the trips."""

import datetime
from pathlib import Path

import pytest
from factory import changed, part, position

from builder.crosschecks import checked_catalog

TODAY = datetime.date(2026, 3, 1)
ALONE = position("alternates:\n  - {part: TB3A-103F38, standing: []}\n", "")
TRIPS = ALONE + "trips:\n  - {name: freezer, at_c: -15, when: rising}\n  - {name: hot, at_c: 60, when: rising}\n"


@pytest.fixture
def told(records):
    """What the cross-checks say of a position, with one place in it changed, beside its clean part."""

    def found(text: str, own: str = part()) -> list[str]:
        records({"part.yaml": own, "place.yaml": text})
        problems = checked_catalog(Path("parts"), today=TODAY).problems
        return [str(problem) for problem in problems if problem.file.endswith("place.yaml")]

    return found


def test_range_and_trips_within_what_the_part_operates_in_are_silent(told):
    assert told(TRIPS) == []


@pytest.mark.parametrize(("range_c", "shown"), [("[-41, 60]", "−41 to 60 °C"), ("[-30, 126]", "−30 to 126 °C")])
def test_range_outside_the_fitted_part_is_told(told, range_c, shown):
    assert told(changed(ALONE, "[-30, 60]", range_c)) == [
        f"parts/place.yaml:4: range_c: {shown} reaches outside what the fitted TB3A-103F38 operates in, −40 to 125 °C. "
        "Fit another part, or narrow the range to what matters."
    ]


def test_range_up_to_the_ends_of_the_fitted_part_is_silent(told):
    assert told(changed(ALONE, "[-30, 60]", "[-40, 125]")) == []


def test_range_of_a_part_that_states_none_is_silent(told):
    assert told(changed(ALONE, "[-30, 60]", "[-50, 60]"), part("limits: {operating_c: [-40, 125]}\n", "")) == []


def test_unknown_part_is_told_once_and_by_its_own_rule(told):
    (message,) = told(changed(ALONE, "fitted: TB3A-103F38", "fitted: NONE-1"))
    assert message == "parts/place.yaml:13: fitted: NONE-1 is not a part of the catalog. Check the number."


@pytest.mark.parametrize(("at_c", "shown"), [("-31", "−31 °C"), ("60.5", "60.5 °C")])
def test_trip_outside_the_range_is_told(told, at_c, shown):
    assert told(changed(TRIPS, "at_c: -15", f"at_c: {at_c}")) == [
        f"parts/place.yaml:15: trips[0].at_c: {shown} lies outside the range, −30 to 60 °C, so the error limit says "
        "nothing about this trip. Widen range_c, or correct the trip."
    ]
