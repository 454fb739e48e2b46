"""The smooth curve through a column, and what it expects of each row that it was not shown.

ln R over 1/T is nearly linear with a slow bend. The curve is a Chebyshev series whose higher terms are held small by
what real tables show (a bend that drifts, pieces that meet with a small change of slope), so that it is stiff in a
table of 8 rows and supple in one of 400: Bayesian linear regression, whose leave-one-out predictions are exact and
need no second fit.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property, lru_cache

import numpy as np

from builder.misprints.table import ZERO_C_K, Mask
from builder.units import Array

_TERMS = 13
_FULL_SPAN_PER_K = 0.00124  # half of 1/T from −55 to 200 °C, where the terms below were judged
_ROUGHNESS_K = 0.01


@dataclass(frozen=True, eq=False)
class Points:
    """The points of one column, ln R over 1/T, with what is known of each row's fineness."""

    x_per_k: Array
    y: Array
    half: Array
    slope_per_k: Array
    middle_per_k: float
    reach_per_k: float
    kinks_per_k: tuple[float, ...]

    @cached_property
    def noise(self) -> Array:
        """Standard uncertainty of each row from rounding and roughness, in ln R."""
        noise: Array = np.hypot(self.half / np.sqrt(3), _ROUGHNESS_K * self.slope_per_k)
        return noise

    @cached_property
    def basis(self) -> Array:
        """The terms of the series at each row."""
        return self.basis_at(self.x_per_k)

    def basis_at(self, x_per_k: Array) -> Array:
        """The terms of the series elsewhere."""
        scaled = (x_per_k - self.middle_per_k) / self.reach_per_k
        basis = np.polynomial.chebyshev.chebvander(scaled, _TERMS - 1).astype(np.float64, copy=False)
        if not self.kinks_per_k:
            return basis
        kinks = [np.abs(x_per_k - kink) / self.reach_per_k for kink in self.kinks_per_k]
        return np.column_stack([basis, *kinks])


@dataclass(frozen=True, eq=False)
class Smooth:
    """A smooth curve through the kept rows of a column; `expected` is that of each row from the others."""

    points: Points
    kept: Mask
    fitted: Array
    expected: Array
    expected_sigma: Array
    coefficients: Array

    @cached_property
    def off(self) -> Array:
        """How far each row lies above what the others expect, in ln R."""
        off: Array = self.points.y - self.expected
        return off

    def ln_r(self, t_c: Array) -> Array:
        """The curve elsewhere."""
        curve: Array = self.points.basis_at(1 / (t_c + ZERO_C_K)) @ self.coefficients
        return curve


@lru_cache
def _prior_precision(reach_of_full: float, kinks: int) -> Array:
    """How small each term of the series is held, as 1/σ²; a free kink hardly at all."""
    order = np.arange(3, _TERMS)
    drift = 0.03 * reach_of_full**3 * 3.5 ** (3.0 - order)
    pieces = 0.015 * reach_of_full / order**2
    sigma = np.r_[1e3, 1e3, max(1.0 * reach_of_full**2, 0.1), drift + pieces, np.ones(kinks)]
    precision: Array = sigma**-2.0
    return precision


def smooth(
    x_per_k: Array, y: Array, half: Array, kept: Mask, *, slope_per_k: Array, kinks_per_k: tuple[float, ...] = ()
) -> Smooth:
    """Fits the smooth curve.

    Parameters
    ----------
    x_per_k, y : array of shape (n,)
        1/T [1/K] and ln R [no unit].
    half : array of shape (n,)
        Half a unit of the last digit, in ln R. [no unit]
    kept : array of n truth values
        Rows that count. [no unit]
    slope_per_k : array of shape (n,)
        Size of d ln R/dT. [1/K]
    kinks_per_k : tuple of float
        1/T where the slope may jump freely. [1/K]

    Returns
    -------
    Smooth
        The curve, and what it expects of each row from the others.
    """
    low, high = float(x_per_k[kept].min()), float(x_per_k[kept].max())
    return _fitted(Points(x_per_k, y, half, slope_per_k, (low + high) / 2, (high - low) / 2, kinks_per_k), kept)


def refitted(curve: Smooth, kept: Mask) -> Smooth:
    """The same column through other rows."""
    return _fitted(curve.points, kept)


def kinked(curve: Smooth, row: int) -> Smooth:
    """The same rows, with a slope that may jump at one of them."""
    points = curve.points
    kinks = (*points.kinks_per_k, float(points.x_per_k[row]))
    return _fitted(replace(points, kinks_per_k=kinks), curve.kept)


def _fitted(points: Points, kept: Mask) -> Smooth:
    basis, y = points.basis, points.y
    weight = kept / points.noise**2
    precision = (basis.T * weight) @ basis
    precision[np.diag_indices_from(precision)] += _prior_precision(
        round(points.reach_per_k / _FULL_SPAN_PER_K, 2), len(points.kinks_per_k)
    )
    scatter = np.linalg.inv(precision)
    coefficients = scatter @ (basis.T @ (weight * y))
    fitted = basis @ coefficients
    variance = ((basis @ scatter) * basis).sum(axis=1)
    free = np.maximum(1 - variance * weight, 1e-9)
    return Smooth(points, kept, fitted, y - (y - fitted) / free, np.sqrt(variance / free), coefficients)
