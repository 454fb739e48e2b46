"""HTML from text: everything that a record says is escaped here, and nowhere left to the caller."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from functools import cache
from html import escape
from typing import Any

from builder.exports.rows import Column, Row

_LONG = 32
_LONG_CLASS = ' class="bd-long"'


class Html(str):
    """Text that is HTML already; any other text is escaped before it becomes part of a page."""

    __slots__ = ()


def html(value: Any) -> Html:
    """A value as HTML: escaped unless it is HTML already, nothing for None.

    >>> html("a < b"), html(Html("<b>x</b>")), html(None)
    ('a &lt; b', '<b>x</b>', '')
    """
    if isinstance(value, Html):
        return value
    return Html("" if value is None else escape(str(value)))


def tag(name: str, /, *content: Any, **attributes: Any) -> Html:
    """An element. `class_` stands for class, an underscore for a hyphen; False and None leave an attribute out.

    >>> tag("a", "R & D", href="x?a=1&b=2", class_="bd-link", hidden=False)
    '<a href="x?a=1&amp;b=2" class="bd-link">R &amp; D</a>'
    """
    inner = joined(content)
    if not attributes:
        return Html(f"<{name}>{inner}</{name}>")
    written = [
        f" {_attribute_name(key)}" if value is True else f' {_attribute_name(key)}="{escape(str(value))}"'
        for key, value in attributes.items()
        if value is not None and value is not False
    ]
    return Html(f"<{name}{''.join(written)}>{inner}</{name}>")


@cache
def _attribute_name(key: str) -> str:
    return key.rstrip("_").replace("_", "-")


def joined(parts: Iterable[Any], by: str = "") -> Html:
    """Parts as one piece of HTML, each escaped unless it is HTML."""
    return Html(html(by).join([part if isinstance(part, Html) else html(part) for part in parts]))


def table(headings: Sequence[Any], body: Iterable[Sequence[Any]], *, caption: str, figures: bool = False) -> Html:
    """A table; each row's first cell is its heading. `figures` sets all other cells to the right.

    A column with nothing in any row is left out.
    """
    columns = [(heading, cells) for heading, cells in zip(headings, zip(*body, strict=True), strict=True) if any(cells)]
    rows = [_row(*cells) for cells in zip(*(cells for _, cells in columns), strict=True)]
    return _framed_table([heading for heading, _ in columns], rows, caption, figures)


def _row(first: Any, *others: Any) -> Html:
    # A page has hundreds of cells: put together at once.
    cells = "".join([f"<td{_LONG_CLASS if _is_long(cell) else ''}>{html(cell)}</td>" for cell in others])
    return Html(f'<tr><th scope="row">{html(first)}</th>{cells}</tr>')


def rows_table(columns: Sequence[Column], rows: Iterable[Row], *, caption: str) -> Html:
    """Rows of figures as a table, points below each other; rows that are extrapolated are marked.

    A column with nothing in any row is left out.
    """
    rows = list(rows)
    shown = {column: [column.text(row[column.name]) for row in rows] for column in columns}
    shown = {column: texts for column, texts in shown.items() if any(texts)}
    first, *others = shown.values()
    written = map(_figures_row, rows, first, zip(*map(_figure_cells, others), strict=True))
    return _framed_table([column.heading for column in shown], written, caption, True)


def _figures_row(row: Row, first: str, cells: Iterable[str]) -> Html:
    # By far the most of a page's HTML: put together at once, every text of it escaped.
    opened = '<tr class="bd-far">' if row.get("extrapolated") else "<tr>"
    return Html(f'{opened}<th scope="row">{escape(first)}</th>{"".join(cells)}</tr>')


def _figure_cells(texts: Sequence[str]) -> list[str]:
    """A column's cells, each told by how many decimals it is shorter than the longest."""
    decimals = [len(text.partition(".")[2]) for text in texts]
    most = max(decimals)
    opened = ["<td>", *(f'<td class="bd-short-{missing}">' for missing in range(1, most + 1))]
    return [f"{opened[most - own]}{escape(text)}</td>" for own, text in zip(decimals, texts, strict=True)]


def _framed_table(headings: Sequence[Any], rows: Iterable[Html], caption: str, figures: bool) -> Html:
    head = tag("thead", tag("tr", *(tag("th", heading, scope="col") for heading in headings)))
    kind = "bd-table bd-figures" if figures else "bd-table"
    shown = tag("table", tag("caption", caption), head, tag("tbody", *rows), class_=kind)
    # A wide table scrolls by itself: reachable by keyboard, so that nobody needs a mouse to see its end.
    return tag("div", shown, class_="bd-scroll", tabindex="0", role="group", aria_label=caption)


def facts(pairs: Iterable[tuple[Any, Any]]) -> Html:
    """Names and values beside each other; a pair without a value is left out."""
    shown = [(name, value) for name, value in pairs if value not in (None, "", ())]
    written = (
        tag("div", tag("dt", name), tag("dd", value), class_="bd-long" if _is_long(value) else None)
        for name, value in shown
    )
    return tag("dl", *written, class_="bd-facts")


def _is_long(value: Any) -> bool:
    """Whether text would make a narrow column tall."""
    return isinstance(value, str) and not isinstance(value, Html) and len(value) > _LONG


def link(text: Any, address: str, **attributes: Any) -> Html:
    """A link to a page of the site or to a web address."""
    return tag("a", text, href=address, **attributes)


def notice(kind: str, *content: Any) -> Html:
    """A paragraph set apart: kind is `caution`, `warning`, `error` or `note`."""
    return tag("div", tag("p", *content), class_=f"bd-notice bd-{kind}", role="note")


def slug(text: str) -> str:
    """Text as a name in an address: lower case, letters, digits, points and hyphens.

    >>> slug("TB3A-103F38"), slug("Ōstrel & Söhne"), slug("½/3")
    ('tb3a-103f38', 'strel-s-hne', '3')
    """
    return re.sub(r"[^a-z0-9.]+", "-", text.casefold()).strip("-.") or "x"
