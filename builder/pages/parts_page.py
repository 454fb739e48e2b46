"""The Parts page: the whole catalog as a list that the browser filters, and the makers as plain links."""

from __future__ import annotations

import json
import posixpath
from collections import Counter
from collections.abc import Callable, Hashable, Iterable, Mapping
from dataclasses import dataclass
from typing import Any, TypeVar, get_args

import numpy as np

from builder.pages.html import Html, html, joined, link, slug, tag
from builder.pages.page import DataFile, Heading, Page
from builder.pages.part_texts import body_text, rated_text
from builder.pages.paths import Paths, relative
from builder.part_curve import PartCurve
from builder.problems import count_text
from builder.records import Catalog, Part, PartRecord
from builder.records.part import Lifecycle
from builder.units import number_text, range_text, resistance_text, temperature_text

PAGE = "parts/index.html"
DATA = "parts/parts-data.js"
B_HEADING = "B25/85 of the curve, K"
_B_PAIR_C = (25.0, 85.0)
# From what may be used to what may not: the order in which people want to see them.
_STANDINGS = ("approved", "restricted", "proposed", "withdrawn", "no standing")
_COLUMNS = (
    ("number", "Part number"),
    ("own", "Own number"),
    ("maker", "Maker"),
    ("rated", "Rated resistance"),
    ("tolerance", "Tolerance"),
    ("b", B_HEADING),
    ("body", "Body"),
    ("range", "Operating range"),
    ("standing", "Standing"),
    ("lifecycle", "Lifecycle"),
)
_Value = TypeVar("_Value", bound=Hashable)
_Places = Mapping[_Value, int]


def parts_page(catalog: Catalog, curves: Mapping[str, PartCurve], paths: Paths) -> Page:  # noqa: ARG001
    """The page with the list; its rows come from `parts_data`, its script from the site's assets."""
    return Page(
        path=PAGE,
        title="Parts",
        description=f"{count_text(len(catalog.parts), 'part')} by number, value, body, range and standing",
        body=lambda: str(_body(catalog, paths)),
        headings=(Heading("makers", "Makers"),),
        search_text="list of all parts, filters, makers",
        in_nav=True,
    )


def parts_data(catalog: Catalog, curves: Mapping[str, PartCurve], paths: Paths) -> DataFile:
    """The list's rows as a script, since a page from file:// cannot fetch data."""
    return DataFile(DATA, lambda: _script(catalog, curves, paths))


def curve_b(curve: PartCurve) -> tuple[float | None, str]:
    """B25/85 of a curve in whole kelvin, and whether it is `estimated` or `extrapolated`; None where it has none."""
    made = curve.curve
    b_k = made.b_value_k(*_B_PAIR_C)
    if not np.isfinite(b_k):
        return None, ""
    if made.extrapolated(_B_PAIR_C).any():
        return round(b_k), "extrapolated"
    return round(b_k), "estimated" if made.fixed_c and not {*_B_PAIR_C} <= {*made.fixed_c} else ""


@dataclass(frozen=True)
class _Occurring:
    """The values that occur in a catalog, each kind in the order it sorts, with their places there."""

    makers: _Places[str]
    rated: _Places[tuple[float, float]]
    tolerances: _Places[float | None]
    bodies: _Places[tuple[str, str]]
    ranges: _Places[tuple[float, float] | None]
    standings: _Places[str]
    lifecycles: _Places[str]
    words: _Places[str]


def _occurring(parts: Iterable[Part]) -> _Occurring:
    parts = tuple(parts)
    return _Occurring(
        makers=_places((p.maker for p in parts), str.casefold),
        rated=_places(map(_rated, parts)),
        tolerances=_places(p.rated.tolerance_pct for p in parts),
        bodies=_places(map(_body_pair, parts)),
        ranges=_places(p.limits.operating_c for p in parts),
        standings=_places(map(_standing, parts), _STANDINGS.index),
        lifecycles=_places((p.lifecycle for p in parts), get_args(Lifecycle).index),
        words=_places(map(_words, parts)),
    )


def _none_last(value: Any) -> tuple[bool, Any]:
    return value is None, value


def _places(values: Iterable[_Value], key: Callable[[Any], Any] = _none_last) -> _Places[_Value]:
    # Sorted twice: where the key takes two values for one, a set's order would decide.
    return {value: place for place, value in enumerate(sorted(sorted(set(values), key=_none_last), key=key))}


def _rated(part: Part) -> tuple[float, float]:
    return part.rated.resistance_ohm, part.rated.at_c


def _body_pair(part: Part) -> tuple[str, str]:
    return part.body.form, part.body.size_code or ""


def _standing(part: Part) -> str:
    return part.state() or "no standing"


def _words(part: Part) -> str:
    """The description's words that the other columns do not say: the filter looks for them, nobody sees them."""
    said = {*f"{part.part} {part.own_number} {part.maker} {rated_text(part)} {body_text(part)}".casefold().split()}
    words = [word.strip(",;") for word in (part.description or "").split()]
    return " ".join(word for word in words if word.casefold() not in said)


def _script(catalog: Catalog, curves: Mapping[str, PartCurve], paths: Paths) -> str:
    here = _occurring(record.part for record in catalog.parts)
    rows = [_row(record, curves[record.source.file], here, paths) for record in catalog.parts]
    data = {
        "makers": [[maker, relative(posixpath.dirname(paths.maker(maker)), PAGE)] for maker in here.makers],
        "rated": [[*pair, resistance_text(pair[0]), _at(pair[1])] for pair in here.rated],
        "tolerances": [[pct, "not stated" if pct is None else f"±{number_text(pct)} %"] for pct in here.tolerances],
        "bodies": list(here.bodies),
        "ranges": [[*span, range_text(span)] if span else [None, None, "not stated"] for span in here.ranges],
        "standings": list(here.standings),
        "lifecycles": list(here.lifecycles),
        "words": list(here.words),
    }
    tables = ",\n".join(f"{_json(name)}:{_json(values)}" for name, values in data.items())
    lines = ",\n".join(map(_json, rows))
    return f'window.beadroll = window.beadroll || {{}};\nbeadroll.parts = {{{tables},\n"rows":[\n{lines}\n]}};\n'


def _at(t_c: float) -> str:
    return "" if t_c == 25 else f"at {temperature_text(t_c)}"


def _row(record: PartRecord, curve: PartCurve, here: _Occurring, paths: Paths) -> list[Any]:
    part = record.part
    b_k, mark = curve_b(curve)
    row = [
        part.part,
        part.own_number or "",
        here.makers[part.maker],
        here.rated[_rated(part)],
        here.tolerances[part.rated.tolerance_pct],
        b_k,
        mark,
        here.bodies[_body_pair(part)],
        here.ranges[part.limits.operating_c],
        here.standings[_standing(part)],
        here.lifecycles[part.lifecycle],
        here.words[_words(part)],
    ]
    # The script makes most file names from the number itself; only the others are sent.
    file = posixpath.basename(paths.part(record))
    return row if part.part.isascii() and file == f"{slug(part.part)}.html" else [*row, file]


def _json(value: Any) -> str:
    """JSON that may stand in a script, whatever a record says."""
    return json.dumps(value, ensure_ascii=False, separators=(",", ":"), allow_nan=False).replace("<", "\\u003c")


def _body(catalog: Catalog, paths: Paths) -> Html:
    parts = [record.part for record in catalog.parts]
    return joined(
        [
            tag("h1", "Parts"),
            tag(
                "section",
                _filters(_occurring(parts)),
                _TOOLS,
                _list_head(),
                id="bd-parts",
                class_="bd-parts",
                aria_label="List of parts",
                hidden=True,
            ),
            tag("h2", "Makers", id="makers"),
            tag("p", "Each maker's page holds its parts as a plain table."),
            _makers(Counter(part.maker for part in parts), paths),
            tag("script", src=relative(DATA, PAGE), defer=True),
        ]
    )


def _makers(counts: Counter[str], paths: Paths) -> Html:
    entries = (
        tag("li", link(maker, relative(paths.maker(maker), PAGE)), f" {count_text(counts[maker], 'part')}")
        for maker in sorted(counts, key=lambda maker: (maker.casefold(), maker))
    )
    return tag("ul", *entries, class_="bd-makers")


_TOOLS = Html(
    '<div class="bd-parts-tools">'
    '<p class="bd-parts-count" role="status"></p>'
    '<button type="button" data-does="clear">Clear filters</button>'
    '<button type="button" data-does="link">Copy link</button>'
    '<button type="button" data-does="copy">Copy as CSV</button>'
    '<button type="button" data-does="download">Download CSV</button>'
    '<a href="#makers">Makers’ pages</a>'
    "</div>"
)


def _filters(here: _Occurring) -> Html:
    resistances = [(f"{ohm:.10g}", resistance_text(ohm)) for ohm in dict.fromkeys(ohm for ohm, _ in here.rated)]
    tolerances = [(f"{pct:.10g}", f"±{number_text(pct)} %") for pct in here.tolerances if pct is not None]
    sizes = sorted({size for _, size in here.bodies} - {""})
    more = [
        _group(
            "Rated resistance",
            _choice("rated", "one value", resistances),
            _entry("rated_from", "or from", "4k7"),
            _entry("rated_to", "to", "100k"),
            _choice("tolerance", "tolerance at most", tolerances),
            wide=True,
        ),
        _group("Operating range covers", _entry("cold", "from °C", "−40"), _entry("hot", "to °C", "125")),
        _group(
            "Body",
            *_ticks("form", dict.fromkeys(form for form, _ in here.bodies)),
            _choice("size", "size code", [(size, size) for size in sizes]),
            wide=True,
        ),
        _group("Maker", _choice("maker", "made by", [(maker, maker) for maker in here.makers])),
        _group("Lifecycle", *_ticks("lifecycle", here.lifecycles), wide=True),
        _group("Standing", *_ticks("standing", here.standings)),
    ]
    return tag(
        "form",
        _FIND,
        tag("details", tag("summary", "Filters"), tag("div", *more, class_="bd-parts-groups")),
        role="search",
        aria_label="Parts",
        autocomplete="off",
    )


_FIND = Html(
    '<label class="bd-parts-find">Find '
    '<input type="search" name="find" spellcheck="false" autocapitalize="none"'
    ' placeholder="piece of a number, word, 10k, 0603">'
    "</label>"
)


def _group(legend: str, *content: Html, wide: bool = False) -> Html:
    return tag("fieldset", tag("legend", legend), *content, class_="bd-parts-wide" if wide else None)


def _choice(name: str, label: str, options: Iterable[tuple[str, str]]) -> Html:
    chosen = [tag("option", "any", value=""), *(tag("option", text, value=value) for value, text in options)]
    return tag("label", tag("span", label), tag("select", *chosen, name=name))


def _entry(name: str, label: str, example: str) -> Html:
    return tag("label", tag("span", label), Html(f'<input name="{name}" size="6" placeholder="{example}">'))


def _ticks(name: str, values: Iterable[str]) -> Iterable[Html]:
    for value in values:
        box = Html(f'<input type="checkbox" name="{name}" value="{html(value)}">')
        yield tag("label", box, value)


def _list_head() -> Html:
    headings = [
        tag(
            "th",
            tag("button", text, type="button", data_by=name),
            scope="col",
            role="columnheader",
            class_=f"bd-c-{name}",
        )
        for name, text in _COLUMNS
    ]
    head = tag("thead", tag("tr", *headings, role="row", aria_rowindex=1), role="rowgroup")
    return joined(
        [
            tag("table", head, class_="bd-parts-table", role="table", aria_label="Parts found"),
            tag("p", "No part is like this. Take a filter away.", class_="bd-parts-none", hidden=True),
        ]
    )
