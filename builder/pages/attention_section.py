"""Decisions that somebody must look at: reviews, parts fitted where they may not be, proposals left undecided."""

from __future__ import annotations

import datetime
from collections.abc import Sequence

from builder.ledger import Entry, may_stand
from builder.ledger.standings import Verdict
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, table
from builder.pages.ledger_page import PAGE, SOON_DAYS, entry_anchor, review_state

_LONG_DAYS = 90
_MOST_NAMED = 5
_POSITIONS = "positions/index.html"


def attention_table(context: Context) -> Html:
    """What there is of each kind, with a link to all of it; nothing where there is none."""
    long_ago = context.today - datetime.timedelta(days=_LONG_DAYS + 1)
    reviews = {kind: _reviews(context, kind) for kind in ("overdue", "soon")}
    groups = (
        ("reviews overdue", f"{PAGE}#review=overdue", reviews["overdue"]),
        (f"reviews due within {SOON_DAYS} days", f"{PAGE}#review=soon", reviews["soon"]),
        (
            f"alternates proposed and undecided for over {_LONG_DAYS} days",
            f"{PAGE}#about=alternate&state=proposed&to={long_ago.isoformat()}&holds=yes",
            _undecided(context, long_ago),
        ),
        ("parts fitted that are withdrawn", f"{PAGE}#state=withdrawn&holds=yes", _fitted(context, "withdrawn")),
        ("parts fitted that nobody approved", _POSITIONS, _fitted(context, "proposed", "undecided")),
    )
    rows = [(link(what, address), len(found), _named(found)) for what, address, found in groups if found]
    return table(("what", "how many", "which"), rows, caption="Decisions to look at") if rows else Html()


def _named(found: Sequence[Html]) -> Html:
    more = [f"and {len(found) - _MOST_NAMED} more"] if len(found) > _MOST_NAMED else []
    return joined([*found[:_MOST_NAMED], *more], ", ")


def _reviews(context: Context, kind: str) -> list[Html]:
    found = [entry for entry in context.entries if review_state(entry, context.today) == kind]
    return [_entry_link(entry, context) for entry in sorted(found, key=lambda e: str(e.standing.review_due))]


def _undecided(context: Context, long_ago: datetime.date) -> list[Html]:
    return [
        _entry_link(entry, context)
        for entry in context.entries
        if entry.position and entry.holds and entry.standing.state == "proposed" and entry.standing.on <= long_ago
    ]


def _entry_link(entry: Entry, context: Context) -> Html:
    at = f" at {entry.position.position.position}" if entry.position else ""
    return link(f"{entry.part.part.part}{at}", f"{PAGE}#{entry_anchor(entry, context)}")


def _fitted(context: Context, *verdicts: Verdict) -> list[Html]:
    parts = [(place, context.catalog.part(place.position.fitted)) for place in context.catalog.positions]
    return [
        link(f"{part.part.part} at {place.position.position}", context.paths.position(place))
        for place, part in parts
        if may_stand(part, place).verdict in verdicts
    ]
