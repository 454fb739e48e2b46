"""Equations that give 1/T as a sum of powers of ln R: B-value, Steinhart–Hart and four terms."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import ClassVar

import numpy as np

from builder.fits.equation import LARGEST_LN_R, Coefficients, Equation, Solver, ohm_from_ln
from builder.fits.least_squares import centred, minimum, solution
from builder.units import Array, celsius, kelvin

_STEPS = 100


class InverseCubic(Equation):
    """1/T = Σ p_k·(ln R)^k over some of the powers 0 to 3, T in kelvin, R in ohm."""

    powers: ClassVar[tuple[int, ...]]
    names: ClassVar[tuple[str, ...]]

    @property
    def solvers(self) -> Mapping[str, Solver]:
        return {"kelvin": self.coefficients}

    def coefficients(self, t_c: Array, r_ohm: Array) -> Coefficients:
        """Least squares in kelvin.

        Parameters
        ----------
        t_c : array of shape (n,)
            Temperatures. [°C]
        r_ohm : array of shape (n,)
            Resistance at each. [Ω]

        Returns
        -------
        dict
            Coefficients by name; R in ohm, T in kelvin.

        Notes
        -----
        Solved in z, which is ln R brought to −1…1. The wanted powers of ln R, written out in powers of z, are
        the columns of a small matrix; the orthogonal factor of it is a basis of the same curves that stays well
        conditioned on any range, its triangular factor leads back. The start is the solution of the problem
        linearised at the points themselves, where dT = −T²·d(1/T).
        """
        t_k = kelvin(t_c)
        z, middle, half = centred(np.log(r_ohm))
        basis, back = np.linalg.qr(np.column_stack([_in_z(power, middle, half) for power in self.powers]))
        columns = np.vander(z, 4, increasing=True) @ basis

        def model(parameters: Array) -> tuple[Array, Array]:
            inverse = columns @ parameters
            values = 1 / np.where(inverse > 0, inverse, np.nan)
            return values, -(values**2)[:, None] * columns

        start = solution((t_k**2)[:, None] * columns, t_k)
        return self._named(np.linalg.solve(back, minimum(model, start, t_k)))

    def temperature_c(self, coefficients: Coefficients, r_ohm: Array, about_ohm: float) -> Array:
        """Temperature at each resistance, NaN off the falling curve."""
        cubic = self._cubic(coefficients)
        low, high = _rising_branch(cubic, math.log(about_ohm))
        ln_r = np.log(np.where(r_ohm > 0, r_ohm, np.nan))
        inverse = _values(cubic, ln_r)
        return celsius(1 / np.where((low < ln_r) & (ln_r < high) & (inverse > 0), inverse, np.nan))

    def resistance_ohm(self, coefficients: Coefficients, t_c: Array, about_ohm: float) -> Array:
        """Resistance at each temperature, NaN off the falling curve."""
        cubic = self._cubic(coefficients)
        t_k = kelvin(t_c)
        inverse = 1 / np.where(t_k > 0, t_k, np.nan)
        return np.asarray(np.exp(_rising_root(cubic, inverse, math.log(about_ohm))))

    def _named(self, parameters: Array) -> Coefficients:
        return dict(zip(self.names, parameters.tolist(), strict=True))

    def _cubic(self, coefficients: Coefficients) -> Array:
        """Factors of the powers 0 to 3 of ln R."""
        cubic = np.zeros(4)
        cubic[list(self.powers)] = [coefficients[name] for name in self.names]
        return cubic


@dataclass(frozen=True)
class BValue(InverseCubic):
    """Resistance at a reference temperature and B-value, both free; the reference may lie outside the points."""

    name = "b-value"
    formula = "R = resistance_ohm · exp(b_k · (1/T − 1/(at_c + 273.15)))"
    free = 2
    powers = (0, 1)
    reference_c: float = 25.0

    def _named(self, parameters: Array) -> Coefficients:
        intercept, slope = parameters.tolist()
        resistance_ohm = ohm_from_ln((1 / kelvin(self.reference_c) - intercept) / slope)
        return {"resistance_ohm": resistance_ohm, "at_c": self.reference_c, "b_k": 1 / slope}

    def _cubic(self, coefficients: Coefficients) -> Array:
        slope = 1 / coefficients["b_k"]
        intercept = 1 / kelvin(coefficients["at_c"]) - slope * math.log(coefficients["resistance_ohm"])
        return np.array([intercept, slope, 0.0, 0.0])


class SteinhartHart(InverseCubic):
    """Steinhart and Hart's equation with three terms (Deep-Sea Research 15, 1968, 497–503)."""

    name = "steinhart-hart"
    formula = "1/T = a + b·ln R + c·(ln R)³"
    free = 3
    powers = (0, 1, 3)
    names = ("a", "b", "c")


class FourTerm(InverseCubic):
    """The full cubic, so that c is the factor of the square and d that of the cube."""

    name = "four-term"
    formula = "1/T = a + b·ln R + c·(ln R)² + d·(ln R)³"
    free = 4
    powers = (0, 1, 2, 3)
    names = ("a", "b", "c", "d")


def _in_z(power: int, middle: float, half: float) -> list[float]:
    """Factors of the powers 0 to 3 of z in (middle + half·z)^power."""
    return [math.comb(power, k) * middle ** max(power - k, 0) * half**k for k in range(4)]


def _values(cubic: Array, ln_r: Array) -> Array:
    return np.asarray(((cubic[3] * ln_r + cubic[2]) * ln_r + cubic[1]) * ln_r + cubic[0])


def _slopes(cubic: Array, ln_r: Array) -> Array:
    return np.asarray((3 * cubic[3] * ln_r + 2 * cubic[2]) * ln_r + cubic[1])


def _rising_branch(cubic: Array, about: float) -> tuple[float, float]:
    """Where 1/T rises with ln R around a place; NaN if it falls there."""
    if not _slopes(cubic, np.array(about)) > 0:
        return math.nan, math.nan
    ends = (-LARGEST_LN_R, *_turns(cubic), LARGEST_LN_R)
    return max(end for end in ends if end < about), min(end for end in ends if end > about)


def _turns(cubic: Array) -> tuple[float, ...]:
    """Where the slope is zero, by the form of the quadratic's roots that does not cancel."""
    b, c, d = cubic[1:].tolist()
    discriminant = c * c - 3 * b * d
    if discriminant <= 0:
        return ()
    larger = -c - math.copysign(math.sqrt(discriminant), c)
    return (b / larger, larger / (3 * d)) if d else (b / larger,)


def _rising_root(cubic: Array, inverse: Array, about: float) -> Array:
    """The ln R that gives each 1/T on the branch around a place: Newton, with bisection where it would leave."""
    ends = _rising_branch(cubic, about)
    low, high = np.full_like(inverse, ends[0]), np.full_like(inverse, ends[1])
    reached = (_values(cubic, low) < inverse) & (inverse < _values(cubic, high))
    ln_r = np.where(reached, about, np.nan)
    for _ in range(_STEPS):
        excess = _values(cubic, ln_r) - inverse
        low, high = np.where(excess < 0, ln_r, low), np.where(excess > 0, ln_r, high)
        newton = ln_r - excess / _slopes(cubic, ln_r)
        previous, ln_r = ln_r, np.where((low <= newton) & (newton <= high), newton, (low + high) / 2)
        ln_r = np.where(reached, ln_r, np.nan)
        # Newton squares its error at each step: after a step of 1e-9 nothing is left to gain.
        if np.max(np.abs(ln_r - previous), where=reached, initial=0.0) < 1e-9:
            break
    return ln_r
