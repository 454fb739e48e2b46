"""Coefficients as text, with no more digits than they need."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np

from builder.fits.fitting import Fit

# The cost of rounding is a smooth curve with a few bends; so many places catch its peak to one in ten thousand.
_PLACES = 257
# Seventeen digits hold every double exactly.
_MOST_DIGITS = 17
_LIMIT_MK = 1.0

Digits = tuple[int, ...]


@dataclass(frozen=True)
class PrintedCoefficients:
    """Coefficients as text, and the most that rounding them moves a temperature over the span of resistances."""

    texts: dict[str, str]
    cost_mk: float


def printed_coefficients(fit: Fit) -> PrintedCoefficients:
    """Coefficients rounded, all at once, as far as it costs less than 1 mK anywhere over the span of the fit.

    Parameters
    ----------
    fit : Fit
        A fitted equation; no unit.

    Returns
    -------
    PrintedCoefficients
        Texts that C, JSON and YAML read as numbers, and what they cost. [mK]

    Notes
    -----
    The cost is the difference of the temperatures of the exact and the rounded equation, both evaluated. From
    the smallest number of digits that does for all coefficients, digits are dropped one by one where that costs
    least, until every further one would cost too much.

    Examples
    --------
    >>> from builder.fits import fit
    >>> printed = printed_coefficients(fit("steinhart-hart", [0, 50, 100], [32650, 3602, 678.6]))
    >>> printed.texts
    {'a': '0.00112937', 'b': '0.000234066', 'c': '8.803e-08'}
    """
    cost_mk = _rounding_cost(fit)
    common = ((count,) * len(fit.coefficients) for count in range(1, _MOST_DIGITS + 1))
    digits = next(candidate for candidate in common if cost_mk(candidate) < _LIMIT_MK)
    while costs := {cost: fewer for fewer in _one_digit_less(digits) if (cost := cost_mk(fewer)) < _LIMIT_MK}:
        digits = costs[min(costs)]
    return PrintedCoefficients(_texts(fit, digits), cost_mk(digits))


def _rounding_cost(fit: Fit) -> Callable[[Digits], float]:
    """What so many digits for each coefficient cost in mK; NaN if the rounded curve turns."""
    r_ohm = np.geomspace(*fit.span_ohm, _PLACES)
    exact_c = fit.temperature_c(r_ohm)

    def cost_mk(digits: Digits) -> float:
        rounded = {name: float(text) for name, text in _texts(fit, digits).items()}
        return float(np.max(np.abs(replace(fit, coefficients=rounded).temperature_c(r_ohm) - exact_c))) * 1e3

    return cost_mk


def _texts(fit: Fit, digits: Digits) -> dict[str, str]:
    pairs = zip(fit.coefficients.items(), digits, strict=True)
    return {name: f"{value:.{count}g}" for (name, value), count in pairs}


def _one_digit_less(digits: Digits) -> list[Digits]:
    return [(*digits[:place], count - 1, *digits[place + 1 :]) for place, count in enumerate(digits) if count > 1]
