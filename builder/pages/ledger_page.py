"""The Ledger page: every decision about parts and alternates, the newest first, and the same as a CSV."""

from __future__ import annotations

import datetime
from collections.abc import Iterable
from functools import partial
from typing import Any

from builder.exports.rows import csv_text
from builder.ledger import Entry
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, tag
from builder.pages.ledger import day_text, standing_badge
from builder.pages.page import DataFile, Page
from builder.pages.paths import relative
from builder.problems import count_text
from builder.records import PartRecord

PAGE, CSV, FEED = "ledger.html", "ledger.csv", "ledger.xml"
SOON_DAYS = 60
_STATES = ("approved", "restricted", "proposed", "withdrawn")
_COLUMNS = ("day", "part", "at position", "standing", "by", "because", "document", "only for", "review due")
_CSV_COLUMNS = (
    *("on", "state", "part", "maker", "own_number", "position", "board", "by", "because"),
    *("document", "revision", "only_for", "review_due", "holds"),
)


def ledger_page(context: Context) -> Page:
    """The page with every entry; its script takes out of the table what is filtered out or far below."""
    return Page(
        path=PAGE,
        title="Ledger",
        description="Every decision about parts and alternates: which day, by whom, why, on which document",
        body=lambda: str(_body(context)),
        search_text="decisions approvals standings reviews due feed",
        in_nav=True,
        made_from=ledger_sources(context),
    )


def ledger_sources(context: Context) -> tuple[str, ...]:
    """Every entry and where its part and position stand, for the `made_from` of what shows them; reads no record anew."""
    paths = context.paths
    parts = [
        (
            context.of_record("standings", part, partial(_told, part)),
            (part.maker, part.number, part.own_number),
            paths.part(part),
        )
        for part in context.catalog.parts
    ]
    places = [
        (context.digest(place), place.position.board, place.position.alternates) for place in context.catalog.positions
    ]
    return (str(context.today), *map(repr, parts), *map(repr, places))


def _told(part: PartRecord) -> list[Any]:
    return [standing.model_dump(mode="json") for standing in part.part.standing]


def ledger_csv(context: Context) -> DataFile:
    """Every entry, the oldest first: later ones are appended."""
    return DataFile(CSV, lambda: csv_text(_CSV_COLUMNS, map(_csv_row, context.entries)), ledger_sources(context))


def entry_anchor(entry: Entry, context: Context) -> str:
    """An entry's name in the page's address: it stays when later entries are appended.

    Slugs have no underscore, so two entries never share one.
    """
    part = context.paths.part(entry.part).removeprefix("parts/").removesuffix(".html").replace("/", "_")
    at = f"{context.paths.position(entry.position).split('/')[1].removesuffix('.html')}__" if entry.position else ""
    return f"{at}{part}_{entry.index + 1}"


def review_state(entry: Entry, today: datetime.date) -> str | None:
    """Whether the review of an entry that holds is `overdue`, due `soon` or still `open`; None where none is asked for."""
    due = entry.standing.review_due
    if due is None or not entry.holds:
        return None
    return "overdue" if due < today else "soon" if (due - today).days <= SOON_DAYS else "open"


def _csv_row(entry: Entry) -> dict[str, Any]:
    standing, part = entry.standing, entry.part.part
    place, document = entry.position and entry.position.position, standing.document
    return {
        "on": standing.on.isoformat(),
        "state": standing.state,
        "part": part.part,
        "maker": part.maker,
        "own_number": part.own_number,
        "position": place and place.position,
        "board": place and place.board,
        "by": standing.by,
        "because": standing.because,
        "document": document and document.title,
        "revision": document and document.revision,
        "only_for": ", ".join(standing.only_for),
        "review_due": standing.review_due and standing.review_due.isoformat(),
        "holds": "yes" if entry.holds else "no",
    }


def _body(context: Context) -> Html:
    entries = context.entries
    count = count_text(len(entries), "entry").replace("entrys", "entries")
    lead = (
        f"{count}, the newest first. Entries are appended, never edited; of each part and alternate the last one holds."
    )
    files = joined([link("ledger.csv", CSV), " · ", link("feed of the newest entries", FEED)])
    if not entries:
        return joined([tag("h1", "Ledger"), tag("p", "Nobody has decided anything yet."), tag("p", files)])
    head = tag("thead", tag("tr", *(tag("th", name, scope="col") for name in _COLUMNS)))
    rows = (_row(entry, context) for entry in reversed(entries))
    shown = tag("table", tag("caption", "Entries"), head, tag("tbody", *rows), class_="bd-table")
    return joined(
        [
            tag("h1", "Ledger"),
            tag("p", lead, class_="bd-lead"),
            tag("p", files),
            tag(
                "section",
                _filters(entries),
                tag("div", shown, class_="bd-scroll", tabindex="0", role="group", aria_label="Entries"),
                id="bd-ledger",
                class_="bd-ledger",
                aria_label="Entries of the ledger",
            ),
        ]
    )


def _row(entry: Entry, context: Context) -> Html:
    standing, part, anchor = entry.standing, entry.part.part, entry_anchor(entry, context)
    maker = tag("span", part.maker, class_="bd-ledger-maker")
    at: Any = "see only for" if standing.only_for else "everywhere"
    if entry.position:
        at = link(entry.position.position.position, relative(context.paths.position(entry.position), PAGE))
    cells = (
        joined([link(part.part, relative(context.paths.part(entry.part), PAGE)), " ", maker]),
        at,
        standing_badge(standing.state),
        standing.by,
        standing.document,
        ", ".join(standing.only_for),
        day_text(standing.review_due),
    )
    return tag(
        "tr",
        tag("th", link(day_text(standing.on), f"#{anchor}"), scope="row"),
        *(tag("td", cell) for cell in cells[:4]),
        tag("td", standing.because, class_="bd-long"),
        *(tag("td", cell) for cell in cells[4:]),
        id=anchor,
        data_day=standing.on.isoformat(),
        data_about="alternate" if entry.position else "part",
        data_state=standing.state,
        data_by=standing.by,
        data_own=part.own_number,
        data_review=review_state(entry, context.today),
        data_holds=entry.holds,
    )


def _filters(entries: Iterable[Entry]) -> Html:
    people = sorted({entry.standing.by for entry in entries}, key=lambda name: (name.casefold(), name))
    reviews = (("open", "open"), ("soon", f"due within {SOON_DAYS} days"), ("overdue", "overdue"))
    return tag(
        "form",
        _field("Part, maker or position", tag("input", type="search", name="find", spellcheck="false")),
        _field("About", _choice("about", [("part", "parts"), ("alternate", "alternates")])),
        _field("Standing", _choice("state", [(state, state) for state in _STATES])),
        _field("By", _choice("by", [(name, name) for name in people])),
        _field("From", tag("input", type="date", name="from")),
        _field("To", tag("input", type="date", name="to")),
        _field("Reviews", _choice("review", reviews)),
        tag("label", tag("input", type="checkbox", name="holds", value="yes"), " only what holds"),
        tag("button", "Clear", type="button"),
        tag("p", role="status"),
        role="search",
        aria_label="Entries",
        autocomplete="off",
        hidden=True,
    )


def _field(name: str, control: Html) -> Html:
    return tag("label", f"{name} ", control)


def _choice(name: str, choices: Iterable[tuple[str, str]]) -> Html:
    options = (tag("option", text, value=value) for value, text in choices)
    return tag("select", tag("option", "all", value=""), *options, name=name)
