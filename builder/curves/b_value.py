"""The B-value: its definition, and the law of a ceramic of which one B-value is known."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.units import ABSOLUTE_ZERO_C, Array, celsius, kelvin

# Fourteen public R–T tables, each reduced to one of its own B-values: the bend c that brings the plain law onto
# the table, colder than the pair (at −40 °C) and hotter than it (at 125 °C). The page Method has the figures.
TYPICAL_BEND_K2 = -1.7e5
COLD_BENDS_K2 = (-2.75e5, -1.3e5)
HOT_BENDS_K2 = (-2.1e5, -0.3e5)


def b_value_k(r1_ohm: Array, t1_c: Array, r2_ohm: Array, t2_c: Array) -> Array:
    """B-value between two points of a curve.

    Parameters
    ----------
    r1_ohm, r2_ohm : float or array
        Zero-power resistances. [Ω]
    t1_c, t2_c : float or array
        Their temperatures. [°C]

    Returns
    -------
    float or array
        B(T1/T2). [K]

    Notes
    -----
    B = ln(R1/R2) / (1/T1 − 1/T2): the definition in IEC 60539-1.

    Examples
    --------
    >>> round(float(b_value_k(np.e, 25.0, 1.0, 85.0)), 4)  # 1/(1/298.15 − 1/358.15)
    1779.707
    """
    # Of two resistances far apart the ratio is beyond a float, not their logarithms.
    return (np.log(r1_ohm) - np.log(r2_ohm)) / (1 / kelvin(t1_c) - 1 / kelvin(t2_c))


@dataclass(frozen=True)
class BentExponential:
    """ln R = ln R1 + B·d + c·(d² − d·(da + db)) with d = 1/T − 1/T1, and da, db the same for the pair of B.

    Whatever the bend c, the resistance at T1 and the B-value of the pair are exact. Where the pair begins at T1,
    da is 0 and the bend's factor is d² − d·d2; c = 0 is the plain law.
    """

    ln_r1: float
    t1_c: float
    pair_c: tuple[float, float]
    b_k: float
    bend_k2: float

    def ln_resistance(self, x_per_k: Array) -> Array:
        """ln R, R in ohm, at x = 1/T."""
        return self.ln_r1 + self.b_k * (x_per_k - self._x1_per_k) + self.bend_k2 * self.bend_term_per_k2(x_per_k)

    def bend_term_per_k2(self, x_per_k: Array) -> Array:
        """What the bend c is multiplied by at x = 1/T, in 1/K²."""
        d = x_per_k - self._x1_per_k
        return d * (d - self._pair_sum_per_k)

    def slope_k(self, x_per_k: Array) -> Array:
        """d ln R / dx in kelvin."""
        return self.b_k + self.bend_k2 * (2 * (x_per_k - self._x1_per_k) - self._pair_sum_per_k)

    def inverse_temperature(self, ln_r: Array) -> Array:
        """x = 1/T at which ln R is reached: the quadratic's root near T1, in the form that loses no digits."""
        rise = ln_r - self.ln_r1
        linear_k = self.b_k - self.bend_k2 * self._pair_sum_per_k
        # Beyond the bend's turning point no temperature has the resistance.
        discriminant = linear_k**2 + 4 * self.bend_k2 * rise
        root = np.sqrt(np.where(discriminant >= 0, discriminant, np.nan))
        return self._x1_per_k + 2 * rise / (linear_k + root)

    @property
    def coldest_c(self) -> float:
        """Where a bend below zero has taken half of the slope at T1, on the way to turning the curve back. [°C]"""
        linear_k = self.b_k - self.bend_k2 * self._pair_sum_per_k
        return celsius(1 / (self._x1_per_k - linear_k / (4 * self.bend_k2))) if self.bend_k2 < 0 else ABSOLUTE_ZERO_C

    @property
    def _x1_per_k(self) -> float:
        return 1 / kelvin(self.t1_c)

    @property
    def _pair_sum_per_k(self) -> float:
        first_c, second_c = self.pair_c
        return 1 / kelvin(first_c) + 1 / kelvin(second_c) - 2 * self._x1_per_k


def shape_allowance(law: BentExponential, t_c: Array) -> tuple[Array, Array]:
    """How far ln R may lie from a curve whose bend is only typical.

    Parameters
    ----------
    law : BentExponential
        With the typical bend; a plain law (bend 0) has no allowance; no unit.
    t_c : array
        Body temperature. [°C]

    Returns
    -------
    tuple of two arrays, the shape of `t_c`
        Lowest (at most 0) and highest (at least 0) deviation of ln R; no unit.

    Notes
    -----
    The bends of fourteen public R–T tables bound it, on the cold and on the hot side of the pair separately, and
    between the temperatures of the pair by both.
    """
    term = law.bend_term_per_k2(1 / kelvin(t_c))
    if law.bend_k2 == 0:
        return 0 * term, 0 * term
    stated_c = (*law.pair_c, law.t1_c)
    colder, hotter = t_c < min(stated_c), t_c > max(stated_c)
    lowest_k2 = np.where(hotter, HOT_BENDS_K2[0], COLD_BENDS_K2[0])
    highest_k2 = np.where(colder, COLD_BENDS_K2[1], HOT_BENDS_K2[1])
    ends = (lowest_k2 - law.bend_k2) * term, (highest_k2 - law.bend_k2) * term
    return np.minimum(*ends), np.maximum(*ends)
