"""What a position reads, and what its alternates would, in one state of the records."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from builder.circuit import Budget, budget, firmware_part, thermistor
from builder.decisions import Verdict, swap
from builder.part_curve import part_curve
from builder.records import Catalog, PositionRecord, UnknownPart


@dataclass(frozen=True, eq=False)
class Reading:
    """The budget of the fitted part, None where a part is not on record, and each alternate's verdict by its number."""

    budget: Budget | None
    verdicts: Mapping[str, Verdict | None]


def reading(place: PositionRecord, catalog: Catalog) -> Reading:
    """A position's budget and the verdicts of its alternates."""
    verdicts = {alternate.part: _verdict(place, alternate.part, catalog) for alternate in place.position.alternates}
    return Reading(_budget(place, catalog), verdicts)


def _budget(place: PositionRecord, catalog: Catalog) -> Budget | None:
    try:
        fitted, made_for = (catalog.part(name) for name in (place.position.fitted, firmware_part(place.position)))
    except UnknownPart:
        return None
    return budget(place.position, thermistor(fitted), part_curve(made_for))


def _verdict(place: PositionRecord, alternate: str, catalog: Catalog) -> Verdict | None:
    try:
        return swap(place, catalog.part(alternate), catalog).verdict
    except UnknownPart:
        return None
