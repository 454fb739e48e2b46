"""Families: parts that read the same, each through each other's curve, within a limit over a range."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from builder.comparisons.comparison import DEFAULT_STEP_K
from builder.comparisons.linkage import Distances, complete_linkage
from builder.curves import Curve
from builder.curves.curve import Mask
from builder.part_curve import PartCurve, whole_steps_c
from builder.units import Array

DEFAULT_WITHIN_K = 0.5
DEFAULT_RANGE_C = (0.0, 70.0)

Indices = npt.NDArray[np.intp]


@dataclass(frozen=True)
class Families:
    """Groups of parts by their places in the sequence given, and the places of those whose curve is too short.

    Every part that is not left out is in one group, alone if nothing is near enough.
    """

    groups: tuple[tuple[int, ...], ...]
    left_out: tuple[int, ...]


def families(
    parts: Sequence[PartCurve],
    within_k: float = DEFAULT_WITHIN_K,
    range_c: tuple[float, float] = DEFAULT_RANGE_C,
) -> Families:
    """Complete-linkage groups of parts that read the same.

    Parameters
    ----------
    parts : sequence of PartCurve
        Any number of parts; no unit.
    within_k : float
        Largest distance of two parts of one family, above zero. [K]
    range_c : tuple of two floats
        The range over which they are compared. [°C]

    Returns
    -------
    Families
        Groups in the order of their first part; the order of `parts` does not change who is with whom.

    Raises
    ------
    ValueError
        A limit that is not above zero.

    Notes
    -----
    The distance of two parts is the largest |reads| of either read through the other's curve, nominal, at whole
    steps of 5 K and both ends of the range. No two parts of a family are farther apart than the limit: that is
    decided without an inverse, since A reads B within δ at T exactly where R_A(T + δ) ≤ R_B(T) ≤ R_A(T − δ).
    Only which parts are merged first rests on interpolation, of T over ln R through T − δ, T and T + δ.

    Memory is that of the samples and of 4 bytes for each pair of the largest neighbourhood, the parts that a
    chain of pairs within the limit connects.
    """
    if not within_k > 0:
        raise ValueError("the limit of a family must be above zero")
    low, high = range_c
    covers = [not part.curve.extrapolated([low, high]).any() for part in parts]
    curves = [part.curve for part, whole in zip(parts, covers, strict=True) if whole]
    places = np.flatnonzero(covers)
    grouped = [places[group].tolist() for group in _groups(curves, whole_steps_c(range_c, DEFAULT_STEP_K), within_k)]
    left_out = tuple(place for place, whole in enumerate(covers) if not whole)
    return Families(tuple(sorted(tuple(sorted(group)) for group in grouped)), left_out)


def _groups(curves: Sequence[Curve], t_c: Array, within_k: float) -> Iterator[Indices]:
    if curves:
        sampled = _sampled(curves, t_c, within_k)
        for members in _neighbourhoods(sampled):
            for group in complete_linkage(_distances_k(sampled, members)):
                yield sampled.order[members[group]]


@dataclass(frozen=True, eq=False)
class _Sampled:
    """ln R of curves, one a row, at the temperatures of a grid (`at`), and by the limit colder and hotter.

    A reading is z·(linear + z·square) with z the difference of ln R. Rows are sorted by their last column, where
    materials differ most, then the others: row i is curve `order[i]`, and only rows `first[i]` to `stop[i]` can be
    within its limit.
    """

    order: Indices
    at: Array
    colder: Array
    hotter: Array
    linear_k: Array
    square_k: Array
    first: Indices
    stop: Indices
    within_k: float

    def within(self, i: int, others: Indices) -> Mask:
        """Which of the other rows read row i, and are read by it, within the limit."""
        theirs, own = self.at[others], self.at[i]
        read_by_own = (theirs <= self.colder[i]) & (theirs >= self.hotter[i])
        own_read = (own <= self.colder[others]) & (own >= self.hotter[others])
        inside: Mask = np.logical_and.reduce(read_by_own & own_read, axis=1)
        return inside

    def distance_k(self, i: int, others: Indices) -> Array:
        """Distances of row i to others that are within the limit."""
        z = self.at[others] - self.at[i]
        there_k = z * (self.linear_k[i] + z * self.square_k[i])
        back_k = z * (self.linear_k[others] - z * self.square_k[others])
        farther_k: Array = np.maximum(np.abs(there_k), np.abs(back_k)).max(axis=1)
        return np.minimum(farther_k, self.within_k)


def _sampled(curves: Sequence[Curve], t_c: Array, within_k: float) -> _Sampled:
    around_c = np.stack([t_c, t_c - within_k, t_c + within_k])
    ln_r = np.log([curve.extended_resistance_ohm(around_c) for curve in curves])
    order = np.lexsort(ln_r[:, 0].T)
    at, colder, hotter = np.ascontiguousarray(ln_r[order].transpose(1, 0, 2))
    # z·(l + z·s) is −δ at the colder point and +δ at the hotter one.
    cold_k, hot_k = -within_k / (colder - at), within_k / (hotter - at)
    square_k = (cold_k - hot_k) / (colder - hotter)
    linear_k = cold_k - square_k * (colder - at)
    first = np.searchsorted(at[:, -1], hotter[:, -1], side="left")
    stop = np.searchsorted(at[:, -1], colder[:, -1], side="right")
    return _Sampled(order, at, colder, hotter, linear_k, square_k, first, stop, within_k)


def _neighbourhoods(sampled: _Sampled) -> Iterator[Indices]:
    """Rows that chains of pairs within the limit connect; every row in one neighbourhood."""
    waiting = np.ones(len(sampled.order), dtype=bool)
    while waiting.any():
        found = [int(waiting.argmax())]
        waiting[found] = False
        for i in found:
            first, stop = sampled.first[i], sampled.stop[i]
            near = first + np.flatnonzero(waiting[first:stop])
            near = near[sampled.within(i, near)]
            waiting[near] = False
            found += near.tolist()
        yield np.sort(found)


def _distances_k(sampled: _Sampled, members: Indices) -> Distances:
    """Distances between the rows of a neighbourhood, infinite beyond the limit."""
    distance_k: Distances = np.full((len(members), len(members)), np.inf, dtype=np.float32)
    for i, row in enumerate(members):
        later = members[i + 1 : np.searchsorted(members, sampled.stop[row])]
        near = np.flatnonzero(sampled.within(row, later))
        distance_k[i, i + 1 + near] = distance_k[i + 1 + near, i] = sampled.distance_k(row, later[near])
    return distance_k
