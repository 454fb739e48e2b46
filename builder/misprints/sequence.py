"""The temperatures of a table as a sequence: their order, the even steps, and the holes in them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from builder.misprints.table import ZERO_C_K, Finding, Mask, middle
from builder.units import Array

_FAR_STEPS = 6  # an end row this many times the widest other step away has a mistyped temperature
_EQUAL_C = 1e-6
_COLDEST_C = -270.0
_EVEN_STEPS = 5  # fewer equal steps do not make the wider one beside them a hole at an end


@dataclass(frozen=True, eq=False)
class Sequence:
    """Temperatures from cold to hot in the table's own order, with the rows of the table they stand in."""

    rows: NDArray[np.intp]
    t_c: Array

    @cached_property
    def in_order(self) -> Mask:
        """Rows whose temperature lies between those before and after, and above absolute zero."""
        t_c = self.t_c
        before, after = np.concatenate([[-np.inf], t_c[:-1]]), np.concatenate([t_c[1:], [np.inf]])
        ordered: Mask = ((before < t_c) & (t_c < after)) | (before >= after)
        steps = np.abs(t_c[1:] - t_c[:-1])
        ordered[0] = (ordered[0] or not ordered[1]) and steps[0] <= _FAR_STEPS * steps[1:].max()
        ordered[-1] = (ordered[-1] or not ordered[-2]) and steps[-1] <= _FAR_STEPS * steps[:-1].max()
        ordered &= t_c > -ZERO_C_K
        return ordered

    @cached_property
    def even_c(self) -> Array:
        """The temperature that even steps leave for each row; nan where the steps around it are not even."""
        edge = np.full(3, np.nan)
        t_c = np.concatenate([edge, self.t_c, edge])
        far, near, after, beyond = t_c[1:-5], t_c[2:-4], t_c[4:-2], t_c[5:-1]
        half_gap = (after - near) / 2
        inside = _equal(near - far, half_gap) | _equal(beyond - after, half_gap)
        even = np.where(inside, near + half_gap, np.nan)
        first, last = t_c[3:7], t_c[-7:-3]
        if _equal(first[3] - first[2], first[2] - first[1]):
            even[0] = 2 * first[1] - first[2]
        if _equal(last[1] - last[0], last[2] - last[1]):
            even[-1] = 2 * last[2] - last[1]
        return even

    @cached_property
    def placed_c(self) -> Array:
        """The temperatures, with those out of order put where their neighbours leave a place."""
        if self.in_order.all():
            return self.t_c
        between = (np.r_[self.t_c[1], self.t_c[:-1]] + np.r_[self.t_c[1:], self.t_c[-2]]) / 2
        place = np.where(np.isfinite(self.even_c), self.even_c, between)
        return np.where(self.in_order, self.t_c, np.maximum(place, _COLDEST_C))

    @cached_property
    def fineness_k(self) -> float:
        """Half a unit of the temperatures' last digit, where they were rounded onto an uneven axis."""
        steps = np.diff(self.t_c)
        spread_k = float(steps.max() - steps.min())
        if not _EQUAL_C < spread_k < 0.25 or not _equal(self.t_c * 10, np.rint(self.t_c * 10)).all():
            return 0.0
        return 0.0 if _equal(self.t_c, np.rint(self.t_c)).all() else 0.05


def _equal(a: Array, b: Array) -> Mask:
    return np.abs(a - b) < _EQUAL_C


def sequence(t_c: Array, usable: Mask) -> Sequence:
    """The usable rows from cold to hot; sorted only where the table has no order of its own."""
    rows = np.flatnonzero(usable)
    steps = np.diff(t_c[rows])
    if (steps < 0).sum() > steps.size / 2:
        rows, steps = rows[::-1], -steps[::-1]
    if (steps < 0).sum() > steps.size / 4:
        rows = rows[np.argsort(t_c[rows], kind="stable")]
    return Sequence(rows, t_c[rows])


def repeated(seq: Sequence, t_c: Array) -> list[Finding]:
    """Rows with the temperature of the row before."""
    again = np.flatnonzero(np.abs(np.diff(t_c)) < _EQUAL_C) + 1
    return [
        Finding("repeated-temperature", int(seq.rows[i]), float(seq.t_c[i]), "t_c", value=float(seq.t_c[i]))
        for i in again
    ]


def holes(seq: Sequence, t_c: Array) -> list[Finding]:
    """Steps two or more times as wide as all others around them: a row is missing.

    A table whose steps change for good, or that has several widths, is not an even one with a hole; nor is a short
    one whose first or last step is wider.
    """
    steps = np.diff(t_c)
    if not steps.size or steps.min() <= 0:
        return []
    usual = middle(steps)
    odd = np.flatnonzero(~_equal(steps, np.full(steps.size, usual)))
    inner = (odd >= 1) & (odd < steps.size - 1) | (steps.size - odd.size >= _EVEN_STEPS)
    whole = _equal(steps[odd] / usual, np.rint(steps[odd] / usual)) & (steps[odd] > usual)
    if odd.size > max(1, steps.size // 40) or not (inner & whole).all():
        return []
    return [
        Finding(
            "uneven-step", int(seq.rows[i + 1]), float(seq.t_c[i + 1]), "t_c",
            value=float(seq.t_c[i + 1]), expected=float(t_c[i] + usual), slip="row-left-out",
        )
        for i in odd
    ]  # fmt: skip
