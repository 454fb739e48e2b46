"""An error budget as rows, as sentences and as JSON's answer: for the command line, pages and CSV."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import Any

from builder.circuit import Budget, TripBudget
from builder.exports.rows import Column, Row, difference_text, rounded
from builder.units import compared_text, number_text, temperature_text

_ARRAYS = ("t_c", "code", "bias_k", "worst_min_k", "worst_max_k", "expanded_k", "codes_per_k")


def _difference_without_sign(value: float | None) -> str:
    return difference_text(value).lstrip("+")


def _figure(value: float | None) -> str:
    return "–" if value is None else number_text(value, 5)


_HEADINGS = {
    "fixed resistor": "fixed",
    "fixed resistor tempco": "its tempco",
    "parallel resistor": "parallel",
    "nonlinearity": "INL",
    "quantisation": "½ LSB",
}


def columns(budget: Budget) -> tuple[Column, ...]:
    """The columns of a budget's table: the sums, then each source that the position has."""
    return (
        Column("t_c", "°C", number_text),
        Column("code", "code", _figure),
        Column("codes_per_k", "codes/K", _figure),
        Column("bias_k", "bias K", difference_text),
        Column("worst_min_k", "worst low K", difference_text),
        Column("worst_max_k", "high K", difference_text),
        Column("expanded_k", "U (k=2) K", _difference_without_sign),
        *(Column(name, f"{_HEADINGS.get(name, name)} K", difference_text) for name in budget.rows.sources_k),
        Column("extrapolated", "", left=True),
    )


def shown_rows(budget: Budget) -> list[Row]:
    """One row for each temperature; of a source's two ends the larger, with its sign."""
    return [
        row | {name: max(ends, key=lambda end: abs(end or 0.0)) for name, ends in row["sources"].items()} | mark
        for row, mark in zip(budget_rows(budget), _marks(budget, "extrapolated", ""), strict=True)
    ]


def csv_names(budget: Budget) -> tuple[str, ...]:
    """The columns of a budget's CSV: as the answer's, with two for each source."""
    return (*_ARRAYS, *(name for source in budget.rows.sources_k for name in _end_names(source)), "extrapolated")


def csv_rows(budget: Budget) -> list[Row]:
    """One row for each temperature, every figure in a cell of its own."""
    return [
        row
        | {name: k for source, ends in row["sources"].items() for name, k in zip(_end_names(source), ends, strict=True)}
        | mark
        for row, mark in zip(budget_rows(budget), _marks(budget, True, False), strict=True)
    ]


def _end_names(source: str) -> tuple[str, str]:
    name = source.replace(" ", "_")
    return f"{name}_min_k", f"{name}_max_k"


def _marks(budget: Budget, yes: Any, no: Any) -> list[Row]:
    return [{"extrapolated": yes if extrapolated else no} for extrapolated in budget.rows.extrapolated.tolist()]


def budget_rows(budget: Budget) -> list[Row]:
    """One row for each temperature, as the answer has them."""
    rows = budget.rows
    spans = {
        name: list(zip(_rounded(low), _rounded(high), strict=True)) for name, (low, high) in rows.sources_k.items()
    }
    figures = zip(*(_rounded(getattr(rows, name)) for name in _ARRAYS), strict=True)
    return [
        dict(zip(_ARRAYS, row, strict=True)) | {"sources": {name: list(span[i]) for name, span in spans.items()}}
        for i, row in enumerate(figures)
    ]


def _rounded(values: Any) -> list[float | None]:
    return [rounded(value) for value in values.tolist()]


def budget_answer(budget: Budget, part: str) -> dict[str, Any]:
    """What JSON answers."""
    return {
        "position": budget.position.position,
        "part": part,
        "rows": budget_rows(budget),
        "worst_k": rounded(budget.worst_k),
        "meets_limit": budget.meets_limit,
        "trips": [trip_answer(trip) for trip in budget.trips],
        "open_margin_codes": _codes(budget.open_margin_codes),
        "short_margin_codes": _codes(budget.short_margin_codes),
        "missing": list(budget.missing),
    }


def _codes(margin_codes: float) -> int | None:
    return int(margin_codes) if math.isfinite(margin_codes) else None


def trip_answer(trip: TripBudget) -> Row:
    """A trip as JSON answers it."""
    return {
        "name": trip.name,
        "acts_from_c": rounded(trip.acts_from_c),
        "acts_to_c": rounded(trip.acts_to_c),
        "ok": trip.ok,
    }


def budget_sentences(budget: Budget) -> Iterator[str]:
    """What stands below the table: verdict, trips, margins, and what to know beside them."""
    limit = f"±{number_text(budget.position.limit_k)} K"
    yield f"{_worst(budget)}; the limit of {limit} {_VERDICTS[budget.meets_limit]}."
    for trip in budget.trips:
        yield f"{trip.name}, {temperature_text(trip.at_c)}: {_acts(trip)}: {_NEARNESS[trip.ok]}."
    yield (
        f"Codes left for telling an open sensor {number_text(budget.open_margin_codes)}, "
        f"a shorted one {number_text(budget.short_margin_codes)}."
    )
    if budget.missing:
        yield f"Not stated: {', '.join(budget.missing)}."
    yield from budget.notes


_VERDICTS = {True: "is met", False: "is not met", None: "is undecided: a figure is missing"}
_NEARNESS = {True: "near enough", False: "too far off", None: "undecided, a figure is missing"}


def _worst(budget: Budget) -> str:
    where = temperature_text(budget.worst_at_c)
    if math.isnan(budget.worst_k):
        return f"Some boards have no reading at {where}"
    return f"Worst case {compared_text(budget.worst_k, budget.position.limit_k, 4)} K at {where}"


def _acts(trip: TripBudget) -> str:
    if math.isnan(trip.acts_from_c + trip.acts_to_c):
        return "does not act on every board"
    return f"acts from {_degrees(trip.acts_from_c)} to {_degrees(trip.acts_to_c)}"


def _degrees(t_c: float) -> str:
    return f"{number_text(round(t_c, 2))} °C"
