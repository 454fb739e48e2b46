"""What changed between two states of the records: as text, as Markdown for a merge request, and as JSON's answer."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import Any

from builder.circuit import Budget
from builder.exports.budget_rows import trip_answer
from builder.exports.rows import Column, Row, rounded, table_text
from builder.history import Changes, Commit, PartChange, PositionChange
from builder.history.fields import FieldChange
from builder.history.matching import Pair, name_of
from builder.problems import clipped, count_text
from builder.records import PartRecord, PositionRecord
from builder.units import number_text, signed_text

_NOT_PLAIN = re.compile(r"[^\w\s.,;:+=°Ω±−–…%/()'\"→²³-]|_|:(?=\S)")
_WORDS = {True: "met", False: "exceeded", None: "undecided"}

PART_COLUMNS = (
    Column("part", "part", left=True),
    Column("change", "change", left=True),
    Column("curve", "curve K"),
    Column("curve_at", "at °C"),
    Column("band", "band K"),
    Column("band_at", "at °C"),
)
POSITION_COLUMNS = (
    Column("position", "position", left=True),
    Column("change", "change", left=True),
    Column("worst_before", "worst K before"),
    Column("worst_now", "now"),
    Column("limit", "limit", left=True),
    Column("trips", "trips", left=True),
    Column("alternates", "alternates", left=True),
)


def changes_text(changes: Changes, since: Commit) -> str:
    """Tables of parts and positions, each with the fields that differ below it."""
    return "\n\n".join([headline(changes, since), *_text_blocks(changes)])


def _text_blocks(changes: Changes) -> Iterator[str]:
    if changes.parts:
        yield table_text(PART_COLUMNS, map(part_row, changes.parts))
    if changes.positions:
        yield table_text(POSITION_COLUMNS, map(position_row, changes.positions))
    told = list(details(changes))
    if told:
        yield "\n".join(f"{name}: {text}" for name, text in told)
    if changes.unread:
        yield "\n".join(["Not readable before:", *(str(problem) for problem in changes.unread)])


def changes_markdown(changes: Changes, since: Commit) -> str:
    """The same as Markdown tables; everything that a record says is escaped."""
    blocks = [f"**{escaped(headline(changes, since))}**"]
    if changes.parts:
        blocks.append(_markdown_table(PART_COLUMNS, map(part_row, changes.parts)))
    if changes.positions:
        blocks.append(_markdown_table(POSITION_COLUMNS, map(position_row, changes.positions)))
    blocks.append("\n".join(f"- {escaped(name)}: {escaped(text)}" for name, text in details(changes)))
    if changes.unread:
        blocks.append("\n".join(["Not readable before:", "", *(f"- {escaped(str(p))}" for p in changes.unread)]))
    return "\n\n".join(block for block in blocks if block)


def headline(changes: Changes, since: Commit) -> str:
    """What changed, counted."""
    counts = f"{count_text(len(changes.parts), 'part')} and {count_text(len(changes.positions), 'position')}"
    return f"Since {since.short} of {since.day}: {counts} changed."


def _markdown_table(columns: Sequence[Column], rows: Iterable[Row]) -> str:
    lines = [[column.heading for column in columns], ["---" if column.left else "---:" for column in columns]]
    lines += [[escaped(row[column.name]) for column in columns] for row in rows]
    return "\n".join(f"| {' | '.join(line)} |" for line in lines)


def escaped(text: str) -> str:
    """Text on one line in which nothing is Markdown, HTML or a mention.

    >>> escaped("a: |b *c*\\n@all <b> www.x.com https://x")
    'a: &#124;b &#42;c&#42; &#64;all &#60;b&#62; www&#46;x.com https&#58;//x'
    """
    plain = _NOT_PLAIN.sub(lambda sign: f"&#{ord(sign[0])};", " ".join(text.split()))
    return plain.replace("www.", "www&#46;")


def part_row(change: PartChange) -> dict[str, str]:
    """A part's change as texts."""
    shift = change.shift
    return {
        "part": _named(change.pair.before, change.pair.now),
        "change": change.pair.change,
        "curve": signed_text(shift.worst_k, 3) if shift else "",
        "curve_at": _place(shift.at_c if shift else None),
        "band": signed_text(shift.band_worst_k, 3) if shift else "",
        "band_at": _place(shift.band_at_c if shift else None),
    }


def position_row(change: PositionChange) -> dict[str, str]:
    """A position's change as texts."""
    before, now = (reading.budget if reading else None for reading in (change.reading_before, change.reading_now))
    return {
        "position": _named(change.pair.before, change.pair.now),
        "change": change.pair.change,
        "worst_before": _worst(before),
        "worst_now": _worst(now),
        "limit": _turned(_limit(before), _limit(now)),
        "trips": _told(_trips(before, now)),
        "alternates": _alternates(change),
    }


def _place(t_c: float | None) -> str:
    return "" if t_c is None else number_text(t_c)


def _named(before: PartRecord | PositionRecord | None, now: PartRecord | PositionRecord | None) -> str:
    names = [name_of(record) for record in (before, now) if record is not None]
    return " → ".join(dict.fromkeys(names))


def _turned(before: str, now: str) -> str:
    return now if before == now else " → ".join([before or "none", now or "none"])


def _worst(budget: Budget | None) -> str:
    return signed_text(budget.worst_k, 3).lstrip("+") if budget else ""


def _limit(budget: Budget | None) -> str:
    return _WORDS[budget.meets_limit] if budget else ""


def _told(turns: Mapping[str, tuple[str, str]]) -> str:
    """What turned, by name."""
    turned = [f"{name}: {_turned(*words)}" for name, words in turns.items() if words[0] != words[1]]
    return "; ".join(turned) or ("as before" if turns else "")


def _alternates(change: PositionChange) -> str:
    if change.reading_before is change.reading_now:  # what changed cannot turn a verdict, so none is computed
        return "as before" if change.pair.record.position.alternates else ""
    return _told(_verdicts(change))


def _trips(before: Budget | None, now: Budget | None) -> dict[str, tuple[str, str]]:
    old, new = ({trip.name: _NEAR[trip.ok] for trip in budget.trips} if budget else {} for budget in (before, now))
    return {name: (old.get(name, ""), new.get(name, "")) for name in dict.fromkeys([*old, *new])}


_NEAR = {True: "near enough", False: "too far off", None: "undecided"}


def _verdicts(change: PositionChange) -> dict[str, tuple[str, str]]:
    old, new = (reading.verdicts if reading else {} for reading in (change.reading_before, change.reading_now))
    return {part: (old.get(part) or "", new.get(part) or "") for part in dict.fromkeys([*old, *new])}


def details(changes: Changes) -> Iterator[tuple[str, str]]:
    """What differs, each with the name of its part or position."""
    for part in changes.parts:
        yield from ((name_of(part.pair.record), text) for text in _fields(part.pair.fields))
        yield from _moved(part.pair.before, part.pair.now)
    for position in changes.positions:
        name = name_of(position.pair.record)
        if position.parts:
            yield name, f"changed with {', '.join(position.parts)}"
        yield from ((name, text) for text in _fields(position.pair.fields))
        yield from _moved(position.pair.before, position.pair.now)


def _moved(
    before: PartRecord | PositionRecord | None, now: PartRecord | PositionRecord | None
) -> Iterator[tuple[str, str]]:
    if before is not None and now is not None and before.source.below != now.source.below:
        yield name_of(now), f"its file was {clipped(before.source.below)}, is {clipped(now.source.below)}"


def _fields(fields: Iterable[FieldChange]) -> Iterator[str]:
    for field in fields:
        yield f"{field.field}: {_value(field.before)} → {_value(field.now)}"


def _value(value: Any) -> str:
    """A value of a record, short."""
    if value is None:
        return "nothing"
    if isinstance(value, bool | str):
        return clipped(str(value))
    if isinstance(value, int | float):
        return number_text(value, 10)
    if isinstance(value, dict):
        return clipped(", ".join(f"{name} {_value(inner)}" for name, inner in value.items()), 160)
    return clipped(", ".join(map(_value, value)) or "nothing")


def changes_answer(changes: Changes, since: Commit) -> dict[str, Any]:
    """What JSON answers."""
    return {
        "since": since.hash,
        "parts": [_part_answer(change) for change in changes.parts],
        "positions": [_position_answer(change) for change in changes.positions],
        "unread": [problem.as_json() for problem in changes.unread],
    }


def _part_answer(change: PartChange) -> dict[str, Any]:
    pair, shift = change.pair, change.shift
    return {
        "part": pair.record.part.part,
        "maker": pair.record.part.maker,
        "was": _old_name(pair),
        "change": pair.change,
        "worst_k": rounded(shift.worst_k) if shift else None,
        "at_c": shift.at_c if shift else None,
        "band_worst_k": rounded(shift.band_worst_k) if shift else None,
        "band_at_c": shift.band_at_c if shift else None,
        "fields": _field_answers(pair.fields),
        "file": pair.record.source.file,
    }


def _old_name(pair: Pair[PartRecord] | Pair[PositionRecord]) -> str | None:
    return name_of(pair.before) if pair.change == "renamed" and pair.before else None


def _position_answer(change: PositionChange) -> dict[str, Any]:
    pair = change.pair
    return {
        "position": name_of(pair.record),
        "was": _old_name(pair),
        "change": change.pair.change,
        "parts": list(change.parts),
        "before": _reading_answer(change.reading_before.budget if change.reading_before else None),
        "now": _reading_answer(change.reading_now.budget if change.reading_now else None),
        "alternates": [
            {"part": part, "before": before or None, "now": now or None}
            for part, (before, now) in _verdicts(change).items()
        ],
        "fields": _field_answers(pair.fields),
        "file": pair.record.source.file,
    }


def _reading_answer(budget: Budget | None) -> dict[str, Any] | None:
    if budget is None:
        return None
    return {
        "worst_k": rounded(budget.worst_k),
        "at_c": budget.worst_at_c,
        "meets_limit": budget.meets_limit,
        "trips": [trip_answer(trip) for trip in budget.trips],
    }


def _field_answers(fields: Iterable[FieldChange]) -> list[dict[str, Any]]:
    return [{"field": field.field, "before": field.before, "now": field.now} for field in fields]
