"""The parts nearest to one, by what its firmware would read with them fitted."""

from __future__ import annotations

from builder.comparisons.nearest import Neighbour
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, table, tag
from builder.pages.ledger import standing_badge
from builder.pages.paths import relative
from builder.pages.side_by_side_page import side_by_side_address
from builder.records import PartRecord
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
    rows = table(headings, [_row(record, n, context) for n in nearest], caption="The nearest parts of the catalog")
    return joined([tag("p", lead), rows, tag("p", link("See the nearest side by side", address))])


def _row(record: PartRecord, neighbour: Neighbour, context: Context) -> tuple[object, ...]:
    other = context.catalog.parts[neighbour.place]
    name = link(other.part.part, relative(context.paths.part(other), context.paths.part(record)))
    partly = "" if neighbour.whole_range else "over a part of the range only"
    worst = f"{signed_text(neighbour.worst_k)} K"
    standing = standing_badge(other.part.state())
    return name, other.part.maker, standing, worst, temperature_text(neighbour.at_c), partly
