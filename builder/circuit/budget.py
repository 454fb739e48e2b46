"""The error budget of a position."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from builder.circuit.chain import Chain
from builder.circuit.gaps import Gaps, gaps
from builder.circuit.margins import margins_codes
from builder.circuit.power import overload_text
from builder.circuit.rows import Rows, budget_rows
from builder.circuit.thermistor import Thermistor
from builder.circuit.trips import TripSpan, trip_spans
from builder.curves.curve import Mask
from builder.part_curve import PartCurve, whole_steps_c
from builder.records import Position
from builder.units import Array, range_text, temperature_text

DEFAULT_STEP_K = 5.0
# The worst case is looked for between the rows too: a firmware's table is exact at its own rows, often the same ones.
CLOSE_K = 0.5


@dataclass(frozen=True, eq=False)
class Budget:
    """What a position reads, and how far off.

    `worst_k` is the largest error of any board within the limits, anywhere in the range and not only at the rows; not
    a number where some board has no reading. `meets_limit` and a trip's `ok` are None where a figure is missing that
    decides; `missing` names the fields. `overload` says that the part takes more power than it may. Margins are whole codes between all real temperatures and an open or shorted
    sensor, on any board.
    """

    position: Position
    rows: Rows
    worst_k: float
    worst_at_c: float
    meets_limit: bool | None
    trips: tuple[TripBudget, ...]
    open_margin_codes: float
    short_margin_codes: float
    missing: tuple[str, ...]
    overload: str | None
    notes: tuple[str, ...]


@dataclass(frozen=True)
class TripBudget:
    """One trip: the true temperatures between which it acts, and whether that is near enough."""

    name: str
    at_c: float
    acts_from_c: float
    acts_to_c: float
    ok: bool | None


def budget(position: Position, fitted: Thermistor, firmware_curve: PartCurve, step_k: float = DEFAULT_STEP_K) -> Budget:
    """The error budget of a position.

    Parameters
    ----------
    position : Position
        Circuit, converter, firmware, range, limit and trips; no unit.
    fitted : Thermistor
        The part in the circuit; no unit.
    firmware_curve : PartCurve
        Of the part that the firmware was made for; no unit.
    step_k : float
        Distance of the rows, which stand at whole steps and at both ends of the range. [K]

    Returns
    -------
    Budget
        Worst cases are exact: the whole chain at every corner of the limits that can be an extreme.
    """
    chain = Chain(position, fitted, firmware_curve.curve, position.circuit.fixed.resistance_ohm)
    rows_c = whole_steps_c(position.range_c, step_k)
    t_c = np.union1d(rows_c, whole_steps_c(position.range_c, CLOSE_K))
    lowest, highest = chain.extremes(t_c)
    worst_min_k, worst_max_k = lowest.reading_c - t_c, highest.reading_c - t_c
    at_rows = np.searchsorted(t_c, rows_c)
    largest_k = np.maximum(-worst_min_k, worst_max_k)
    worst = int(largest_k.argmax())  # the first that is not a number, if there is one
    known, spans = gaps(chain, t_c, position.limit_k), trip_spans(chain)
    overload = overload_text(fitted, t_c, highest.power_mw)
    # A trip may stand outside the range, where less of the part is stated.
    of_trips = [gaps(chain, np.array([span.trip.at_c]), _allowed_k(span, position)) for span in spans]
    return Budget(
        position,
        budget_rows(chain, rows_c, worst_min_k[at_rows], worst_max_k[at_rows]),
        float(largest_k[worst]),
        float(t_c[worst]),
        known.verdict(bool(largest_k[worst] <= position.limit_k)),
        tuple(_trip(span, _allowed_k(span, position), own) for span, own in zip(spans, of_trips, strict=True)),
        *margins_codes(chain, lowest.code, highest.code),
        tuple(dict.fromkeys(field for each in (known, *of_trips) for field in each.fields)),
        overload,
        (
            *_range_notes(chain, t_c, np.isnan(largest_k)),
            *([f"The part {overload}."] if overload else []),
            *_trip_notes(spans, position.range_c),
        ),
    )


def _allowed_k(span: TripSpan, position: Position) -> float:
    return span.trip.within_k or position.limit_k


def _trip(span: TripSpan, allowed_k: float, known: Gaps) -> TripBudget:
    trip = span.trip
    ok = known.verdict(span.off_k <= allowed_k)
    return TripBudget(trip.name, trip.at_c, span.acts_from_c, span.acts_to_c, ok)


def _range_notes(chain: Chain, t_c: Array, unread: Mask) -> Iterator[str]:
    extrapolated: dict[tuple[float, float], str] = {}
    for whose, curve in chain.curves.items():
        for span_c in _spans_c(t_c, curve.extrapolated(t_c)):
            extrapolated.setdefault(span_c, whose)  # the firmware's curve is the part's own, as a rule
    for span_c, whose in extrapolated.items():
        yield f"The {whose}'s curve is extrapolated at {_span_text(span_c)}."
    for span_c in _spans_c(t_c, unread):
        yield (
            f"Some boards have no reading at {_span_text(span_c)}: the code reaches an end of the converter, or the "
            "curve or the firmware's conversion ends."
        )


def _trip_notes(spans: tuple[TripSpan, ...], range_c: tuple[float, float]) -> Iterator[str]:
    for span in spans:
        at_c = span.trip.at_c
        if not range_c[0] <= at_c <= range_c[1]:
            yield f"{span.trip.name} acts at {temperature_text(at_c)}, outside the range {range_text(range_c)}."
        if np.isnan(span.off_k):
            yield f"{span.trip.name} does not act on every board."


def _spans_c(t_c: Array, places: Mask) -> Iterator[tuple[float, float]]:
    """The runs of neighbouring temperatures that a mask marks."""
    edges = np.diff(np.concatenate([[False], places, [False]]).astype(int))
    for first, behind in zip(np.flatnonzero(edges == 1), np.flatnonzero(edges == -1), strict=True):
        yield float(t_c[first]), float(t_c[behind - 1])


def _span_text(span_c: tuple[float, float]) -> str:
    return temperature_text(span_c[0]) if span_c[0] == span_c[1] else range_text(span_c)
