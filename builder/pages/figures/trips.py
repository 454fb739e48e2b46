"""Where trips act: all of them on a line over the range, and each one magnified about its setting."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from html import escape

import numpy as np

from builder.circuit import Budget
from builder.pages.figures.scales import WIDTH, Scale, temperature_scale, width_scale
from builder.units import number_text, temperature_text

# The magnified part: what a bar is called stands at its left, what it is worth at its right.
LEFT, RIGHT = 82, 420
_RANGE_RIGHT = WIDTH - 30
_RANGE_Y = 44
_TOP = 84
_HEADING, _BAR, _GAP = 34, 26, 8
WORDS = {True: "ok", False: "too far off", None: "undecided"}


@dataclass(frozen=True)
class TripInterval:
    """Between which true temperatures a trip acts, in one case such as `before`; not a number where it does not."""

    case: str
    acts_from_c: float
    acts_to_c: float
    ok: bool | None


@dataclass(frozen=True)
class TripRow:
    """A trip's setting, how far off it may act, and one interval or several to be compared."""

    name: str
    at_c: float
    when: str
    within_k: float
    intervals: tuple[TripInterval, ...]


def trip_rows(budgets: Mapping[str, Budget]) -> list[TripRow]:
    """The trips of one position from its budgets, by case: `{"": budget}`, or `{"before": …, "after": …}`."""
    position = next(iter(budgets.values())).position
    return [
        TripRow(
            trip.name,
            trip.at_c,
            trip.when,
            trip.within_k or position.limit_k,
            tuple(
                TripInterval(case, budget.trips[i].acts_from_c, budget.trips[i].acts_to_c, budget.trips[i].ok)
                for case, budget in budgets.items()
            ),
        )
        for i, trip in enumerate(position.trips)
    ]


def trips_line(rows: Sequence[TripRow], range_c: tuple[float, float]) -> str:
    """Trips on a temperature line, as a figure to be put into a page.

    `rows` are the trips, each with one interval or several (`trip_rows` makes them from budgets); `range_c` is the
    position's range, which the line covers. On top all trips stand on that line, numbered; below each is magnified
    about its setting, all on one scale in K: a band for what is allowed, a bar for each interval, and in words
    whether it is near enough.
    """
    ends_c = [end for row in rows for span in row.intervals for end in (span.acts_from_c, span.acts_to_c)]
    line = temperature_scale(np.array([*range_c, *(row.at_c for row in rows), *ends_c]))
    lens = _lens(rows)
    height = _TOP + sum(_row_height(row) for row in rows) + 48
    drawn, y = [], _TOP
    for number, row in enumerate(rows, start=1):
        drawn.append(_magnified(number, row, lens, y))
        y += _row_height(row)
    return (
        f'<figure class="bd-figure bd-trips"><svg viewBox="0 0 {WIDTH} {height}" role="img">'
        f"<title>Where the trips act</title><desc>{escape(' '.join(map(_said, rows)))}</desc>"
        f"{_range_line(rows, line, range_c)}{''.join(drawn)}{_lens_labels(lens, y)}</svg>"
        f"<figcaption>{_KEY}</figcaption></figure>"
    )


def _lens(rows: Sequence[TripRow]) -> Scale:
    """One scale for all, symmetric about the setting."""
    offs_k = np.abs([off_k for row in rows for off_k in _offs_k(row)])
    upper = width_scale(offs_k, "Beside the setting (K)")
    return replace(upper, low=-upper.high)


def _offs_k(row: TripRow) -> Iterator[float]:
    yield row.within_k
    for span in row.intervals:
        yield from (span.acts_from_c - row.at_c, span.acts_to_c - row.at_c)


def _row_height(row: TripRow) -> int:
    return _HEADING + _BAR * len(row.intervals) + _GAP


def _said(row: TripRow) -> str:
    acts = "; ".join(
        f"{f'{span.case} ' if span.case else ''}acts between {_degrees(span.acts_from_c)} and "
        f"{_degrees(span.acts_to_c)}, {WORDS[span.ok]}"
        for span in row.intervals
    )
    return f"{row.name}, {temperature_text(row.at_c)} {row.when}, allowed ±{number_text(row.within_k)} K: {acts}."


def _degrees(t_c: float) -> str:
    return f"{number_text(round(t_c, 2))} °C"


def _range_line(rows: Sequence[TripRow], line: Scale, range_c: tuple[float, float]) -> str:
    """The temperature line: ticks, the range as a thick stroke, and each trip's number over its setting."""
    ticks = np.arange(round(line.low / line.step), round(line.high / line.step) + 1) * line.step
    marks = "".join(f"M{_along(line, t_c):.1f} {_RANGE_Y}v6" for t_c in ticks.tolist())
    labels = "".join(
        f'<text x="{_along(line, t_c):.1f}" y="{_RANGE_Y + 9}" dy=".8em">{number_text(t_c)}</text>'
        for t_c in ticks.tolist()
    )
    low, high = (_along(line, t_c) for t_c in range_c)
    settings = "".join(f"M{_along(line, row.at_c):.1f} {_RANGE_Y - 12}v12" for row in rows)
    numbers = "".join(_numbers(rows, line))
    return (
        f'<path class="bdt-axis" d="M{LEFT} {_RANGE_Y}H{_RANGE_RIGHT}{marks}"/>'
        f'<path class="bdt-range" d="M{low:.1f} {_RANGE_Y}H{high:.1f}"/><path class="bdt-setting" d="{settings}"/>'
        f'<g text-anchor="middle">{labels}{numbers}</g>'
        f'<text x="2" y="{_RANGE_Y + 9}" dy=".8em">°C</text>'
    )


def _numbers(rows: Sequence[TripRow], line: Scale) -> Iterator[str]:
    """Each trip's number, moved to the right where it would touch the one before."""
    free = 0.0
    for number, row in sorted(enumerate(rows, start=1), key=lambda item: item[1].at_c):
        x = max(_along(line, row.at_c), free)
        free = x + 16
        yield f'<text x="{x:.1f}" y="{_RANGE_Y - 16}">{number}</text>'


def _along(scale: Scale, t_c: float) -> float:
    return float(LEFT + scale.fraction(np.array(t_c)) * (_RANGE_RIGHT - LEFT))


def _across(scale: Scale, off_k: float) -> float:
    return float(LEFT + scale.fraction(np.array(off_k)) * (RIGHT - LEFT))


def _lens_labels(lens: Scale, y: int) -> str:
    """The ends and the middle of the magnified scale: more would touch on a phone."""
    labels = "".join(
        f'<text x="{_across(lens, off_k):.1f}" y="{y}" dy=".8em">{_signed(off_k)}</text>'
        for off_k in (lens.low, 0.0, lens.high)
    )
    name = f'<text x="{_across(lens, 0.0):.1f}" y="{y + 40}">{lens.label}</text>'
    return f'<g text-anchor="middle">{labels}{name}</g>'


def _signed(off_k: float) -> str:
    return f"{off_k:+g}".replace("-", "−") if off_k else "0"


def _magnified(number: int, row: TripRow, lens: Scale, y: int) -> str:
    top, height = y + _HEADING, _BAR * len(row.intervals)
    low, high = _across(lens, -row.within_k), _across(lens, row.within_k)
    heading = f"{number} {row.name}, {row.when} at {temperature_text(row.at_c)}"
    return (
        f'<text x="2" y="{top - 8}">{escape(heading)}</text>{_grid(lens, top, height)}'
        f'<path class="bdt-allowed" d="M{low:.1f} {top}H{high:.1f}v{height}H{low:.1f}z"/>'
        + "".join(_bar(span, row.at_c, lens, top + i * _BAR, i) for i, span in enumerate(row.intervals))
    )


def _grid(lens: Scale, top: int, height: int) -> str:
    ticks = np.arange(round(lens.low / lens.step), round(lens.high / lens.step) + 1) * lens.step
    lines = "".join(f"M{_across(lens, off_k):.1f} {top}v{height}" for off_k in ticks.tolist())
    setting = f"M{_across(lens, 0.0):.1f} {top}v{height}"
    return f'<path class="bdf-grid" d="{lines}"/><path class="bdf-zero" d="{setting}"/>'


def _bar(span: TripInterval, at_c: float, lens: Scale, y: int, place: int) -> str:
    middle = y + _BAR / 2
    text = f'<text x="2" y="{middle:g}" dy=".35em">{escape(span.case)}</text>' if span.case else ""
    words = f'<text x="{RIGHT + 14}" y="{middle:g}" dy=".35em">{WORDS[span.ok]}</text>'
    if not math.isfinite(span.acts_from_c + span.acts_to_c):
        return text + words
    low, high = (_across(lens, end_c - at_c) for end_c in (span.acts_from_c, span.acts_to_c))
    # A bar with end strokes: seen even where the interval is thinner than a pixel.
    ends = f"M{low:.1f} {middle - 8:g}v16M{high:.1f} {middle - 8:g}v16"
    return f'<path class="bdt-bar bdt-bar-{place + 1}" d="M{low:.1f} {middle:g}H{high:.1f}{ends}"/>{text}{words}'


def _entry(drawn: str, text: str) -> str:
    return f'<span><svg viewBox="0 0 30 12" aria-hidden="true">{drawn}</svg>{text}</span>'


_KEY = (
    _entry('<path class="bdt-bar bdt-bar-1" d="M2 6H28M2 1v10M28 1v10"/>', "acts between")
    + _entry('<path class="bdt-allowed" d="M0 0H30V12H0z"/>', "allowed")
    + _entry('<path class="bdt-range" d="M0 6H30"/>', "range of the position")
)
