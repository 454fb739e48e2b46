"""One column of a table with its smooth curve, and its rows out of line as findings."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import cached_property, partial
from math import exp

import numpy as np

from builder.misprints.outliers import limit, settled
from builder.misprints.rounding import Printed
from builder.misprints.sequence import Sequence
from builder.misprints.slips import explanations, temperature_edits
from builder.misprints.smoothness import Smooth, smooth
from builder.misprints.table import ZERO_C_K, Finding, Mask, Slip, usual_slope
from builder.units import Array

_POINTS = 400
_HOTTEST_PER_K = 1e-3
_ROUGHNESS_K = 0.01


@dataclass(frozen=True, eq=False)
class Column:
    """A column in the order of the sequence.

    Attributes
    ----------
    name : str
        Its name in the table. [no unit]
    seq : Sequence
        The rows and their temperatures as typed.
    t_c : array of shape (n,)
        Temperatures that the rows stand for, once the axis and its shifts are put right. [°C]
    r_ohm : array of shape (n,)
        Values as typed. [Ω]
    scale_factor : float
        What turns the table's own unit into Ω. [no unit]
    factor : array of shape (n,)
        What turns each row into Ω; parts of a table may stand in another unit. [no unit]
    printed : Printed
        Their digits.
    to_c : function
        From the axis as typed to °C.
    kinks_c : tuple of float
        Where the slope may jump: a tolerance band is narrowest at the rated temperature. [°C]
    coarsest : array of shape (n,)
        Half units of what the column was computed from, relative. [no unit]
    """

    name: str
    seq: Sequence
    t_c: Array
    r_ohm: Array
    scale_factor: float
    factor: Array
    printed: Printed
    to_c: Callable[[Array], Array]
    kinks_c: tuple[float, ...] = ()
    coarsest: Array | float = 0.0

    @cached_property
    def y(self) -> Array:
        """ln R, R in Ω."""
        y: Array = np.log(self.r_ohm * self.factor)
        return y

    @cached_property
    def curve(self) -> Smooth:
        """The smooth curve through the rows that belong."""
        return settled(self.first_curve)

    @cached_property
    def first_curve(self) -> Smooth:
        """The smooth curve through all rows whose temperature is in order."""
        x = 1 / (self.t_c + ZERO_C_K)
        slope_per_k = usual_slope(x, self.y) * x**2
        half = np.maximum(self.printed.half, self.coarsest) + self.seq.fineness_k * slope_per_k
        kinks = tuple(1 / (kink_c + ZERO_C_K) for kink_c in self.kinks_c)
        return smooth(x, self.y, half, self.seq.in_order, slope_per_k=slope_per_k, kinks_per_k=kinks)

    @cached_property
    def out_of_line(self) -> Mask:
        """Rows that the curve leaves out."""
        return ~self.curve.kept

    def reading_c(self, row: int) -> float:
        """The temperature that a row's value belongs to, by the curve, straight beyond its ends."""
        points = self.curve.points
        x = points.middle_per_k + points.reach_per_k * np.linspace(-1, 1, _POINTS)
        y = self.curve.ln_r(1 / x - ZERO_C_K)
        at = self.y[row]
        end = -1 if at > y[-1] else 0
        beyond = x[end] + (at - y[end]) * points.x_per_k[row] ** 2 / points.slope_per_k[row]
        inside = y[0] <= at <= y[-1]
        return float(1 / max(np.interp(at, y, x) if inside else beyond, _HOTTEST_PER_K) - ZERO_C_K)

    def tolerance_k(self, row: int) -> float:
        """How far a row that belongs may read off."""
        return float(limit(self.curve)[row] / self.curve.points.slope_per_k[row])

    def typed_c(self, row: int) -> float:
        """The temperature that a row stands for as typed, where it stands in order."""
        return float(self.t_c[row] if self.seq.in_order[row] else self.to_c(self.seq.t_c[row : row + 1])[0])


def findings(column: Column) -> list[Finding]:
    """The rows out of line, one finding each."""
    found = (_finding(column, int(row)) for row in np.flatnonzero(column.out_of_line))
    return [one for one in found if one is not None]


def _finding(column: Column, row: int) -> Finding | None:
    reading_c = column.reading_c(row)
    reads_k = reading_c - column.typed_c(row)
    if abs(reads_k) <= column.tolerance_k(row):
        return None
    in_order, seq = bool(column.seq.in_order[row]), column.seq
    place = Finding("row-out-of-line", int(seq.rows[row]), float(seq.t_c[row]), column.name, reads_k=reads_k)
    temperatures = _temperatures(column, row, reading_c)
    if not in_order or (temperatures and np.isfinite(seq.even_c[row])):
        return _mistyped_temperature(place, reading_c, temperatures)
    return _wrong_value(column, row, place, temperatures)


def _mistyped_temperature(place: Finding, reading_c: float, slips: tuple[Slip, ...]) -> Finding:
    """The row's resistance belongs to another temperature."""
    restored = slips[0].restored if len(slips) == 1 else None
    return replace(
        place, column="t_c", value=place.t_c, expected=reading_c,
        slip="temperature-mistyped", restored=restored, candidates=slips,
    )  # fmt: skip


def _wrong_value(column: Column, row: int, place: Finding, temperatures: tuple[Slip, ...]) -> Finding:
    """The row's value is wrong; the slip is named where only one explains it."""
    value, expected = float(column.r_ohm[row]), exp(column.curve.expected[row]) / float(column.factor[row])
    neighbours = column.r_ohm[[max(row - 1, 0), min(row + 1, column.r_ohm.size - 1)]]
    place = replace(place, value=value, expected=expected)
    slips = (*_resistances(column, row, value, expected), *temperatures)
    alone = slips[0] if len(slips) == 1 else None
    place = replace(place, restored=alone.restored if alone else None, candidates=slips)
    if (neighbours == value).sum() > (row in (0, column.r_ohm.size - 1)):
        return replace(place, slip="repeated-neighbour")
    return replace(place, slip=alone.kind if alone else None)


def _resistances(column: Column, row: int, value: float, expected: float) -> tuple[Slip, ...]:
    """The slips that explain a value, restored in the column's unit."""
    curve, number = column.curve, float(column.printed.numbers[row])
    scale = value / number
    slips = explanations(
        number, int(column.printed.digits[row]), expected=expected / scale, most=float(limit(curve)[row]),
        sigma=float(np.hypot(curve.expected_sigma[row], _ROUGHNESS_K * curve.points.slope_per_k[row])),
        prints=partial(column.printed.prints, row),
    )  # fmt: skip
    return tuple(replace(slip, restored=float(f"{slip.restored * scale:.12g}")) for slip in slips)


def _temperatures(column: Column, row: int, reading_c: float) -> tuple[Slip, ...]:
    """Temperatures that the row's value fits: what even steps leave for it, or else a slip of its figures."""
    seq, tolerance_k = column.seq, column.tolerance_k(row)
    typed, even = float(seq.t_c[row]), float(seq.even_c[row])
    if np.isfinite(even):
        edits = [Slip("temperature-mistyped", even)] if abs(even - typed) > 1e-6 else []
    else:
        edits = list(dict.fromkeys(temperature_edits(typed)))
    return tuple(
        slip for slip in edits
        if abs(float(column.to_c(np.array([slip.restored]))[0]) - reading_c) <= tolerance_k
        and _between(slip.restored, seq.t_c, row)
    )  # fmt: skip


def _between(t_c: float, typed_c: Array, row: int) -> bool:
    before = typed_c[row - 1] if row else -np.inf
    after = typed_c[row + 1] if row + 1 < typed_c.size else np.inf
    return bool(before < t_c < after)
