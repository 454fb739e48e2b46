"""Comparisons and families as rows and as JSON's answer: for the command line, pages and CSV."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any

from builder.comparisons import Comparison
from builder.exports.rows import Column, Row, difference_text, rounded
from builder.units import number_text

ANSWER_NAMES = ("t_c", "r_ref_ohm", "r_ohm", "ratio_pct", "reads_k", "reads_min_k", "reads_max_k")
_ARRAYS = (*ANSWER_NAMES, "reference_min_k", "reference_max_k")


def _resistance(value: float | None) -> str:
    return "–" if value is None else number_text(value, 7)


COLUMNS = (
    Column("t_c", "°C", number_text),
    Column("r_ref_ohm", "reference Ω", _resistance),
    Column("r_ohm", "R in Ω", _resistance),
    Column("ratio_pct", "ratio in %", difference_text),
    Column("reads_k", "reads K", difference_text),
    Column("reads_min_k", "low K", difference_text),
    Column("reads_max_k", "high K", difference_text),
    Column("reference_min_k", "reference low K", difference_text),
    Column("reference_max_k", "high K", difference_text),
    Column("extrapolated", "", left=True),
)
NAMES = tuple(column.name for column in COLUMNS)


def comparison_rows(comparison: Comparison) -> list[Row]:
    """One row for each temperature; `extrapolated` says whose curve is used beyond its span."""
    columns: dict[str, list[Any]] = {name: [rounded(v) for v in getattr(comparison, name).tolist()] for name in _ARRAYS}
    marks = zip(comparison.reference_extrapolated.tolist(), comparison.other_extrapolated.tolist(), strict=True)
    columns["extrapolated"] = [_EXTRAPOLATED[mark] for mark in marks]
    return [dict(zip(columns, values, strict=True)) for values in zip(*columns.values(), strict=True)]


_EXTRAPOLATED = {
    (False, False): "",
    (True, False): "reference extrapolated",
    (False, True): "extrapolated",
    (True, True): "both extrapolated",
}


def comparison_answer(reference: str, others: Iterable[tuple[str, Comparison]]) -> dict[str, Any]:
    """What JSON answers: the reference's number, and each other part's with its rows and summary."""
    return {"reference": reference, "others": [_other(part, comparison) for part, comparison in others]}


def _other(part: str, comparison: Comparison) -> dict[str, Any]:
    return {
        "part": part,
        "rows": [{name: row[name] for name in ANSWER_NAMES} for row in comparison_rows(comparison)],
        "worst_k": rounded(comparison.worst_k),
        "worst_at_c": rounded(comparison.worst_at_c),
        "worst_with_tolerance_k": rounded(comparison.worst_with_tolerance_k),
        "within_reference_band": comparison.within_reference_band,
    }


def family_rows(groups: Iterable[Sequence[str]]) -> list[Row]:
    """One row for each part that has company: its family's number, counted from 1, and its name."""
    shared = (group for group in groups if len(group) > 1)
    return [{"family": number, "part": part} for number, group in enumerate(shared, start=1) for part in group]


FAMILY_COLUMNS = (Column("family", "family"), Column("part", "part", left=True))
