"""Whether the ledger was kept since a revision: whole findings, with what they say."""

import shutil
from pathlib import Path

import pytest
from git_records import appended, other_part, part, position

from builder.history import Repository, ledger_slips, present_state, states_since

APPROVED = (
    "state: approved, on: 2026-02-10, by: components, because: tested, document: {title: data sheet, revision: A}"
)
SECOND = "state: approved, on: 2026-05-01, by: components, because: again, document: {title: data sheet, revision: A}"
WITHDRAWN = "state: withdrawn, on: 2026-04-01, by: quality, because: drifts"


def findings(since):
    repository, now = Repository(Path("parts")), present_state(Path("parts"))
    return [str(problem) for problem in ledger_slips(states_since(repository, repository.commit(since), now), now)]


def approved() -> str:
    return appended(part(), APPROVED)


def test_entries_that_are_appended_are_fine(kept):
    first = kept.commit("one", x=part(), y=other_part(), place=position())
    kept.commit("two", x=approved())
    kept.write(x=appended(approved(), WITHDRAWN), place=appended(position(), APPROVED))
    assert findings(first) == []


def test_an_entry_that_was_edited_is_told_with_what_it_said(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=approved().replace("because: tested", "because: tested twice").replace("2026-02-10", "2026-02-11"))
    assert findings(first) == [
        "parts/x.yaml:13: standing[1]: the entry approved on 2026-02-10 by components stood otherwise in revision "
        f'{first[:10]}: on was "2026-02-10", because was "tested". Restore it, and append what holds now as a new entry.'
    ]


def test_an_entry_that_was_removed_is_told(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=part())
    assert findings(first) == [
        "parts/x.yaml:11: standing: the entry approved on 2026-02-10 by components stood in revision "
        f"{first[:10]} and is gone. Restore it, and append what holds now as a new entry."
    ]


def test_an_entry_that_was_removed_from_the_middle_is_told_once(kept):
    first = kept.commit("one", x=appended(approved(), WITHDRAWN))
    kept.write(x=appended(part(), WITHDRAWN))
    assert len(findings(first)) == 1
    assert "standing: the entry approved on 2026-02-10 by components stood in revision" in findings(first)[0]


def test_a_whole_ledger_that_was_emptied_is_told(kept):
    first = kept.commit("one", x=approved())
    text = approved()
    kept.write(x=text[: text.index("standing:")])
    assert len(findings(first)) == 2


@pytest.mark.parametrize("entries", [(WITHDRAWN, APPROVED), (SECOND, APPROVED, WITHDRAWN)])
def test_entries_in_another_order_are_told_once(kept, entries):
    first = kept.commit("one", x=appended(part(), APPROVED, WITHDRAWN))
    kept.write(x=appended(part(), *entries))
    assert findings(first) == [
        f"parts/x.yaml:11: standing: the entries do not stand in the order that they had in revision {first[:10]}. "
        "Restore it; a new entry goes to the end."
    ]


def test_how_an_entry_is_typed_may_change(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=approved().replace("because: tested,", "because: 'tested',").replace("  - {", "  -  {"))
    assert findings(first) == []


def test_a_part_that_is_gone_with_its_ledger_is_told_whatever_stood_there(kept):
    first = kept.commit("one", x=approved(), y=other_part())
    kept.write(x=None, y=None)
    assert findings(first) == [
        f"parts/x.yaml:11: standing: the record of Maker X-103 is gone, whose ledger stood in revision {first[:10]}: "
        "proposed on 2026-01-12 by sensors, approved on 2026-02-10 by components. "
        "Put it back, and append an entry that withdraws it.",
        f"parts/y.yaml:11: standing: the record of Maker Y-103 is gone, whose ledger stood in revision {first[:10]}: "
        "proposed on 2026-01-12 by sensors. Put it back, and append an entry that withdraws it.",
    ]


def test_a_part_that_nobody_has_decided_about_may_go(kept):
    text = other_part()
    first = kept.commit("one", x=part(), y=text[: text.index("standing:")])
    kept.write(y=None)
    assert findings(first) == []


def test_a_position_that_is_gone_is_told_for_each_ledger_of_its_alternates(kept):
    first = kept.commit("one", x=part(), y=other_part(), place=position())
    kept.write(place=None)
    assert findings(first) == [
        "parts/place.yaml:16: alternates: the alternate Y-103 at board/RT1 is gone, whose ledger stood in revision "
        f"{first[:10]}: proposed on 2026-01-13 by purchasing. Put it back, and append an entry that withdraws it."
    ]


def test_one_of_two_equal_entries_that_was_removed_is_told(kept):
    first = kept.commit("one", x=appended(part(), APPROVED, APPROVED))
    kept.write(x=approved())
    assert findings(first) == [
        "parts/x.yaml:11: standing: the entry approved on 2026-02-10 by components stood in revision "
        f"{first[:10]} and is gone. Restore it, and append what holds now as a new entry."
    ]


def test_a_part_that_was_renamed_keeps_its_ledger(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=None, moved=approved().replace("X-103", "X-103B", 1))
    assert findings(first) == []
    kept.write(moved=part().replace("X-103", "X-103B", 1))
    assert [finding.partition(" stood")[0] for finding in findings(first)] == [
        "parts/moved.yaml:11: standing: the entry approved on 2026-02-10 by components"
    ]


def test_a_record_that_cannot_be_read_now_is_left_to_the_other_checks(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=part(("b_k: 3950", "b_k: 39500")))
    assert findings(first) == []


def test_alternates_are_looked_at_as_parts_are(kept):
    first = kept.commit("one", x=part(), y=other_part(), place=appended(position(), APPROVED))
    kept.write(place=position())
    assert findings(first) == [
        "parts/place.yaml:18: alternates[0].standing: the entry approved on 2026-02-10 by components stood in revision "
        f"{first[:10]} and is gone. Restore it, and append what holds now as a new entry."
    ]


def test_an_alternate_that_is_gone_with_its_approval_is_told(kept):
    first = kept.commit("one", x=part(), y=other_part(), place=appended(position(), APPROVED))
    text = position()
    kept.write(place=text[: text.index("alternates:")])
    assert findings(first) == [
        "parts/place.yaml:1: alternates: the alternate Y-103 at board/RT1 is gone, whose ledger stood in revision "
        f"{first[:10]}: proposed on 2026-01-13 by purchasing, approved on 2026-02-10 by components. "
        "Put it back, and append an entry that withdraws it."
    ]


def test_an_alternate_whose_part_was_renamed_keeps_its_ledger(kept):
    approved_there = appended(position(), APPROVED)
    first = kept.commit("one", x=part(), y=other_part(), place=approved_there)
    kept.write(y=other_part("Y-104"), place=approved_there.replace("Y-103", "Y-104"))
    assert findings(first) == []
    kept.commit("two")
    kept.write(place=approved_there.replace("Y-103", "maker y-104"))
    assert findings(first) == []
    kept.write(place=position(("Y-103", "Y-104")))
    assert len(findings(first)) == 1


def test_an_alternate_that_is_the_fitted_part_now_has_left_the_list_rightly(kept):
    first = kept.commit("one", x=part(), y=other_part(), place=appended(position(), APPROVED))
    fitted = position(("fitted: X-103", "fitted: maker y-103"))
    kept.write(place=fitted[: fitted.index("alternates:")])
    assert findings(first) == []


def test_an_alternate_whose_part_left_the_catalog_is_still_in_its_list(kept):
    text = other_part()
    first = kept.commit("one", x=part(), y=text[: text.index("standing:")], place=appended(position(), APPROVED))
    kept.write(y=None)
    assert findings(first) == []


def test_a_refusal_may_not_go_with_its_record(kept):
    first = kept.commit("one", x=part(), y=appended(other_part(), WITHDRAWN))
    kept.write(y=None)
    (finding,) = findings(first)
    assert "the record of Maker Y-103 is gone, whose ledger stood in revision" in finding
    assert finding.endswith("proposed on 2026-01-12 by sensors, withdrawn on 2026-04-01 by quality. Put it back.")


def test_a_curve_that_is_approved_as_an_alternate_only_does_not_move_without_a_new_entry(kept):
    there = appended(position(), APPROVED)
    first = kept.commit("one", x=part(), y=other_part(), place=there)
    kept.commit("move", y=other_part().replace("3960", "3900"))
    # 1/(1/298.15 + 3900/3960·(1/378.15 − 1/298.15)) − 378.15, by hand
    assert findings(first) == [
        "parts/place.yaml:20: alternates[0].standing[1]: the curve moved by −1.531 K at 105 °C since revision "
        f"{first[:10]}, where the alternate Y-103 at board/RT1 stood as approved already. "
        "Append an entry that approves it as it is, or restore the figures."
    ]
    kept.write(place=appended(there, SECOND))
    assert findings(first) == []


def test_of_a_part_with_an_approval_of_its_own_that_one_signs_for_its_alternates(kept):
    own = appended(other_part(), APPROVED)
    first = kept.commit("one", x=part(), y=own, place=appended(position(), APPROVED))
    kept.write(y=appended(own.replace("3960", "3900"), SECOND))
    assert findings(first) == []


def test_an_alternate_that_is_gone_though_only_proposed_is_told(kept):
    first = kept.commit("one", x=part(), y=other_part(), place=position())
    text = position()
    kept.write(place=text[: text.index("alternates:")])
    assert findings(first) == [
        "parts/place.yaml:1: alternates: the alternate Y-103 at board/RT1 is gone, whose ledger stood in revision "
        f"{first[:10]}: proposed on 2026-01-13 by purchasing. Put it back, and append an entry that withdraws it."
    ]


def test_an_entry_that_came_and_went_in_between_is_told(kept):
    first = kept.commit("one", x=part(), y=other_part(), place=position())
    second = kept.commit("approve the swap", place=appended(position(), APPROVED))
    kept.commit("undo it", place=position())
    kept.commit("elsewhere", y=other_part("Y-103", ("bead", "probe")))
    assert findings(first) == [
        "parts/place.yaml:18: alternates[0].standing: the entry approved on 2026-02-10 by components stood in revision "
        f"{second[:10]} and is gone. Restore it, and append what holds now as a new entry."
    ]


def test_a_part_that_came_approved_and_went_in_between_is_told(kept):
    first = kept.commit("one", y=other_part())
    second = kept.commit("two", x=approved())
    kept.commit("three", x=None)
    assert [finding.partition(", whose")[0] for finding in findings(first)] == [
        "parts/x.yaml:11: standing: the record of Maker X-103 is gone"
    ]
    assert second[:10] in findings(first)[0]


def test_what_was_broken_and_restored_in_between_is_fine(kept):
    first = kept.commit("one", x=approved())
    kept.commit("edit", x=approved().replace("because: tested", "because: untested"))
    kept.commit("remove", x=part())
    kept.commit("restore", x=approved())
    assert findings(first) == []


def test_a_curve_that_moved_without_a_new_entry_is_told(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=approved().replace("3950", "3900"))
    assert findings(first) == [
        "parts/x.yaml:13: standing[1]: the curve moved by −1.280 K at 105 °C since revision "
        f"{first[:10]}, where the part stood as approved already. "
        "Append an entry that approves it as it is, or restore the figures."
    ]


def test_a_band_that_moved_without_a_new_entry_is_told(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=approved().replace("b_k: 3950, tolerance_pct: 1", "b_k: 3950, tolerance_pct: 2"))
    (finding,) = findings(first)
    assert "standing[1]: the tolerance band moved by " in finding


def test_a_band_that_moved_is_told_though_the_curve_moved_by_less_than_counts(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=approved().replace("b_k: 3950, tolerance_pct: 1", "b_k: 3950.01, tolerance_pct: 2"))
    (finding,) = findings(first)
    assert "standing[1]: the tolerance band moved by " in finding


@pytest.mark.parametrize("state", ["proposed", "withdrawn"])
def test_the_curve_of_a_part_that_is_not_approved_may_move(kept, state):
    text = appended(part(), WITHDRAWN) if state == "withdrawn" else part()
    first = kept.commit("one", x=text)
    kept.write(x=text.replace("3950", "3900"))
    assert findings(first) == []


def test_a_new_entry_with_the_edit_or_after_it_signs_it(kept):
    first = kept.commit("one", x=approved())
    moved = approved().replace("3950", "3900")
    kept.write(x=appended(moved, SECOND))
    assert findings(first) == []
    kept.commit("move", x=moved)
    kept.commit("sign", x=appended(moved, SECOND))
    assert findings(first) == []


def test_an_edit_after_the_new_entry_is_told_though_there_is_one(kept):
    first = kept.commit("one", x=part())
    second = kept.commit("approve", x=approved())
    kept.commit("move", x=approved().replace("3950", "3900"))
    (finding,) = findings(first)
    assert f"since revision {second[:10]}" in finding


def test_a_curve_that_moved_and_came_back_is_fine(kept):
    first = kept.commit("one", x=approved())
    kept.commit("move", x=approved().replace("3950", "3900"))
    kept.commit("back", x=approved())
    assert findings(first) == []


def test_less_than_a_millikelvin_is_no_move(kept):
    first = kept.commit("one", x=approved())
    kept.write(x=approved().replace("3950", "3950.01"))
    assert findings(first) == []


def test_a_side_branch_counts_as_what_its_merge_brought(kept):
    first = kept.commit("one", x=part())
    kept.git("checkout", "--quiet", "-b", "side")
    kept.commit("approve", x=approved())
    kept.commit("undo", x=part(), y=other_part())
    kept.git("checkout", "--quiet", "main")
    kept.git("merge", "--quiet", "--no-ff", "--message", "merge", "side")
    assert findings(first) == []


def test_a_revision_that_was_amended_away_is_not_forgotten(kept):
    kept.commit("one", x=part())
    second = kept.commit("two", x=approved())
    kept.git("reset", "--quiet", "--hard", "HEAD~1")
    kept.commit("other", y=other_part())
    assert len(findings(second)) == 1


def test_a_folder_that_came_and_went_in_between_is_read_round(kept):
    first = kept.commit("one", x=approved())
    shutil.move(kept.records, kept.root / "elsewhere")
    kept.commit("move away")
    shutil.move(kept.root / "elsewhere", kept.records)
    kept.commit("and back")
    assert findings(first) == []
