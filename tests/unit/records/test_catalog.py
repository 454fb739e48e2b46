"""The parts and positions of a folder, and the names they go by."""

import dataclasses

import pytest
from factory import PART, POSITION, WITH_CSV, part, position

from builder.records import UnknownPart

OTHER = part("Tarnbrook Ceramics", "Nordvell Elements")
TWO_PARTS = (
    "TB3A-103F38 is the number of 2 parts: Nordvell Elements TB3A-103F38, Tarnbrook Ceramics TB3A-103F38. "
    "Name the maker too."
)


def test_valid_records_have_no_problems(records):
    catalog = records({"tb.yaml": PART, "board/RT1.yaml": POSITION})
    assert catalog.problems == ()
    assert [record.name for record in catalog.parts] == ["Tarnbrook Ceramics TB3A-103F38"]
    assert [record.position.position for record in catalog.positions] == ["coolbox-main/RT1"]
    assert [record.source.below for record in catalog.positions] == ["board/RT1.yaml"]


def test_records_come_in_the_order_of_their_names_not_of_their_files(records):
    catalog = records({"a.yaml": part("TB3A", "ZZ"), "b.yaml": PART, "c.yaml": OTHER})
    assert [record.name for record in catalog.parts] == [
        "Nordvell Elements TB3A-103F38",
        "Tarnbrook Ceramics TB3A-103F38",
        "Tarnbrook Ceramics ZZ-103F38",
    ]


@pytest.mark.parametrize("number", ["TB3A-103F38", "tb3a-103f38"])
def test_one_maker_has_one_record_of_a_number(messages, number):
    assert messages({"a.yaml": PART, "b.yaml": part("TB3A-103F38", number)}) == [
        f"parts/b.yaml:1: part: Tarnbrook Ceramics {number} has a record already, parts/a.yaml. Keep one of the two."
    ]


def test_a_position_has_one_record(messages):
    assert messages({"tb.yaml": PART, "a.yaml": POSITION, "b.yaml": POSITION}) == [
        "parts/b.yaml:1: position: coolbox-main/RT1 has a record already, parts/a.yaml. Keep one of the two."
    ]


def test_two_makers_may_use_one_number(messages):
    assert messages({"a.yaml": PART, "b.yaml": OTHER}) == []


def test_a_position_that_names_a_number_of_two_makers_is_told_to_name_the_maker(messages):
    assert messages({"a.yaml": PART, "b.yaml": OTHER, "p.yaml": POSITION}) == [
        f"parts/p.yaml:13: fitted: {TWO_PARTS}",
        f"parts/p.yaml:15: alternates[0].part: {TWO_PARTS}",
    ]


def test_a_position_may_name_the_maker(messages):
    named = POSITION.replace("TB3A-103F38", "Nordvell Elements TB3A-103F38")
    assert messages({"a.yaml": PART, "b.yaml": OTHER, "p.yaml": named}) == []


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ("fitted: TB3A-103F38", "fitted: TB3A-103F3", "13: fitted: TB3A-103F3 is not a part of the catalog. Did you mean TB3A-103F38?"),
        ("fitted: TB3A-103F38", "fitted: X", "13: fitted: X is not a part of the catalog. Check the number."),
        ("{part: TB3A-103F38", "{part: X", "15: alternates[0].part: X is not a part of the catalog. Check the number."),
        ("step_k: 5", "step_k: 5, part: X", "12: firmware.part: X is not a part of the catalog. Check the number."),
    ],
)  # fmt: skip
def test_a_position_names_parts_of_the_catalog(messages, old, new, message):
    assert messages({"a.yaml": PART, "p.yaml": position(old, new)}) == [f"parts/p.yaml:{message}"]


FAULTY = {
    "wrong field": part("3435", "x"),
    "broken line": part("3435", "}"),
    "alias": part("3435", "*x"),
    "table that is missing": WITH_CSV,
}
UNREADABLE = {"no UTF-8": PART.encode("utf-16"), "far too large": PART + "#" * 1_000_000}


@pytest.mark.parametrize("text", FAULTY.values(), ids=FAULTY)
def test_a_position_that_names_a_faulty_part_is_not_told_that_it_is_unknown(messages, text):
    (told,) = messages({"a.yaml": text, "p.yaml": POSITION})
    assert told.startswith("parts/a.yaml:")


@pytest.mark.parametrize("text", UNREADABLE.values(), ids=UNREADABLE)
def test_a_record_that_cannot_be_read_at_all_is_known_by_its_file_name(messages, text):
    (told,) = messages({"TB3A-103F38.yaml": text, "p.yaml": POSITION})
    assert told.startswith("parts/TB3A-103F38.yaml:")


def test_a_number_that_yaml_took_for_one_is_no_unknown_part_as_well(messages):
    files = {"a.yaml": part("TB3A-103F38", "0603"), "p.yaml": POSITION.replace("TB3A-103F38", '"0603"')}
    assert messages(files) == [
        'parts/a.yaml:1: part: 0603 is read as a number, where text must stand. Put it in quotes: "0603".'
    ]


@pytest.mark.parametrize("name", ["Tarnbrook Ceramics TB3A-103F38", "HS-1"])
def test_a_faulty_part_goes_by_all_its_names(messages, name):
    faulty = part("maker:", "own_number: HS-1\nmaker:").replace("3435", "x")
    (told,) = messages({"a.yaml": faulty, "p.yaml": POSITION.replace("TB3A-103F38", name)})
    assert "a.yaml:7: b_values[0].b_k" in told


@pytest.fixture
def catalog(records):
    own = part("maker:", "own_number: HS-10473\nmaker:")
    hidden = part("TB3A-103F38", "NV10").replace("maker:", "own_number: TB3A-103F38\nmaker:")
    return records({"a.yaml": own, "b.yaml": hidden})


@pytest.mark.parametrize(
    "name",
    ["TB3A-103F38", " tb3a-103f38 ", "Tarnbrook Ceramics TB3A-103F38", "tarnbrook ceramics tb3a-103f38", "hs-10473"],
)
def test_a_part_goes_by_its_number_its_full_name_or_its_own_number(catalog, name):
    assert catalog.part(name).name == "Tarnbrook Ceramics TB3A-103F38"


@pytest.mark.parametrize(
    ("name", "message"),
    [
        ("TB3A-103F3", "TB3A-103F3 is not a part of the catalog. Did you mean TB3A-103F38?"),
        ("zzz", "zzz is not a part of the catalog. Check the number."),
        ("", '"" is not a part of the catalog. Check the number.'),
        ("x" * 900, f"{'x' * 59}… is not a part of the catalog. Check the number."),
        ("a\x1b[31m", "a\\x1b[31m is not a part of the catalog. Check the number."),
    ],
)  # fmt: skip
def test_an_unknown_name_gets_the_nearest_number(catalog, name, message):
    with pytest.raises(UnknownPart) as unknown:
        catalog.part(name)
    assert str(unknown.value) == message


def test_an_own_number_of_several_parts_is_no_name(records):
    own = PART.replace("maker:", "own_number: HS-1\nmaker:")
    catalog = records({"a.yaml": own, "b.yaml": own.replace("TB3A", "NV")})
    with pytest.raises(UnknownPart) as several:
        catalog.part("HS-1")
    assert str(several.value) == (
        "HS-1 is the number of 2 parts: Tarnbrook Ceramics NV-103F38, Tarnbrook Ceramics TB3A-103F38. Name the maker too."
    )


def test_a_record_cannot_be_changed(records):
    (record,) = records({"a.yaml": PART}).parts
    with pytest.raises(dataclasses.FrozenInstanceError):
        record.table = None
    with pytest.raises(ValueError, match="frozen"):
        record.part.maker = "x"


def test_the_standing_that_holds_is_the_last(records):
    later = PART + "  - {state: approved, on: 2026-02-10, by: sensors, because: measured}\n"
    empty = PART[: PART.index("standing:")].replace("TB3A", "NV")
    catalog = records({"a.yaml": later, "b.yaml": empty})
    assert [record.part.state() for record in catalog.parts] == [None, "approved"]


def test_b_values_at_the_rated_temperature_are_one_for_each_other_temperature(records):
    listed = "[25, 85], b_k: 3435, tolerance_pct: 1}\n" + "".join(
        f"  - {{between_c: [{pair}], b_k: {b_k}}}\n"
        for pair, b_k in (("50, 25", 3380), ("85, 25", 3435), ("0, 50", 3350))
    )
    text = part("[25, 85], b_k: 3435, tolerance_pct: 1}\n", listed)
    stated = records({"a.yaml": text}).parts[0].part
    at_rated = [(stated.other_c(b), b.b_k, b.tolerance_pct) for b in stated.b_values_at_rated()]
    assert at_rated == [(50, 3380, None), (85, 3435, 1)]
    assert stated.curve_sources() == ("b-values", "b-value")
