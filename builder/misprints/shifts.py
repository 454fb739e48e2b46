"""Resistances and temperatures out of step: a resistance left out or doubled, and every later row one row off."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.misprints.table import ZERO_C_K, usual_slope
from builder.units import Array

_LIKELIEST = 12
_CLOSEST_K = 1e-3
_HOTTEST_PER_K = 1e-3


@dataclass(frozen=True, eq=False)
class Shift:
    """From a row on, each resistance belongs to the next (or, doubled, the previous) row's temperature."""

    start: int
    slip: str
    t_c: Array


def shifts(t_c: Array, y: Array) -> list[Shift]:
    """The likeliest shifts: where one step of the table falls twice as far as its neighbours, or not at all;
    none where temperatures are repeated or out of order."""
    if np.diff(t_c).min() < _CLOSEST_K:
        return []
    x = 1 / (t_c + ZERO_C_K)
    share = np.diff(y) / np.diff(x) / usual_slope(x, y)
    left_out = np.argsort(np.abs(share - _expected_share(t_c)))[:_LIKELIEST]
    doubled = np.argsort(np.abs(share))[:_LIKELIEST]
    return [
        *(Shift(int(i) + 1, "row-left-out", _later(t_c, y, int(i) + 1)) for i in left_out if i < t_c.size - 2),
        *(Shift(int(i) + 1, "row-doubled", _earlier(t_c, int(i) + 1)) for i in doubled if 1 <= i < t_c.size - 2),
    ]


def _expected_share(t_c: Array) -> Array:
    """How far a step falls that also holds the next step."""
    steps = np.diff(t_c)
    share: Array = 1 + np.append(steps[1:], steps[-1]) / steps
    return share


def _later(t_c: Array, y: Array, start: int) -> Array:
    """The temperatures one row on. The last row's stands in no row: the next even step, or where the steps are not
    even, the temperature to which the rows before it lead."""
    later = t_c[start + 1 :]
    if np.ptp(np.diff(t_c[-4:])) < _CLOSEST_K or np.diff(y[-4:]).max() >= 0:
        return np.concatenate([t_c[:start], later, [2 * t_c[-1] - t_c[-2]]])
    x = 1 / (np.concatenate([t_c[:start], later])[-3:] + ZERO_C_K)
    bend = np.polyfit(y[-4:-1] - y[-1], x, 2)
    return np.concatenate([t_c[:start], later, [1 / max(bend[-1], _HOTTEST_PER_K) - ZERO_C_K]])


def _earlier(t_c: Array, start: int) -> Array:
    return np.concatenate([t_c[:start], t_c[start - 1 : -1]])
