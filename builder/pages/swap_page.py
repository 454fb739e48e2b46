"""The review of a swap: one alternate at one position, decided and signed on two sheets of paper."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

import numpy as np

from builder.circuit import Budget, firmware_part
from builder.decisions import Reason, Swap
from builder.exports.rows import Column, Row, csv_text, difference_text, rounded
from builder.ledger.standings import goes_by
from builder.pages.cautions import CAUTION
from builder.pages.context import Context
from builder.pages.figures import Band, Limit, Line, Mark, reads_figure
from builder.pages.figures.trips import trip_rows, trips_line
from builder.pages.html import Html, facts, joined, link, notice, rows_table, table, tag
from builder.pages.ledger import ledger_table, standing_badge
from builder.pages.page import DataFile, Heading, Page
from builder.pages.part_facts import FACT_NAMES, part_facts
from builder.pages.paths import relative
from builder.pages.trips_section import acts_text
from builder.pages.verdicts import MEANINGS, verdict_badge
from builder.records import PartRecord, PositionRecord
from builder.units import compared_text, number_text, range_text, temperature_text

# On paper the figures of one page; the CSV has every row of the budget.
_MOST_ROWS = 14
_HEADINGS = (
    ("reasons", "Reasons"),
    ("reads", "What the instrument reads"),
    ("trips", "Trips before and after"),
    ("differences", "The two parts"),
    ("documents", "Documents and ledger"),
    ("cautions", "Cautions"),
    ("sign", "Decision"),
)
_SIGNED_BY = ("Prepared", "Checked", "Approved")


def swap_page(record: PositionRecord, alternate: PartRecord, context: Context) -> Page:
    """The review of one alternate at one position."""
    name = f"{alternate.part.part} at {record.position.position}"
    return Page(
        path=context.paths.swap(record, alternate),
        title=f"Swap review: {name}",
        description=f"Whether {alternate.name} may replace {record.position.fitted} at {record.position.position}",
        body=lambda: str(_body(context.swap(record, alternate), context)),
        headings=tuple(Heading(anchor, text) for anchor, text in _HEADINGS),
        search_text=f"swap review alternate {record.position.board} {alternate.part.maker} {record.position.fitted}",
        record=record.source.below,
        made_from=_made_from(record, alternate, context),
    )


def swap_csv(record: PositionRecord, alternate: PartRecord, context: Context) -> DataFile:
    """What the instrument reads before and after, at every row of the budget."""
    return DataFile(
        context.paths.swap_csv(record, alternate),
        lambda: csv_text([c.name for c in _COLUMNS], _rows(context.swap(record, alternate))),
        _made_from(record, alternate, context),
    )


def _made_from(record: PositionRecord, alternate: PartRecord, context: Context) -> tuple[str, ...]:
    named = [context.catalog.part(name) for name in (record.position.fitted, firmware_part(record.position))]
    return (context.digest(record), *map(context.digest, (alternate, *named)))


def _body(swap: Swap, context: Context) -> Html:
    here = context.paths.swap(swap.position, swap.alternate)
    sections = (
        _reasons(swap),
        _reads(swap, context),
        _trips(swap, context),
        _differences(swap, context),
        _documents(swap),
        _cautions(),
        _sign(swap),
    )
    shown = (
        tag("section", tag("h2", text, id=anchor), body, class_=f"bd-review-{anchor}")
        for (anchor, text), body in zip(_HEADINGS, sections, strict=True)
    )
    return tag("div", _head(swap, context, here), *shown, class_="bd-review")


def _head(swap: Swap, context: Context, here: str) -> Html:
    position = swap.position.position
    place = link(position.position, relative(context.paths.position(swap.position), here))
    known = facts(
        [
            ("Position", place),
            ("Board", position.board),
            ("Purpose", position.purpose),
            ("Fitted", _part_link(swap.fitted, context, here)),
            ("Alternate", _part_link(swap.alternate, context, here)),
            ("Range", range_text(position.range_c)),
            ("Limit", f"±{number_text(position.limit_k)} K on the whole reading"),
            ("Worst case", f"{_worst(swap.before)} before, {_worst(swap.after)} after"),
        ]
    )
    return joined(
        [
            tag("h1", f"{swap.alternate.part.part} in place of {swap.fitted.part.part}"),
            tag("p", verdict_badge(swap.verdict), " ", MEANINGS[swap.verdict], class_="bd-review-verdict"),
            known,
        ]
    )


def _part_link(part: PartRecord, context: Context, here: str) -> Html:
    return joined([link(part.part.part, relative(context.paths.part(part), here)), f", {part.part.maker}"])


def _worst(budget: Budget) -> str:
    if not np.isfinite(budget.worst_k):
        return f"no reading at {temperature_text(budget.worst_at_c)}"
    return f"{compared_text(budget.worst_k, budget.position.limit_k, 3)} K at {temperature_text(budget.worst_at_c)}"


def _reasons(swap: Swap) -> Html:
    groups = (("Against", True), ("Left open", None), ("To know", False))
    told = [
        joined(
            [tag("h3", heading), tag("ul", *(_reason(reason) for reason in swap.reasons if reason.against is against))]
        )
        for heading, against in groups
        if any(reason.against is against for reason in swap.reasons)
    ]
    return joined(told) if told else tag("p", "Nothing speaks against it, and nothing is left open.")


def _reason(reason: Reason) -> Html:
    return tag("li", tag("strong", f"{reason.about}: "), reason.message)


def _reads(swap: Swap, context: Context) -> Html:
    address = relative(
        context.paths.swap_csv(swap.position, swap.alternate), context.paths.swap(swap.position, swap.alternate)
    )
    rows = _rows(swap)
    shown = rows[:: -(-len(rows) // _MOST_ROWS)]
    if shown[-1] is not rows[-1]:
        shown = [*shown, rows[-1]]
    caption = "Reading minus true temperature, firmware unchanged: nominal, and the boards farthest off either way."
    return joined(
        [
            Html(_figure(swap)) if context.figures else "",
            rows_table(_COLUMNS, shown, caption=caption),
            tag("p", link("Every row as CSV", address, download=True), class_="bd-screen-only"),
        ]
    )


def _figure(swap: Swap) -> str:
    position, before, after = swap.position.position, swap.before.rows, swap.after.rows
    marks: list[Mark] = [
        Band("any board before", before.t_c, before.worst_min_k, before.worst_max_k),
        Band("any board after", after.t_c, after.worst_min_k, after.worst_max_k, after.extrapolated, series=2),
        Line("nominal before", before.t_c, before.bias_k),
        Line("nominal after", after.t_c, after.bias_k, after.extrapolated, series=2),
        Limit(f"limit ±{number_text(position.limit_k)} K", position.limit_k),
    ]
    title = f"Reading error at {position.position} before and after the swap"
    return reads_figure(title, f"Worst case {_worst(swap.before)} before, {_worst(swap.after)} after.", marks)


_COLUMNS = (
    Column("t_c", "°C", number_text),
    Column("before_k", "before K", difference_text),
    Column("before_min_k", "low K", difference_text),
    Column("before_max_k", "high K", difference_text),
    Column("after_k", "after K", difference_text),
    Column("after_min_k", "low K", difference_text),
    Column("after_max_k", "high K", difference_text),
    Column("moved_k", "moved by K", difference_text),
    Column("extrapolated", "", lambda extrapolated: "extrapolated" if extrapolated else "", left=True),
)


def _rows(swap: Swap) -> list[Row]:
    before, after = swap.before.rows, swap.after.rows
    columns = {
        "t_c": before.t_c,
        "before_k": before.bias_k,
        "before_min_k": before.worst_min_k,
        "before_max_k": before.worst_max_k,
        "after_k": after.bias_k,
        "after_min_k": after.worst_min_k,
        "after_max_k": after.worst_max_k,
        "moved_k": after.bias_k - before.bias_k,
    }
    values = zip(*([rounded(value) for value in column.tolist()] for column in columns.values()), strict=True)
    return [
        dict(zip(columns, row, strict=True)) | {"extrapolated": extrapolated}
        for row, extrapolated in zip(values, after.extrapolated.tolist(), strict=True)
    ]


def _trips(swap: Swap, context: Context) -> Html:
    if not swap.after.trips:
        return tag("p", "The firmware acts on no threshold here.")
    rows = [
        (before.name, temperature_text(before.at_c), acts_text(before), acts_text(after), _NEAR[after.ok])
        for before, after in zip(swap.before.trips, swap.after.trips, strict=True)
    ]
    headings = ("trip", "set to", "acts before", "acts after", "after")
    figures = trips_line(trip_rows({"before": swap.before, "after": swap.after}), swap.position.position.range_c)
    shown = table(headings, rows, caption="True temperatures between which each trip acts, on any board")
    return joined([Html(figures) if context.figures else "", shown])


_NEAR = {True: "near enough", False: "too far off", None: "undecided: a figure is missing"}


def _differences(swap: Swap, context: Context) -> Html:
    fitted, alternate = (part_facts(r.part, context.curve(r)) for r in (swap.fitted, swap.alternate))
    rows: list[tuple[Any, ...]] = [
        (name, old, tag("b", new) if old != new else new, "differs" if old != new else "")
        for name, old, new in zip(FACT_NAMES, fitted, alternate, strict=True)
    ]
    headings = ("fact", swap.fitted.part.part, swap.alternate.part.part, "beside the fitted part")
    return table(headings, rows, caption="What the records state of the fitted part and of the alternate")


def _documents(swap: Swap) -> Html:
    rows = [
        (part.part.part, d.title, d.revision, d.dated.isoformat() if d.dated else None)
        for part in (swap.fitted, swap.alternate)
        for d in part.part.documents
    ]
    used = (
        table(("part", "document", "revision", "dated"), rows, caption="Documents that the figures were read from")
        if rows
        else tag("p", "Neither record names a document.")
    )
    return joined([used, *_ledgers(swap)])


def _ledgers(swap: Swap) -> Iterator[Html]:
    number, place = swap.alternate.part.part, swap.position.position
    here = next((a.standing for a in place.alternates if goes_by(swap.alternate, a.part)), ())
    if here:
        yield ledger_table(here, f"Standings of {number} at {place.position}, the newest first")
    else:
        yield tag("p", f"Nobody has decided about {number} at {place.position} yet.")
    if swap.alternate.part.standing:
        yield ledger_table(swap.alternate.part.standing, f"Standings of {number} itself, the newest first")
    else:
        yield tag("p", f"{number} itself has ", standing_badge(None), ".")


def _cautions() -> Html:
    more = (
        "The verdict rests on what the records state. It says nothing of ageing, of moisture, of how the sensor touches "
        "what it measures, or of boards outside their stated limits: try the swap on real boards before it is released."
    )
    return joined([notice("caution", CAUTION), notice("caution", more)])


def _sign(swap: Swap) -> Html:
    caption = f"{swap.alternate.part.part} at {swap.position.position.position}: {swap.verdict}"
    blank = tag("span")  # a column without anything would be left out
    lines = table(
        ("role", "name", "day", "signature"), [(role, blank, blank, blank) for role in _SIGNED_BY], caption=caption
    )
    entry = "- {state: approved, on: 2026-01-31, by: …, because: …, document: {title: …, revision: …}}"
    paste = joined(
        [
            "The decision takes effect when it stands in the record, below ",
            tag("code", "standing:"),
            " of this alternate: ",
            tag("code", entry),
        ]
    )
    return joined([lines, tag("p", paste, class_="bd-screen-only")])
