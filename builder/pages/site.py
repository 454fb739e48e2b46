"""All pages and files of the site, each rendered only when it is written."""

from __future__ import annotations

from collections.abc import Iterator

from builder.crosschecks import RULES, CheckedCatalog
from builder.history import Past
from builder.kept import Kept
from builder.pages.budget_section import budget_csv
from builder.pages.changes_page import changes_page
from builder.pages.checks_page import checks_page, rule_page
from builder.pages.context import Context
from builder.pages.documents_section import document_files
from builder.pages.families_page import families_page
from builder.pages.home_page import home_page
from builder.pages.ledger_feed import ledger_feed
from builder.pages.ledger_page import ledger_csv, ledger_page
from builder.pages.maker_page import maker_pages
from builder.pages.page import CopiedFile, DataFile, Page
from builder.pages.part_page import part_csv, part_page
from builder.pages.parts_page import parts_data, parts_page
from builder.pages.position_page import position_page
from builder.pages.positions_page import positions_page
from builder.pages.record_format_page import record_format_page, schema_files
from builder.pages.shortlist_page import shortlist_data, shortlist_page
from builder.pages.side_by_side_page import curve_file, side_by_side_page
from builder.pages.swap_page import swap_csv, swap_page


def site(
    checked: CheckedCatalog,
    *,
    about: str = "",
    figures: bool = True,
    past: Past | None = None,
    kept: Kept | None = None,
    site_url: str = "",
) -> Iterator[Page | DataFile | CopiedFile]:
    """Every generated page and file.

    `about` is what the home page says of the catalog; pages without figures cost less, for measuring what figures cost;
    `past` has the revisions that the Changes page shows, `kept` what was computed for an earlier site,
    `site_url` is where the site will stand, for links from outside it.
    """
    context = Context(checked, about, figures, kept or Kept())
    yield home_page(context)
    yield parts_page(context)
    yield parts_data(context)
    yield from maker_pages(context)
    yield side_by_side_page()
    yield families_page(context)
    yield positions_page(context)
    yield shortlist_page(context)
    yield shortlist_data(context)
    yield ledger_page(context)
    yield ledger_csv(context)
    yield ledger_feed(context, site_url)
    yield changes_page(context, past)
    yield checks_page()
    yield from (rule_page(rule, context) for rule in RULES)
    yield record_format_page()
    yield from schema_files()
    yield from document_files(context)
    for record in context.catalog.parts:
        yield part_page(record, context)
        yield part_csv(record, context)
        yield curve_file(record, context)
    for place in context.catalog.positions:
        yield position_page(place, context)
        yield budget_csv(place, context)
        for alternate in context.alternates(place):
            yield swap_page(place, alternate, context)
            yield swap_csv(place, alternate, context)
