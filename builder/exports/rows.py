"""Rows of figures as an aligned table, as CSV and as JSON."""

from __future__ import annotations

import csv
import io
import json
import math
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from typing import Any

from builder.units import FIGURE, signed_text

Row = dict[str, Any]


@dataclass(frozen=True)
class Column:
    """A column: its name in CSV and JSON, its heading with unit, and how a table shows a value."""

    name: str
    heading: str
    text: Callable[[Any], str] = str
    left: bool = False


def difference_text(value: float | None) -> str:
    """A difference in kelvin or per cent as a table shows it, with its sign; a dash where there is none.

    >>> difference_text(-0.25), difference_text(None)
    ('−0.250', '–')
    """
    return "–" if value is None else signed_text(value, 3)


def table_text(columns: Sequence[Column], rows: Iterable[Row]) -> str:
    """The rows under their headings, figures with their points below each other.

    >>> columns = Column("t_c", "°C"), Column("note", "note", left=True)
    >>> print(table_text(columns, [{"t_c": 25, "note": "rated"}, {"t_c": 117.5, "note": ""}]))
       °C  note
     25    rated
    117.5
    """
    rows = list(rows)
    lines = zip(*(_aligned(column, [column.text(row[column.name]) for row in rows]) for column in columns), strict=True)
    return "\n".join("  ".join(line).rstrip() for line in lines)


def _aligned(column: Column, cells: list[str]) -> list[str]:
    """A column's heading and cells, all of one width."""
    if not column.left:
        decimals = [len(cell) - len(cell.partition(".")[0]) for cell in cells]
        most = max(decimals, default=0)
        cells = [cell + " " * (most - own) for cell, own in zip(cells, decimals, strict=True)]
    lines = [column.heading, *cells]
    width = max(map(len, lines))
    return [line.ljust(width) if column.left else line.rjust(width) for line in lines]


def csv_text(names: Sequence[str], rows: Iterable[Row]) -> str:
    """The rows as CSV under their names; what is not a number is an empty cell."""
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(names)
    writer.writerows([_csv_cell(row.get(name)) for name in names] for row in rows)
    return out.getvalue()


def json_text(value: Any) -> str:
    """JSON with null where there is no number, text as it is, on lines."""
    return json.dumps(_finite(value), ensure_ascii=False, indent=1, allow_nan=False) + "\n"


def rounded(value: float) -> float | None:
    """A number with the ten digits that are worth passing on; None where it is not one.

    >>> rounded(9999.986256957), rounded(-0.0), rounded(float("nan"))
    (9999.986257, 0.0, None)
    """
    return float(f"{value:z.10g}") if math.isfinite(value) else None


def csv_figure(value: float | None) -> str:
    """A number as a CSV cell, with the ten digits that are worth passing on; empty where it is not one.

    >>> csv_figure(9999.986256957), csv_figure(25.0), csv_figure(float("nan"))
    ('9999.986257', '25', '')
    """
    return "" if value is None or not math.isfinite(value) else f"{value:z.10g}"


def _csv_cell(value: Any) -> Any:
    if isinstance(value, bool):
        return "yes" if value else "no"
    if value is None or isinstance(value, float):
        return csv_figure(value)
    # A spreadsheet takes text that begins so for a formula, unless it is a number; a record's text is data.
    formula = isinstance(value, str) and value[:1] in ("=", "+", "-", "@") and not FIGURE.fullmatch(value)
    return f"'{value}" if formula else value


def _finite(value: Any) -> Any:
    if isinstance(value, dict):
        return {key: _finite(inner) for key, inner in value.items()}
    if isinstance(value, list | tuple):
        return [_finite(inner) for inner in value]
    return None if isinstance(value, float) and not math.isfinite(value) else value
