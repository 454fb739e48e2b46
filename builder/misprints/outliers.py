"""Rows that the smooth curve through the others does not expect: found one by one, the worst first."""

from __future__ import annotations

from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from builder.misprints.smoothness import Smooth, kinked, refitted
from builder.misprints.table import Mask
from builder.units import Array

_FLOOR_K = 0.06  # real tables are this rough where two fits of their maker meet
_SIGMAS = 4.2
_BEND_K = 0.1
_KINK_K = 0.25
_SUSPECTS = 6
_MOST_TOGETHER = 4
_MOST_REMOVED = 8
_SMALL = 20
_FEWEST_KEPT = 5


def limit(curve: Smooth) -> Array:
    """How far a row may lie from what the others expect, in ln R."""
    allowed: Array = _FLOOR_K * curve.points.slope_per_k + curve.points.half + _SIGMAS * curve.expected_sigma
    return allowed


def settled(curve: Smooth) -> Smooth:
    """The curve through the rows that belong; its `kept` tells which do not."""
    greedy = curve
    better = _without_worst(curve)
    while better is not None and curve.kept.sum() - greedy.kept.sum() < _most(curve):
        greedy, better = better, _without_worst(better)
    if greedy is curve:
        return curve
    settles = better is None or curve.kept.sum() <= _SMALL
    if settles and curve.kept.sum() - greedy.kept.sum() > 1:
        greedy = _with_fewer_removed(curve, greedy)
    return _with_innocents(greedy, curve.kept)


def _most(curve: Smooth) -> int:
    """How many rows may be taken out before the rest says too little."""
    return max(1, min(_MOST_REMOVED, int(curve.kept.sum()) - _FEWEST_KEPT, int(curve.kept.sum()) // 2))


def _with_fewer_removed(curve: Smooth, greedy: Smooth) -> Smooth:
    """One bad row at an end can make its neighbours look bad: the smallest set of rows that explains the table."""
    removed = np.flatnonzero(curve.kept & ~greedy.kept)
    suspects = sorted({*removed.tolist(), *_ranked(curve)[:_SUSPECTS].tolist()})
    for count in range(1, min(removed.size, _MOST_TOGETHER + 1, _most(curve) + 1)):
        sets = [refitted(curve, _but(curve.kept, rows)) for rows in combinations(suspects, count)]
        clean = [one for one in sets if _without_worst(one) is None]
        if clean:
            return min(clean, key=misfit)
    return greedy


def misfit(curve: Smooth) -> float:
    """How ill the kept rows fit, weighed against their rounding."""
    off = ((curve.points.y - curve.fitted) / curve.points.noise)[curve.kept]
    return float(off @ off)


def _but(kept: Mask, rows: tuple[int, ...]) -> Mask:
    left = kept.copy()
    left[list(rows)] = False
    return left


def _ranked(curve: Smooth) -> NDArray[np.intp]:
    """Kept rows, the one whose removal mends the most first."""
    sigma = np.hypot(curve.expected_sigma, curve.points.noise)
    rank = np.where(curve.kept, np.abs(curve.off) / sigma, -1.0)
    return np.argsort(-rank)[: int(curve.kept.sum())]


def _without_worst(curve: Smooth) -> Smooth | None:
    """The curve without the row farthest out of line, or None where all are in line."""
    out = (np.abs(curve.off) > limit(curve)) & curve.kept
    if not out.any():
        return None
    for row in [row for row in _ranked(curve) if out[row]][:_SUSPECTS]:
        without = refitted(curve, _but(curve.kept, (int(row),)))
        if _stands_alone(without, int(row)) and not _is_kink(curve, without, int(row)):
            return without
    return None


def _stands_alone(without: Smooth, row: int) -> bool:
    """Whether the row is out of line with its neighbours too, not with the curve alone: where the whole
    neighbourhood lies off the curve, the maker's own fit bends there."""
    others = np.flatnonzero(without.kept)
    at = int(np.searchsorted(others, row))
    first = min(max(at - 2, 0), max(others.size - 4, 0))
    level = float(np.median((without.points.y - without.fitted)[others[first : first + 4]]))
    most = _BEND_K * float(without.points.slope_per_k[row])
    off = without.off[row] - np.clip(level, -most, most)
    return bool(abs(off) > limit(without)[row])


def _is_kink(curve: Smooth, without: Smooth, row: int) -> bool:
    """Whether a row little out of line is where two fits of the maker meet: a jump in slope there explains the rows
    around it at least as well as taking the row out. (At the ends of a table nothing tells the two apart.)"""
    off_k = abs(without.off[row]) / without.points.slope_per_k[row]
    kept = np.flatnonzero(curve.kept)
    if off_k > _KINK_K or row in (*kept[:2], *kept[-2:]):
        return False
    return misfit(kinked(curve, row)) < misfit(without)


def _with_innocents(curve: Smooth, usable: Mask) -> Smooth:
    """The curve with those rows taken back that turn out to fit it."""
    back = usable & ~curve.kept & (np.abs(curve.off) <= limit(curve))
    return refitted(curve, curve.kept | back) if back.any() else curve
