"""Rows of exact numbers in °C and Ω, under one division, one decimal sign and one unit."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from itertools import pairwise

from builder.intake.columns import Column, Layout
from builder.intake.headings import Role
from builder.intake.numerals import (
    RESISTANCE_POWER,
    Numeral,
    has_tolerance,
    numeral,
    printed,
    resistance_unit,
    shifted,
    temperature_unit,
)
from builder.intake.sheets import Sheet, SheetLine
from builder.intake.unreadable import NotANumber, Unreadable, clipped

_ORDER: tuple[Role, ...] = ("nominal", "minimum", "maximum", "ratio")
_HOTTEST_C = Decimal(1200)
_LEAST_OHM, _MOST_OHM = Decimal("1e-6"), Decimal("1e12")


@dataclass(frozen=True)
class Row:
    """One row: the line and column it was read from, its temperature, its values in the order of the table's roles."""

    line: int
    column: str
    t_c: Decimal
    values: tuple[Decimal, ...]


@dataclass(frozen=True)
class Table:
    """The rows in rising temperature; values in Ω, or ratios."""

    roles: tuple[Role, ...]
    rows: tuple[Row, ...]
    notes: tuple[str, ...]

    @property
    def rated_c(self) -> Decimal | None:
        """The temperature at which a table of ratios has 1."""
        return next((row.t_c for row in self.rows if row.values[0] == 1), None)

    def value_at(self, t_c: int) -> Decimal | None:
        """The nominal value in the row at a temperature, None where there is no such row."""
        return next((row.values[0] for row in self.rows if row.t_c == t_c), None)


@dataclass(frozen=True)
class _RawRow:
    line: int
    t: Numeral
    values: tuple[tuple[Column, str, Numeral], ...]


def table(sheet: Sheet, layout: Layout, *, decimal: str, ohm_unit: str | None, t_unit: str) -> Table:
    """The table under one reading; raises where the reading does not hold."""
    roles, notes = _roles(layout)
    raw = [row for group in layout.groups for row in _raw_rows(sheet, layout, group, roles, decimal, notes)]
    if any(has_tolerance(text) for row in raw for _, text, _ in row.values):
        notes.append("tolerances written behind ± in the cells are left out")
    rows = [_row(row, ohm_unit, t_unit) for row in raw]
    if t_unit == "°F" and any(row.t_c.as_tuple().exponent == -6 for row in rows):
        notes.append("temperatures in °F that come out endless in °C are rounded to 0.000001 K")
    rows = _ordered(rows, notes)
    if len(rows) < 2:
        raise Unreadable(rows[0].line if rows else None, "the table has fewer than 2 rows. A curve needs two at least.")
    _check_fall(rows, roles)
    _check_band(rows, roles)
    read = Table(roles, tuple(rows), tuple(notes))
    if roles == ("ratio",):
        _check_ratio(read)
    return read


def _roles(layout: Layout) -> tuple[tuple[Role, ...], list[str]]:
    found = layout.groups[0]
    roles = tuple(role for role in _ORDER if role in found)
    if ("minimum" in roles) == ("maximum" in roles):
        return roles, []
    lone = "minimum" if "minimum" in roles else "maximum"
    return tuple(role for role in roles if role != lone), [f"the {lone} column is left out: it has no counterpart"]


def _raw_rows(
    sheet: Sheet, layout: Layout, group: dict[Role, Column], roles: Sequence[Role], decimal: str, notes: list[str]
) -> Iterator[_RawRow]:
    for line in sheet.rows:
        cells = _cells(sheet, layout, line)
        t_cell, *value_cells = (cells[group[role].index] for role in ("temperature", *roles))
        if not any(value_cells):
            if t_cell:
                notes.append(f"line {line.number}: {clipped(t_cell)} has no resistance, the row is left out")
            continue
        if not t_cell or not all(value_cells):
            raise Unreadable(
                line.number,
                f"{clipped(line.text)!r} lacks a value that the other rows have. Fill it in, or delete the line.",
            )
        values = tuple(
            (group[role], cell, _numeral(cell, decimal, line.number))
            for role, cell in zip(roles, value_cells, strict=True)
        )
        yield _RawRow(line.number, _numeral(t_cell, decimal, line.number), values)


def _cells(sheet: Sheet, layout: Layout, line: SheetLine) -> list[str]:
    """The row's cells, one for each column of the sheet."""
    missing = sheet.width - len(line.cells)
    if missing > 0 and sheet.aligned and not _is_short_row(sheet, layout, line):
        raise Unreadable(
            line.number,
            f"{clipped(line.text)!r} has {len(line.cells)} values where other rows have {sheet.width}. "
            'Write "-" where a value is missing, or divide the columns by semicolons.',
        )
    return [*line.cells, *[""] * missing]


def _is_short_row(sheet: Sheet, layout: Layout, line: SheetLine) -> bool:
    """Whether only whole tables at the right are missing, and all tables side by side are of one kind."""
    tables = len(layout.groups)
    units = {tuple(c.heading.unit for c in group.values()) for group in layout.groups}
    return sheet.width % tables == 0 and len(line.cells) % (sheet.width // tables) == 0 and len(units) == 1


def _numeral(cell: str, decimal: str, line: int) -> Numeral:
    try:
        return numeral(cell, decimal)
    except ValueError:
        sign = "point" if decimal == "." else "comma"
        raise NotANumber(
            line,
            f"{clipped(cell)!r} is not a number when the {sign} is the decimal sign. "
            "Write all values with one decimal sign.",
        ) from None


def _row(raw: _RawRow, ohm_unit: str | None, t_unit: str) -> Row:
    return Row(
        raw.line,
        raw.values[0][0].shown,
        _celsius(raw.t, t_unit, raw.line),
        tuple(_value(column, text, number, ohm_unit, raw.line) for column, text, number in raw.values),
    )


def _celsius(number: Numeral, unit: str, line: int) -> Decimal:
    if number.suffix and temperature_unit(number.suffix) is None:
        raise Unreadable(
            line,
            f"{printed(number.value)} {number.suffix} stands where a temperature must stand. "
            "Check which column is the temperature.",
        )
    t_c = _CELSIUS_FROM[temperature_unit(number.suffix) or unit](number.value)
    if not Decimal("-273.15") < t_c <= _HOTTEST_C:
        raise Unreadable(
            line,
            f"{printed(t_c)} °C is no temperature of a thermistor. Check the unit and which column is the temperature.",
        )
    return t_c


def _from_fahrenheit(value: Decimal) -> Decimal:
    exact = (Fraction(value) - 32) * 5 / 9
    places = next((n for n in range(7) if (exact * 10**n).denominator == 1), 6)
    return shifted(Decimal(round(exact * 10**places)), -places)


_CELSIUS_FROM: dict[str, Callable[[Decimal], Decimal]] = {
    "°C": lambda value: value,
    "°F": _from_fahrenheit,
    "K": lambda value: value - Decimal("273.15"),
}


def _value(column: Column, text: str, number: Numeral, ohm_unit: str | None, line: int) -> Decimal:
    unit = resistance_unit(number.suffix) if number.suffix else column.heading.unit or ohm_unit
    if column.role == "ratio":
        unit = None if number.suffix else "Ω"
    if unit is None:
        raise Unreadable(
            line, f"{clipped(text)!r} stands where a {column.role} must stand. Check the column and its unit."
        )
    if re.match("0[0-9]", text):
        raise Unreadable(
            line,
            f"{clipped(text)!r} begins with a zero, as the rear half of a divided number does. "
            "Close up the number, or write it without the zero.",
        )
    value = shifted(number.value, RESISTANCE_POWER[unit])
    if not _LEAST_OHM <= value <= _MOST_OHM:
        raise Unreadable(line, f"{clipped(text)!r} is no resistance of a thermistor. Check the value and its unit.")
    return value


def _ordered(rows: Iterable[Row], notes: list[str]) -> list[Row]:
    """The rows in rising temperature, identical ones once."""
    kept: dict[Decimal, Row] = {}
    for row in rows:
        before = kept.setdefault(row.t_c, row)
        if before is row:
            continue
        if before.values != row.values:
            raise _two_values(row, before)
        notes.append(f"line {row.line}: {printed(row.t_c)} °C repeats line {before.line} and is dropped")
    ordered = sorted(kept.values(), key=lambda row: row.t_c)
    if ordered == list(reversed(kept.values())):
        notes.append("the rows were in falling temperature and are turned round")
    elif ordered != list(kept.values()):
        notes.append("the rows were not in the order of temperature and are sorted")
    return ordered


def _check_band(rows: Sequence[Row], roles: Sequence[Role]) -> None:
    """Minimum and maximum hold the nominal in one row at least; else the headings stand over the wrong columns."""
    if roles != ("nominal", "minimum", "maximum"):
        return
    if not any(low <= nominal <= high for nominal, low, high in (row.values for row in rows)):
        raise Unreadable(
            rows[0].line,
            "in no row does the nominal value lie between minimum and maximum. "
            "Check that each heading stands over its own column, and the decimal sign.",
        )


def _check_ratio(read: Table) -> None:
    """A ratio is 1 at the rated temperature, and near 1 at 25 °C where that is the rated one."""
    at_25 = read.value_at(25)
    if at_25 is not None and read.rated_c is None and not Decimal("0.9") < at_25 < Decimal("1.1"):
        raise Unreadable(
            read.rows[0].line,
            f"the ratio at 25 °C is {printed(at_25)} and no row has 1, so it is not resistance over rated resistance. "
            "Head the column with what it is, such as R (kΩ).",
        )


def _two_values(row: Row, before: Row) -> Unreadable:
    where = "" if row.column == before.column else f", {before.column}"
    return Unreadable(
        row.line,
        f"{printed(row.t_c)} °C has {printed(row.values[0])} in {row.column} and {printed(before.values[0])} in line "
        f"{before.line}{where}. Correct the wrong one; if these are two parts, choose one by the option column.",
    )


def _check_fall(rows: Sequence[Row], roles: Sequence[Role]) -> None:
    for before, row in pairwise(rows):
        for role, upper, value in zip(roles, before.values, row.values, strict=True):
            if value >= upper:
                raise Unreadable(
                    row.line,
                    f"the {role} value {printed(value)} at {printed(row.t_c)} °C is not below {printed(upper)} at "
                    f"{printed(before.t_c)} °C (line {before.line}). An NTC's resistance falls as temperature rises: "
                    "compare both rows with the data sheet, and check which column is the temperature.",
                )
