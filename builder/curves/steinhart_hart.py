"""The Steinhart–Hart law, from stated coefficients or through points."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.units import Array, kelvin


@dataclass(frozen=True)
class SteinhartHartLaw:
    """1/T = a + b·y + c·y³ with y = ln(R/unit), R in ohm, T in kelvin; makers state the coefficients for 1 Ω."""

    a: float
    b: float
    c: float
    unit_ohm: float = 1.0

    def inverse_temperature(self, ln_r: Array) -> Array:
        """x = 1/T at which ln R is reached: the law itself."""
        y = ln_r - np.log(self.unit_ohm)
        x_per_k: Array = self.a + y * (self.b + self.c * y * y)
        return x_per_k

    def ln_resistance(self, x_per_k: Array) -> Array:
        """ln R, R in ohm, at x = 1/T; not a number where b ≤ 0, or where c < 0 and the law has turned back."""
        ln_r: Array = self._root(x_per_k) + np.log(self.unit_ohm)
        return ln_r

    def slope_k(self, x_per_k: Array) -> Array:
        """d ln R / dx in kelvin."""
        y = self._root(x_per_k)
        slope_k: Array = 1 / (self.b + 3 * self.c * y * y)
        return slope_k

    def _root(self, x_per_k: Array) -> Array:
        if self.b <= 0:
            return np.full(np.shape(x_per_k), np.nan)
        if self.c == 0:
            linear: Array = (x_per_k - self.a) / self.b
            return linear
        # The cubic's root between its turning points, or its only one, by the triple-angle formula: Cardano's form
        # loses digits near y = 0. With y = 2·h·sinh u, or sin u, the law reads x − a = ⅔·b·h·sinh 3u, or sin 3u.
        h = np.sqrt(self.b) / np.sqrt(3 * abs(self.c))
        triple = (x_per_k - self.a) / (2 / 3 * self.b * h)
        if self.c > 0:
            third = np.sinh(np.arcsinh(triple) / 3)
        else:
            third = np.sin(np.arcsin(np.where(np.abs(triple) <= 1, triple, np.nan)) / 3)
        root: Array = 2 * h * third
        return root


def through_points(t_c: Array, r_ohm: Array, unit_ohm: float = 1.0) -> SteinhartHartLaw:
    """The law through three points, or nearest to more.

    Parameters
    ----------
    t_c : array of shape (n,)
        Temperatures, three or more. [°C]
    r_ohm : array of shape (n,)
        Zero-power resistances. [Ω]
    unit_ohm : float
        What the law takes the logarithm of R over. [Ω]

    Returns
    -------
    SteinhartHartLaw
        Exact for three points; least squares in kelvin for more.

    Raises
    ------
    ValueError
        Fewer than three points.

    Notes
    -----
    The law is linear in its coefficients. A residual of 1/T times T² is a residual in kelvin.

    Examples
    --------
    >>> law = through_points(np.array([0.0, 50.0, 100.0]), np.array([32650.0, 3602.0, 678.6]))
    >>> f"{law.a:.4e} {law.b:.4e} {law.c:.4e}"
    '1.1294e-03 2.3407e-04 8.8025e-08'
    """
    if len(t_c) < 3:
        raise ValueError("Steinhart–Hart coefficients need three points")
    t_k, y = kelvin(t_c), np.log(r_ohm / unit_ohm)
    terms = np.stack([np.ones_like(y), y, y**3], axis=1)
    if len(t_c) == 3:
        a, b, c = np.linalg.solve(terms, 1 / t_k).tolist()
        return SteinhartHartLaw(a, b, c, unit_ohm)
    weight_k2 = t_k**2
    scale = np.abs(terms).max(axis=0)
    solution = np.linalg.lstsq(terms / scale * weight_k2[:, None], weight_k2 / t_k, rcond=None)[0]
    a, b, c = (solution / scale).tolist()
    return SteinhartHartLaw(a, b, c, unit_ohm)
