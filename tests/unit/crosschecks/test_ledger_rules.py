"""Rules about the ledger: its order and dates, the document of an approval, reasons, reviews, own numbers."""

from __future__ import annotations

import datetime
from collections.abc import Callable
from pathlib import Path

import pytest
from ledger_catalog import APPROVED, DOCUMENTS, WITHDRAWN, alternate, part, position

Told = Callable[..., list[str]]
PROPOSED = "state: proposed, on: 2026-01-12, by: us, because: second source"
PLAIN = "state: approved, on: 2026-03-02, by: us, because: tested"
NEAR = "[{title: specification, revision: '01'}]"


def test_a_ledger_in_order_with_its_documents_is_passed_in_silence(told: Told) -> None:
    at = position(*alternate("PX-2", PROPOSED, APPROVED))
    assert told(a=part(PROPOSED, APPROVED), b=part(PROPOSED, number="PX-2"), p=at) == []


def test_an_entry_before_the_one_above_it_is_an_error(told: Told) -> None:
    assert told(a=part(APPROVED, PROPOSED)) == [
        "parts/a.yaml:11: standing[1].on: 2026-01-12 lies before the entry above, 2026-03-02. Entries are appended as they are "
        "made: correct the date, or move the entry. [error: ledger-order]"
    ]


def test_entries_of_one_day_are_in_order(told: Told) -> None:
    assert told(a=part(PROPOSED.replace("01-12", "03-02"), APPROVED)) == []


def test_each_alternate_has_an_order_of_its_own(told: Told) -> None:
    lines = [*alternate("PX-2", APPROVED), *alternate("PX-3", PROPOSED)]
    assert told(a=part(), b=part(number="PX-2"), c=part(number="PX-3"), p=position(*lines)) == []


@pytest.mark.parametrize("state", ["approved", "restricted"])
def test_an_approval_without_a_document_is_an_error_also_where_a_later_entry_holds(told: Told, state: str) -> None:
    said = f"standing[0].document: is missing: {state} without one. Name the document that the decision rests on, with its revision."
    entry = PLAIN.replace("approved", state)
    assert told(a=part(entry)) == [f"parts/a.yaml:10: {said} [error: approval-document]"]
    assert told(a=part(entry, WITHDRAWN)) == [f"parts/a.yaml:10: {said} [error: approval-document]"]


def test_a_proposal_and_a_withdrawal_need_no_document(told: Told) -> None:
    assert told(a=part(PROPOSED, WITHDRAWN)) == []


def test_an_approval_without_a_revision_is_an_error(told: Told) -> None:
    assert told(a=part(f"{PLAIN}, document: {{title: data sheet}}")) == [
        "parts/a.yaml:10: standing[0].document.revision: is missing: approved on no revision of the data sheet. "
        "Name the one that was looked at. [error: approval-document]"
    ]


@pytest.mark.parametrize(
    ("named", "documents", "said"),
    [
        (
            "{title: data sheet, revision: D}",
            DOCUMENTS,
            "data sheet, revision D is not among the documents of Pellworm PX-1. Did you mean data sheet, revision C?",
        ),
        (
            "{title: drawing, revision: D}",
            NEAR,
            "drawing, revision D is not among the documents of Pellworm PX-1. Add it there, or name the one that was meant.",
        ),
    ],
)
def test_a_revision_that_the_part_does_not_have_is_an_error(told: Told, named: str, documents: str, said: str) -> None:
    for entry in (PLAIN, PROPOSED):
        found = told(a=part(f"{entry}, document: {named}", documents=documents))
        assert found == [f"parts/a.yaml:10: standing[0].document: {said} [error: approval-document]"]


def test_titles_and_revisions_are_alike_in_upper_and_lower_case(told: Told) -> None:
    assert told(a=part(f"{PLAIN}, document: {{title: Data Sheet, revision: c}}")) == []


def test_an_alternate_s_document_is_one_of_the_alternate(told: Told) -> None:
    entry = f"{PLAIN}, document: {{title: specification, revision: '01'}}"
    own = part(number="PX-2", documents=NEAR)
    assert told(a=part(), b=own, p=position(*alternate("PX-2", entry))) == []
    assert told(a=part(), b=own, p=position(*alternate("PX-2", APPROVED))) == [
        "parts/p.yaml:13: alternates[0].standing[0].document: data sheet, revision C is not among the documents of Pellworm PX-2. "
        "Add it there, or name the one that was meant. [error: approval-document]"
    ]


def test_an_approval_on_a_replaced_revision_is_told_where_it_holds(told: Told) -> None:
    on_b = APPROVED.replace("revision: C", "revision: B")
    said = (
        "approved rests on data sheet, revision B, which revision C of 2026-02-03 has replaced. Review what changed, then append "
        "an entry. [warning: revision-replaced]"
    )
    assert told(a=part(on_b)) == [f"parts/a.yaml:10: standing[0].document: {said}"]
    assert told(a=part(on_b, APPROVED)) == []
    assert told(a=part(on_b, WITHDRAWN)) == []
    at = position(*alternate("PX-2", on_b))
    assert told(a=part(), b=part(number="PX-2"), p=at) == [
        f"parts/p.yaml:13: alternates[0].standing[0].document: {said}"
    ]


def test_a_later_document_without_a_revision_replaces_too(told: Told) -> None:
    documents = "[{title: data sheet, revision: C}, {title: data sheet}]"
    assert told(a=part(APPROVED, documents=documents)) == [
        "parts/a.yaml:10: standing[0].document: approved rests on data sheet, revision C, which one without a revision has "
        "replaced. Review what changed, then append an entry. [warning: revision-replaced]"
    ]


def test_a_replaced_revision_cannot_be_accepted_for_good(told: Told) -> None:
    on_b = APPROVED.replace("revision: C", "revision: B")
    accepted = "accepted: [{rule: revision-replaced, because: revision C corrects the address}]\n"
    (refused,) = (said for said in told(a=part(on_b, more=accepted)) if "accepted[0].rule" in said)
    assert "revision-replaced" in refused and refused.endswith("[error: wrong-choice]")


@pytest.mark.parametrize("reason", ['"-"', "obsolete", "n/a", '"— !"'])
def test_a_withdrawal_says_why(told: Told, reason: str) -> None:
    shown = reason.strip('"')
    assert told(a=part(WITHDRAWN.replace("no longer made", reason))) == [
        f"parts/a.yaml:10: standing[0].because: {shown} does not say why. Write a sentence: somebody will want to approve it "
        "again. [error: withdrawn-why]"
    ]


def test_other_entries_may_be_short(told: Told) -> None:
    assert told(a=part(APPROVED, WITHDRAWN.replace("no longer made", "not made"))) == []


def test_a_document_that_is_dated_after_the_decision_is_told(told: Told) -> None:
    """Revision C is of 2026-02-03."""
    said = (
        "parts/a.yaml:10: standing[0].document: data sheet, revision C is of 2026-02-03, after the decision, 2026-02-02. "
        "Correct one of the two days, or name the revision that was looked at. [warning: document-after-decision]"
    )
    assert told(a=part(APPROVED.replace("03-02", "02-02"))) == [said]
    assert told(a=part(APPROVED.replace("03-02", "02-03"))) == []


def test_a_review_before_the_decision_is_an_error(told: Told) -> None:
    assert told(a=part(f"{APPROVED}, review_due: 2026-03-01", f"{APPROVED}, review_due: 2027-03-01")) == [
        "parts/a.yaml:10: standing[0].review_due: 2026-03-01 lies before the decision, 2026-03-02. Correct one of the two. "
        "[error: review-before-decision]"
    ]


def test_an_entry_is_in_the_future_until_its_day(told: Told) -> None:
    record = part(APPROVED)
    assert told(datetime.date(2026, 3, 2), a=record) == []
    assert told(datetime.date(2026, 3, 1), a=record) == [
        "parts/a.yaml:10: standing[0].on: 2026-03-02 lies after today, 2026-03-01. Correct the date, or append the entry on its "
        "day. [warning: future-entry]"
    ]


def test_an_alternate_s_review_is_overdue_from_the_day_after_it_was_due(told: Told) -> None:
    at = position(*alternate("PX-2", f"{APPROVED}, review_due: 2026-05-31"))
    records = {"a": part(), "b": part(number="PX-2"), "p": at}
    assert told(datetime.date(2026, 5, 31), **records) == []
    assert told(datetime.date(2026, 6, 1), **records) == [
        "parts/p.yaml:13: alternates[0].standing[0].review_due: the review was due on 2026-05-31. Review the alternate and append "
        "an entry to its standing. [warning: review-overdue]"
    ]


def test_an_own_number_of_two_parts_is_told_in_both_records_and_can_be_accepted(told: Told) -> None:
    own, accepted = "own_number: HS-1\n", "accepted: [{rule: own-number-shared, because: either may be bought}]\n"
    said = "Give each part its own, or accept the finding where one number buys either. [warning: own-number-shared]"
    both = {"a": part(more=own), "b": part(number="PX-2", more=own.replace("HS", "hs"))}
    assert told(**both) == [
        f"parts/a.yaml:9: own_number: HS-1 is the own number of Pellworm PX-2 too. {said}",
        f"parts/b.yaml:9: own_number: hs-1 is the own number of Pellworm PX-1 too. {said}",
    ]
    assert told(**{name: text + accepted for name, text in both.items()}) == []
    assert told(b=part(number="PX-2", more="own_number: HS-2\n"), a=part(more=own)) == []


def test_an_own_number_that_is_another_part_s_number_is_told(told: Told) -> None:
    assert told(a=part(more="own_number: PX-1\n")) == []
    assert told(a=part(more="own_number: px-2\n"), b=part(number="PX-2")) == [
        "parts/a.yaml:9: own_number: px-2 is the part number of Pellworm PX-2 too. Give each part its own, or accept the finding "
        "where one number buys either. [warning: own-number-shared]"
    ]


@pytest.mark.parametrize(
    ("old", "new", "count"),
    [
        ("b_k: 3977", "b_k: 39770", "1 error"),
        ("tolerance_pct: 1}\nb_values", "tolerance_pct: 1}\nfoo: 1\nbar: 2\nb_values", "2 errors"),
        ("limits:", "r_t_table: {rows: [[0, 100], [25, 10000]]}\nlimits:", "1 error"),
    ],
    ids=["a refused field", "two refused fields", "a table that does not fall"],
)
def test_that_people_rely_on_a_part_with_errors_is_told_beside_them(told: Told, old: str, new: str, count: str) -> None:
    record = part(PROPOSED, APPROVED)
    assert old in record
    line = 11 + new.count("\n") - old.count("\n")
    said = (
        f"parts/a.yaml:{line}: standing[1]: the part is approved since 2026-03-02, and its record has {count}. Correct what is "
        "wrong; where a figure changes, append an entry that says who looked at it. [warning: approval-of-errors]"
    )
    found = told(a=record.replace(old, new))
    assert said in found and len(found) == 1 + int(count[0])
    proposed = told(a=part(PROPOSED).replace(old, new))
    assert len(proposed) == int(count[0]) and "approval-of-errors" not in "".join(proposed)


def test_errors_in_the_file_of_its_table_count(told: Told) -> None:
    Path("parts").mkdir()
    Path("parts", "t.csv").write_text("t_c,r_ohm\n0,100\n25,10000\n", "utf-8")
    found = told(a=part(APPROVED, more="r_t_table: {file: t.csv}\n"))
    assert [line.rpartition("[")[2] for line in found] == ["warning: approval-of-errors]", "error: not-falling]"]
    refused = told(a=part(APPROVED, more="r_t_table: {file: t.csv}\n").replace("3977", "39770"))
    assert len(refused) == 3 and "its record has 2 errors." in "".join(refused)


def test_errors_of_the_ledger_itself_do_not_count(told: Told) -> None:
    later = APPROVED.replace("03-02", "05-04")
    assert told(a=part(APPROVED, WITHDRAWN.replace("no longer made", '"-"'), later)) == [
        "parts/a.yaml:11: standing[1].because: - does not say why. Write a sentence: somebody will want to approve it again. "
        "[error: withdrawn-why]"
    ]


def test_a_part_without_entries_has_nothing_to_be_told(told: Told) -> None:
    assert told(a=part(), b=part(number="PX-2", documents="[{title: sheet}]")) == []
