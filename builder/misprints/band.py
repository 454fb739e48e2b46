"""Minimum and maximum columns: their own rows, and whether they hold the nominal between them."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.lib.stride_tricks import sliding_window_view

from builder.misprints import columns, scales
from builder.misprints.columns import Column
from builder.misprints.rounding import printed
from builder.misprints.scales import levels
from builder.misprints.sequence import Sequence
from builder.misprints.table import ZERO_C_K, Finding, Table, in_reach, middle

_NAMES = ("r_min_ohm", "r_max_ohm")
_FEWEST_ROWS = 6
_ROWS_EACH = 3  # more rows than these are one thing wrong with a column
_OTHER_UNIT = 4.6  # a hundredfold, in ln R
_ROUNDINGS = 1.01


def findings(table: Table, nominal: Column, rated_c: float, wrong: set[int | None]) -> list[Finding]:
    """What the band of a table says.

    Parameters
    ----------
    table : Table
        The table as typed; no unit.
    nominal : Column
        The nominal column, examined; no unit.
    rated_c : float
        Rated temperature, where a band is narrowest and its slope jumps. [°C]
    wrong : set of rows as typed
        Rows whose temperature is wrong; nothing more is said of these. [no unit]

    Returns
    -------
    list of Finding
        Rows out of line, then rows where the band does not hold the nominal.
    """
    ends = [_end(table, name, nominal, rated_c) for name in _NAMES if table.column(name) is not None]
    in_line = [one for end in ends if end is not None for one in _of_end(end, nominal)]
    return [one for one in in_line if one.row not in wrong]


def _end(table: Table, name: str, nominal: Column, rated_c: float) -> Column | None:
    """One end of the band over the rows that have it."""
    typed = table.column(name)
    assert typed is not None
    typed = typed[nominal.seq.rows]
    has = in_reach(typed)
    if has.sum() < _FEWEST_ROWS:
        return None
    seq, r_ohm = Sequence(nominal.seq.rows[has], nominal.seq.t_c[has]), typed[has]
    t_c, x = nominal.t_c[has], 1 / (nominal.t_c[has] + ZERO_C_K)
    width = np.abs(np.log(r_ohm) - nominal.curve.fitted[has])
    narrowest = float(t_c[np.argmin(np.median(sliding_window_view(np.pad(width, 1, mode="edge"), 3), axis=1))])
    kinks_c = tuple(sorted({kink_c for kink_c in (narrowest, rated_c) if t_c.min() < kink_c < t_c.max()}))
    factor = nominal.scale_factor * 1000.0 ** -levels(x, np.log(r_ohm))
    return Column(
        name, seq, t_c, r_ohm, nominal.scale_factor, factor,
        printed(r_ohm),
        nominal.to_c, kinks_c, nominal.printed.half[has],
    )  # fmt: skip


def _of_end(end: Column, nominal: Column) -> list[Finding]:
    off = middle(end.y) - middle(nominal.y)
    if abs(off) > _OTHER_UNIT:
        slip = "kilo-missed" if off < 0 else "kilo-typed-twice"
        return [Finding("units-look-wrong", column=end.name, slip=slip)]
    apart = scales.parts(end.seq, end.name, end.r_ohm, end.factor)
    return [*apart, *columns.findings(end), *_not_held(end, nominal)]


def _not_held(end: Column, nominal: Column) -> list[Finding]:
    """Rows where the nominal lies outside, by more than the rounding of both."""
    at = np.flatnonzero(np.isin(nominal.seq.rows, end.seq.rows))
    above = (end.y - nominal.y[at]) * (1.0 if end.name == "r_max_ohm" else -1.0)
    outside = above < -(end.printed.half + nominal.printed.half[at]) * _ROUNDINGS
    rows = np.flatnonzero(outside & ~end.out_of_line & ~nominal.out_of_line[at])
    found = [
        Finding(
            "band-does-not-hold-nominal", int(end.seq.rows[i]), float(end.seq.t_c[i]), end.name,
            value=float(end.r_ohm[i]), expected=float(nominal.r_ohm[at[i]]),
        )
        for i in rows
    ]  # fmt: skip
    if len(found) <= _ROWS_EACH:
        return found
    slip = "columns-swapped" if len(found) > 0.9 * outside.size else None
    return [replace(found[0], slip=slip, about=f"{len(found)} rows")]
