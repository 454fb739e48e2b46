"""Standings as pages show them."""

from __future__ import annotations

from datetime import date

from small_site import rows, text

from builder.pages.ledger import ledger_table, standing_badge, standing_line
from builder.records.part import Standing

PROPOSED = Standing(state="proposed", on=date(2026, 1, 12), by="sensors", because="first samples")
RESTRICTED = Standing(
    state="restricted",
    on=date(2026, 2, 10),
    by="safety",
    because="warm only",
    only_for=("a/RT1", "b"),
    review_due=date(2027, 2, 10),
)


def test_the_last_entry_is_the_standing_that_holds() -> None:
    assert text(standing_line([PROPOSED, RESTRICTED])) == (
        "restricted since 2026-02-10, by safety, only for a/RT1, b, review due 2027-02-10"
    )
    assert text(standing_line([RESTRICTED, PROPOSED])) == "proposed since 2026-01-12, by sensors"


def test_an_empty_ledger_says_that_nobody_has_decided() -> None:
    assert text(standing_line([])) == "no standing nobody has decided about this part yet"


def test_a_standing_is_told_in_words_and_in_colour() -> None:
    assert standing_badge("withdrawn") == '<span class="bd-standing bd-standing-withdrawn">withdrawn</span>'
    assert standing_badge(None) == '<span class="bd-standing bd-standing-none">no standing</span>'


def test_the_ledger_keeps_every_entry_the_newest_first() -> None:
    table = ledger_table([PROPOSED, RESTRICTED], "Standings")
    assert rows(table, "Standings") == [
        ["2026-02-10", "restricted", "safety", "warm only", "a/RT1, b", "2027-02-10"],
        ["2026-01-12", "proposed", "sensors", "first samples", "", ""],
    ]
    assert '<time datetime="2026-02-10">' in table
