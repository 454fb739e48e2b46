"""The Side by side page: parts chosen and compared in the browser, from curves that stand beside the parts' pages."""

from __future__ import annotations

from builder.exports.curve_script import curve_script
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, notice, tag
from builder.pages.page import DataFile, Page
from builder.pages.part_facts import FACT_NAMES, part_facts
from builder.pages.parts_page import DATA as PARTS_DATA
from builder.pages.parts_page import PAGE as PARTS_PAGE
from builder.records import PartRecord

PAGE = "side-by-side.html"


def side_by_side_page() -> Page:
    """The page; its script fills it from `parts_page.parts_data` and from `curve_file`."""
    return Page(
        path=PAGE,
        title="Side by side",
        description="Two to six parts against one another: resistance, ratio, and what each reads in kelvin",
        body=lambda: str(_body()),
        search_text="compare parts, difference in kelvin, ratio, what an alternate reads, replace, second source",
        in_nav=True,
        made_from=(),
    )


def curve_file(record: PartRecord, context: Context) -> DataFile:
    """A part's curve for the browser, beside the part's page."""
    path = context.paths.part(record).removesuffix(".html")
    key = path.removeprefix("parts/")

    def content() -> str:
        curve = context.curve(record)
        return curve_script(key, curve, part_facts(record.part, curve))

    return DataFile(f"{path}.js", content, made_from=(record.digest,))


def side_by_side_address(reference: PartRecord, others: tuple[PartRecord, ...], context: Context) -> str:
    """The page's address, from the site's root, with parts chosen."""
    keys = [context.paths.part(r).removeprefix("parts/").removesuffix(".html") for r in (reference, *others)]
    return f"{PAGE}#reference={keys[0]}&parts={','.join(keys)}"


def _body() -> Html:
    return joined(
        [
            tag("h1", "Side by side"),
            _NEEDS_SCRIPT,
            notice(
                "caution",
                "Parts that agree in resistance and B-value are not thereby interchangeable: see ",
                link("Cautions", "cautions.html"),
                ".",
            ),
            tag("section", _FORM, _RESULT, _differences(), id="bd-side", class_="bd-side", hidden=True),
            tag("script", src=PARTS_DATA, defer=True),
        ]
    )


def _differences() -> Html:
    rows = [tag("tr", tag("th", label, scope="row")) for label in FACT_NAMES]
    head = tag("thead", tag("tr", tag("td")))
    shown = tag(
        "table",
        tag("caption", "What the records state; a cell that differs from the reference’s says so"),
        head,
        tag("tbody", *rows),
        class_="bd-table",
    )
    framed = tag("div", shown, class_="bd-scroll", tabindex="0", role="group", aria_label="Differences")
    return tag("div", tag("h2", "Differences", id="differences"), framed, class_="bd-side-differences", hidden=True)


# Taken away by the script; an element for browsers without scripts is not shown where a script is merely blocked.
_NEEDS_SCRIPT = tag(
    "p",
    "This page computes in the browser: allow JavaScript for it. Without, every part’s resistance and tolerance stand as "
    "tables on ",
    link("the parts’ own pages", PARTS_PAGE),
    ".",
    id="bd-side-needs",
)
_FORM = Html("""\
<form autocomplete="off">
<div class="bd-side-add">
<label for="bd-side-find">Add a part</label>
<div class="bd-side-box">
<input id="bd-side-find" role="combobox" aria-expanded="false" aria-controls="bd-side-found" aria-autocomplete="list"
 spellcheck="false" autocapitalize="none" placeholder="piece of a number, maker, 10k, 0603">
<ul id="bd-side-found" role="listbox" aria-label="Parts found" hidden></ul>
</div>
</div>
<fieldset class="bd-side-parts">
<legend>Parts, and which of them the firmware was made for</legend>
<ol></ol>
<p class="bd-side-none">None yet: two to six can be compared.</p>
</fieldset>
<div class="bd-side-settings">
<fieldset>
<legend>Show</legend>
<label><input type="radio" name="view" value="reads"> reads, K</label>
<label><input type="radio" name="view" value="ratio"> ratio, %</label>
<label><input type="radio" name="view" value="resistance"> resistance, Ω</label>
</fieldset>
<fieldset>
<legend>Range, °C</legend>
<label>from <input name="from" type="number" step="1" min="-273" max="1000" aria-describedby="bd-side-said"></label>
<label>to <input name="to" type="number" step="1" min="-273" max="1000" aria-describedby="bd-side-said"></label>
<button type="button" data-does="common">Common range</button>
</fieldset>
<label>Table every
<select name="step"><option value="1">1 K</option><option value="5">5 K</option><option value="10">10 K</option></select>
</label>
</div>
</form>
<p class="bd-side-said" id="bd-side-said" role="status"></p>
<div class="bd-side-tools">
<button type="button" data-does="link">Copy link</button>
<button type="button" data-does="sentences">Copy sentences</button>
<button type="button" data-does="csv">Download CSV</button>
<button type="button" data-does="svg">Chart as SVG</button>
<button type="button" data-does="png">Chart as PNG</button>
<button type="button" data-does="print">Print</button>
</div>
""")

_RESULT = Html("""\
<div class="bd-side-result" hidden>
<div class="bd-side-drawn">
<h2 id="chart"></h2>
<div class="bd-side-chart"></div>
</div>
<ul class="bd-side-sentences"></ul>
<div class="bd-side-rows">
<h2 id="table">The same in figures</h2>
<div class="bd-scroll" tabindex="0" role="group" aria-label="Table of the chart’s figures">
<table class="bd-table bd-figures"><caption></caption><thead></thead><tbody></tbody></table>
</div>
</div>
</div>
""")
