"""What a position asks of a part beside its reading: nothing here is cured by firmware."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Literal

from builder.ledger import is_for
from builder.records import Part, Position
from builder.records.part import Standing
from builder.units import number_text, temperature_text

About = Literal[
    "error",
    "trips",
    "sensor faults",
    "body",
    "range",
    "power",
    "qualification",
    "time constant",
    "standing",
    "lifecycle",
]

# Every grade of AEC-Q200 is for a range of temperatures that holds the next one's: 0 is the widest.
_GRADE = re.compile("aec-q200 grade [0-4]")


@dataclass(frozen=True)
class Reason:
    """One reason of a verdict, as a sentence without a full stop.

    `against` is True where it speaks against the part, None where a figure is missing that would decide, named by
    `missing`, and False where it is only to be known.
    """

    about: About
    message: str
    against: bool | None
    missing: tuple[str, ...] = ()


def requirement_reasons(position: Position, part: Part) -> Iterator[Reason]:
    """What speaks against a part at a position, or is to be known, by its record alone."""
    yield from _footprint(position, part)
    yield from _range(position, part)
    yield from _qualification(position, part)
    yield from _time_constant(position, part)
    yield from _standing(position, part)
    yield from _lifecycle(part)


def body_text(part: Part) -> str:
    """A body in words.

    Examples
    --------
    >>> from builder.records.part import Body
    >>> body_text(Part.model_construct(body=Body(form="chip", size_code="0603")))
    'chip 0603'
    """
    return " ".join(filter(None, (part.body.form, part.body.size_code)))


def _footprint(position: Position, part: Part) -> Iterator[Reason]:
    # A chip always states its size code, so a body without one is none.
    footprint, body = position.requires.size_code, part.body
    if footprint is not None and body.size_code != footprint:
        message = f"{body.size_code or body_text(part)} does not stand on the footprint {footprint}"
        yield Reason("body", message, True)


def _range(position: Position, part: Part) -> Iterator[Reason]:
    if part.limits.operating_c is None:
        yield _not_stated("range", "operating range", "limits.operating_c")
        return
    (low_c, high_c), (coldest_c, hottest_c) = position.range_c, part.limits.operating_c
    if low_c < coldest_c:
        yield Reason("range", f"operates from {temperature_text(coldest_c)}, the range reaches {temperature_text(low_c)}", True)  # fmt: skip
    if high_c > hottest_c:
        yield Reason("range", f"operates to {temperature_text(hottest_c)}, the range reaches {temperature_text(high_c)}", True)  # fmt: skip


def _qualification(position: Position, part: Part) -> Iterator[Reason]:
    for asked in position.requires.qualification:
        if not any(_covers(stated.casefold(), asked.casefold()) for stated in part.qualification):
            has = f"it has {', '.join(part.qualification)}" if part.qualification else "it has none"
            yield Reason("qualification", f"{asked} is required, {has}", True)


def _covers(stated: str, asked: str) -> bool:
    grades = [_GRADE.fullmatch(text) for text in (stated, asked)]
    return stated == asked or (all(grades) and stated < asked)


def _time_constant(position: Position, part: Part) -> Iterator[Reason]:
    slowest_s, own_s = position.requires.time_constant_max_s, part.limits.time_constant_s
    if slowest_s is None:
        return
    if own_s is None:
        yield _not_stated("time constant", "time constant", "limits.time_constant_s")
    elif own_s > slowest_s:
        message = f"time constant {number_text(own_s)} s, at most {number_text(slowest_s)} s is required"
        yield Reason("time constant", message, True)


def _standing(position: Position, part: Part) -> Iterator[Reason]:
    yield from ledger_reasons("the part", part.standing[-1] if part.standing else None, position)


def ledger_reasons(whose: str, holds: Standing | None, position: Position) -> Iterator[Reason]:
    """What the entry that holds in a ledger means at a position; an approval needs no word."""
    if holds is None:
        yield Reason("standing", f"{whose} has no entry in its ledger", False)
        return
    if holds.state in ("withdrawn", "proposed"):
        message = f"{whose} is {holds.state} since {holds.on.isoformat()} ({holds.by}: {holds.because.rstrip('.')})"
        yield Reason("standing", message, holds.state == "withdrawn")
    if not is_for(holds, position):
        yield Reason("standing", f"{whose} may be fitted only at {', '.join(holds.only_for)}", True)


def _lifecycle(part: Part) -> Iterator[Reason]:
    if part.lifecycle != "active":
        yield Reason("lifecycle", f"the part is {part.lifecycle}", part.lifecycle == "obsolete")


def _not_stated(about: About, what: str, field: str) -> Reason:
    return Reason(about, f"the part's {what} is not stated ({field})", None, (field,))
