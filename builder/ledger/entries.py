"""Every entry of the ledger, of parts and of alternates at positions, in the order of their days."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from builder.problems import Problem, Severity
from builder.records import Catalog, PartRecord, PositionRecord, Source, UnknownPart
from builder.records.part import Standing
from builder.records.yaml_text import Path, line_of


@dataclass(frozen=True, eq=False)
class Entry:
    """One decision: about a part, or where `position` is given about the part as an alternate there.

    `index` is its place in its list of standings, `line` where it stands in the record, `path` the same as fields.
    """

    standing: Standing
    part: PartRecord
    position: PositionRecord | None
    index: int
    line: int
    path: Path
    holds: bool

    @property
    def source(self) -> Source:
        """The record that the entry stands in."""
        return (self.position or self.part).source

    def problem(self, field: str, rule: str, message: str, severity: Severity = "error") -> Problem:
        """A problem of one of the entry's fields."""
        return self.source.problem((*self.path, *field.split(".")), rule, message, severity)


def entries(catalog: Catalog) -> tuple[Entry, ...]:
    """Every entry, the oldest first; those of one day in the order of the records."""
    found = [entry for part in catalog.parts for entry in part_entries(part)]
    found += [entry for place in catalog.positions for entry in position_entries(place, catalog)]
    return tuple(sorted(found, key=lambda entry: entry.standing.on))


def part_entries(part: PartRecord) -> Iterator[Entry]:
    """The entries of a part's own ledger, as they stand in its record."""
    return _entries(part.part.standing, part, None, ("standing",))


def position_entries(place: PositionRecord, catalog: Catalog) -> Iterator[Entry]:
    """The entries of the ledgers of a position's alternates; an alternate that is no part of the catalog has none."""
    for i, alternate in enumerate(place.position.alternates):
        try:
            part = catalog.part(alternate.part)
        except UnknownPart:
            continue
        yield from _entries(alternate.standing, part, place, ("alternates", i, "standing"))


def _entries(
    standings: tuple[Standing, ...], part: PartRecord, place: PositionRecord | None, path: Path
) -> Iterator[Entry]:
    lines, last = (place or part).source.lines, len(standings) - 1
    for i, standing in enumerate(standings):
        yield Entry(standing, part, place, i, line_of(lines, (*path, i)), (*path, i), i == last)
