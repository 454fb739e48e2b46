"""What changed between two states of the records, and what that does in kelvin."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from builder.history.effects import has_effect
from builder.history.matching import Pair, part_pairs, position_pairs
from builder.history.readings import Reading
from builder.history.revision import State
from builder.history.shift import NOTHING_MOVED, Shift, shift
from builder.problems import Problem
from builder.records import Catalog, PartRecord, PositionRecord, UnknownPart


@dataclass(frozen=True, eq=False)
class PartChange:
    """A part that changed; `shift` is None where there is no curve on one of the two sides."""

    pair: Pair[PartRecord]
    shift: Shift | None


@dataclass(frozen=True, eq=False)
class PositionChange:
    """A position that changed, or whose parts did, as named in `parts`; what it read, None where it was not there, and reads."""

    pair: Pair[PositionRecord]
    parts: tuple[str, ...]
    reading_before: Reading | None
    reading_now: Reading | None


@dataclass(frozen=True, eq=False)
class Changes:
    """What changed from one state to another; `unread` are the records that the older one could not read."""

    parts: tuple[PartChange, ...]
    positions: tuple[PositionChange, ...]
    unread: tuple[Problem, ...]


def changes(before: State, now: State) -> Changes:
    """What differs between two states: only records that differ, and the positions that hang on them, are computed."""
    pairs = part_pairs(before, now)
    parts = tuple(PartChange(pair, _shift(pair)) for pair in pairs)
    return Changes(parts, tuple(_position_changes(before, now, pairs)), before.unread)


def _shift(pair: Pair[PartRecord]) -> Shift | None:
    if pair.before is None or pair.now is None:
        return None
    return shift(pair.before, pair.now) if has_effect(pair) else NOTHING_MOVED


def _position_changes(before: State, now: State, parts: Sequence[Pair[PartRecord]]) -> Iterator[PositionChange]:
    effective = [pair for pair in parts if has_effect(pair)]
    changed_before = {pair.before.name: pair.record.name for pair in effective if pair.before}
    changed_now = {pair.now.name: pair.record.name for pair in effective if pair.now}
    pairs = {_place(pair): pair for pair in position_pairs(before, now)}
    olds = {record.position.position: record for record in before.catalog.positions}
    for record in now.catalog.positions:
        name = record.position.position
        pair = pairs.pop(name, None) or Pair("its parts", olds.get(name, record), record)
        hangs_on: dict[str, None] = {}
        if pair.before is not None:
            hangs_on = _hangs_on(pair.before, before.catalog, changed_before) | _hangs_on(
                record, now.catalog, changed_now
            )
        if pair.change != "its parts" or hangs_on:
            yield _position_change(pair, tuple(hangs_on), before.catalog, now.catalog)
    for pair in pairs.values():
        yield _position_change(pair, (), before.catalog, now.catalog)


def _position_change(
    pair: Pair[PositionRecord], parts: tuple[str, ...], before: Catalog, now: Catalog
) -> PositionChange:
    reads = Reading(pair.now, now) if pair.now else None
    if pair.before is not None and not parts and not has_effect(pair):
        return PositionChange(pair, parts, reads, reads)
    return PositionChange(pair, parts, Reading(pair.before, before) if pair.before else None, reads)


def _place(pair: Pair[PositionRecord]) -> str:
    return pair.record.position.position


def _hangs_on(place: PositionRecord, catalog: Catalog, changed: Mapping[str, str]) -> dict[str, None]:
    """The changed parts that a position names, in its order."""
    found: dict[str, None] = {}
    for name in place.position.named_parts().values():
        try:
            part = catalog.part(name).name
        except UnknownPart:
            continue
        if part in changed:
            found[changed[part]] = None
    return found
