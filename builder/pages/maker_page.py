"""A maker's page: its parts as one plain table, for links, print, and browsers without scripts."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterator, Mapping, Sequence
from typing import Any
from urllib.parse import quote

from builder.pages.html import Html, joined, link, table, tag
from builder.pages.ledger import standing_badge
from builder.pages.page import Page
from builder.pages.part_texts import body_text, rated_text
from builder.pages.parts_page import B_HEADING, PAGE, curve_b
from builder.pages.paths import Paths, relative
from builder.part_curve import PartCurve
from builder.problems import count_text
from builder.records import Catalog, PartRecord
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


def maker_pages(catalog: Catalog, curves: Mapping[str, PartCurve], paths: Paths) -> Iterator[Page]:
    """A page for each maker, in the order of the catalog."""
    by_maker: dict[str, list[PartRecord]] = defaultdict(list)
    for record in catalog.parts:
        by_maker[record.maker].append(record)
    for maker, records in by_maker.items():
        yield _maker_page(maker, records, curves, paths)


def _maker_page(maker: str, records: Sequence[PartRecord], curves: Mapping[str, PartCurve], paths: Paths) -> Page:
    count = count_text(len(records), "part")
    return Page(
        path=paths.maker(maker),
        title=maker,
        description=f"{count} of {maker}",
        body=lambda: str(_body(maker, records, curves, paths)),
        search_text=f"maker, {count}",
        made_from=tuple(f"{paths.part(record)} {record.digest}" for record in records),
    )


def _body(maker: str, records: Sequence[PartRecord], curves: Mapping[str, PartCurve], paths: Paths) -> Html:
    here = paths.maker(maker)
    in_list = link("in the list with filters", f"{relative(PAGE, here)}#maker={quote(maker)}")
    rows = [_row(record, curves[record.source.file], relative(paths.part(record), here)) for record in records]
    return joined(
        [
            tag("h1", maker),
            tag("p", f"{count_text(len(records), 'part')}, also ", in_list, "."),
            tag("div", table(_HEADINGS, rows, caption=f"Parts of {maker}"), class_="bd-maker"),
        ]
    )


def _row(record: PartRecord, curve: PartCurve, address: str) -> tuple[Any, ...]:
    part, (b_k, mark) = record.part, curve_b(curve)
    return (
        link(part.part, address),
        part.own_number,
        rated_text(part),
        "–" if b_k is None else f"{b_k} {mark}".rstrip(),
        body_text(part),
        range_text(part.limits.operating_c) if part.limits.operating_c else "not stated",
        standing_badge(part.state()),
        part.lifecycle,
    )
