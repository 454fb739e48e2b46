"""What a position asks of a part beside its reading, each reason as a whole message."""

import pytest
from places import APPROVED, PROPOSED, WITHDRAWN, part, place

from builder.decisions.requirements import Reason, requirement_reasons


def reasons(own=None, **fields):
    return list(requirement_reasons(place(**fields).position, (own or part()).part))


def test_part_that_has_what_is_asked_gives_no_reason():
    asked = {"size_code": "0603", "time_constant_max_s": 4, "qualification": ["AEC-Q200 grade 1"]}
    assert reasons(part(qualification=["aec-q200 GRADE 1"]), requires=asked) == []


AGAINST = {
    "another size code": (
        part(body={"form": "chip", "size_code": "0402"}),
        {"size_code": "0603"},
        Reason("body", "0402 does not stand on the footprint 0603", True),
    ),
    "no chip": (
        part(body={"form": "leaded"}),
        {"size_code": "0603"},
        Reason("body", "leaded does not stand on the footprint 0603", True),
    ),
    "too hot": (
        part(limits={"operating_c": [-40, 55]}),
        {},
        Reason("range", "operates to 55 °C, the range reaches 60 °C", True),
    ),
    "too cold": (
        part(limits={"operating_c": [5, 125]}),
        {},
        Reason("range", "operates from 5 °C, the range reaches 0 °C", True),
    ),
    "no qualification": (
        part(),
        {"qualification": ["UL 1434"]},
        Reason("qualification", "UL 1434 is required, it has none", True),
    ),
    "another qualification": (
        part(qualification=["AEC-Q200 grade 1"]),
        {"qualification": ["UL 1434"]},
        Reason("qualification", "UL 1434 is required, it has AEC-Q200 grade 1", True),
    ),
    "too slow": (
        part(),
        {"time_constant_max_s": 2.5},
        Reason("time constant", "time constant 4 s, at most 2.5 s is required", True),
    ),
}


@pytest.mark.parametrize(("own", "requires", "reason"), AGAINST.values(), ids=AGAINST)
def test_what_is_asked_and_not_there_speaks_against_a_part(own, requires, reason):
    assert reasons(own, requires=requires) == [reason]


NOT_STATED = {
    "operating range": (
        {"operating_c": None},
        Reason("range", "the part's operating range is not stated (limits.operating_c)", None, ("limits.operating_c",)),
    ),
    "time constant": (
        {"time_constant_s": None},
        Reason(
            "time constant",
            "the part's time constant is not stated (limits.time_constant_s)",
            None,
            ("limits.time_constant_s",),
        ),
    ),
}


@pytest.mark.parametrize(("limits", "reason"), NOT_STATED.values(), ids=NOT_STATED)
def test_figure_that_is_asked_and_not_stated_leaves_it_open(limits, reason):
    assert reasons(part(limits=limits), requires={"time_constant_max_s": 4}) == [reason]


def test_time_constant_that_nobody_asks_for_need_not_be_stated():
    assert reasons(part(limits={"time_constant_s": None})) == []


@pytest.mark.parametrize(
    ("grade", "covers"), [("0", True), ("1", True), ("2", False)]
)  # AEC-Q200: grade 0 is −50 to 150 °C, 1 is −40 to 125 °C, 2 is −40 to 105 °C
def test_better_grade_of_aec_q200_covers_a_lesser_one(grade, covers):
    found = reasons(part(qualification=[f"AEC-Q200 grade {grade}"]), requires={"qualification": ["AEC-Q200 grade 1"]})
    assert (found == []) is covers


STANDINGS = {
    "withdrawn": ([APPROVED, WITHDRAWN], "the part is withdrawn since 2026-03-30 (quality: It cracks)", True),
    "proposed": ([PROPOSED], "the part is proposed since 2026-01-12 (purchasing: It is cheap)", False),
    "nothing": ([], "the part has no entry in its ledger", False),
    "elsewhere": ([APPROVED | {"only_for": ["a/RT1", "b"]}], "the part may be fitted only at a/RT1, b", True),
}


@pytest.mark.parametrize(("standing", "message", "against"), STANDINGS.values(), ids=STANDINGS)
def test_standing_of_the_part_is_told(standing, message, against):
    assert reasons(part(standing=standing)) == [Reason("standing", message, against)]


@pytest.mark.parametrize("here", ["BOARD/rt1", "board"], ids=["position", "board"])
def test_part_kept_to_this_position_or_its_board_may_stand_here(here):
    assert reasons(part(standing=[APPROVED | {"only_for": ["a/RT1", here]}])) == []


def test_part_withdrawn_and_then_approved_again_stands():
    assert reasons(part(standing=[WITHDRAWN, APPROVED])) == []


LIFECYCLES = {"active": None, "not for new designs": False, "last time buy": False, "obsolete": True}


@pytest.mark.parametrize("lifecycle", LIFECYCLES)
def test_only_an_obsolete_part_is_ruled_out_by_its_lifecycle(lifecycle):
    expected = [] if lifecycle == "active" else [Reason("lifecycle", f"the part is {lifecycle}", LIFECYCLES[lifecycle])]
    assert reasons(part(lifecycle=lifecycle)) == expected


def test_every_reason_is_told_and_not_the_first_alone():
    found = reasons(
        part(body={"form": "disc"}, limits={"operating_c": [10, 50]}, lifecycle="obsolete", standing=[WITHDRAWN]),
        requires={"size_code": "0603", "qualification": ["UL 1434"], "time_constant_max_s": 1},
    )
    assert [reason.about for reason in found] == [
        "body",
        "range",
        "range",
        "qualification",
        "time constant",
        "standing",
        "lifecycle",
    ]
    assert all(reason.against for reason in found)
