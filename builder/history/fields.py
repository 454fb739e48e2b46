"""The fields in which a record differs from what it was."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import zip_longest
from typing import Any

import numpy as np

from builder.records import PartRecord, PositionRecord
from builder.records.table import TableData
from builder.records.yaml_text import Path, field_name
from builder.units import temperature_text

# More rows than that are told by their number.
_MOST_ROWS = 4
_COLUMNS = ("r_ohm", "r_min_ohm", "r_max_ohm")


@dataclass(frozen=True)
class FieldChange:
    """A field with its value before and now, as JSON has it; None where it was not stated."""

    field: str
    before: Any
    now: Any


def differing_fields(before: PartRecord | PositionRecord, now: PartRecord | PositionRecord) -> tuple[FieldChange, ...]:
    """The fields that differ, in the order of the record; a table's rows at the end."""
    return (*differing_values((), _stated(before), _stated(now)), *differing_rows(before, now))


def _stated(record: PartRecord | PositionRecord) -> dict[str, Any]:
    model = record.part if isinstance(record, PartRecord) else record.position
    # Rows are compared as numbers, wherever they stand.
    return model.model_dump(mode="json", exclude_defaults=True, exclude={"r_t_table": {"rows"}})


def differing_values(path: Path, before: Any, now: Any) -> Iterator[FieldChange]:
    """Where two values differ, each as a field below a path."""
    if before == now:
        return
    if isinstance(before, dict) and isinstance(now, dict):
        for name in dict.fromkeys([*before, *now]):
            yield from differing_values((*path, name), before.get(name), now.get(name))
    elif _are_entries(before) and _are_entries(now):
        for i, (old, new) in enumerate(zip_longest(before or (), now or ())):
            yield from differing_values((*path, i), old, new)
    else:
        yield FieldChange(field_name(path), before, now)


def _are_entries(value: Any) -> bool:
    return value is None or (isinstance(value, list) and all(isinstance(entry, dict) for entry in value))


def _table(record: PartRecord | PositionRecord) -> TableData | None:
    return record.table if isinstance(record, PartRecord) else None


def differing_rows(before: PartRecord | PositionRecord, now: PartRecord | PositionRecord) -> Iterator[FieldChange]:
    """The rows of two records' tables that differ, told by their number where they are many."""
    old, new = _rows(_table(before)), _rows(_table(now))
    differing = [t_c for t_c in sorted(old.keys() | new.keys()) if old.get(t_c) != new.get(t_c)]
    if len(differing) > _MOST_ROWS:
        yield FieldChange("r_t_table", f"{len(old)} rows", f"{len(new)} rows, {len(differing)} differ")
        return
    for t_c in differing:
        for name in _COLUMNS:
            values = [rows.get(t_c, {}).get(name) for rows in (old, new)]
            if values[0] != values[1]:
                yield FieldChange(f"r_t_table {name} at {temperature_text(t_c)}", *values)


def _rows(table: TableData | None) -> dict[float, dict[str, float]]:
    if table is None:
        return {}
    columns = {name: values for name in _COLUMNS if (values := getattr(table, name)) is not None}
    figures = np.transpose(list(columns.values())).tolist()
    return {t_c: dict(zip(columns, row, strict=True)) for t_c, row in zip(table.t_c.tolist(), figures, strict=True)}
