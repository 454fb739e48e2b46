"""A maker's page: its parts as one plain table, for links, print, and browsers without scripts."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterator, Sequence
from functools import partial
from typing import Any
from urllib.parse import quote

from builder.pages.context import Context
from builder.pages.html import Html, joined, link, table, tag
from builder.pages.ledger import standing_badge
from builder.pages.page import Page
from builder.pages.part_texts import body_text, rated_text
from builder.pages.parts_page import B_HEADING, PAGE, curve_b
from builder.pages.paths import relative
from builder.problems import count_text
from builder.records import PartRecord
from builder.units import range_text

_HEADINGS = (
    "Part number",
    "Own number",
    "Rated resistance",
    B_HEADING,
    "Body",
    "Operating range",
    "Standing",
    "Lifecycle",
)


def maker_pages(context: Context) -> Iterator[Page]:
    """A page for each maker, in the order of the catalog."""
    by_maker: dict[str, list[PartRecord]] = defaultdict(list)
    for record in context.catalog.parts:
        by_maker[record.maker].append(record)
    for maker, records in by_maker.items():
        yield _maker_page(maker, records, context)


def _maker_page(maker: str, records: Sequence[PartRecord], context: Context) -> Page:
    count = count_text(len(records), "part")
    rows = [
        (context.paths.part(record), *context.of_record("maker-row", record, partial(_texts, record, context)))
        for record in records
    ]
    return Page(
        path=context.paths.maker(maker),
        title=maker,
        description=f"{count} of {maker}",
        body=lambda: str(_body(maker, rows, context.paths.maker(maker))),
        search_text=f"maker, {count}",
        made_from=tuple(map(repr, rows)),
    )


def _body(maker: str, rows: Sequence[tuple[Any, ...]], here: str) -> Html:
    in_list = link("in the list with filters", f"{relative(PAGE, here)}#maker={quote(maker)}")
    shown = [
        (link(number, relative(path, here)), *texts, standing_badge(state), lifecycle)
        for path, number, *texts, state, lifecycle in rows
    ]
    return joined(
        [
            tag("h1", maker),
            tag("p", f"{count_text(len(rows), 'part')}, also ", in_list, "."),
            tag("div", table(_HEADINGS, shown, caption=f"Parts of {maker}"), class_="bd-maker"),
        ]
    )


def _texts(record: PartRecord, context: Context) -> tuple[str | None, ...]:
    part, (b_k, mark) = record.part, curve_b(context.curve(record))
    return (
        part.part,
        part.own_number,
        rated_text(part),
        "–" if b_k is None else f"{b_k} {mark}".rstrip(),
        body_text(part),
        range_text(part.limits.operating_c) if part.limits.operating_c else "not stated",
        part.state(),
        part.lifecycle,
    )
