"""An R–T table's rows as numbers, from the record or from the CSV beside it."""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace
from typing import get_args

import numpy as np

from builder.problems import Problem, count_text, nearest, quoted
from builder.records.part import Column, columns_problem
from builder.records.quantities import HOTTEST_C
from builder.units import (
    ABSOLUTE_ZERO_C,
    FIGURE,
    Array,
    number_text,
    resistance_from_code,
    resistance_text,
    temperature_text,
)

# Up to so many rows are reported each; a longer table that mostly rises is one thing that is wrong, not many.
_FEW_ROWS = 4
Cells = Sequence[Sequence[float | str]]
Report = Callable[[Problem], None]

_COLUMNS: tuple[str, ...] = get_args(Column)
# Temperatures as in every other field. Resistances reach lower, so that a table typed in kΩ or MΩ is read, and told as
# that; a ratio spans from the one end of resistance to the other.
_OHM_BOUNDS = (1e-6, 1e9)
_BOUNDS = dict.fromkeys(_COLUMNS, _OHM_BOUNDS) | {"t_c": (ABSOLUTE_ZERO_C + 0.01, HOTTEST_C), "ratio": (1e-7, 1e7)}
_FIGURE_SIGNS = re.compile("[-+.eE0-9]*")


@dataclass(frozen=True, eq=False)
class TableData:
    """Rows in rising temperature, with the file and line each stands on. The arrays cannot be written to."""

    file: str
    lines: tuple[int, ...]
    t_c: Array
    r_ohm: Array
    r_min_ohm: Array | None = None
    r_max_ohm: Array | None = None
    ratio: Array | None = None  # as typed, where the table gives R over the rated resistance
    falls: bool = True  # whether a curve can be made of it

    def __setstate__(self, state: dict[str, object]) -> None:
        """After the way through another process, where numpy forgets that its arrays cannot be written to."""
        self.__dict__.update(state)
        for value in state.values():
            if isinstance(value, np.ndarray):
                value.flags.writeable = False


@dataclass(frozen=True)
class RawTable:
    """A table's cells as typed, before anything is made of them."""

    file: str
    columns: tuple[str, ...]
    cells: Cells
    lines: tuple[int, ...]


def csv_table(text: str, file: str, report: Report) -> RawTable | None:
    """The cells of a CSV whose header row names the columns; lines that begin with # are remarks."""
    lines = enumerate(re.split(r"\r\n|\r|\n", text), start=1)
    rows = [(number, cells) for number, line in lines if (cells := _csv_cells(line))]
    if not rows:
        message = "the file is empty. Give a header row such as t_c,r_ohm and the rows below it."
        report(Problem(file, 1, "", "table-columns", message))
        return None
    header_line, header = rows[0]
    wrong = _header_problem(tuple(header))
    if wrong:
        report(Problem(file, header_line, "", "table-columns", wrong))
        return None
    return RawTable(file, tuple(header), [cells for _, cells in rows[1:]], tuple(line for line, _ in rows[1:]))


def _csv_cells(line: str) -> list[str]:
    # Quotes hold nothing together: no number has a comma or a line break in it, and every line keeps its number.
    cells = [cell.strip(' \t"') for cell in line.split(",")]
    return cells if any(cells) and not cells[0].startswith("#") else []


def _header_problem(header: tuple[str, ...]) -> str:
    unknown = next((name for name in header if name not in _COLUMNS), None)
    if unknown is None:
        return columns_problem(header)
    if ";" in unknown or "\t" in unknown:
        return "the columns are separated by semicolons or tabs. Separate them by commas, and write a point as decimal sign."
    if FIGURE.fullmatch(unknown):
        return "the first row holds figures. Give a header row above it, such as t_c,r_ohm."
    cure = "Name the columns t_c,r_ohm or t_c,r_ohm,r_min_ohm,r_max_ohm or t_c,ratio, separated by commas."
    return f"the header row has {quoted(unknown)}, which is not a column.{nearest(unknown, _COLUMNS) or f' {cure}'}"


def table_data(raw: RawTable, rated_resistance_ohm: float, report: Report) -> TableData | None:
    """The rows as numbers, or None with the problems reported; a table out of order is reported and given."""
    if len(raw.cells) < 2:
        line = raw.lines[0] if raw.lines else 1
        message = f"the table has {count_text(len(raw.cells), 'row')}. A curve needs at least two."
        report(Problem(raw.file, line, "r_t_table", "table-too-short", message))
        return None
    values = _numbers(raw, report)
    if values is None:
        return None
    column = dict(zip(raw.columns, values.T, strict=True))
    nominal = column["r_ohm"] if "r_ohm" in column else column["ratio"] * rated_resistance_ohm
    # By most of the steps: the first or the last temperature alone may be mistyped.
    order = slice(None, None, -1) if np.sign(np.diff(column["t_c"])).sum() < 0 else slice(None)
    low, high = (column.get(name) for name in ("r_min_ohm", "r_max_ohm"))
    table = TableData(
        raw.file,
        raw.lines[order],
        _frozen(column["t_c"][order]),
        _frozen(nominal[order]),
        None if low is None else _frozen(low[order]),
        None if high is None else _frozen(high[order]),
        _frozen(column["ratio"][order]) if "ratio" in column else None,
    )
    problems = list(order_problems(table))
    for problem in problems:
        report(problem)
    return replace(table, falls=not problems)


def _frozen(values: Array) -> Array:
    held = np.array(values, dtype=float)
    held.flags.writeable = False
    return held


def _numbers(raw: RawTable, report: Report) -> Array | None:
    values = _plain_numbers(raw)
    if values is not None:
        return values
    problems = [p for row, line in zip(raw.cells, raw.lines, strict=True) for p in _row_problems(raw, row, line)]
    for problem in problems:
        report(problem)
    rows = [[_number(name, cell) for name, cell in zip(raw.columns, row, strict=False)] for row in raw.cells]
    return None if problems else np.array(rows, dtype=float)


def _plain_numbers(raw: RawTable) -> Array | None:
    """The values of a table of plain figures, quickly; None where a cell needs a second look."""
    cells = [str(cell) for row in raw.cells for cell in row]
    if {*map(len, raw.cells)} != {len(raw.columns)} or not _FIGURE_SIGNS.fullmatch("".join(cells)):
        return None
    try:
        values = np.array([*map(float, cells)]).reshape(-1, len(raw.columns))
    except ValueError:
        return None
    low, high = np.transpose([_BOUNDS[name] for name in raw.columns])
    return values if ((values >= low) & (values <= high)).all() else None


def _row_problems(raw: RawTable, row: Sequence[float | str], line: int) -> Iterator[Problem]:
    if len(row) != len(raw.columns):
        message = f"the row has {count_text(len(row), 'value')}, where {len(raw.columns)} must stand: {', '.join(raw.columns)}. Check for a missing comma, or a comma too many: a point is the decimal sign."
        yield Problem(raw.file, line, "r_t_table", "table-row", message)
        return
    for name, cell in zip(raw.columns, row, strict=True):
        message = _cell_problem(name, cell)
        if message:
            yield Problem(raw.file, line, name, "table-row", message)


def _cell_problem(name: str, cell: float | str) -> str:
    value = _number(name, cell)
    if value is None:
        cure = "Write the figure without unit, with a point as decimal sign and a hyphen as minus."
        return f"{quoted(cell or None)} stands where a number must stand. {cure}"
    if not math.isfinite(value):
        return f"{quoted(cell)} is not a finite number. Check the figure in the data sheet."
    low, high = _BOUNDS[name]
    if low <= value <= high:
        return ""
    if name == "t_c":
        return f"{temperature_text(value)} is no temperature of a thermistor. Check the figure and its unit."
    unit, cure = ("", "") if name == "ratio" else (" Ω", ", and k or M")
    bounds = f"{number_text(low)} to {number_text(high)}{unit}"
    return f"{number_text(value)}{unit} is outside {bounds}. Check the decimal point{cure}."


def _number(name: str, cell: float | str) -> float | None:
    """A cell as a number, a resistance as R-K-M code too; None where it is neither."""
    if not isinstance(cell, str) or FIGURE.fullmatch(cell):
        return float(cell)
    try:
        return None if name in ("t_c", "ratio") else resistance_from_code(cell)
    except ValueError:
        return None


def order_problems(table: TableData) -> Iterator[Problem]:
    """Rows that keep a curve from being made: temperatures that do not rise, resistances that do not fall."""
    for i in np.flatnonzero(np.diff(table.t_c) <= 0) + 1:
        t_c, before_c = float(table.t_c[i]), float(table.t_c[i - 1])
        what = "stands twice" if t_c == before_c else f"is out of order beside {temperature_text(before_c)}"
        message = (
            f"{temperature_text(t_c)} {what}. Temperatures rise, or fall, from row to row; compare with the data sheet."
        )
        yield Problem(table.file, table.lines[i], "t_c", "repeated-temperature", message, row=t_c)
    columns = {"r_ohm": table.r_ohm, "r_min_ohm": table.r_min_ohm, "r_max_ohm": table.r_max_ohm}
    for name, values in columns.items():
        if values is not None:
            yield from _not_falling(table, name, values)


def _not_falling(table: TableData, name: str, values: Array) -> Iterator[Problem]:
    # A row at the wrong temperature is reported as that; its resistance may well be right.
    wrong = np.flatnonzero((np.diff(values) >= 0) & (np.diff(table.t_c) > 0)) + 1
    if wrong.size > max(len(values) / 2, _FEW_ROWS):
        message = "the values do not fall with temperature, so this is no table of an NTC thermistor. Compare with the data sheet."
        yield Problem(table.file, table.lines[0], name, "not-falling", message)
        return
    for i in wrong:
        here, before = (resistance_text(float(r_ohm), 7) for r_ohm in (values[i], values[i - 1]))
        where = temperature_text(float(table.t_c[i - 1]))
        message = f"{here} is not below {before} at {where}. An NTC's resistance falls; compare both rows with the data sheet."
        yield Problem(table.file, table.lines[i], name, "not-falling", message, row=float(table.t_c[i]))
