"""Every entry of the ledger, of parts and of alternates at positions, in the order of their days."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from builder.problems import Problem, Severity
from builder.records import Catalog, PartRecord, PositionRecord, Source
from builder.records.part import Standing
from builder.records.yaml_text import Path, line_of


@dataclass(frozen=True, eq=False)
class Entry:
    """One decision: about a part, or where `position` is given about the part as an alternate there.

    `index` is its place in its list of standings, `line` where it stands in the record, `path` the same as fields;
    `holds` tells the last of a list.
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

    def problem(self, field: Path, rule: str, message: str, severity: Severity = "error") -> Problem:
        """A problem of one of the entry's fields."""
        return self.source.problem((*self.path, *field), rule, message, severity)


def entries(catalog: Catalog) -> tuple[Entry, ...]:
    """Every entry, the oldest first; those of one day in the order of the records."""
    ledgers = [part_ledger(part) for part in catalog.parts]
    ledgers += [ledger for place in catalog.positions for ledger in alternate_ledgers(place, catalog)]
    return tuple(sorted((entry for ledger in ledgers for entry in ledger), key=lambda entry: entry.standing.on))


def part_ledger(part: PartRecord) -> tuple[Entry, ...]:
    """A part's own entries, as they stand in its record."""
    return _ledger(part.part.standing, part, None, ("standing",))


def alternate_ledgers(place: PositionRecord, catalog: Catalog) -> Iterator[tuple[Entry, ...]]:
    """The entries of each alternate of a position; an alternate that is no part of the catalog is left out."""
    for i, alternate in enumerate(place.position.alternates):
        part = catalog.known_part(alternate.part)
        if part is not None:
            yield _ledger(alternate.standing, part, place, ("alternates", i, "standing"))


def _ledger(
    standings: tuple[Standing, ...], part: PartRecord, place: PositionRecord | None, path: Path
) -> tuple[Entry, ...]:
    lines, last = (place or part).source.lines, len(standings) - 1
    return tuple(
        Entry(standing, part, place, i, line_of(lines, (*path, i)), (*path, i), i == last)
        for i, standing in enumerate(standings)
    )
