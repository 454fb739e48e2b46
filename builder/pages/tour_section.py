"""A tour by example: two parts of the catalog that agree on paper and not in the cold."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterator
from functools import partial

import numpy as np

from builder.comparisons import Comparison, NoCommonRange, common_range_c, compared, sentence
from builder.kept import digest
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, tag
from builder.pages.side_by_side_page import side_by_side_address
from builder.part_curve import PartCurve
from builder.records import Part, PartRecord

# Below this a pair is no lesson.
_LEAST_K = 1.0
_PAIR_C = (25.0, 85.0)

_ROWS = 34

Pair = tuple[PartRecord, PartRecord, Comparison]
# How far apart in K, and the places in the group of the part that the firmware was made for and of the other.
_Farthest = tuple[float, int, int]


def tour_section(context: Context) -> Html:
    """The pair that agrees in rated resistance and B25/85 and yet reads most apart at the cold end, and the way on."""
    way = joined(
        [
            "Find a part by any fragment of its number under ",
            link("Parts", "parts/index.html"),
            "; put parts ",
            link("side by side", "side-by-side.html"),
            " to see what one reads in place of another; look for company under ",
            link("Families", "families.html"),
            ".",
        ]
    )
    pair = largest_pair(context)
    return joined([tag("p", way), _lesson(*pair, context) if pair else ""])


def _lesson(reference: PartRecord, other: PartRecord, comparison: Comparison, context: Context) -> Html:
    address = side_by_side_address(reference, (other,), context)
    said = sentence(reference.name, other.name, comparison)
    lead = "Equal on paper is not equal: these two agree in rated resistance and in B25/85. "
    return tag("p", lead, said, " ", link("See them side by side", address), ".")


def largest_pair(context: Context) -> Pair | None:
    """Reference, other and their comparison; None where no two parts that agree on paper differ by a kelvin."""
    pairs = [(pair, group) for group in _alike_on_paper(context) if (pair := _kept_farthest(group, context))]
    if not pairs:
        return None
    (apart_k, *places), group = max(pairs, key=lambda found: found[0][0])
    reference, other = (group[place] for place in places)
    span_c = np.linspace(*common_range_c(*map(context.curve, group)), _ROWS)
    found = compared(context.curve(reference), context.curve(other), span_c)
    return (reference, other, found) if apart_k > _LEAST_K else None


def tour_sources(context: Context) -> tuple[str, ...]:
    """What the tour is made from, for the `made_from` of its page."""
    alike = (record for group in _alike_on_paper(context) for record in group)
    return tuple(repr((context.paths.part(r), r.name, context.curve_digest(r), r.digest)) for r in alike)


def _alike_on_paper(context: Context) -> Iterator[list[PartRecord]]:
    """Parts with one rated resistance and one stated B25/85, whose curves are more than an estimate from these."""
    groups: dict[tuple[float, ...], list[PartRecord]] = defaultdict(list)
    for record in context.catalog.parts:
        stated = context.of_record("on-paper", record, partial(_on_paper, record, context))
        if stated:
            groups[tuple(stated)].append(record)
    return (group for group in groups.values() if len(group) > 1)


def _on_paper(record: PartRecord, context: Context) -> list[float]:
    """Rated resistance and temperature, and B25/85; nothing where the curve would not be more than these."""
    part, b_k = record.part, _stated_b_k(record.part)
    if b_k is None or context.curve(record).curve.basis not in ("table", "steinhart-hart"):
        return []
    return [part.rated.resistance_ohm, part.rated.at_c, b_k]


def _stated_b_k(part: Part) -> float | None:
    return next((b.b_k for b in part.b_values if tuple(sorted(b.between_c)) == _PAIR_C), None)


def _kept_farthest(group: list[PartRecord], context: Context) -> _Farthest | None:
    """As found before, if no curve of the group is another."""
    shelf = context.kept.shelf("farthest")
    key = digest(repr([context.curve_digest(record) for record in group]).encode())
    kept: list[_Farthest | None] | None = shelf.head(key)
    if kept is None:
        kept = [_farthest([context.curve(record) for record in group])]
        shelf.put(key, None, kept)
    return kept[0]


def _farthest(curves: list[PartCurve]) -> _Farthest | None:
    """The two that are farthest apart at the coldest temperature that all are made for."""
    try:
        coldest_c, _ = common_range_c(*curves)
    except NoCommonRange:
        return None
    r_ohm = np.array([float(curve.curve.resistance_ohm(coldest_c)) for curve in curves])
    if not np.isfinite(r_ohm).all():
        return None
    least, most = int(r_ohm.argmin()), int(r_ohm.argmax())
    apart_k = abs(float(compared(curves[least], curves[most], [coldest_c]).reads_k[0]))
    return (apart_k, least, most) if np.isfinite(apart_k) else None
