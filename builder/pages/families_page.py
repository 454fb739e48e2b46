"""Families: parts that read the same within half a kelvin."""

from __future__ import annotations

from collections.abc import Sequence

from builder.comparisons import families
from builder.comparisons.families import DEFAULT_RANGE_C, DEFAULT_WITHIN_K
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, table, tag
from builder.pages.ledger import standing_badge
from builder.pages.page import Page
from builder.pages.part_texts import body_text, rated_text
from builder.pages.paths import relative
from builder.problems import count_text
from builder.records import PartRecord
from builder.units import number_text, range_text

_HERE = "families.html"


def families_page(context: Context) -> Page:
    """The families of the catalog."""
    return Page(
        path=_HERE,
        title="Families",
        description="Parts whose nominal curves read the same, each through each other's.",
        body=lambda: str(_body(context)),
        search_text="families groups same curve alternates",
        in_nav=True,
        made_from=tuple(repr(_shown(record, context)) for record in context.catalog.parts),
    )


def _shown(record: PartRecord, context: Context) -> tuple[object, ...]:
    """What the page takes of a part."""
    texts = context.of_record("family-texts", record, lambda: [rated_text(record.part), body_text(record.part)])
    return context.paths.part(record), record.maker, record.number, record.state, texts, context.curve_digest(record)


def _body(context: Context) -> Html:
    parts = context.catalog.parts
    found = families([context.curve(record) for record in parts])
    groups = [[parts[i] for i in group] for group in found.groups if len(group) > 1]
    within, span = f"{number_text(DEFAULT_WITHIN_K)} K", range_text(DEFAULT_RANGE_C)
    lead = (
        f"The parts of a family read the same within {within} from {span}: every pair of them, each through the other's nominal "
        "curve. Tolerances, bodies and ratings are not compared; a family is where to look for an alternate, not an approval."
    )
    alone = sum(len(group) == 1 for group in found.groups)
    return joined(
        [
            tag("h1", "Families"),
            tag("p", lead, class_="bd-lead"),
            tag("p", "Other limits and ranges: ", tag("code", "beadroll families --within K --from C --to C"), "."),
            *(_family(number, group, context) for number, group in enumerate(groups, start=1)),
            tag("p", f"{count_text(alone, 'part')} stand alone.") if alone else "",
            _left_out([parts[i] for i in found.left_out], span, context),
        ]
    )


def _family(number: int, group: Sequence[PartRecord], context: Context) -> Html:
    rows = [
        (_part_link(r, context), r.maker, rated_text(r.part), body_text(r.part), standing_badge(r.state)) for r in group
    ]
    caption = f"Family {number}: {count_text(len(group), 'part')}"
    return table(("part", "maker", "rated", "body", "standing"), rows, caption=caption)


def _left_out(records: Sequence[PartRecord], span: str, context: Context) -> Html:
    if not records:
        return Html()
    names = joined([_part_link(record, context) for record in records], ", ")
    return tag("p", f"Left out, because their curves do not hold over the whole of {span}: ", names, ".")


def _part_link(record: PartRecord, context: Context) -> Html:
    return link(record.number, relative(context.paths.part(record), _HERE))
