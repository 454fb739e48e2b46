"""All ways the file can be read, and the one that holds: several that hold are refused, never chosen from."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from itertools import pairwise

from builder.intake import leftovers, stated_units
from builder.intake.choices import Choices
from builder.intake.columns import Layout, layout
from builder.intake.decoding import Line
from builder.intake.numerals import RESISTANCE_POWER, printed
from builder.intake.rated import Statement, statements
from builder.intake.sheets import Sheet, sheets
from builder.intake.tables import Table, table
from builder.intake.unreadable import NotANumber, Unreadable, clipped

_SIGN = {".": "point", ",": "comma"}
_RATED_AGREES = Decimal("0.05")
# No NTC thermistor is rated so high at 25 °C; 10.000 kΩ read as ten thousand kilohm would be.
_BEYOND_RATED_OHM = Decimal("1e7")


@dataclass(frozen=True)
class _Attempt:
    """One way to read the file, and the table it gives."""

    sheet: Sheet
    layout: Layout
    decimal: str
    unit: str | None
    unit_from: str
    t_unit: str
    t_unit_from: str
    table: Table
    stated: tuple[Statement, ...]

    @property
    def at_25_ohm(self) -> Decimal | None:
        return self.table.value_at(25)

    @property
    def confirmed_by(self) -> Statement | None:
        """The line of text whose rated resistance the row at 25 °C has."""
        at_25 = self.at_25_ohm
        if at_25 is None:
            return None
        return next((s for s in self.stated if abs(at_25 - s.ohm) <= _RATED_AGREES * s.ohm), None)

    @property
    def key(self) -> tuple[object, ...]:
        return self.table.roles, tuple((row.t_c, row.values) for row in self.table.rows)


@dataclass(frozen=True)
class Reading:
    """The table as read, what was recognised, assumed and left out, and the rated resistance the text states."""

    table: Table
    recognised: tuple[str, ...]
    assumed: tuple[str, ...]
    left_out: tuple[str, ...]
    stated: tuple[Statement, ...]


def reading(lines: Sequence[Line], chosen: Choices) -> Reading:
    """The one way to read the lines.

    Raises
    ------
    Unreadable
        No way holds, or several do and nothing in the file settles which.
    """
    divided = sheets(lines)
    if not divided:
        raise Unreadable(
            None,
            "no table was found: at least two rows with a temperature and a resistance are needed. "
            "Give each row its own line, with columns divided by semicolons, commas, tabs, bars or spaces.",
        )
    attempts: list[_Attempt] = []
    failures: dict[str, Unreadable] = {}
    for sheet in divided:
        for decimal in (chosen.decimal,) if chosen.decimal else (".", ","):
            try:
                attempts += _attempts(sheet, decimal, chosen)
            except Unreadable as failure:
                failures.setdefault(decimal, failure)
    if not attempts:
        raise next((f for f in failures.values() if not isinstance(f, NotANumber)), next(iter(failures.values())))
    attempt, settled = _settled(attempts)
    held = {a.decimal for a in attempts}
    return _reading(attempt, settled, {sign: f for sign, f in failures.items() if sign not in held}, chosen)


def _attempts(sheet: Sheet, decimal: str, chosen: Choices) -> list[_Attempt]:
    """The readings under one division and decimal sign: one, or one for each unit when no unit is stated."""
    found = layout(sheet, chosen.column)
    stated = tuple(statements((line for line in sheet.lines if not line.is_row), decimal))
    unit, unit_from = stated_units.of_resistance(sheet, found, chosen)
    t_unit, t_unit_from = stated_units.of_temperature(sheet, found, chosen)
    leftovers.notes(sheet, found)
    attempts: list[_Attempt] = []
    failure: Unreadable | None = None
    for tried in (unit,) if unit_from else tuple(RESISTANCE_POWER):
        try:
            read = table(sheet, found, decimal=decimal, ohm_unit=tried, t_unit=t_unit)
        except Unreadable as raised:
            failure = failure or raised
        else:
            _check_sides(read, found)
            attempts.append(_Attempt(sheet, found, decimal, tried, unit_from, t_unit, t_unit_from, read, stated))
    if failure and not attempts:
        raise _with_assumptions(failure, found)
    return attempts


def _check_sides(read: Table, found: Layout) -> None:
    """Where a temperature is only assumed, it must not be the other column that has the even steps."""
    steps = [{b - a for a, b in pairwise(v)} for v in ([r.t_c for r in read.rows], [r.values[0] for r in read.rows])]
    if found.assumed and len(steps[0]) > 1 and len(steps[1]) == 1:
        raise Unreadable(
            read.rows[0].line,
            "the values taken as resistance have even steps, and the temperatures have not, as if they stood in each "
            "other's column. Write headings above the rows, such as T (°C) and R (kΩ).",
        )


def _with_assumptions(failure: Unreadable, found: Layout) -> Unreadable:
    """The failure, saying what had to be assumed before it came up, which may well be its cause."""
    if not found.assumed or isinstance(failure, NotANumber):
        return failure
    said = "; ".join(found.assumed)
    return Unreadable(
        failure.line, f"{failure.message} Assumed: {said}. If that is wrong, write headings above the rows."
    )


def _settled(attempts: Sequence[_Attempt]) -> tuple[_Attempt, str]:
    """The attempt that holds, and what settled it where the file could be read in several ways."""
    if len({a.key for a in attempts}) == 1:
        return attempts[0], ""
    confirmed = [a for a in attempts if a.confirmed_by]
    if len({a.key for a in confirmed}) == 1:
        by = confirmed[0].confirmed_by
        assert by is not None
        return confirmed[0], f'line {by.line} says "{clipped(by.text)}", and the row at 25 °C has that'
    if len({a.decimal for a in attempts}) > 1 and all(a.unit in ("kΩ", "MΩ") and a.unit_from for a in attempts):
        usual = [a for a in attempts if a.at_25_ohm is not None and a.at_25_ohm < _BEYOND_RATED_OHM]
        if len({a.key for a in usual}) == 1:
            unit = usual[0].unit
            return usual[0], f"the heading says {unit}, and read as thousands the row at 25 °C would have 10 MΩ or more"
    raise _ambiguous(attempts)


def _ambiguous(attempts: Sequence[_Attempt]) -> Unreadable:
    first = attempts[0]
    line = first.sheet.rows[0].number
    if not first.unit_from and len({a.unit for a in attempts}) > 1:
        return Unreadable(
            line,
            "nothing states the unit of resistance. Write it in the heading, such as R (kΩ), "
            "or give the option unit, ohm or kohm.",
        )
    other = next(a for a in attempts if a.key != first.key)
    if other.decimal != first.decimal:
        rows = zip(first.table.rows, other.table.rows, strict=False)
        mine, its = next(
            (p for p in rows if (p[0].t_c, p[0].values) != (p[1].t_c, p[1].values)), (first.table.rows[0],) * 2
        )
        return Unreadable(
            mine.line,
            f"the value may be {printed(mine.values[0])} or {printed(its.values[0])}: nothing in the file settles whether "
            "point and comma are decimal signs or thousands separators. Give the option decimal, point or comma.",
        )
    return Unreadable(
        line,
        f"the columns may be divided by {first.sheet.delimiter} or by {other.sheet.delimiter}, with different numbers. "
        "Divide them by semicolons.",
    )


def _reading(attempt: _Attempt, settled: str, failures: dict[str, Unreadable], chosen: Choices) -> Reading:
    recognised = [
        f"columns divided by {attempt.sheet.delimiter}",
        *_decimal_notes(attempt, settled, failures, chosen),
        *_column_notes(attempt),
        *_unit_notes(attempt, settled),
        *dict.fromkeys(attempt.table.notes),
    ]
    assumed = list(attempt.layout.assumed)
    if not attempt.t_unit_from:
        assumed.append("temperatures are in °C: nothing states their unit")
    left_out = leftovers.notes(attempt.sheet, attempt.layout)
    return Reading(attempt.table, tuple(recognised), tuple(assumed), tuple(left_out), attempt.stated)


def _decimal_notes(attempt: _Attempt, settled: str, failures: dict[str, Unreadable], chosen: Choices) -> list[str]:
    cells = [cell for row in attempt.sheet.rows for cell in row.cells]
    if not any("." in cell or "," in cell for cell in cells):
        return []
    sign = _SIGN[attempt.decimal]
    if chosen.decimal:
        return [f"decimal sign: {sign}, by the option decimal"]
    other = "," if attempt.decimal == "." else "."
    if failure := failures.get(other):
        why = failure.message.split(". ")[0]
        return [f"decimal sign: {sign}; with the {_SIGN[other]}, line {failure.line}: {why}"]
    return [f"decimal sign: {sign}; {settled}"] if settled else [f"decimal sign: {sign}"]


def _column_notes(attempt: _Attempt) -> list[str]:
    groups = attempt.layout.groups
    beside = [f"{len(groups)} tables side by side"] if len(groups) > 1 else []
    columns = [f"{c.shown} read as {role}" for group in groups for role, c in group.items()]
    ignored = [
        f"{c.shown} left out{'' if c.role == 'other' else f': {c.role}'}"
        for c in attempt.layout.ignored
        if c.heading.text or c.role != "other"
    ]
    return [*beside, *dict.fromkeys(columns), *dict.fromkeys(ignored)]


def _unit_notes(attempt: _Attempt, settled: str) -> list[str]:
    notes = []
    if attempt.unit_from:
        notes.append(f"resistance{f' in {attempt.unit}' if attempt.unit else ''}: {attempt.unit_from}")
    else:
        why = settled or "with another unit the values without one would not fall in line with those that have one"
        notes.append(f"resistance in {attempt.unit}: no heading says so, but {why}")
    if attempt.t_unit_from:
        notes.append(f"temperature in {attempt.t_unit}: {attempt.t_unit_from}")
    return notes
