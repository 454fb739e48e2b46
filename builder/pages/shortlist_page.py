"""The Shortlist page: a circuit is typed in, and the browser ranks every part of the catalog in it."""

from __future__ import annotations

from functools import partial
from typing import Any

from builder.exports.shortlist_script import ShortlistRow, shortlist_row, shortlist_script
from builder.pages.cautions import CAUTION
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, notice, tag
from builder.pages.page import DataFile, Heading, Page
from builder.pages.parts_page import DATA as PARTS_DATA
from builder.pages.shortlist_form import form, start_values
from builder.records import PartRecord

PAGE = "shortlist.html"
DATA = "shortlist-data.js"


def shortlist_page(context: Context) -> Page:
    """The page; its script fills it from `parts_page.parts_data` and from `shortlist_data`."""
    return Page(
        path=PAGE,
        title="Shortlist",
        description="Every part of the catalog in a circuit that is typed in, ranked by worst case",
        body=lambda: str(_body(context)),
        headings=(Heading("ranked", "Ranked"), Heading("out", "Out, and why")),
        search_text="choose a part, best fixed resistor, worst case, rank all parts, requirements, new position",
        in_nav=True,
        made_from=_form_sources(context),
    )


def _form_sources(context: Context) -> tuple[str, ...]:
    """What the form offers to choose from."""
    choices = {
        context.of_record("shortlist-form", record, partial(_choices, record)) for record in context.catalog.parts
    }
    places = [place.position.position for place in context.catalog.positions]
    return repr(places), *sorted(map(repr, choices))


def _choices(record: PartRecord) -> tuple[Any, ...]:
    return record.part.body.form, record.part.body.size_code, record.part.qualification


def shortlist_data(context: Context) -> DataFile:
    """All parts' curves and the positions to start from, for this page alone."""
    starts = [start_values(place.position) for place in context.catalog.positions]
    rows = [
        ShortlistRow._make(context.of_record("shortlist", record, partial(_row, record, context)))
        for record in context.catalog.parts
    ]
    return DataFile(DATA, lambda: shortlist_script(rows, starts), made_from=(repr(rows), repr(starts)))


def _row(record: PartRecord, context: Context) -> tuple[Any, ...]:
    return tuple(shortlist_row(record.part, context.curve(record)))


def _body(context: Context) -> Html:
    return joined(
        [
            tag("h1", "Shortlist"),
            _NEEDS_SCRIPT,
            tag(
                "section",
                tag(
                    "details", tag("summary", "Circuit and requirements"), form(context.catalog), class_="bd-short-form"
                ),
                tag("div", _RESULT, class_="bd-short-result"),
                id="bd-short",
                class_="bd-short",
                hidden=True,
            ),
            notice("caution", CAUTION, " See ", link("Cautions", "cautions.html"), "."),
            tag("script", src=PARTS_DATA, defer=True),
            tag("script", src=DATA, defer=True),
        ]
    )


# Taken away by the script; an element for browsers without scripts is not shown where a script is merely blocked.
_NEEDS_SCRIPT = tag(
    "p",
    "This page computes in the browser: allow JavaScript for it. Without, ",
    tag("code", "beadroll shortlist"),
    " ranks the parts at a position of the catalog; see ",
    link("Commands", "commands.html"),
    ".",
    id="bd-short-needs",
)
_RESULT = Html("""\
<p class="bd-short-circuit"></p>
<p class="bd-short-said" role="status"></p>
<p class="bd-short-busy"></p>
<div class="bd-short-tools">
<label class="bd-short-find">Find <input name="find" type="search" spellcheck="false" autocapitalize="none"
 placeholder="piece of a number, maker"></label>
<button type="button" data-does="link">Copy link</button>
<button type="button" data-does="record">Copy position record</button>
<button type="button" data-does="csv">Download CSV</button>
<button type="button" data-does="print">Print</button>
<button type="button" data-does="reset">Start anew</button>
</div>
<h2 id="ranked">Ranked</h2>
<table class="bd-short-table bd-short-ranked" role="table" aria-label="Parts ranked by worst case">
<thead role="rowgroup"><tr role="row" aria-rowindex="1">
<th scope="col" role="columnheader" class="bd-s-place">Place</th>
<th scope="col" role="columnheader" class="bd-s-number">Part</th>
<th scope="col" role="columnheader" class="bd-s-about">What it is</th>
<th scope="col" role="columnheader" class="bd-s-fixed">Best fixed resistor</th>
<th scope="col" role="columnheader" class="bd-s-worst">Worst case, K</th>
<th scope="col" role="columnheader" class="bd-s-margin">Margin, K</th>
<th scope="col" role="columnheader" class="bd-s-verdict">Limit</th>
<th scope="col" role="columnheader" class="bd-s-take">For the record</th>
</tr></thead>
</table>
<p class="bd-short-none" hidden>No part is left to be ranked.</p>
<h2 id="out">Out, and why</h2>
<table class="bd-short-table bd-short-out" role="table" aria-label="Parts that are out">
<thead role="rowgroup"><tr role="row" aria-rowindex="1">
<th scope="col" role="columnheader" class="bd-s-number">Part</th>
<th scope="col" role="columnheader" class="bd-s-about">What it is</th>
<th scope="col" role="columnheader" class="bd-s-because">Every reason</th>
</tr></thead>
</table>
<p class="bd-short-assumed">The worst case has every source of error at the end that pushes the reading the same way, looked
for every 0.5 K over the range, with firmware made for each part and its resistor. The fixed resistor is the value of the
series that makes it smallest. A figure that is left out leaves the limit undecided, unless it is missed anyway; a part that lacks one itself
stands behind all others. Trips are not looked at. See <a href="method.html#fixed-resistor-and-shortlist">Method</a>.</p>
""")
