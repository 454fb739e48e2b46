"""The Parts page: the whole catalog as a list that the browser filters, and the makers as plain links."""

from __future__ import annotations

import json
import posixpath
from collections import Counter
from collections.abc import Callable, Hashable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from functools import partial
from typing import Any, NamedTuple, TypeVar, get_args

import numpy as np

from builder.pages.context import Context
from builder.pages.html import Html, html, joined, link, slug, tag
from builder.pages.page import DataFile, Heading, Page
from builder.pages.part_texts import body_text, rated_text
from builder.pages.paths import Paths, relative
from builder.part_curve import PartCurve
from builder.problems import count_text
from builder.records import Part, PartRecord
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


def parts_page(context: Context) -> Page:
    """The page with the list; its rows come from `parts_data`, its script from the site's assets."""
    catalog, paths = context.catalog, context.paths
    makers = Counter(record.maker for record in catalog.parts)
    return Page(
        path=PAGE,
        title="Parts",
        description=f"{count_text(len(catalog.parts), 'part')} by number, value, body, range and standing",
        body=lambda: str(_body(_occurring(_listed(context)), makers, paths)),
        headings=(Heading("makers", "Makers"),),
        search_text="list of all parts, filters, makers",
        in_nav=True,
        made_from=(
            repr([(maker, count, paths.maker(maker)) for maker, count in makers.items()]),
            repr(_occurring(_listed(context))),
        ),
    )


def parts_data(context: Context) -> DataFile:
    """The list's rows as a script, since a page from file:// cannot fetch data."""
    paths = tuple(context.paths.part(record) for record in context.catalog.parts)
    rows = tuple(map(repr, _listed(context)))
    return DataFile(DATA, lambda: _script(context), made_from=(*paths, *rows))


class Listed(NamedTuple):
    """What the list has of a part, its page apart."""

    number: str
    own_number: str
    maker: str
    rated: tuple[float, float]
    tolerance_pct: float | None
    b_k: float | None
    b_mark: str
    body: tuple[str, str]
    operating_c: tuple[float, float] | None
    standing: str
    lifecycle: str
    words: str


def _listed(context: Context) -> list[Listed]:
    return [
        Listed._make(context.of_record("listed", record, partial(_values, record, context)))
        for record in context.catalog.parts
    ]


def _values(record: PartRecord, context: Context) -> tuple[Any, ...]:
    part, (b_k, mark) = record.part, curve_b(context.curve(record))
    return (
        part.part,
        part.own_number or "",
        part.maker,
        (part.rated.resistance_ohm, part.rated.at_c),
        part.rated.tolerance_pct,
        b_k,
        mark,
        (part.body.form, part.body.size_code or ""),
        part.limits.operating_c,
        part.state() or "no standing",
        part.lifecycle,
        _words(part),
    )


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


def _occurring(rows: Sequence[Listed]) -> _Occurring:
    return _Occurring(
        makers=_places((row.maker for row in rows), str.casefold),
        rated=_places(row.rated for row in rows),
        tolerances=_places(row.tolerance_pct for row in rows),
        bodies=_places(row.body for row in rows),
        ranges=_places(row.operating_c for row in rows),
        standings=_places((row.standing for row in rows), _STANDINGS.index),
        lifecycles=_places((row.lifecycle for row in rows), get_args(Lifecycle).index),
        words=_places(row.words for row in rows),
    )


def _none_last(value: Any) -> tuple[bool, Any]:
    return value is None, value


def _places(values: Iterable[_Value], key: Callable[[Any], Any] = _none_last) -> _Places[_Value]:
    # Sorted twice: where the key takes two values for one, a set's order would decide.
    return {value: place for place, value in enumerate(sorted(sorted(set(values), key=_none_last), key=key))}


def _words(part: Part) -> str:
    """The description's words that the other columns do not say: the filter looks for them, nobody sees them."""
    said = {*f"{part.part} {part.own_number} {part.maker} {rated_text(part)} {body_text(part)}".casefold().split()}
    words = [word.strip(",;") for word in (part.description or "").split()]
    return " ".join(word for word in words if word.casefold() not in said)


def _script(context: Context) -> str:
    listed, paths = _listed(context), context.paths
    here = _occurring(listed)
    rows = [_row(row, paths.part(record), here) for row, record in zip(listed, context.catalog.parts, strict=True)]
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


def _row(part: Listed, path: str, here: _Occurring) -> list[Any]:
    row = [
        part.number,
        part.own_number,
        here.makers[part.maker],
        here.rated[part.rated],
        here.tolerances[part.tolerance_pct],
        part.b_k,
        part.b_mark,
        here.bodies[part.body],
        here.ranges[part.operating_c],
        here.standings[part.standing],
        here.lifecycles[part.lifecycle],
        here.words[part.words],
    ]
    # The script makes most file names from the number itself; only the others are sent.
    file = posixpath.basename(path)
    return row if part.number.isascii() and file == f"{slug(part.number)}.html" else [*row, file]


def _json(value: Any) -> str:
    """JSON that may stand in a script, whatever a record says."""
    return json.dumps(value, ensure_ascii=False, separators=(",", ":"), allow_nan=False).replace("<", "\\u003c")


def _body(here: _Occurring, makers: Counter[str], paths: Paths) -> Html:
    return joined(
        [
            tag("h1", "Parts"),
            tag(
                "section",
                _filters(here),
                _TOOLS,
                _list_head(),
                id="bd-parts",
                class_="bd-parts",
                aria_label="List of parts",
                hidden=True,
            ),
            tag("h2", "Makers", id="makers"),
            tag("p", "Each maker's page holds its parts as a plain table."),
            _makers(makers, paths),
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
