"""The parts nearest to one, by what its firmware would read with them fitted."""

from __future__ import annotations

from builder.pages.context import Context
from builder.pages.html import Html, joined, link, table, tag
from builder.pages.ledger import standing_badge
from builder.pages.paths import relative
from builder.pages.side_by_side_page import side_by_side_address
from builder.records import PartRecord
from builder.records.part import StandingState
from builder.units import range_text, signed_text, temperature_text

# As many as are still told apart in one figure.
_CHOSEN = 3


def nearest_section(record: PartRecord, context: Context) -> Html:
    """The ten nearest parts with their largest difference over the part's own operating range."""
    nearest = context.nearest(record)
    if not nearest:
        return tag("p", "No other part of the catalog can be compared over this part's range.")
    span = range_text(context.curve(record).operating_c)
    lead = (
        f"What an instrument made for this part reads with another one fitted, nominal, at its worst from {span}: + reads high. "
        "Equal curves are not interchangeable parts: compare bodies, ratings and tolerances too."
    )
    here = context.paths.part(record)
    others = tuple(context.catalog.parts[n.place] for n in nearest[:_CHOSEN])
    address = relative(side_by_side_address(record, others, context), here)
    headings = ("part", "maker", "standing", "reads at most", "at", "note")
    rows = [_row(*shown, here) for shown in shown_neighbours(record, context)]
    named = table(headings, rows, caption="The nearest parts of the catalog")
    return joined([tag("p", lead), named, tag("p", link("See the nearest side by side", address))])


def shown_neighbours(
    record: PartRecord, context: Context
) -> list[tuple[str, str, str, StandingState | None, float, float, bool]]:
    """Of each of the nearest parts all that the section shows: page, number, maker, standing, and its figures."""
    return [
        (
            context.paths.part(other),
            other.number,
            other.maker,
            other.state,
            neighbour.worst_k,
            neighbour.at_c,
            neighbour.whole_range,
        )
        for neighbour in context.nearest(record)
        for other in (context.catalog.parts[neighbour.place],)
    ]


def _row(
    path: str,
    number: str,
    maker: str,
    state: StandingState | None,
    worst_k: float,
    at_c: float,
    whole_range: bool,
    here: str,
) -> tuple[object, ...]:
    partly = "" if whole_range else "over a part of the range only"
    worst = f"{signed_text(worst_k)} K"
    return link(number, relative(path, here)), maker, standing_badge(state), worst, temperature_text(at_c), partly
