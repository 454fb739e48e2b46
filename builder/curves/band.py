"""A part's tolerance as a band of resistance over temperature, and in kelvin."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from builder.curves.b_value import BentExponential, shape_allowance
from builder.curves.curve import Curve, Mask
from builder.units import Array, kelvin


@dataclass(frozen=True)
class BTolerance:
    """Tolerance of one stated B-value, and the temperature of its pair farther from the rated one."""

    other_c: float
    b_k: float
    tolerance_pct: float


@dataclass(frozen=True)
class AccuracyRange:
    """A tolerance in kelvin over a range."""

    between_c: tuple[float, float]
    within_k: float


@dataclass(frozen=True, eq=False)
class Band:
    """The lowest and highest resistance that a part within its tolerance may have.

    From the first of these that applies at a temperature: minimum and maximum columns; an accuracy in kelvin,
    carried through the curve; the tolerances of the rated resistance and of the B-value nearest by pair, widened
    by the shape allowance of a curve from a single B-value. Without a rated tolerance the outermost accuracies go on.
    """

    curve: Curve
    rated_c: float
    rated_tolerance_pct: float | None
    b_tolerances: tuple[BTolerance, ...] = ()
    accuracy: tuple[AccuracyRange, ...] = ()
    columns: tuple[Curve, Curve] | None = None

    def edges_ohm(self, t_c: npt.ArrayLike) -> tuple[Array, Array]:
        """Minimum and maximum resistance.

        Parameters
        ----------
        t_c : float or array
            Body temperature. [°C]

        Returns
        -------
        tuple of two arrays, the shape of `t_c`
            Minimum and maximum. [Ω]
        """
        t_c = np.asarray(t_c, dtype=float)
        if self.columns is not None:
            return _column_edges_ohm(*self.columns, self.curve, t_c)
        nominal_ohm = self.curve.resistance_ohm(t_c)
        with np.errstate(over="ignore"):  # near absolute zero the edges are beyond a float
            low, high = self._factors(t_c)
            low_ohm, high_ohm = nominal_ohm * low, nominal_ohm * high
        known, stated_c = np.isfinite(nominal_ohm), self._with_accuracy_c(t_c)
        for stated in self._accuracy_widest_first():
            inside = known & _within(stated, stated_c)
            low_ohm = np.where(inside, self.curve.extended_resistance_ohm(t_c + stated.within_k), low_ohm)
            high_ohm = np.where(inside, self.curve.extended_resistance_ohm(t_c - stated.within_k), high_ohm)
        return low_ohm, high_ohm

    def reads_k(self, t_c: npt.ArrayLike) -> tuple[Array, Array]:
        """What the band means in kelvin: the reading through the nominal curve minus the true temperature.

        Parameters
        ----------
        t_c : float or array
            Body temperature. [°C]

        Returns
        -------
        tuple of two arrays, the shape of `t_c`
            Lowest (the part at its maximum resistance) and highest reading error; exact, through the inverse of
            the nominal curve. [K]
        """
        t_c = np.asarray(t_c, dtype=float)
        return self.read_edges_k(t_c, *self.edges_ohm(t_c))

    def read_edges_k(self, t_c: Array, low_ohm: Array, high_ohm: Array) -> tuple[Array, Array]:
        """What edges that are known already mean in kelvin; see `reads_k`.

        Parameters
        ----------
        t_c : array
            Body temperature. [°C]
        low_ohm, high_ohm : array, the shape of `t_c`
            The band's edges there. [Ω]

        Returns
        -------
        tuple of two arrays, the shape of `t_c`
            Lowest and highest reading error. [K]
        """
        read_c = self.curve.extended_temperature_c
        return read_c(high_ohm) - t_c, read_c(low_ohm) - t_c

    def incomplete(self, t_c: npt.ArrayLike) -> Mask:
        """Where a tolerance that the band needs is not stated.

        Parameters
        ----------
        t_c : float or array
            Body temperature. [°C]

        Returns
        -------
        array of bool, the shape of `t_c`
            True where the band is narrower than the truth; no unit.
        """
        t_c = np.asarray(t_c, dtype=float)
        lacking = self.columns is None and (self.rated_tolerance_pct is None or not self.b_tolerances)
        mask: Mask = np.full(t_c.shape, lacking)
        for stated in self.accuracy:
            mask &= ~_within(stated, t_c)
        return mask

    def _with_accuracy_c(self, t_c: Array) -> Array:
        """The temperatures, each beyond all accuracies at their end where no rated tolerance takes over from them."""
        if self.rated_tolerance_pct is not None or not self.accuracy:
            return t_c
        # Else a body that its own power warms beyond the end would have no tolerance there.
        coldest_c, hottest_c = zip(*(stated.between_c for stated in self.accuracy), strict=True)
        return np.clip(t_c, min(coldest_c), max(hottest_c))

    def _accuracy_widest_first(self) -> list[AccuracyRange]:
        # Ranges may overlap (±0.2 K from 0 to 70 °C, ±0.5 K everywhere): the tightest statement holds.
        return sorted(self.accuracy, key=lambda stated: -stated.within_k)

    def _factors(self, t_c: Array) -> tuple[Array, Array]:
        p = (self.rated_tolerance_pct or 0.0) / 100
        spread = self._b_tolerance_k(t_c) * np.abs(1 / kelvin(t_c) - 1 / kelvin(self.rated_c))
        law = self.curve.law
        low, high = shape_allowance(law, t_c) if isinstance(law, BentExponential) else (0.0, 0.0)
        return (1 - p) * np.exp(low - spread), (1 + p) * np.exp(high + spread)

    def _b_tolerance_k(self, t_c: Array) -> Array:
        if not self.b_tolerances:
            return np.zeros_like(t_c)
        other_c = np.array([b.other_c for b in self.b_tolerances])
        half_width_k = np.array([b.b_k * b.tolerance_pct / 100 for b in self.b_tolerances])
        nearest: Array = half_width_k[np.abs(t_c[..., None] - other_c).argmin(axis=-1)]
        return nearest


def _column_edges_ohm(lowest: Curve, highest: Curve, nominal: Curve, t_c: Array) -> tuple[Array, Array]:
    # Beyond the table each column goes on with its own slope. Slopes that close in would soon cross the nominal
    # curve, so there the band stays at least as wide as at the table's end.
    end_c = np.clip(t_c, *nominal.span_c)
    if np.array_equal(end_c, t_c):
        return lowest.resistance_ohm(t_c), highest.resistance_ohm(t_c)
    # A steep column has no number far out; fmin and fmax then take the other.
    ratio = nominal.resistance_ohm(t_c) / nominal.resistance_ohm(end_c)
    return (
        np.fmin(lowest.resistance_ohm(t_c), ratio * lowest.resistance_ohm(end_c)),
        np.fmax(highest.resistance_ohm(t_c), ratio * highest.resistance_ohm(end_c)),
    )


def _within(stated: AccuracyRange, t_c: Array) -> Mask:
    inside: Mask = (t_c >= stated.between_c[0]) & (t_c <= stated.between_c[1])
    return inside
