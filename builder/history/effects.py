"""Whether an edit of a record can change what positions read, or the verdict on a swap."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from builder.history.fields import differing_rows
from builder.history.matching import Pair, R
from builder.records import PartRecord, PositionRecord
from builder.records.part import Standing

_REMARKS = frozenset(("accepted", "description", "documents", "notes", "packaging_suffixes", "purpose"))


def has_effect(pair: Pair[R]) -> bool:
    """Whether a pair differs in more than remarks, its file, and entries of the ledger after which the same holds."""
    before, now = pair.before, pair.now
    return before is None or now is None or _what_counts(before) != _what_counts(now) or _rows_differ(before, now)


def _what_counts(record: PartRecord | PositionRecord) -> dict[str, Any]:
    model = record.part if isinstance(record, PartRecord) else record.position
    stated = model.model_dump(exclude={*_REMARKS, "standing", "alternates", "r_t_table"})
    if isinstance(record, PartRecord):
        return stated | {"standing": _holds(record.part.standing)}
    return stated | {"alternates": [(entry.part, _holds(entry.standing)) for entry in record.position.alternates]}


def _holds(standing: Sequence[Standing]) -> tuple[object, ...]:
    return (standing[-1].state, standing[-1].only_for) if standing else ()


def _rows_differ(before: PartRecord | PositionRecord, now: PartRecord | PositionRecord) -> bool:
    return any(True for _ in differing_rows(before, now))
