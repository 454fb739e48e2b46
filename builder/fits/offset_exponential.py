"""The equation R = a·exp(b/(t + c))."""

from __future__ import annotations

import math
from collections.abc import Mapping

import numpy as np

from builder.fits.equation import LARGEST_LN_R, Coefficients, Equation, Solver, ohm_from_ln
from builder.fits.least_squares import centred, minimum, solution
from builder.units import Array


class OffsetExponential(Equation):
    """R = a·exp(b/(t + c)) with t in °C; b and c are temperatures, c is 273.15 in the plain B-value law."""

    name = "offset-exponential"
    formula = "R = a · exp(b/(t + c))"
    free = 3

    @property
    def solvers(self) -> Mapping[str, Solver]:
        return {"kelvin": self.coefficients, "ohm": self.coefficients_by_ohm}

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
            a [Ω], b [K] and c [°C].

        Notes
        -----
        t = b/(ln R − ln a) − c is a hyperbola of ln R. Multiplied by its denominator it is linear in the
        parameters of the scaled hyperbola, which gives the start.
        """
        z, middle, half = centred(np.log(r_ohm))
        start = solution(np.column_stack([np.ones_like(z), z, -t_c * z]), t_c)
        best = minimum(lambda parameters: _hyperbola(parameters, z), start, t_c)
        level_c, b, shift = _unscaled(best, middle, half)
        return _named(-shift, b, -level_c)

    def coefficients_by_ohm(self, t_c: Array, r_ohm: Array, start: Coefficients | None = None) -> Coefficients:
        """Least squares in ohm.

        Parameters
        ----------
        t_c : array of shape (n,)
            Temperatures. [°C]
        r_ohm : array of shape (n,)
            Resistance at each. [Ω]
        start : dict, optional
            b [K] and c [°C] to begin with; left out, those of the least squares in kelvin.

        Returns
        -------
        dict
            a [Ω], b [K] and c [°C].

        Raises
        ------
        ValueError
            No minimum found.

        Notes
        -----
        ln R = ln a + b/(t + c) is a hyperbola of t. Its scaled parameters are stepped, never a, b and c, which
        hang together to six digits. With b and c given, the best ln a is a mean, so a needs no start.
        """
        z, middle, half = centred(t_c)

        def model(parameters: Array) -> tuple[Array, Array]:
            ln_r, slopes = _hyperbola(parameters, z)
            values = np.exp(np.minimum(ln_r, LARGEST_LN_R))
            return values, values[:, None] * slopes

        begin = start or self.coefficients(t_c, r_ohm)
        ln_a = float(np.mean(np.log(r_ohm) - begin["b"] / (t_c + begin["c"])))
        first = _scaled((ln_a, begin["b"], begin["c"]), middle, half)
        return _named(*_unscaled(minimum(model, first, r_ohm), middle, half))

    def temperature_c(self, coefficients: Coefficients, r_ohm: Array, about_ohm: float) -> Array:
        """Temperature at each resistance, NaN off the falling curve."""
        ln_a, b, side = self._branch(coefficients, about_ohm)
        above = np.log(np.where(r_ohm > 0, r_ohm, np.nan)) - ln_a
        return b / np.where(above * side > 0, above, np.nan) - coefficients["c"]

    def resistance_ohm(self, coefficients: Coefficients, t_c: Array, about_ohm: float) -> Array:
        """Resistance at each temperature, NaN off the falling curve."""
        ln_a, b, side = self._branch(coefficients, about_ohm)
        above = t_c + coefficients["c"]
        with np.errstate(over="ignore"):
            return np.asarray(np.exp(ln_a + b / np.where(above * side > 0, above, np.nan)))

    def _branch(self, coefficients: Coefficients, about_ohm: float) -> tuple[float, float, float]:
        """ln a, b and the side of the pole; NaN for a side if the curve does not fall."""
        ln_a, b = math.log(coefficients["a"]), coefficients["b"]
        return ln_a, b, math.copysign(1.0, math.log(about_ohm) - ln_a) if b > 0 else math.nan


def _named(ln_a: float, b: float, c: float) -> Coefficients:
    return {"a": ohm_from_ln(ln_a), "b": b, "c": c}


def _hyperbola(parameters: Array, z: Array) -> tuple[Array, Array]:
    """(u + v·z)/(1 + w·z) and its derivatives by u, v and w; NaN beyond the pole."""
    below = 1 + parameters[2] * z
    below = np.where(below > 0, below, np.nan)
    values = (parameters[0] + parameters[1] * z) / below
    return values, np.column_stack([np.ones_like(z), z, -values * z]) / below[:, None]


def _unscaled(parameters: Array, middle: float, half: float) -> tuple[float, float, float]:
    """(u + v·z)/(1 + w·z) with z = (x − middle)/half, as p + q/(x + r)."""
    u, v, w = parameters.tolist()
    return v / w, (u - v / w) * half / w, half / w - middle


def _scaled(hyperbola: tuple[float, float, float], middle: float, half: float) -> Array:
    """The way back from p + q/(x + r)."""
    p, q, r = hyperbola
    w = half / (middle + r)
    return np.array([p + q / (middle + r), p * w, w])
