"""What changed between two states of the records, and what that does in kelvin."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from builder.history.fields import FieldChange
from builder.history.matching import Change, Pair, part_pairs, position_pairs
from builder.history.readings import Reading, reading
from builder.history.revision import State
from builder.history.shift import Shift, shift
from builder.problems import Problem
from builder.records import Catalog, PartRecord, PositionRecord, UnknownPart

# What a part says in these does nothing to the positions where it is named.
_WITHOUT_EFFECT = ("accepted", "description", "documents", "notes")


@dataclass(frozen=True, eq=False)
class PartChange:
    """A part that changed; `shift` is None where there is no curve on one of the two sides."""

    pair: Pair[PartRecord]
    shift: Shift | None


@dataclass(frozen=True, eq=False)
class PositionChange:
    """A position that changed, or whose parts did, as named in `parts`; what it read before and reads now."""

    change: Change
    before: PositionRecord | None
    now: PositionRecord | None
    fields: tuple[FieldChange, ...]
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
    return shift(pair.before, pair.now) if pair.before is not None and pair.now is not None else None


def _position_changes(before: State, now: State, parts: Sequence[Pair[PartRecord]]) -> Iterator[PositionChange]:
    effective = [pair for pair in parts if _has_effect(pair)]
    changed_before = {pair.before.name: pair.record.name for pair in effective if pair.before}
    changed_now = {pair.now.name: pair.record.name for pair in effective if pair.now}
    pairs = {_place(pair): pair for pair in position_pairs(before, now)}
    olds = {record.position.position: record for record in before.catalog.positions}
    for record in now.catalog.positions:
        name = record.position.position
        pair = pairs.pop(name, None) or Pair("its parts", olds.get(name, record), record)
        hangs_on = {
            **(_hangs_on(pair.before, before.catalog, changed_before) if pair.before else {}),
            **_hangs_on(record, now.catalog, changed_now),
        }
        if pair.change != "its parts" or hangs_on:
            yield _position_change(pair, tuple(hangs_on), before, now)
    for pair in pairs.values():
        yield _position_change(pair, (), before, now)


def _position_change(pair: Pair[PositionRecord], parts: tuple[str, ...], before: State, now: State) -> PositionChange:
    read_before = reading(pair.before, before.catalog) if pair.before else None
    read_now = reading(pair.now, now.catalog) if pair.now else None
    return PositionChange(pair.change, pair.before, pair.now, pair.fields, parts, read_before, read_now)


def _place(pair: Pair[PositionRecord]) -> str:
    return pair.record.position.position


def _has_effect(pair: Pair[PartRecord]) -> bool:
    said = {field.field.partition("[")[0] for field in pair.fields}
    return pair.change != "file moved" and not (said and said <= set(_WITHOUT_EFFECT))


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
