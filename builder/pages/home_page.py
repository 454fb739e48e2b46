"""The home page: what the catalog holds, what needs attention, what was decided last."""

from __future__ import annotations

from collections import Counter
from collections.abc import Mapping, Sequence
from typing import Any

from builder.pages.attention_section import attention_table
from builder.pages.context import Context
from builder.pages.doubts import rule_link
from builder.pages.html import Html, joined, link, notice, table, tag
from builder.pages.ledger import day_text, standing_badge
from builder.pages.ledger_page import PAGE as LEDGER
from builder.pages.ledger_page import ledger_sources
from builder.pages.page import Heading, Page
from builder.pages.paths import relative
from builder.pages.tour_section import tour_section, tour_sources
from builder.problems import Problem, count_text

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
        made_from=(
            *problem_sources(context.catalog.problems[:_MOST_DOUBTS], context),
            repr((len(context.catalog.problems), len(context.catalog.positions))),
            repr([(record.maker, record.state) for record in context.catalog.parts]),
            repr([context.paths.maker(maker) for maker in {record.maker: None for record in context.catalog.parts}]),
            *ledger_sources(context),
            *tour_sources(context),
        ),
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
    states = Counter(record.state for record in catalog.parts)
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
    problems, decisions = context.catalog.problems, attention_table(context)
    if not problems and not decisions:
        return tag("p", "Nothing: every record passes every check without a warning, and no review is due.")
    left = len(problems) - _MOST_DOUBTS
    more = tag("p", f"And {count_text(left, 'more warning')}; beadroll check shows all.") if left > 0 else ""
    return joined([decisions, problems_table(problems[:_MOST_DOUBTS], HERE, context) if problems else "", more])


def problem_sources(problems: Sequence[Problem], context: Context) -> tuple[str, ...]:
    """What `problems_table` shows, for the `made_from` of its page."""
    return tuple(repr((problem, context.pages_by_file.get(problem.file))) for problem in problems)


def problems_table(problems: Sequence[Problem], here: str, context: Context) -> Html:
    """Problems with a link to the page of each one's record and of its rule."""
    if not problems:
        return tag("p", "Nothing in this catalog.")
    rows = [
        (
            _record_link(problem, context.pages_by_file, here),
            tag("code", problem.place) if problem.field else None,
            problem.message,
            rule_link(problem.rule, here),
        )
        for problem in problems
    ]
    return table(("record", "field", "what", "rule"), rows, caption=f"Found: {count_text(len(problems), 'warning')}")


def _record_link(problem: Problem, pages: Mapping[str, tuple[str, str]], here: str) -> Any:
    if problem.file not in pages:
        return problem.file
    name, path = pages[problem.file]
    return link(name, relative(path, here))


def _newest(context: Context) -> Html:
    newest = context.entries[: -_NEWEST - 1 : -1]
    if not newest:
        return tag("p", "Nobody has decided anything yet.")
    rows = [
        (
            day_text(entry.standing.on),
            link(entry.part.part.part, context.paths.part(entry.part)),
            entry.position and link(entry.position.position.position, context.paths.position(entry.position)),
            standing_badge(entry.standing.state),
            entry.standing.by,
            entry.standing.because,
        )
        for entry in newest
    ]
    headings = ("day", "part", "at", "standing", "by", "because")
    shown = table(headings, rows, caption="The latest decisions about parts and alternates")
    return joined([shown, tag("p", link("The whole ledger", LEDGER))])


def _holds(context: Context) -> Html:
    makers = Counter(record.maker for record in context.catalog.parts)
    rows = [(link(maker, context.paths.maker(maker)), count) for maker, count in sorted(makers.items())]
    if not rows:
        return tag("p", "No part yet. Record format shows how to write the first one.")
    return table(("maker", "parts"), rows, caption="Parts by maker")
