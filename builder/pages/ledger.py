"""Standings as a page shows them: the one that holds, and the ledger behind it."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import date

from builder.pages.html import Html, joined, table, tag
from builder.records.part import Standing


def standing_badge(state: str | None) -> Html:
    """The standing that holds, in words and colour."""
    return tag("span", state or "no standing", class_=f"bd-standing bd-standing-{state or 'none'}")


def standing_line(standing: Sequence[Standing]) -> Html:
    """The standing that holds, with its day, who decided, and what it is restricted to."""
    if not standing:
        return joined([standing_badge(None), " nobody has decided about this part yet"], " ")
    last = standing[-1]
    only = f"only for {', '.join(last.only_for)}" if last.only_for else None
    review = f"review due {last.review_due.isoformat()}" if last.review_due else None
    said = [f"since {last.on.isoformat()}", f"by {last.by}", only, review]
    return joined([standing_badge(last.state), ", ".join(s for s in said if s)], " ")


def day_text(day: date | None) -> Html | None:
    """A day that stays on one line."""
    return tag("time", day.isoformat(), datetime=day.isoformat()) if day else None


def ledger_table(standing: Sequence[Standing], caption: str) -> Html:
    """Every entry, the newest first."""
    rows = [
        (
            day_text(entry.on),
            standing_badge(entry.state),
            entry.by,
            entry.because,
            entry.document,
            ", ".join(entry.only_for),
            day_text(entry.review_due),
        )
        for entry in reversed(standing)
    ]
    return table(("day", "standing", "by", "because", "document", "only for", "review due"), rows, caption=caption)
