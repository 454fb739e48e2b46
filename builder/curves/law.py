"""What every resistance law offers: ln R over x = 1/T, its slope, and its inverse."""

from __future__ import annotations

from typing import Protocol

from builder.units import Array


class Law(Protocol):
    """ln R as a function of x = 1/T, rising in x. Arrays in, arrays of the same shape out; no bounds."""

    def ln_resistance(self, x_per_k: Array) -> Array:
        """ln R, R in ohm, at x = 1/T."""

    def slope_k(self, x_per_k: Array) -> Array:
        """d ln R / dx in kelvin: the local B-value."""

    def inverse_temperature(self, ln_r: Array) -> Array:
        """x = 1/T at which ln R is reached."""
