"""What a position reads, and what its alternates would, in one state of the records."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

from builder.circuit import Budget, budget, firmware_part, thermistor
from builder.decisions import Verdict, swap
from builder.part_curve import part_curve
from builder.records import Catalog, PositionRecord, UnknownPart


@dataclass(frozen=True, eq=False)
class Reading:
    """A position in one state; each of its figures is computed when it is asked for."""

    place: PositionRecord
    catalog: Catalog

    @cached_property
    def budget(self) -> Budget | None:
        """The budget of the fitted part; None where a part is not on record."""
        return _budget(self.place, self.catalog)

    @cached_property
    def verdicts(self) -> Mapping[str, Verdict | None]:
        """The verdict on each alternate by its number; None where it is not on record."""
        alternates = self.place.position.alternates
        return {alternate.part: _verdict(self.place, alternate.part, self.catalog) for alternate in alternates}


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
