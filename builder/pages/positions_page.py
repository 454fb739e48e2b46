"""The list of positions: for each board its positions by their alternates, with the verdict on each swap."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence

from builder.pages.context import Context
from builder.pages.html import Html, joined, link, slug, table, tag
from builder.pages.page import Heading, Page
from builder.pages.paths import relative
from builder.pages.verdicts import MEANINGS, verdict_badge
from builder.problems import count_text
from builder.records import PartRecord, PositionRecord
from builder.units import number_text, range_text

HERE = "positions/index.html"
_LEAD = (
    "A position is one place on one board where a thermistor is fitted. For each alternate there stands what fitting it "
    "does with the firmware unchanged; the verdict leads to its review."
)


def positions_page(context: Context) -> Page:
    """The matrix of positions and alternates."""
    return Page(
        path=HERE,
        title="Positions",
        description="Where thermistors are fitted, with range, limit and what each alternate does there.",
        body=lambda: str(_body(context)),
        headings=tuple(Heading(anchor, board) for board, anchor, _ in _boards(context)),
        search_text="positions boards designators fitted alternates swap verdict matrix",
        in_nav=True,
        made_from=tuple(_sources(place, context) for place in context.catalog.positions),
    )


def _sources(place: PositionRecord, context: Context) -> str:
    """What the page takes of a position and the parts that it names."""
    fitted, alternates = context.catalog.part(place.position.fitted), context.alternates(place)
    parts = [
        (part.name, part.number, context.paths.part(part), context.paths.swap(place, part))
        for part in (fitted, *alternates)
    ]
    return repr((context.digest(place), parts, [context.verdict(place, part) for part in alternates]))


def _body(context: Context) -> Html:
    boards = _boards(context)
    if not boards:
        return joined([tag("h1", "Positions"), tag("p", _LEAD), tag("p", "The catalog has none yet.")])
    meanings = [
        joined([tag("dt", verdict_badge(verdict)), tag("dd", meaning)]) for verdict, meaning in MEANINGS.items()
    ]
    return joined(
        [
            tag("h1", "Positions"),
            tag("p", _LEAD),
            tag("dl", *(tag("div", meaning) for meaning in meanings), class_="bd-verdicts"),
            *(_board(*board, context) for board in boards),
        ]
    )


def _boards(context: Context) -> list[tuple[str, str, list[PositionRecord]]]:
    """Each board with its anchor and its positions, in the order of the boards' names."""
    boards: dict[str, list[PositionRecord]] = defaultdict(list)
    for place in sorted(context.catalog.positions, key=lambda place: place.position.board):
        boards[place.position.board].append(place)
    return [(board, f"board-{n}-{slug(board)}", places) for n, (board, places) in enumerate(boards.items(), 1)]


def _board(board: str, anchor: str, places: Sequence[PositionRecord], context: Context) -> Html:
    """The board's positions as rows, the alternates of any of them as columns."""
    alternates = {part.source.file: part for place in places for part in context.alternates(place)}
    columns = sorted(alternates.values(), key=lambda part: part.name)
    rows = [
        (
            link(place.position.position, relative(context.paths.position(place), HERE)),
            _part_link(context.catalog.part(place.position.fitted), context),
            *_verdicts(place, columns, context),
            _limit(place),
            place.position.purpose,
        )
        for place in places
    ]
    headings = ("position", "fitted", *(_part_link(part, context) for part in columns), "limit", "purpose")
    counted = f"{count_text(len(places), 'position')}, {count_text(len(columns), 'alternate')}"
    return joined([tag("h2", board, id=anchor), table(headings, rows, caption=f"{board}: {counted}")])


def _limit(place: PositionRecord) -> Html:
    texts = f"±{number_text(place.position.limit_k)} K", f"at {range_text(place.position.range_c)}"
    return joined((tag("span", text, class_="bd-whole") for text in texts), " ")


def _verdicts(place: PositionRecord, columns: Sequence[PartRecord], context: Context) -> list[Html]:
    here = {part.source.file for part in context.alternates(place)}
    return [
        link(verdict_badge(context.verdict(place, part)), relative(context.paths.swap(place, part), HERE))
        if part.source.file in here
        else tag("span", "–", class_="bd-none")
        for part in columns
    ]


def _part_link(part: PartRecord, context: Context) -> Html:
    return link(part.number, relative(context.paths.part(part), HERE))
