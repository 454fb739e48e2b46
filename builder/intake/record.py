"""The record as YAML: what was read, what was assumed, and what is still to be filled in."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from decimal import Decimal

from builder.intake.numerals import printed
from builder.intake.readings import Reading
from builder.intake.tables import Table
from builder.intake.unreadable import clipped

FILL_IN = "FILL-IN"
_COLUMN_NAMES = {"nominal": "r_ohm", "minimum": "r_min_ohm", "maximum": "r_max_ohm", "ratio": "ratio"}
_B_VALUE_PAIRS_C = (50, 85, 100)
_ABSOLUTE_ZERO_C = -273.15


def yaml(reading: Reading, *, encoding: str, page_breaks: int, name: str, part: str | None, maker: str | None) -> str:
    """The whole record."""
    return "\n".join(
        (
            *_opening(name),
            f"part: {_text(part)}",
            f"maker: {_text(maker)}",
            '# form: chip, leaded, bead, probe, lug or disc. A chip also needs its size code, in quotes: size_code: "0603".',
            f"body: {{form: {FILL_IN}}}",
            *_rated(reading),
            *_b_values(reading.table),
            *_limits(reading.table),
            "# The document the table was taken from: dated as year-month-day, revision in quotes.",
            "documents:",
            f"  - {{title: data sheet, revision: {FILL_IN}, dated: {FILL_IN}, link: {FILL_IN}}}",
            "standing:",
            f"  - {{state: proposed, on: {FILL_IN}, by: {FILL_IN}, because: {FILL_IN}}}",
            *_table(reading, encoding, page_breaks),
            "",
        )
    )


def _opening(name: str) -> Iterator[str]:
    yield f"# Taken from {clipped(name, 120)} by beadroll intake. Compare it with the data sheet, replace every {FILL_IN},"
    yield "# delete these comments, then run beadroll check."


def _text(value: str | None) -> str:
    """A text as YAML reads it back, whatever it holds."""
    if value is None:
        return FILL_IN
    return '"' + "".join(_escaped(c) for c in value) + '"'


def _escaped(character: str) -> str:
    if character in '"\\':
        return f"\\{character}"
    return character if character.isprintable() else f"\\U{ord(character):08X}"


def _rated(reading: Reading) -> Iterator[str]:
    is_ratio = reading.table.roles == ("ratio",)
    at_25 = None if is_ratio else reading.table.value_at(25)
    rated_c = reading.table.rated_c if is_ratio else None
    stated = reading.stated[0] if reading.stated and len({s.ohm for s in reading.stated}) == 1 else None
    value = FILL_IN
    if at_25 is not None:
        yield "# Rated resistance: the table's row at 25 °C. The data sheet may rate the part at another temperature."
        value = printed(at_25)
    elif stated:
        yield f'# Rated resistance: line {stated.line} says "{clipped(stated.text)}".'
        value = printed(stated.ohm)
    else:
        yield "# Rated resistance: the table has no resistance at 25 °C to take it from."
    if rated_c is not None:
        yield "# Rated temperature: the row where the ratio is 1."
    yield f"rated: {{resistance_ohm: {value}, at_c: {printed(rated_c or Decimal(25))}, tolerance_pct: {FILL_IN}}}"


def _b_values(table: Table) -> Iterator[str]:
    found = [(t_c, b) for t_c in _B_VALUE_PAIRS_C if (b := _b_value_k(table, t_c)) is not None]
    if not found:
        return
    yield "# B-values computed from the table's rows. Compare them with the data sheet, and enter the data sheet's:"
    yield "# b_values:"
    for t_c, b_k in found:
        yield f"#   - {{between_c: [25, {t_c}], b_k: {b_k:.1f}}}"


def _b_value_k(table: Table, t_c: int) -> float | None:
    """B(25/t) = ln(R25/R) / (1/T25 − 1/T). [K]"""
    at_25, at_t = table.value_at(25), table.value_at(t_c)
    if at_25 is None or at_t is None:
        return None
    return math.log(at_25 / at_t) / (1 / (25 - _ABSOLUTE_ZERO_C) - 1 / (t_c - _ABSOLUTE_ZERO_C))


def _limits(table: Table) -> Iterator[str]:
    coldest, hottest = printed(table.rows[0].t_c), printed(table.rows[-1].t_c)
    yield "# Assumed: the operating range is the table's span. Enter the data sheet's."
    yield f"limits: {{operating_c: [{coldest}, {hottest}]}}"


def _table(reading: Reading, encoding: str, page_breaks: int) -> Iterator[str]:
    breaks = [f"page breaks: {page_breaks}"] if page_breaks else []
    yield from _comments("Recognised", [f"text: {encoding}", *breaks, *reading.recognised])
    yield from _comments("Assumed", reading.assumed)
    yield from _comments("Left out", reading.left_out)
    table = reading.table
    yield "r_t_table:"
    yield f"  columns: [{', '.join(['t_c', *(_COLUMN_NAMES[role] for role in table.roles)])}]"
    yield "  rows:"
    for row in table.rows:
        yield f"    - [{', '.join(map(printed, (row.t_c, *row.values)))}]"


def _comments(title: str, notes: Iterable[str]) -> Iterator[str]:
    for i, note in enumerate(notes):
        if i == 0:
            yield f"# {title}:"
        yield f"# - {clipped(note, 400)}"
