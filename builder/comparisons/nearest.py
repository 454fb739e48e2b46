"""The parts of a catalog that read most like a given one."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from builder.comparisons.comparison import DEFAULT_STEP_K
from builder.curves import Curve
from builder.part_curve import PartCurve
from builder.units import Array

# Parts looked at at a time: most of the nearest ten are among the first, and the exact inverse costs little.
_LOOK = 32
# The inverse is exact to 1e-6 K; without rounding, equal parts would be told apart by noise.
_DECIMALS = 6

Indices = npt.NDArray[np.intp]


@dataclass(frozen=True, slots=True)
class Neighbour:
    """A part near another one: its place in the catalog, its largest reading error and where that is.

    `whole_range` is False where its curve holds over a part of the other's operating range only.
    """

    place: int
    worst_k: float
    at_c: float
    whole_range: bool


class NearestParts:
    """For each part of a catalog the others that its firmware would read best.

    The measure is the largest |T_self(R_other(T)) − T|, nominal, at the whole steps of 5 K within the part's own
    operating range at which the other's curve holds without extrapolation. A part whose curve holds at half of
    these steps or fewer is left out; so each one that counts has a resistance at the middle step, and what it reads
    there is a lower bound of the measure. Of parts that are equally near, to 1e-6 K, any may be named.
    """

    def __init__(self, parts: Sequence[PartCurve]) -> None:
        self._parts = parts
        ends_c = np.array([(part.curve.span_c, part.operating_c) for part in parts]) / DEFAULT_STEP_K
        self._t_c = np.arange(np.floor(ends_c.min()), np.ceil(ends_c.max()) + 1) * DEFAULT_STEP_K
        self._r_ohm = np.array([_held_ohm(part.curve, self._t_c) for part in parts])
        self._orders: dict[int, tuple[Indices, Array]] = {}

    def of(self, place: int, count: int = 10) -> tuple[Neighbour, ...]:
        """The nearest parts to one, nearest first.

        Parameters
        ----------
        place : int
            The part's place in the catalog; no unit.
        count : int
            How many are wanted; no unit.

        Returns
        -------
        tuple of Neighbour
            Fewer than wanted where fewer can be compared.
        """
        low, high = self._parts[place].operating_c
        steps = np.flatnonzero((self._t_c >= low - 1e-9) & (self._t_c <= high + 1e-9))
        if not len(steps):
            return ()
        order, middle_ohm = self._order(int(steps[len(steps) // 2]))
        view = _View(self._parts[place].curve, self._t_c[steps], self._r_ohm[:, steps[0] : steps[-1] + 1], place)
        own = int(np.searchsorted(middle_ohm, view.own_middle_ohm()))
        first, stop = max(own - _LOOK, 0), own + _LOOK
        found = view.neighbours(order[first:stop])[:count]
        left, right = np.searchsorted(middle_ohm, view.middle_between_ohm(_bound_k(found, count)))
        rest = np.concatenate([order[left:first], order[stop:right]])
        while len(rest):
            rest = rest[view.nearer(rest, _bound_k(found, count))]
            found = sorted(found + view.neighbours(rest[:_LOOK]), key=_nearness)[:count]
            rest = rest[_LOOK:]
        return tuple(found)

    def _order(self, step: int) -> tuple[Indices, Array]:
        """The parts that have a resistance at a step, by it, and these resistances; sorted once for each step."""
        if step not in self._orders:
            r_ohm = self._r_ohm[:, step]
            order = r_ohm.argsort(kind="stable")[: np.isfinite(r_ohm).sum()]
            self._orders[step] = order, r_ohm[order]
        return self._orders[step]


@dataclass(frozen=True, eq=False)
class _View:
    """All parts as one of them reads them, at its own steps."""

    curve: Curve
    t_c: Array
    r_ohm: Array
    place: int

    def own_middle_ohm(self) -> Array:
        """The part's own resistance at the middle step."""
        return self.curve.extended_resistance_ohm(self.t_c[len(self.t_c) // 2])

    def middle_between_ohm(self, bound_k: float) -> Array:
        """The resistances that it reads within a bound at the middle step."""
        return self.curve.extended_resistance_ohm(self.t_c[len(self.t_c) // 2] + np.array([bound_k, -bound_k]))

    def nearer(self, places: Indices, bound_k: float) -> npt.NDArray[np.bool_]:
        """Which parts read nearer than a bound everywhere; exact, without an inverse."""
        hotter_ohm, colder_ohm = self.curve.extended_resistance_ohm([self.t_c + bound_k, self.t_c - bound_k])
        r_ohm = self.r_ohm[places]
        # Not a number, where a curve does not hold, is on neither side.
        outside: npt.NDArray[np.bool_] = ((r_ohm <= hotter_ohm) | (r_ohm >= colder_ohm)).any(axis=1)
        return ~outside

    def neighbours(self, places: Indices) -> list[Neighbour]:
        """Those of some parts whose curves hold at enough steps, nearest first."""
        held = np.isfinite(self.r_ohm[places])
        enough = (2 * held.sum(axis=1) > len(self.t_c)) & (places != self.place)
        places, held = places[enough], held[enough]
        reads_k = np.round(self.curve.extended_temperature_c(self.r_ohm[places]) - self.t_c, _DECIMALS)
        # A resistance that no temperature has, however far the curve is extended, is as wrong as can be.
        reads_k = np.where(held, np.where(np.isfinite(reads_k), reads_k, np.inf), 0)
        at = np.abs(reads_k).argmax(axis=1)
        worst_k = np.take_along_axis(reads_k, at[:, None], axis=1)[:, 0]
        columns = places.tolist(), worst_k.tolist(), self.t_c[at].tolist(), held.all(axis=1).tolist()
        return sorted(map(Neighbour, *columns), key=_nearness)


def _held_ohm(curve: Curve, t_c: Array) -> Array:
    return np.where(curve.extrapolated(t_c), np.nan, curve.resistance_ohm(t_c))


def _bound_k(found: Sequence[Neighbour], count: int) -> float:
    """What a further part must stay below to be one of the nearest."""
    return abs(found[count - 1].worst_k) if len(found) >= count else np.inf


def _nearness(neighbour: Neighbour) -> tuple[float, int]:
    return abs(neighbour.worst_k), neighbour.place
