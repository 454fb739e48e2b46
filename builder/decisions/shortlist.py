"""Every part of a catalog at a position, each with its best fixed resistor, ranked by worst case."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import partial

from builder.circuit import Chain, thermistor
from builder.circuit.budget import CLOSE_K
from builder.circuit.gaps import gaps
from builder.circuit.power import can_overload, overload_text
from builder.decisions.requirements import requirement_reasons
from builder.decisions.resistors import best_value
from builder.decisions.series import Series
from builder.part_curve import whole_steps_c
from builder.processes import shared_out
from builder.records import Catalog, PartRecord, Position, PositionRecord
from builder.units import range_text, resistance_text


@dataclass(frozen=True, eq=False)
class Ranked:
    """A part that can be fitted: its best fixed resistor, its worst case with that, and what is left to the limit.

    `meets` is None where a figure is missing that decides; `missing` names the fields. `is_incomplete` where that is so of
    this part and not of every part there: its worst case is then not to be held against those of others.
    """

    part: PartRecord
    fixed_ohm: float
    worst_k: float
    margin_k: float
    meets: bool | None
    missing: tuple[str, ...]
    is_incomplete: bool


@dataclass(frozen=True, eq=False)
class Excluded:
    """A part that is out, and every reason."""

    part: PartRecord
    because: tuple[str, ...]


@dataclass(frozen=True, eq=False)
class Shortlist:
    """The parts of a catalog at a position, and those that are out.

    The smallest worst case stands first, but parts that are incomplete stand behind all others.
    """

    position: PositionRecord
    series: Series
    ranked: tuple[Ranked, ...]
    excluded: tuple[Excluded, ...]


def shortlist(position: PositionRecord, catalog: Catalog, series: Series = "E96") -> Shortlist:
    """Every part of a catalog at a position, with firmware of the position's method made for it.

    Parameters
    ----------
    position : PositionRecord
        Circuit, converter, method of the firmware, range, limit and requirements; what is fitted there plays no part;
        no unit.
    catalog : Catalog
        The parts; no unit.
    series : str
        `E24` or `E96`, which the fixed resistor is taken from; no unit.

    Returns
    -------
    Shortlist
        Each part is in one of its two lists.
    """
    place, parts = position.position, catalog.parts
    ranked, excluded = [], []
    for part, found in zip(parts, shared_out(partial(_judgements, place, series), parts), strict=True):
        if isinstance(found, _Found):
            margin_k = place.limit_k - found.worst_k
            ranked.append(
                Ranked(part, found.fixed_ohm, found.worst_k, margin_k, found.meets, found.missing, found.is_incomplete)
            )
        else:
            excluded.append(Excluded(part, found))
    ranked.sort(key=lambda one: (one.is_incomplete, one.worst_k))
    return Shortlist(position, series, tuple(ranked), tuple(excluded))


@dataclass(frozen=True)
class _Found:
    """What is found of a part that can be fitted; light, since another process may hand it over."""

    fixed_ohm: float
    worst_k: float
    meets: bool | None
    missing: tuple[str, ...]
    is_incomplete: bool


def _judgements(place: Position, series: Series, parts: Sequence[PartRecord]) -> list[_Found | tuple[str, ...]]:
    return [_judged(place, part, series) for part in parts]


def _judged(place: Position, part: PartRecord, series: Series) -> _Found | tuple[str, ...]:
    """What is found, or every reason why the part is out."""
    reasons = tuple(requirement_reasons(place, part.part))
    against = tuple(reason.message for reason in reasons if reason.against)
    if against:
        return against
    fitted = thermistor(part)
    try:
        fixed_ohm, worst_k = best_value(place, fitted, fitted.made, series)
    except ValueError as unusable:
        return (str(unusable),)
    if math.isinf(worst_k):
        return (f"with no resistor of {series} every board has a reading over {range_text(place.range_c)}",)
    chain, t_c = Chain(place, fitted, fitted.made.curve, fixed_ohm), whole_steps_c(place.range_c, CLOSE_K)
    # All corners at all temperatures again, which few circuits need.
    overload = can_overload(chain) and overload_text(fitted, t_c, chain.extremes(t_c)[1].power_mw)
    if overload:
        return (f"with its best resistor, {resistance_text(fixed_ohm)}, it {overload}",)
    known = gaps(chain, t_c, place.limit_k)
    asked = tuple(field for reason in reasons for field in reason.missing)
    meets = known.verdict(worst_k <= place.limit_k)
    if asked and meets:
        meets = None
    is_incomplete = meets is None and (known.of_part or bool(asked))
    return _Found(fixed_ohm, worst_k, meets, (*known.fields, *asked), is_incomplete)
