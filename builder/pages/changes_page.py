"""Changes: what the newest revisions of the records did, in kelvin."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import Any

from builder.exports import change_rows
from builder.exports.rows import Column
from builder.history import Changes, HistoryUnread, PartChange, Past, PositionChange, Step
from builder.history.matching import name_of
from builder.history.shift import NOTHING_MOVED
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, notice, table, tag
from builder.pages.page import Heading, Page
from builder.pages.paths import relative
from builder.problems import clipped, count_text

HERE = "changes.html"
# Of one revision: more are told by their number, and not computed.
_MOST_ROWS = 50
_MOST_NAMES = 20
_MOST_DETAILS = 200
_SAME = "edited, with the same figures"
_ONLY_NAMED = ("added", "removed", "file moved", _SAME)
_LEAD = (
    "The newest revisions of the records, and by how many kelvin each of them moved curves, tolerance bands and what positions read. "
    "For any other revision: beadroll changes REVISION."
)
_COMPARED = "What is compared with what, and how the ledger is kept"


def changes_page(context: Context, past: Past | None) -> Page:
    """The newest revisions; where there are none to show, why."""
    steps, missing = _steps(past)
    links = {record.name: relative(context.paths.part(record), HERE) for record in context.catalog.parts}
    links |= {r.position.position: relative(context.paths.position(r), HERE) for r in context.catalog.positions}
    return Page(
        path=HERE,
        title="Changes",
        description="What the newest revisions of the records changed, in kelvin.",
        body=lambda: str(_body(context, past, steps, missing, links)),
        headings=tuple(Heading(_anchor(step), _heading(step)) for step in steps),
        search_text="changes history revisions git moved edited",
        in_nav=True,
        made_from=(repr(steps), missing, repr(sorted(links.items()))),
    )


def _steps(past: Past | None) -> tuple[tuple[Step, ...], str]:
    """The revisions to show, and where there are none, why."""
    if past is None or past.most < 1:
        return (), "This site shows no changes: its mkdocs.yml has changes: 0."
    if not past.is_under_git:
        return (), "These records are not kept in a git repository, so nothing is known of how they came about."
    try:
        steps = past.steps()
    except HistoryUnread as unread:
        return (), f"The history cannot be read: {unread}"
    return steps, "" if steps else "This clone has no older revision of the records to compare with."


def _body(context: Context, past: Past | None, steps: tuple[Step, ...], missing: str, links: Mapping[str, str]) -> Html:
    shown = [notice("note", missing)] if missing else _sections(context, past, steps, links)
    more = tag("p", link(_COMPARED, "honest-history.html"), ".")
    return joined([tag("h1", "Changes"), tag("p", _LEAD, class_="bd-lead"), more, *shown])


def _sections(context: Context, past: Past | None, steps: tuple[Step, ...], links: Mapping[str, str]) -> Iterator[Html]:
    assert past is not None
    try:
        for step, changes in past.told(steps, context.catalog):
            yield _section(step, changes, links)
    except HistoryUnread as unread:
        yield notice("note", f"The history cannot be read further: {unread}")


def _anchor(step: Step) -> str:
    return f"r-{step.newer.short}"


def _heading(step: Step) -> str:
    return f"{step.newer.day} {clipped(step.newer.subject)}"


def _section(step: Step, changes: Changes, links: Mapping[str, str]) -> Html:
    parts = [change for change in changes.parts if _kind(change) not in _ONLY_NAMED]
    positions = [change for change in changes.positions if _kind(change) not in _ONLY_NAMED]
    shown = Changes(tuple(parts[:_MOST_ROWS]), tuple(positions[:_MOST_ROWS]), changes.unread)
    counts = [count_text(len(changes.parts), "part"), count_text(len(changes.positions), "position")]
    return joined(
        [
            tag("h2", _heading(step), id=_anchor(step)),
            tag("p", "Revision ", tag("code", step.newer.short), f": {' and '.join(counts)}."),
            *_named(changes.parts, "Parts", links),
            *_named(changes.positions, "Positions", links),
            _rows(change_rows.PART_COLUMNS, map(change_rows.part_row, shown.parts), links, f"Parts changed by {step.newer.short}"),
            _rows(change_rows.POSITION_COLUMNS, map(change_rows.position_row, shown.positions), links, f"Positions changed by {step.newer.short}"),
            _left_out(len(parts) + len(positions) - len(shown.parts) - len(shown.positions)),
            _details(list(change_rows.details(changes))),
            _unread(changes),
        ]
    )  # fmt: skip


def _named(
    changes: Sequence[PartChange] | Sequence[PositionChange], what: str, links: Mapping[str, str]
) -> Iterator[Html]:
    """What came, went or moved, by name."""
    for kind in _ONLY_NAMED:
        names = [name_of(change.pair.record) for change in changes if _kind(change) == kind]
        if names:
            more = f" and {len(names) - _MOST_NAMES} more" if len(names) > _MOST_NAMES else ""
            told = joined([_linked(name, links) for name in names[:_MOST_NAMES]], ", ")
            yield tag("p", f"{what} {kind}: ", told, more, ".")


def _kind(change: PartChange | PositionChange) -> str:
    """How a record changed; an edit that moves no figure apart."""
    if isinstance(change, PartChange):
        same = change.shift == NOTHING_MOVED
    else:
        same = change.reading_before is change.reading_now
    return _SAME if same and change.pair.change == "edited" else change.pair.change


def _rows(columns: Sequence[Column], rows: Iterable[Mapping[str, str]], links: Mapping[str, str], caption: str) -> Html:
    first, *others = columns
    body = [(_linked(row[first.name], links), *(_text(row[column.name]) for column in others)) for row in rows]
    return table([column.heading for column in columns], body, caption=caption) if body else Html()


def _text(text: str) -> Any:
    return text or None


def _linked(name: str, links: Mapping[str, str]) -> Any:
    """A name with its page, where it has one today; of one that was renamed the name since."""
    address = links.get(name.rpartition(" → ")[2])
    return link(name, address) if address else name


def _left_out(count: int) -> Html:
    return tag("p", f"{count} more are not shown.") if count else Html()


def _details(told: Sequence[tuple[str, str]]) -> Html:
    if not told:
        return Html()
    entries = [tag("li", tag("strong", name), f": {text}") for name, text in told[:_MOST_DETAILS]]
    left_out = [tag("li", f"{len(told) - _MOST_DETAILS} more")] if len(told) > _MOST_DETAILS else []
    return tag("details", tag("summary", "What differs"), tag("ul", *entries, *left_out), class_="bd-more")


def _unread(changes: Changes) -> Html:
    entries = [tag("li", str(problem)) for problem in changes.unread[:_MOST_NAMES]]
    return joined([tag("p", "Not readable before:"), tag("ul", *entries)]) if entries else Html()
