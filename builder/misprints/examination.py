"""A table examined: its units first, then its rows, then the table as a whole."""

from __future__ import annotations

from dataclasses import replace
from functools import partial

import numpy as np

from builder.misprints import band, columns, ratings, scales, sequence
from builder.misprints.columns import Column
from builder.misprints.outliers import misfit
from builder.misprints.rounding import printed
from builder.misprints.sequence import Sequence
from builder.misprints.shifts import Shift, shifts
from builder.misprints.table import ZERO_C_K, Finding, Rated, Table, in_reach, usual_slope
from builder.units import Array

_FEWEST_ROWS = 6
_ROUNDINGS = 1.01
_HOTTEST_C = 1e4  # what lies beyond is no figure of a table


def findings(table: Table, rated: Rated | None = None) -> tuple[Finding, ...]:
    """Everything in a table that does not belong.

    Parameters
    ----------
    table : Table
        The table as typed; rows without a usable temperature or nominal resistance are passed over; no unit.
    rated : Rated, optional
        What the record states beside it; no unit.

    Returns
    -------
    tuple of Finding
        Units first, then rows in the table's order, then the table as a whole; empty for a clean table and for
        one of fewer than six rows, of which nothing can be said.
    """
    usable = (np.abs(table.t_c) < _HOTTEST_C) & in_reach(table.r_ohm)
    seq = sequence.sequence(table.t_c, usable)
    if seq.t_c.size < _FEWEST_ROWS or seq.in_order.sum() < _FEWEST_ROWS - 2 or np.ptp(seq.t_c[seq.in_order]) == 0:
        return ()
    if usual_slope(1 / (seq.placed_c + ZERO_C_K), np.log(table.r_ohm[seq.rows])) <= 0:
        return (Finding("not-falling"),)
    nominal, found = _nominal(table, seq, rated)
    shift, nominal = _in_step(nominal)
    rated_c = Rated().rated_c if rated is None else rated.rated_c
    return (*scales.whole_table(found), *_of_rows(table, nominal, shift, rated_c), *_of_whole(nominal, rated))


def _nominal(table: Table, seq: Sequence, rated: Rated | None) -> tuple[Column, scales.Scale]:
    """The nominal column in °C and Ω."""
    r_ohm = table.r_ohm[seq.rows]
    level = scales.levels(1 / (seq.placed_c + ZERO_C_K), np.log(r_ohm))
    y = np.log(r_ohm) - level * np.log(1000.0)
    column = partial(Column, "r_ohm", seq, r_ohm=r_ohm, printed=printed(r_ohm))
    found = scales.scale(seq.placed_c, y, rated)
    if found.axis:
        # Rows out of line and resistances out of step can feign the bend of a wrong axis: look again without them.
        _, typed = _in_step(column(seq.placed_c, scale_factor=1.0, factor=1000.0**-level, to_c=found.to_c))
        found = scales.scale(typed.t_c, typed.curve.fitted, rated)
        found = replace(found, t_c=found.to_c(seq.placed_c))
    factor = found.factor * 1000.0**-level
    if (factor == 1.0).any():
        found = replace(found, unit="")
    return column(found.t_c, scale_factor=found.factor, factor=factor, to_c=found.to_c), found


def _in_step(nominal: Column) -> tuple[Shift | None, Column]:
    """The column with its temperatures put back in step, where that leaves fewer findings than taking it as typed."""
    wrong = int(nominal.out_of_line.sum())
    if wrong < 2 and not nominal.out_of_line[0]:
        return None, nominal
    tries = [(shift, replace(nominal, t_c=shift.t_c)) for shift in shifts(nominal.t_c, nominal.y)]
    if not tries:
        return None, nominal
    best = min(tries, key=lambda pair: misfit(pair[1].first_curve))
    left = int(best[1].out_of_line.sum())
    first_alone = wrong == 1 and best[0].start == 1 and not left
    return best if left + 1 < wrong or first_alone else (None, nominal)


def _of_rows(table: Table, nominal: Column, shift: Shift | None, rated_c: float) -> list[Finding]:
    """Findings that stand in a row."""
    seq, wrong = nominal.seq, columns.findings(nominal)
    moved = [one for one in wrong if one.column == "t_c"]
    found = [*scales.parts(seq, "r_ohm", nominal.r_ohm, nominal.factor), *wrong]
    if shift is not None:
        found.append(_shifted(nominal, shift))
    mistyped = {one.row for one in moved}
    put_right = _put_right(seq, moved)
    found += [one for one in sequence.repeated(seq, put_right) if one.row not in mistyped]
    found += sequence.holes(seq, put_right)
    found += _not_falling(nominal)
    found += band.findings(table, nominal, rated_c, mistyped)
    return sorted(found, key=lambda one: -1 if one.row is None else one.row)


def _shifted(nominal: Column, shift: Shift) -> Finding:
    row = shift.start
    return Finding(
        "row-out-of-line", int(nominal.seq.rows[row]), float(nominal.seq.t_c[row]),
        value=float(nominal.r_ohm[row]), expected=float(_typed(nominal, row)), slip=shift.slip,
        reads_k=float(nominal.t_c[row] - nominal.to_c(nominal.seq.t_c)[row]),
    )  # fmt: skip


def _typed(nominal: Column, row: int) -> float:
    """What the curve expects at the temperature as typed."""
    at_c = nominal.to_c(nominal.seq.t_c)[row : row + 1]
    return float(np.exp(nominal.curve.ln_r(at_c))[0] / nominal.factor[row])


def _put_right(seq: Sequence, moved: list[Finding]) -> Array:
    """The temperatures with the mistyped ones restored, or else where their resistances belong."""
    if not moved:
        return seq.t_c
    restored = {one.row: one.expected if one.restored is None else one.restored for one in moved}
    return np.array([restored.get(int(row), t_c) for row, t_c in zip(seq.rows, seq.t_c, strict=True)])


def _not_falling(nominal: Column) -> list[Finding]:
    """Rows that do not fall, by more than the rounding, of those not already out of line."""
    good = np.flatnonzero(~nominal.out_of_line)
    rise = np.diff(nominal.y[good])
    rounding = nominal.printed.half[good]
    rising = good[1:][(rise > (rounding[1:] + rounding[:-1]) * _ROUNDINGS) & (np.diff(nominal.t_c[good]) > 0)]
    return [
        Finding("not-falling", int(nominal.seq.rows[i]), float(nominal.seq.t_c[i]), value=float(nominal.r_ohm[i]))
        for i in rising
    ]


def _of_whole(nominal: Column, rated: Rated | None) -> list[Finding]:
    """Findings about the table as a whole."""
    span_c = (float(nominal.t_c.min()), float(nominal.t_c.max()))
    found = ratings.findings(nominal.curve, span_c, rated) if rated is not None else []
    if ratings.is_straight(nominal.curve):
        found.append(Finding("b-order", slip="constant-b"))
    return found
