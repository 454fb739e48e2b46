"""Rules about which part stands where: withdrawn, kept to other places, named twice."""

from __future__ import annotations

from collections.abc import Callable

import pytest
from ledger_catalog import APPROVED, WITHDRAWN, alternate, part, position

Told = Callable[..., list[str]]
ELSEWHERE = f"{APPROVED}, only_for: [can/RT1]"
OTHER_PLACE = position().replace("box/RT1", "can/RT1").replace("board: Box", "board: Can")


def only_for(*names: str) -> str:
    return f"{APPROVED}, only_for: [{', '.join(names)}]"


def test_a_fitted_part_that_is_withdrawn_is_told(told: Told) -> None:
    assert told(a=part(APPROVED, WITHDRAWN), p=position()) == [
        "parts/p.yaml:9: fitted: Pellworm PX-1 is withdrawn since 2026-04-01. Fit another part, or an approved alternate. "
        "[warning: withdrawn-fitted]"
    ]


def test_of_a_withdrawn_part_it_is_not_told_where_it_might_be_fitted(told: Told) -> None:
    gone = part(f"{WITHDRAWN}, only_for: [can/RT1]", number="PX-2")
    found = told(a=part(), b=gone, p=position(*alternate("PX-1", APPROVED), fitted="PX-2"), q=OTHER_PLACE)
    assert [line.rpartition("[")[2] for line in found] == ["warning: withdrawn-fitted]"]
    found = told(p=position(*alternate("PX-2", APPROVED)))
    assert [line.rpartition("[")[2] for line in found] == ["error: approved-though-withdrawn]"]


def test_a_part_that_was_approved_again_may_be_fitted(told: Told) -> None:
    assert told(a=part(WITHDRAWN, APPROVED.replace("03-02", "05-04")), p=position()) == []


def test_an_approved_alternate_whose_part_is_withdrawn_is_an_error_whichever_came_first(told: Told) -> None:
    for state, day in (("approved", "03-02"), ("restricted", "05-04")):
        entry = APPROVED.replace("approved", state).replace("03-02", day)
        assert told(a=part(), b=part(WITHDRAWN, number="PX-2"), p=position(*alternate("PX-2", entry))) == [
            f"parts/p.yaml:13: alternates[0].standing[0].state: {state} here, where Pellworm PX-2 is withdrawn since 2026-04-01. "
            "Append an entry that withdraws it here too, or approve the part again. [error: approved-though-withdrawn]"
        ]


def test_later_entries_settle_an_alternate_of_a_withdrawn_part(told: Told) -> None:
    withdrawn_here = position(*alternate("PX-2", APPROVED, WITHDRAWN))
    assert told(a=part(), b=part(WITHDRAWN, number="PX-2"), p=withdrawn_here) == []
    approved_again = part(WITHDRAWN, APPROVED.replace("03-02", "05-04"), number="PX-2")
    assert told(a=part(), b=approved_again, p=position(*alternate("PX-2", APPROVED))) == []


def test_a_fitted_part_that_is_for_other_places_is_an_error(told: Told) -> None:
    assert told(a=part(ELSEWHERE), p=position(), q=OTHER_PLACE) == [
        "parts/p.yaml:9: fitted: Pellworm PX-1 is only for can/RT1 since 2026-03-02. Fit another part, or append an entry to its "
        "standing that names this position. [error: not-for-here]"
    ]


@pytest.mark.parametrize("names", [("box/RT1",), ("BOX/rt1",), ("Box",), ("can/RT1", "BOX"), ()])
def test_a_part_may_be_fitted_where_its_standing_names_the_position_or_its_board(
    told: Told, names: tuple[str, ...]
) -> None:
    assert (
        told(a=part(only_for(*names)), p=position(), q=OTHER_PLACE.replace("PX-1", "PX-2"), b=part(number="PX-2")) == []
    )


@pytest.mark.parametrize("name", ["box", "box/RT", "RT1"])
def test_a_place_is_named_whole(told: Told, name: str) -> None:
    # "box" is the board's name but for its case; the position's own board is "The box".
    found = told(a=part(only_for(name)), p=position().replace("board: Box", "board: The box"))
    assert [line.rpartition("[")[2] for line in found] == ["warning: only-for-unknown]", "error: not-for-here]"]


def test_an_approved_alternate_whose_part_is_for_other_places_is_an_error(told: Told) -> None:
    records = {"a": part(), "b": part(ELSEWHERE, number="PX-2"), "q": OTHER_PLACE}
    assert told(p=position(*alternate("PX-2", APPROVED)), **records) == [
        "parts/p.yaml:13: alternates[0].standing[0].state: approved here, where Pellworm PX-2 is only for can/RT1 since 2026-03-02. "
        "Append an entry to one of the two. [error: not-for-here]"
    ]
    assert told(p=position(*alternate("PX-2", APPROVED, WITHDRAWN)), **records) == []


def test_an_alternate_s_own_entry_must_be_for_its_position(told: Told) -> None:
    records = {"a": part(), "b": part(number="PX-2"), "q": OTHER_PLACE}
    assert told(p=position(*alternate("PX-2", only_for("Box"))), **records) == []
    assert told(p=position(*alternate("PX-2", ELSEWHERE)), **records) == [
        "parts/p.yaml:13: alternates[0].standing[0].only_for: can/RT1 is not this position. Name it or its board, or leave "
        "only_for out: the entry is for here. [error: not-for-here]"
    ]


def test_a_place_that_no_record_has_is_told_with_the_nearest_one(told: Told) -> None:
    at = {"a": part(only_for("box/RT1", "bx/RT1", "nowhere")), "p": position()}
    assert told(**at) == [
        "parts/a.yaml:10: standing[0].only_for[1]: bx/RT1 is no position and no board of the catalog. Did you mean box/RT1? "
        "[warning: only-for-unknown]",
        "parts/a.yaml:10: standing[0].only_for[2]: nowhere is no position and no board of the catalog. Check the name; the part may "
        "be fitted nowhere by it. [warning: only-for-unknown]",
    ]


def test_places_of_earlier_entries_are_history(told: Told) -> None:
    assert told(a=part(only_for("nowhere"), APPROVED), p=position()) == []


def test_no_place_is_called_unknown_while_a_record_cannot_be_read(told: Told) -> None:
    found = told(a=part(only_for("can/RT1")), q=OTHER_PLACE.replace("limit_k: 2", "limit_k: 2000"))
    assert [line.rpartition("[")[2] for line in found] == ["error: out-of-bounds]"]


def test_an_alternate_that_is_the_fitted_part_or_stands_twice_is_an_error(told: Told) -> None:
    lines = ["- {part: PX-2}", "- {part: hs-1}", "- {part: Pellworm PX-2}"]
    assert told(a=part(more="own_number: HS-1\n"), b=part(number="PX-2"), p=position(*lines)) == [
        "parts/p.yaml:12: alternates[1].part: hs-1 is the fitted part already. Keep one, with all its entries. "
        "[error: alternate-repeated]",
        "parts/p.yaml:13: alternates[2].part: Pellworm PX-2 is an alternate already. Keep one, with all its entries. "
        "[error: alternate-repeated]",
    ]


def test_parts_that_no_record_has_are_told_as_unknown_and_no_more(told: Told) -> None:
    found = told(a=part(number="ZZ-9"), p=position(*alternate("PX-2", APPROVED), "- {part: PX-2}", fitted="PX-2"))
    assert [line.rpartition("[")[2] for line in found] == ["error: unknown-part]"] * 3
