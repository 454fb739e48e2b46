"""Every part of a catalog at a position, each with its best fixed resistor, ranked by worst case."""

from __future__ import annotations

import math
from dataclasses import dataclass

from builder.circuit import Chain, thermistor
from builder.circuit.budget import CLOSE_K
from builder.circuit.gaps import gaps
from builder.decisions.requirements import requirement_reasons
from builder.decisions.resistors import best_value
from builder.decisions.series import Series
from builder.part_curve import whole_steps_c
from builder.records import Catalog, PartRecord, Position, PositionRecord
from builder.units import range_text


@dataclass(frozen=True, eq=False)
class Ranked:
    """A part that can be fitted: its best fixed resistor, its worst case with that, and what is left to the limit.

    `meets` is None where a figure is missing that decides; `missing` names the fields.
    """

    part: PartRecord
    fixed_ohm: float
    worst_k: float
    margin_k: float
    meets: bool | None
    missing: tuple[str, ...]


@dataclass(frozen=True, eq=False)
class Excluded:
    """A part that is out, and every reason."""

    part: PartRecord
    because: tuple[str, ...]


@dataclass(frozen=True, eq=False)
class Shortlist:
    """The parts of a catalog at a position, the smallest worst case first, and those that are out."""

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
    found = [_judged(position.position, part, series) for part in catalog.parts]
    ranked = [one for one in found if isinstance(one, Ranked)]
    excluded = tuple(one for one in found if isinstance(one, Excluded))
    return Shortlist(position, series, tuple(sorted(ranked, key=lambda one: one.worst_k)), excluded)


def _judged(position: Position, part: PartRecord, series: Series) -> Ranked | Excluded:
    reasons = tuple(requirement_reasons(position, part.part))
    against = tuple(reason.message for reason in reasons if reason.against)
    if against:
        return Excluded(part, against)
    fitted = thermistor(part)
    try:
        fixed_ohm, worst_k = best_value(position, fitted, fitted.made, series)
    except ValueError as unusable:
        return Excluded(part, (str(unusable),))
    if math.isinf(worst_k):
        over = range_text(position.range_c)
        return Excluded(part, (f"with no resistor of {series} every board has a reading over {over}",))
    chain = Chain(position, fitted, fitted.made.curve, fixed_ohm)
    known = gaps(chain, whole_steps_c(position.range_c, CLOSE_K))
    asked = tuple(field for reason in reasons for field in reason.missing)
    meets = known.verdict(worst_k <= position.limit_k)
    return Ranked(
        part,
        fixed_ohm,
        worst_k,
        position.limit_k - worst_k,
        None if asked and meets else meets,
        (*known.fields, *asked),
    )
