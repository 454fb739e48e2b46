"""The fit of an equation to points."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from builder.fits.equation import Coefficients, Equation
from builder.fits.inverse_cubic import BValue, FourTerm, SteinhartHart
from builder.fits.offset_exponential import OffsetExponential
from builder.units import ABSOLUTE_ZERO_C, Array, number_text, range_text, temperature_text

EQUATIONS: dict[str, Equation] = {
    equation.name: equation for equation in (BValue(), SteinhartHart(), FourTerm(), OffsetExponential())
}


@dataclass(frozen=True)
class Fit:
    """A fitted equation; it falls all the way between the smallest and the largest resistance of its points."""

    equation: str
    coefficients: Coefficients
    worst_k: float
    """Largest error at the points, as a magnitude."""
    at_c: float
    """Where it is."""
    span_c: tuple[float, float]
    span_ohm: tuple[float, float]
    residuals_k: Array
    """Fitted minus given temperature at each point."""

    def temperature_c(self, r_ohm: npt.ArrayLike) -> Array:
        """Temperature that the equation gives.

        Parameters
        ----------
        r_ohm : float or array
            Resistances. [Ω]

        Returns
        -------
        array, the shape of `r_ohm`
            Temperatures; NaN where the equation has left its falling curve. [°C]
        """
        return self._evaluator.temperature_c(self.coefficients, _array(r_ohm), self._about_ohm)

    def resistance_ohm(self, t_c: npt.ArrayLike) -> Array:
        """Resistance that the equation gives.

        Parameters
        ----------
        t_c : float or array
            Temperatures. [°C]

        Returns
        -------
        array, the shape of `t_c`
            Resistances; NaN where the equation has left its falling curve. [Ω]
        """
        return self._evaluator.resistance_ohm(self.coefficients, _array(t_c), self._about_ohm)

    @property
    def _evaluator(self) -> Equation:
        return EQUATIONS[self.equation]

    @property
    def _about_ohm(self) -> float:
        return _about_ohm(self.span_ohm)


def fit(
    equation: str | Equation,
    t_c: npt.ArrayLike,
    r_ohm: npt.ArrayLike,
    *,
    minimise: str = "kelvin",
    between_c: tuple[float, float] | None = None,
) -> Fit:
    """Least-squares fit of an equation to points of resistance over temperature.

    Parameters
    ----------
    equation : str or Equation
        One of the names in `EQUATIONS`, or an equation, such as ``BValue(reference_c=0)``; no unit.
    t_c : array of shape (n,)
        Temperatures. [°C]
    r_ohm : array of shape (n,)
        Resistance at each. [Ω]
    minimise : str
        ``kelvin`` for the sum of squared errors of temperature; ``ohm``, which offset-exponential offers too,
        for that of resistance; no unit.
    between_c : tuple of two floats, optional
        Points outside this range are left out. [°C]

    Returns
    -------
    Fit
        Coefficients, and the errors they leave at the points. [K]

    Raises
    ------
    ValueError
        An unknown name, points that no such equation can have or that are too few, no points in the range, or
        a fitted curve that does not fall all the way.

    Examples
    --------
    >>> fitted = fit("b-value", [0, 25, 50], [32650, 10000, 3602])
    >>> round(fitted.coefficients["b_k"]), round(fitted.worst_k, 2), fitted.at_c
    (3895, 0.17, 25.0)
    """
    chosen = _equation(equation)
    if minimise not in chosen.solvers:
        raise ValueError(f"{chosen.name} is fitted in {' or '.join(chosen.solvers)}, not in {minimise}")
    t_c, r_ohm = _within(between_c, *_points(_array(t_c), _array(r_ohm)))
    different = min(len(np.unique(t_c)), len(np.unique(r_ohm)))
    if different < chosen.free:
        raise ValueError(f"{chosen.name} needs {chosen.free} different points or more, not {different}")
    try:
        coefficients = chosen.solvers[minimise](t_c, r_ohm)
    except ArithmeticError:
        raise ValueError(f"{chosen.name}: these points lead to no finite coefficients") from None
    return _checked(chosen, coefficients, t_c, r_ohm)


def _checked(equation: Equation, coefficients: Coefficients, t_c: Array, r_ohm: Array) -> Fit:
    """The fit with its errors, which are NaN where the curve has turned."""
    span_c, span_ohm = _span(t_c), _span(r_ohm)
    residuals_k = equation.temperature_c(coefficients, r_ohm, _about_ohm(span_ohm)) - t_c
    if not np.isfinite(residuals_k).all():
        raise ValueError(f"{equation.name}: the fitted resistance does not fall all the way over {range_text(span_c)}")
    worst = int(np.argmax(np.abs(residuals_k)))
    return Fit(
        equation.name, coefficients, float(abs(residuals_k[worst])), float(t_c[worst]), span_c, span_ohm, residuals_k
    )


def _equation(equation: str | Equation) -> Equation:
    if isinstance(equation, Equation):
        return equation
    if equation not in EQUATIONS:
        raise ValueError(f"{equation} is no equation here; there are {', '.join(EQUATIONS)}")
    return EQUATIONS[equation]


def _points(t_c: Array, r_ohm: Array) -> tuple[Array, Array]:
    """The points, if a thermistor can have them."""
    if t_c.shape != r_ohm.shape or t_c.ndim != 1:
        raise ValueError(f"{t_c.size} temperatures and {r_ohm.size} resistances do not make points")
    possible = (t_c > ABSOLUTE_ZERO_C) & (t_c < math.inf) & (r_ohm > 0) & (r_ohm < math.inf)
    if not possible.all():
        first = int(np.argmin(possible))
        raise ValueError(f"{number_text(r_ohm[first])} Ω at {temperature_text(t_c[first])} is no point of a thermistor")
    return t_c, r_ohm


def _within(between_c: tuple[float, float] | None, t_c: Array, r_ohm: Array) -> tuple[Array, Array]:
    """The points inside a range."""
    if between_c is None:
        return t_c, r_ohm
    inside = (between_c[0] <= t_c) & (t_c <= between_c[1])
    if not inside.any():
        raise ValueError(f"there are no points in {range_text(between_c)}")
    return t_c[inside], r_ohm[inside]


def _span(values: Array) -> tuple[float, float]:
    return float(values.min()), float(values.max())


def _about_ohm(span_ohm: tuple[float, float]) -> float:
    """The middle of a range of resistances, on a logarithmic scale."""
    return math.sqrt(span_ohm[0]) * math.sqrt(span_ohm[1])


def _array(values: npt.ArrayLike) -> Array:
    return np.asarray(values, dtype=np.float64)
