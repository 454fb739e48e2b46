"""Shape-preserving monotone cubic through the points of a table."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from builder.units import Array

Indices = npt.NDArray[np.intp]

# From the chord, Newton's error on a table's nearly straight pieces is 1e-7 of the step, then nothing.
_NEWTON_STEPS = 3
_BISECTIONS = 55


@dataclass(frozen=True, eq=False)
class MonotoneCubic:
    """y over x through points that rise in both, by cubics that rise too.

    `x`, `y` and `slope` (dy/dx at the points) have shape (n,); `bend` and `twist`, the coefficients of each piece's
    square and cube, shape (n − 1,). Arguments are taken to the nearest end of the points.
    """

    x: Array
    y: Array
    slope: Array
    bend: Array
    twist: Array

    def ln_resistance(self, x_per_k: Array) -> Array:
        """ln R, R in ohm, at x = 1/T."""
        i, dx = self._place(x_per_k)
        return self.y[i] + dx * (self.slope[i] + dx * (self.bend[i] + dx * self.twist[i]))

    def slope_k(self, x_per_k: Array) -> Array:
        """d ln R / dx in kelvin."""
        i, dx = self._place(x_per_k)
        return self.slope[i] + dx * (2 * self.bend[i] + dx * 3 * self.twist[i])

    def inverse_temperature(self, ln_r: Array) -> Array:
        """x = 1/T at which ln R is reached: Newton's method from the chord, bisection for what it leaves."""
        y = np.clip(ln_r, self.y[0], self.y[-1])
        i = _piece(self.y, y)
        width, rise = (self.x[1:] - self.x[:-1])[i], y - self.y[i]
        slope, bend, twist = self.slope[i], self.bend[i], self.twist[i]
        dx = rise * ((self.x[1:] - self.x[:-1]) / (self.y[1:] - self.y[:-1]))[i]
        with np.errstate(divide="ignore", invalid="ignore"):
            for _ in range(_NEWTON_STEPS):
                miss = dx * (slope + dx * (bend + dx * twist)) - rise
                step = miss / (slope + dx * (2 * bend + dx * 3 * twist))
                dx = dx - step
            arrived = (np.abs(step) <= 1e-9 * width) & (dx >= -1e-9 * width) & (dx <= (1 + 1e-9) * width)
        if not arrived.all():
            dx, left = np.asarray(dx), ~arrived  # a scalar takes no mask
            dx[left] = _bisected(slope[left], bend[left], twist[left], rise[left], width[left])
        return self.x[i] + dx

    def _place(self, x_per_k: Array) -> tuple[Indices, Array]:
        x = np.clip(x_per_k, self.x[0], self.x[-1])
        i = _piece(self.x, x)
        return i, x - self.x[i]


def monotone_cubic(x: Array, y: Array) -> MonotoneCubic:
    """The cubic through points that rise in x and y.

    Parameters
    ----------
    x : array of shape (n,)
        Two points or more, rising; 1/T for a table. [1/K]
    y : array of shape (n,)
        Values, rising; ln R for a table. [no unit]

    Returns
    -------
    MonotoneCubic
        Rising everywhere; through every point.

    Raises
    ------
    ValueError
        Points that do not rise.

    Notes
    -----
    Slopes are the weighted harmonic means of Fritsch and Butland, SIAM J. Sci. Stat. Comput. 5 (1984) 300, at the
    ends the three-point formula, held above a tenth of the chord: a flat end could not be extrapolated.

    Examples
    --------
    >>> cubic = monotone_cubic(np.array([0.0, 1.0, 2.0]), np.array([0.0, 1.0, 3.0]))
    >>> cubic.ln_resistance(np.array([0.5, 2.0])).round(4).tolist()
    [0.3958, 3.0]
    """
    width, rise = np.diff(x), np.diff(y)
    if not ((width > 0).all() and (rise > 0).all()):
        raise ValueError("the points of a monotone cubic must rise")
    chord = rise / width
    slope = _slopes(width, chord)
    bend = (3 * chord - 2 * slope[:-1] - slope[1:]) / width
    twist = (slope[:-1] + slope[1:] - 2 * chord) / width**2
    held = [np.array(values, dtype=float) for values in (x, y, slope, bend, twist)]
    for values in held:
        values.flags.writeable = False
    return MonotoneCubic(*held)


def _slopes(width: Array, chord: Array) -> Array:
    if len(width) == 1:
        return np.repeat(chord, 2)
    before, after = width[:-1], width[1:]
    weight_before, weight_after = 2 * after + before, after + 2 * before
    inner = (weight_before + weight_after) / (weight_before / chord[:-1] + weight_after / chord[1:])
    first = _end_slope(width[0], width[1], chord[0], chord[1])
    last = _end_slope(width[-1], width[-2], chord[-1], chord[-2])
    return np.concatenate([[first], inner, [last]])


def _end_slope(width: float, next_width: float, chord: float, next_chord: float) -> float:
    slope = ((2 * width + next_width) * chord - width * next_chord) / (width + next_width)
    return max(slope, 0.1 * chord)


def _piece(points: Array, at: Array) -> Indices:
    return np.clip(np.searchsorted(points, at, side="right") - 1, 0, len(points) - 2)


def _bisected(slope: Array, bend: Array, twist: Array, rise: Array, width: Array) -> Array:
    low, high = np.zeros_like(width), width.copy()
    for _ in range(_BISECTIONS):
        middle = (low + high) / 2
        above = middle * (slope + middle * (bend + middle * twist)) > rise
        low, high = np.where(above, low, middle), np.where(above, middle, high)
    return (low + high) / 2
