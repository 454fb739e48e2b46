"""A shortlist as rows and as JSON's answer."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from builder.decisions import Shortlist
from builder.exports.rows import Column, Row, rounded
from builder.problems import count_text
from builder.units import number_text, range_text, resistance_text, signed_text

_MEETS = {True: "yes", False: "no", None: "undecided"}

COLUMNS = (
    Column("name", "part", left=True),
    Column("fixed_ohm", "fixed", resistance_text, left=True),
    Column("worst_k", "worst K", lambda worst_k: signed_text(worst_k, 3).lstrip("+")),
    Column("margin_k", "margin K", lambda margin_k: signed_text(margin_k, 3)),
    Column("meets_limit", "within", lambda meets: _MEETS[meets], left=True),
    Column("missing", "not stated", ", ".join, left=True),
)
CSV_NAMES = ("part", "fixed_ohm", "worst_k", "margin_k", "meets_limit", "missing", "because")


def shortlist_answer(found: Shortlist) -> dict[str, Any]:
    """What JSON answers."""
    return {
        "position": found.position.position.position,
        "series": found.series,
        "parts": ranked_rows(found),
        "excluded": [{"part": one.part.part.part, "because": list(one.because)} for one in found.excluded],
    }


def ranked_rows(found: Shortlist) -> list[Row]:
    """One row for each ranked part."""
    return [
        {
            "part": one.part.part.part,
            "fixed_ohm": rounded(one.fixed_ohm),
            "worst_k": rounded(one.worst_k),
            "margin_k": rounded(one.margin_k),
            "meets_limit": one.meets,
            "missing": list(one.missing),
        }
        for one in found.ranked
    ]


def shown_rows(found: Shortlist) -> list[Row]:
    """The same for a table, each part with its maker."""
    return [row | {"name": one.part.name} for row, one in zip(ranked_rows(found), found.ranked, strict=True)]


def csv_rows(found: Shortlist) -> list[Row]:
    """One row for each part, ranked ones first; lists in one cell."""
    ranked = [row | {"missing": "; ".join(row["missing"])} for row in ranked_rows(found)]
    return ranked + [{"part": one.part.part.part, "because": "; ".join(one.because)} for one in found.excluded]


def shortlist_sentences(found: Shortlist) -> Iterator[str]:
    """What the list is of, then every part that is out."""
    place = found.position.position
    yield (
        f"{place.position}, {place.purpose}: ±{number_text(place.limit_k)} K over {range_text(place.range_c)}, fixed "
        f"resistor from {found.series}, firmware by {place.firmware.method} made for each part."
    )
    yield f"{count_text(len(found.excluded), 'part')} of the catalog cannot be fitted."
    for one in found.excluded:
        yield f"{one.part.name}: {'; '.join(one.because)}."
