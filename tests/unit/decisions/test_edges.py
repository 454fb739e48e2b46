"""Positions at the edge of what makes sense: each has a clear problem, warning or verdict."""

import datetime
from pathlib import Path

import pytest
from factory import changed, part, position
from places import WITHDRAWN, catalog, place
from places import part as part_record

from builder.circuit import budget, thermistor
from builder.crosschecks import checked_catalog
from builder.decisions import shortlist, swap

TODAY = datetime.date(2026, 6, 1)
ALONE = position("alternates:\n  - {part: TB3A-103F38, standing: []}\n", "")


@pytest.fixture
def told(records):
    """What is said of a position and its part."""

    def found(text: str, own: str = part()) -> list[str]:
        records({"part.yaml": own, "place.yaml": text})
        return [str(problem) for problem in checked_catalog(Path("parts"), today=TODAY).problems]

    return found


REFUSED = {
    "zero ohm": (
        ("resistance_ohm: 10k", "resistance_ohm: 0"),
        "parts/place.yaml:8: circuit.fixed.resistance_ohm: 0 Ω is outside 0.01 to 1e9 Ω. "
        "Check the decimal point, and k or M.",
    ),
    "zero ohm across": (
        ("  supply_v", "  parallel: {resistance_ohm: 0R}\n  supply_v"),
        "parts/place.yaml:9: circuit.parallel.resistance_ohm: 0 Ω is outside 0.01 to 1e9 Ω. "
        "Check the decimal point, and k or M.",
    ),
    "no supply": (
        ("supply_v: 3.3", "supply_v: 0"),
        "parts/place.yaml:9: circuit.supply_v: 0 V is outside 0.1 to 1000 V. Check the decimal point and the unit.",
    ),
    "no bits": (
        ("bits: 12, full_scale: 4096", "bits: 0"),
        "parts/place.yaml:11: adc.bits: 0 bits is outside 4 to 32 bits. Check the converter's data sheet.",
    ),
    "too many bits": (
        ("bits: 12, full_scale: 4096", "bits: 40"),
        "parts/place.yaml:11: adc.bits: 40 bits is outside 4 to 32 bits. Check the converter's data sheet.",
    ),
    "no limit": (
        ("limit_k: 1.0", "limit_k: 0"),
        "parts/place.yaml:5: limit_k: 0 K is outside 0.001 to 100 K. Check the decimal point and the unit.",
    ),
}


@pytest.mark.parametrize(("change", "message"), REFUSED.values(), ids=REFUSED)
def test_circuit_that_cannot_be_is_refused(told, change, message):
    assert told(changed(ALONE, *change)) == [message]


def test_range_outside_the_fitted_part_is_a_warning(told):
    assert told(changed(ALONE, "[-30, 60]", "[-30, 150]")) == [
        "parts/place.yaml:4: range_c: −30 to 150 °C reaches outside what the fitted TB3A-103F38 operates in, "
        "−40 to 125 °C. Fit another part, or narrow the range to what matters."
    ]


def test_trip_outside_the_range_is_a_warning(told):
    assert told(ALONE + "trips: [{name: hot, at_c: 80, when: rising}]\n") == [
        "parts/place.yaml:14: trips[0].at_c: 80 °C lies outside the range, −30 to 60 °C, so the error limit says nothing "
        "about this trip. Widen range_c, or correct the trip."
    ]


def test_withdrawn_part_that_is_fitted_is_told(told):
    withdrawn = "  - {state: withdrawn, on: 2026-03-30, by: quality, because: it cracks in the cold}\n"
    (message,) = told(ALONE, part() + withdrawn)
    assert message == (
        "parts/place.yaml:13: fitted: Tarnbrook Ceramics TB3A-103F38 is withdrawn since 2026-03-30. "
        "Fit another part, or an approved alternate."
    )


def test_withdrawn_part_that_is_fitted_does_not_keep_an_alternate_out():
    fitted = part_record(standing=[WITHDRAWN])
    assert swap(place(), part_record("X2"), catalog(fitted, part_record("X2"))).verdict == "fits"


def test_code_that_reaches_an_end_inside_the_range_leaves_boards_without_a_reading():
    # 10 MΩ over 10 kΩ: all of the supply, within an LSB of the highest code.
    fitted = part_record(rated={"resistance_ohm": "10M", "tolerance_pct": 1})
    found = budget(place().position, thermistor(fitted), thermistor(fitted).made)
    assert found.meets_limit is False
    assert found.notes == (
        "Some boards have no reading at 0 to 46.5 °C: the code reaches an end of the converter, or the curve or the "
        "firmware's conversion ends.",
    )


def test_alternate_whose_code_reaches_an_end_does_not_fit():
    alternate = part_record("X2", rated={"resistance_ohm": "10M", "tolerance_pct": 1})
    found = swap(place(), alternate, catalog(part_record(), alternate))
    assert found.verdict == "does not fit"
    assert [reason.message for reason in found.reasons if reason.against] == [
        "some boards have no reading at 0 °C",
        "with new firmware: some boards have no reading at 0 °C",
    ]


def test_limit_that_no_part_can_meet_leaves_every_margin_below_zero():
    parts = [part_record("A"), part_record("B", accuracy=[{"between_c": [-10, 80], "within_k": 0.01}])]
    found = shortlist(place(limit_k=0.01), catalog(*parts))
    assert [(one.part.part.part, one.meets, one.margin_k < 0) for one in found.ranked] == [
        ("B", False, True),
        ("A", False, True),
    ]


def test_range_no_part_of_the_catalog_operates_in_leaves_the_list_empty():
    found = shortlist(place(range_c=[-60, 200]), catalog(part_record()))
    assert found.ranked == ()
    assert found.excluded[0].because == (
        "operates from −40 °C, the range reaches −60 °C",
        "operates to 125 °C, the range reaches 200 °C",
    )


def test_trip_outside_the_range_is_noted_in_the_swap():
    trips = [{"name": "hot", "at_c": 80, "when": "rising", "within_k": 5}]
    found = swap(place(trips=trips), part_record("X2"), catalog(part_record(), part_record("X2")))
    assert found.verdict == "fits"
    assert found.after.notes == ("hot acts at 80 °C, outside the range 0 to 60 °C.",)
