"""A position's budget: the verdict, figures and table, and what a code is worth."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from builder.circuit import DEFAULT_STEP_K, Budget
from builder.exports.budget_rows import columns, csv_names, csv_rows, shown_rows
from builder.exports.rows import csv_text
from builder.pages.context import SAMPLE_STEP_K, Context
from builder.pages.figures.budgets import budget_figure, sources_figure
from builder.pages.html import Html, joined, link, notice, rows_table, table, tag
from builder.pages.page import DataFile
from builder.pages.paths import relative
from builder.part_curve import whole_steps_c
from builder.problems import count_text
from builder.records import PositionRecord
from builder.units import compared_text, number_text, temperature_text

_VERDICTS = {
    True: ("good", "Limit met"),
    False: ("bad", "Limit exceeded"),
    None: ("open", "Undecided"),
}
_LEAD = (
    "The whole reading error on any board within its limits. Bias is what the nominal board reads wrong; the statistical band "
    "takes every source as a rectangular limit, k = 2; in the worst case all sources stand at their ends together."
)


def position_sources(record: PositionRecord, context: Context) -> tuple[str, ...]:
    """What a position's page and file are made from: its record, and those of the parts that it names."""
    parts = (context.catalog.part(name) for name in dict.fromkeys(record.position.named_parts().values()))
    return context.digest(record), *map(context.digest, parts)


def verdict_line(budget: Budget) -> Html:
    """Whether limit and trips are met, how far off the worst case is and where, and what is missing to tell."""
    kind, words = _VERDICTS[budget.meets_limit]
    far, left_open = ([trip.name for trip in budget.trips if trip.ok is ok] for ok in (False, None))
    if far:
        joins = "and" if budget.meets_limit is False else "but"
        kind, words = "bad", f"{words}, {joins} too far off: {', '.join(far)}"
    elif left_open and budget.meets_limit:
        kind, words = "open", f"{words}, but undecided: {', '.join(left_open)}"
    said = joined([tag("strong", words), *_reasons(budget)], " ")
    return tag("p", said, class_=f"bd-outcome bd-outcome-{kind}")


def _reasons(budget: Budget) -> Iterator[Html]:
    limit_k = budget.position.limit_k
    where = temperature_text(budget.worst_at_c)
    if math.isnan(budget.worst_k):
        yield Html(f"At {where} some boards have no reading; limit ±{number_text(limit_k)} K.")
    else:
        left = f", {number_text(limit_k - budget.worst_k, 2)} K left" if budget.worst_k <= limit_k else ""
        worst = compared_text(budget.worst_k, limit_k, 3)
        yield Html(f"Worst case {worst} K at {where}, limit ±{number_text(limit_k)} K{left}.")
    if budget.missing:
        fields = joined([tag("code", field) for field in budget.missing], ", ")
        leaves = ", so the error may be larger" if budget.meets_limit is None else ""
        yield joined(["Not stated: ", fields, leaves, "."])


def budget_section(record: PositionRecord, context: Context) -> Html:
    """Figures and table of the budget."""
    budget = context.budget(record)
    figures = [Html(budget_figure(budget)), Html(sources_figure(budget))] if context.figures else []
    drawn = tag("div", *figures, class_="bd-figures-row") if figures else ""
    notes = [notice("note", note) for note in budget.notes]
    here = context.paths.position(record)
    address = relative(context.paths.position_csv(record), here)
    file = link(f"The budget as CSV, every {number_text(SAMPLE_STEP_K)} K", address, download=True)
    tables = tag("div", _tables(budget), class_="bd-dense")
    return joined([tag("p", _LEAD), *notes, drawn, tables, tag("p", file)])


def _tables(budget: Budget) -> Html:
    """The sums, and what each source adds to them: in one table they would be too wide for paper."""
    shown_c = set(whole_steps_c(budget.position.range_c, DEFAULT_STEP_K).tolist())
    rows = [row for row in shown_rows(budget) if row["t_c"] in shown_c]
    every = f"every {number_text(DEFAULT_STEP_K)} K"
    sums = f"The reading's error {every}; U is the expanded uncertainty about bias and shift"
    sources = f"What each source adds {every}: of its two ends the larger, with its sign"
    all_columns = columns(budget)
    of_sums = [column for column in all_columns if column.name not in budget.rows.sources_k]
    of_sources = [c for c in all_columns if c not in of_sums or c.name in ("t_c", "extrapolated")]
    return joined([rows_table(of_sums, rows, caption=sums), rows_table(of_sources, rows, caption=sources)])


def budget_csv(record: PositionRecord, context: Context) -> DataFile:
    """The position's budget in steps of 1 K."""

    def content() -> str:
        budget = context.budget(record)
        return csv_text(csv_names(budget), csv_rows(budget))

    return DataFile(context.paths.position_csv(record), content, position_sources(record, context))


def codes_section(budget: Budget) -> Html:
    """What a code is worth at both ends and where it is worth most, and what tells a faulty sensor."""
    rows = budget.rows
    least = int(np.argmin(rows.codes_per_k))
    places = {"lower end": 0, "upper end": len(rows.t_c) - 1, "coarsest": least}
    cells = [
        (
            name,
            temperature_text(float(rows.t_c[place])),
            number_text(float(rows.code[place]), 5),
            number_text(float(rows.codes_per_k[place]), 4),
            number_text(1000 * float(rows.resolution_k[place]), 3),
        )
        for name, place in places.items()
    ]
    headings = ("where", "at", "code", "codes per K", "mK per code")
    margins = tag("ul", *(tag("li", said) for said in margin_sentences(budget)))
    return joined([table(headings, cells, caption="What a code is worth, nominal", figures=True), margins])


def margin_sentences(budget: Budget) -> tuple[str, str]:
    """How far an open and a shorted sensor stand from every real temperature, in words."""
    low_side = budget.position.circuit.thermistor == "low side"
    return (
        _margin("An open", budget.open_margin_codes, above=low_side),
        _margin("A shorted", budget.short_margin_codes, above=not low_side),
    )


def _margin(faulty: str, margin_codes: float, *, above: bool) -> str:
    if not margin_codes > 0:
        return f"{faulty} sensor cannot be told from a real temperature by its code."
    side = "above" if above else "below"
    return f"{faulty} sensor stands {count_text(int(margin_codes), 'code')} {side} any real temperature, on any board."
