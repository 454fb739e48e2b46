"""What every equation between resistance and temperature offers."""

from __future__ import annotations

import math
from abc import ABC, abstractmethod
from collections.abc import Callable, Mapping
from typing import ClassVar

from builder.units import Array

Coefficients = dict[str, float]
Solver = Callable[[Array, Array], Coefficients]

# exp() of it, and of its negative, can still be squared; resistances end long before.
LARGEST_LN_R = 350.0


def ohm_from_ln(ln_r: float) -> float:
    """A coefficient in ohm from its logarithm.

    Raises
    ------
    OverflowError
        No float can hold it well.
    """
    if not abs(ln_r) < LARGEST_LN_R:
        raise OverflowError(f"exp({ln_r}) is no resistance")
    return math.exp(ln_r)


class Equation(ABC):
    """One equation: its name, how it is written, and its arithmetic in both directions.

    Polynomials turn and hyperbolas have a pole, so one set of coefficients may describe several falling
    curves. `about_ohm`, a resistance well inside the wanted one, says which; off that curve the answer is NaN.
    """

    name: ClassVar[str]
    formula: ClassVar[str]
    """T is in kelvin, t in °C, R in ohm."""
    free: ClassVar[int]
    """How many numbers the least squares are free in."""

    @property
    @abstractmethod
    def solvers(self) -> Mapping[str, Solver]:
        """Least squares by the name of what they minimise; each takes temperatures in °C and ohms."""

    @abstractmethod
    def temperature_c(self, coefficients: Coefficients, r_ohm: Array, about_ohm: float) -> Array:
        """Temperature at each resistance, NaN off the falling curve."""

    @abstractmethod
    def resistance_ohm(self, coefficients: Coefficients, t_c: Array, about_ohm: float) -> Array:
        """Resistance at each temperature, NaN off the falling curve."""
