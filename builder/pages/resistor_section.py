"""The fixed resistor that a position could have, beside the one that it has."""

from __future__ import annotations

import math
from urllib.parse import quote

from builder.decisions import Series, best_resistor
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, table, tag
from builder.pages.paths import relative
from builder.pages.shortlist_page import PAGE as SHORTLIST
from builder.records import PositionRecord
from builder.units import number_text, resistance_text, temperature_text

_SERIES: tuple[Series, ...] = ("E24", "E96")
_LEAD = (
    "The value of each series (IEC 60063) with the smallest worst case, and the common rule, which takes the thermistor's "
    "resistance in the middle of the range. Each has this position's tolerance and tempco, and firmware made anew for it by "
    "the same method; the present one stands as the budget has it."
)


def resistor_section(record: PositionRecord, context: Context) -> Html:
    """Best values beside the common rule and the present value."""
    position, budget = record.position, context.budget(record)
    thermistor, curve = context.fitted(record)
    try:
        found = [best_resistor(position, thermistor, curve, series) for series in _SERIES]
    except ValueError as error:
        return tag("p", f"No other resistor can be tried: {error}.")
    rows = [
        _row("present", position.circuit.fixed.resistance_ohm, budget.worst_k, budget.worst_at_c),
        *(_row(f"best of {best.series}", best.fixed_ohm, best.worst_k, best.worst_at_c) for best in found),
        *(_row(f"common rule, {best.series}", best.common_ohm, best.common_worst_k) for best in found),
    ]
    better = "The present resistor with its firmware is better than any of these."
    none_better = all(best.worst_k > budget.worst_k for best in found)
    shown = table(("fixed resistor", "value", "worst case", "at"), rows, caption="The worst case by the fixed resistor")
    others = link("Every part of the catalog in this circuit", _shortlist_address(record, context))
    return joined([tag("p", _LEAD), shown, tag("p", better) if none_better else "", tag("p", others)])


def _shortlist_address(record: PositionRecord, context: Context) -> str:
    """The Shortlist page, started from the position."""
    page = relative(SHORTLIST, context.paths.position(record))
    return f"{page}#start={quote(record.position.position)}"


def _row(name: str, fixed_ohm: float, worst_k: float, at_c: float | None = None) -> tuple[str, ...]:
    worst = "some boards have no reading" if math.isnan(worst_k) else f"{number_text(worst_k, 3)} K"
    return name, resistance_text(fixed_ohm), worst, "" if at_c is None else temperature_text(at_c)
