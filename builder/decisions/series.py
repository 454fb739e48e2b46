"""The resistor values of IEC 60063, preferred number series E24 and E96."""

from __future__ import annotations

from functools import cache
from typing import Literal

import numpy as np

from builder.units import Array

Series = Literal["E24", "E96"]

# E24 is older than its formula: 27 to 47 and 82 are not what rounding gives. E96 is, and three digits of it.
_E24 = (10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91)
_E96 = tuple(round(100 * 10 ** (i / 96)) for i in range(96))
_VALUES: dict[Series, tuple[int, ...]] = {"E24": _E24, "E96": _E96}
_DECADES = range(-6, 12)


def series_ohm(name: Series, low_ohm: float, high_ohm: float) -> Array:
    """The values of a series between two resistances, both included.

    Parameters
    ----------
    name : str
        `E24` or `E96`; no unit.
    low_ohm, high_ohm : float
        The ends. [Ω]

    Returns
    -------
    array of shape (n,)
        Rising resistances. [Ω]

    Examples
    --------
    >>> series_ohm("E24", 4.7e3, 10e3).tolist()
    [4700.0, 5100.0, 5600.0, 6200.0, 6800.0, 7500.0, 8200.0, 9100.0, 10000.0]
    """
    every_ohm = _every_ohm(name)
    return every_ohm[(every_ohm >= low_ohm) & (every_ohm <= high_ohm)]


@cache
def _every_ohm(name: Series) -> Array:
    # Read as text, so that 10.2 Ω is 10.2 and not 102 times a tenth.
    return np.array([float(f"{value}e{decade}") for decade in _DECADES for value in _VALUES[name]])
