"""The ledger's newest entries as an Atom feed (RFC 4287)."""

from __future__ import annotations

import uuid
from urllib.parse import urljoin

from builder.ledger import Entry
from builder.pages.context import Context
from builder.pages.html import Html, joined, tag
from builder.pages.ledger_page import FEED, PAGE, entry_anchor, ledger_sources
from builder.pages.page import DataFile

_NEWEST = 100
_NO_ENTRY = "1970-01-01"
# For the head of the Ledger page, where readers of feeds look for it.
# Material takes every link whose rel is just "alternate" for a translation, and fetches a sitemap for it.
FEED_LINK = f'<link rel="alternate feed" type="application/atom+xml" title="Ledger" href="{FEED}">'


def ledger_feed(context: Context, site_url: str) -> DataFile:
    """The feed; its links are absolute where the site's address is known."""
    return DataFile(FEED, lambda: _feed(context, site_url), (site_url, *ledger_sources(context)))


def _feed(context: Context, site_url: str) -> str:
    entries = context.entries[: -_NEWEST - 1 : -1]
    last = entries[0].standing.on.isoformat() if entries else _NO_ENTRY
    feed = tag(
        "feed",
        tag("id", _urn("ledger", site_url)),
        tag("title", "Ledger of thermistors"),
        tag("updated", f"{last}T00:00:00Z"),
        tag("author", tag("name", "Beadroll")),
        _link(urljoin(site_url, PAGE)),
        _link(urljoin(site_url, FEED), rel="self"),
        *(_entry(entry, context, site_url) for entry in entries),
        xmlns="http://www.w3.org/2005/Atom",
    )
    return f'<?xml version="1.0" encoding="utf-8"?>\n{feed}\n'


def _entry(entry: Entry, context: Context, site_url: str) -> Html:
    standing, place = entry.standing, entry.position.position.position if entry.position else ""
    said = [standing.because, f"document: {standing.document}" if standing.document else ""]
    said += [f"only for {', '.join(standing.only_for)}" if standing.only_for else ""]
    return tag(
        "entry",
        # From what is decided about and its place in that ledger: the same in every build, whatever is appended.
        tag("id", _urn(entry.part.part.maker, entry.part.part.part, place, str(entry.index))),
        tag("title", f"{entry.part.part.part} {standing.state}{f' at {place}' if place else ''}"),
        tag("updated", f"{standing.on.isoformat()}T00:00:00Z"),
        tag("author", tag("name", standing.by)),
        _link(urljoin(site_url, f"{PAGE}#{entry_anchor(entry, context)}")),
        tag("summary", " · ".join(filter(None, said))),
    )


def _urn(*names: str) -> str:
    return uuid.uuid5(uuid.NAMESPACE_URL, "\n".join(names)).urn


def _link(address: str, rel: str = "alternate") -> Html:
    return Html(joined([tag("link", rel=rel, href=address)]).replace("></link>", "/>"))
