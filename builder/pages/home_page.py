"""The home page: what the catalog holds, what needs attention, what was decided last."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from typing import Any

from builder.pages.context import Context
from builder.pages.doubts import rule_link
from builder.pages.html import Html, joined, link, notice, table, tag
from builder.pages.ledger import standing_badge
from builder.pages.page import Heading, Page
from builder.pages.paths import relative
from builder.pages.tour_section import tour_section
from builder.problems import Problem, count_text
from builder.records import PartRecord

HERE = "index.html"
_NEWEST = 10
_MOST_DOUBTS = 50
_HEADINGS = (
    ("attention", "Needs attention"),
    ("newest", "Newest standings"),
    ("tour", "A short tour"),
    ("holds", "What the catalog holds"),
)


def home_page(context: Context) -> Page:
    """The first page."""
    return Page(
        path=HERE,
        title="Home",
        description="NTC thermistors on record: checked, turned into curves, compared in kelvin.",
        body=lambda: str(_body(context)),
        headings=tuple(Heading(anchor, text) for anchor, text in _HEADINGS),
        search_text="home counts attention standings",
        in_nav=True,
    )


def _body(context: Context) -> Html:
    bodies = (_attention(context), _newest(context), tour_section(context), _holds(context))
    sections = [
        joined([tag("h2", text, id=anchor), body]) for (anchor, text), body in zip(_HEADINGS, bodies, strict=True)
    ]
    lead = "Which thermistor stands where, whether it may, and what it reads there: every decision in kelvin."
    about = notice("note", context.about) if context.about else ""
    return joined(
        [tag("h1", "Thermistors on record"), tag("p", lead, class_="bd-lead"), about, _tiles(context), *sections]
    )


def _tiles(context: Context) -> Html:
    catalog = context.catalog
    states = Counter(record.part.state() for record in catalog.parts)
    tiles = [
        (len(catalog.parts), "parts", "parts/index.html"),
        (states["approved"], "approved", "parts/index.html#standing=approved"),
        (states["restricted"], "restricted", "parts/index.html#standing=restricted"),
        (states["proposed"], "proposed", "parts/index.html#standing=proposed"),
        (states["withdrawn"], "withdrawn", "parts/index.html#standing=withdrawn"),
        (len(catalog.positions), "positions", "positions/index.html"),
    ]
    return tag(
        "ul",
        *(tag("li", link(joined([tag("b", n), f" {name}"]), address)) for n, name, address in tiles),
        class_="bd-tiles",
    )


def _attention(context: Context) -> Html:
    problems = context.catalog.problems
    if not problems:
        return tag("p", "Nothing: every record passes every check without a warning.")
    left = len(problems) - _MOST_DOUBTS
    more = tag("p", f"And {count_text(left, 'more warning')}; beadroll check shows all.") if left > 0 else ""
    return joined([problems_table(problems[:_MOST_DOUBTS], HERE, context), more])


def problems_table(problems: Sequence[Problem], here: str, context: Context) -> Html:
    """Problems with a link to the page of each one's record and of its rule."""
    if not problems:
        return tag("p", "Nothing in this catalog.")
    pages = _pages_by_file(context)
    rows = [
        (
            _record_link(problem, pages, here),
            tag("code", problem.place) if problem.field else None,
            problem.message,
            rule_link(problem.rule, here),
        )
        for problem in problems
    ]
    return table(("record", "field", "what", "rule"), rows, caption=f"Found: {count_text(len(problems), 'warning')}")


def _record_link(problem: Problem, pages: dict[str, tuple[str, str]], here: str) -> Any:
    if problem.file not in pages:
        return problem.file
    name, path = pages[problem.file]
    return link(name, relative(path, here))


def _pages_by_file(context: Context) -> dict[str, tuple[str, str]]:
    """Name and page of the record that each file belongs to."""
    pages = {
        place.source.file: (place.position.position, context.paths.position(place))
        for place in context.catalog.positions
    }
    for record in context.catalog.parts:
        files = {record.source.file, record.table.file if record.table else record.source.file}
        pages |= dict.fromkeys(files, (record.part.part, context.paths.part(record)))
    return pages


def _newest(context: Context) -> Html:
    entries = [
        (entry, _part_link(record, context), "") for record in context.catalog.parts for entry in record.part.standing
    ]
    for place in context.catalog.positions:
        at = link(place.position.position, relative(context.paths.position(place), HERE))
        for alternate in place.position.alternates:
            part = _part_link(context.catalog.part(alternate.part), context)
            entries += [(entry, part, at) for entry in alternate.standing]
    newest = sorted(entries, key=lambda e: e[0].on, reverse=True)[:_NEWEST]
    rows: list[tuple[Any, ...]] = [
        (entry.on.isoformat(), part, at, standing_badge(entry.state), entry.by, entry.because)
        for entry, part, at in newest
    ]
    if not rows:
        return tag("p", "Nobody has decided anything yet.")
    return table(
        ("day", "part", "at", "standing", "by", "because"),
        rows,
        caption="The latest decisions about parts and alternates",
    )


def _part_link(record: PartRecord, context: Context) -> Html:
    return link(record.part.part, relative(context.paths.part(record), HERE))


def _holds(context: Context) -> Html:
    parts = [record.part for record in context.catalog.parts]
    makers = Counter(part.maker for part in parts)
    rows = [(link(maker, context.paths.maker(maker)), count) for maker, count in sorted(makers.items())]
    if not rows:
        return tag("p", "No part yet. Record format shows how to write the first one.")
    return table(("maker", "parts"), rows, caption="Parts by maker")
