"""A shortlist as rows, as JSON's answer, as CSV and as sentences."""

import pytest
from circuit_records import real_position

from builder.decisions import Excluded, Ranked, Shortlist
from builder.exports import rows, shortlist_rows
from builder.records import Part, PartRecord, PositionRecord, Source


def part(number: str) -> PartRecord:
    record = Part.model_validate(
        {
            "part": number,
            "maker": "Maker",
            "body": {"form": "bead"},
            "rated": {"resistance_ohm": "10k"},
            "b_values": [{"between_c": [25, 85], "b_k": 3950}],
        }
    )
    return PartRecord(record, Source(f"{number}.yaml", f"{number}.yaml", {}))


@pytest.fixture
def found():
    place = PositionRecord(real_position(range_c=[0, 60], limit_k=2.0), Source("p.yaml", "p.yaml", {}))
    ranked = (
        Ranked(part("A"), 10700.0, 1.25, 0.75, True, (), False),
        Ranked(part("B"), 4.99e4, 1.5, 0.5, None, ("rated.tolerance_pct", "limits.operating_c"), True),
        Ranked(part("C"), 330.0, 2.125, -0.125, False, (), False),
    )
    return Shortlist(place, "E96", ranked, (Excluded(part("D"), ("it is a lug", "it is obsolete")),))


def test_answer_has_the_parts_and_those_that_are_out(found):
    assert shortlist_rows.shortlist_answer(found) == {
        "position": "board/RT1",
        "series": "E96",
        "parts": [
            {"part": "A", "fixed_ohm": 10700, "worst_k": 1.25, "margin_k": 0.75, "meets_limit": True, "missing": []},
            {
                "part": "B",
                "fixed_ohm": 49900,
                "worst_k": 1.5,
                "margin_k": 0.5,
                "meets_limit": None,
                "missing": ["rated.tolerance_pct", "limits.operating_c"],
            },
            {"part": "C", "fixed_ohm": 330, "worst_k": 2.125, "margin_k": -0.125, "meets_limit": False, "missing": []},
        ],
        "excluded": [{"part": "D", "because": ["it is a lug", "it is obsolete"]}],
    }


def test_csv_has_the_parts_that_are_out_below_the_others(found):
    assert rows.csv_text(shortlist_rows.CSV_NAMES, shortlist_rows.csv_rows(found)) == (
        "part,fixed_ohm,worst_k,margin_k,meets_limit,missing,because\n"
        "A,10700,1.25,0.75,yes,,\n"
        "B,49900,1.5,0.5,,rated.tolerance_pct; limits.operating_c,\n"
        "C,330,2.125,-0.125,no,,\n"
        "D,,,,,,it is a lug; it is obsolete\n"
    )


def test_table_shows_maker_and_prefix(found):
    assert rows.table_text(shortlist_rows.COLUMNS, shortlist_rows.shown_rows(found)) == (
        "part     fixed    worst K  margin K  within     not stated\n"
        "Maker A  10.7 kΩ    1.250    +0.750  yes\n"
        "Maker B  49.9 kΩ    1.500    +0.500  undecided  rated.tolerance_pct, limits.operating_c\n"
        "Maker C  330 Ω      2.125    −0.125  no"
    )


def test_sentences_say_what_was_asked_and_who_is_out(found):
    assert list(shortlist_rows.shortlist_sentences(found)) == [
        "board/RT1, air: ±2 K over 0 to 60 °C, fixed resistor from E96, firmware by curve made for each part.",
        "1 part of the catalog cannot be fitted.",
        "Maker D: it is a lug; it is obsolete.",
    ]
