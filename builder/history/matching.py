"""Which record of one state is which of another: by its name, then by its file, then as git finds renamed files."""

from __future__ import annotations

import json
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Generic, Literal, TypeVar

from builder.history.fields import FieldChange, differing_fields
from builder.history.repository import renamed_files
from builder.history.revision import Record, State
from builder.records import PartRecord, PositionRecord

Change = Literal[
    "added", "removed", "renamed", "edited", "file moved", "not readable before", "not readable now", "its parts"
]
R = TypeVar("R", PartRecord, PositionRecord)


@dataclass(frozen=True, eq=False)
class Pair(Generic[R]):
    """A record before and now that differ in something, if only in their file; one of them may be None."""

    change: Change
    before: R | None
    now: R | None
    fields: tuple[FieldChange, ...] = ()

    @property
    def record(self) -> R:
        """The record as it is now, or as it was last."""
        record = self.now or self.before
        assert record is not None
        return record


def part_pairs(before: State, now: State) -> list[Pair[PartRecord]]:
    """The parts that differ between two states, in the order of their names."""
    return _pairs(before.catalog.parts, now.catalog.parts, before, now)


def position_pairs(before: State, now: State) -> list[Pair[PositionRecord]]:
    """The positions that differ between two states, in the order of their names."""
    return _pairs(before.catalog.positions, now.catalog.positions, before, now)


def name_of(record: Record) -> str:
    """What a record goes by: maker and number, or the position's name."""
    return record.name if isinstance(record, PartRecord) else record.position.position


def _pairs(before: Sequence[R], now: Sequence[R], state_before: State, state_now: State) -> list[Pair[R]]:
    gone, new = _by_name(before), _by_name(now)
    both = {name: (gone.pop(name), new.pop(name)) for name in list(gone) if name in new}
    found = [pair for record, other in both.values() if (pair := _edited(record, other)) is not None]
    for record, other in _renamed(list(gone.values()), list(new.values())):
        del gone[_key(record)], new[_key(other)]
        found.append(Pair("renamed", record, other, differing_fields(record, other)))
    found += [Pair(_gone(record, state_now), record, None) for record in gone.values()]
    found += [Pair(_new(record, state_before), None, record) for record in new.values()]
    return sorted(found, key=lambda pair: _key(pair.record))


def _by_name(records: Sequence[R]) -> dict[str, R]:
    return {_key(record): record for record in records}


def _key(record: Record) -> str:
    return name_of(record).casefold()


def _edited(before: R, now: R) -> Pair[R] | None:
    if before is now:
        return None
    fields = differing_fields(before, now)
    if not fields and before.source.below == now.source.below:
        return None
    return Pair("edited" if fields else "file moved", before, now, fields)


def _renamed(gone: Sequence[R], new: Sequence[R]) -> Iterator[tuple[R, R]]:
    gone_by_file, new_by_file = ({r.source.below: r for r in records} for records in (gone, new))
    in_place = {file: file for file in gone_by_file if file in new_by_file}
    left = {file: _lines(r) for file, r in gone_by_file.items() if file not in in_place}
    others = {file: _lines(r) for file, r in new_by_file.items() if file not in in_place}
    for file, new_file in (in_place | renamed_files(left, others)).items():
        yield gone_by_file[file], new_by_file[new_file]


def _lines(record: Record) -> bytes:
    """A record's fields, a line each: what git counts when it looks for renamed files."""
    model = record.part if isinstance(record, PartRecord) else record.position
    stated: Mapping[str, object] = model.model_dump(mode="json", exclude_defaults=True)
    return "".join(f"{name}: {json.dumps(value, ensure_ascii=False)}\n" for name, value in stated.items()).encode()


def _gone(record: Record, now: State) -> Change:
    return "not readable now" if now.could_not_read(record) else "removed"


def _new(record: Record, before: State) -> Change:
    return "not readable before" if before.could_not_read(record) else "added"
