"""A part's resistance over temperature and back, inside the span it is known for and beyond."""

from __future__ import annotations

from dataclasses import dataclass
from functools import partial
from typing import Literal

import numpy as np
import numpy.typing as npt

from builder.curves.b_value import b_value_k
from builder.curves.law import Law
from builder.units import Array, celsius, kelvin

Basis = Literal["table", "steinhart-hart", "b-values", "b-value"]
Mask = npt.NDArray[np.bool_]

# e to more than that, or to less than its negative, is beyond a float; a few kelvin above absolute zero gets there.
_LN_LARGEST = 700.0
# Coefficients that make no curve are for the cross-checks to tell; here they give no number, without a warning.
_quietly = partial(np.errstate, all="ignore")


@dataclass(frozen=True, eq=False)
class Curve:
    """Zero-power resistance of a part; immutable.

    `span_c` is where the law holds. Beyond it ln R goes on over 1/T with the slope of the span's end, unless
    `extends` is False: then there is no number (a Steinhart–Hart law with c ≤ 0 bends the wrong way).
    `fixed_c` are the temperatures whose resistance the record states, where the law is an estimate between and
    beyond them.
    """

    basis: Basis
    law: Law
    span_c: tuple[float, float]
    extends: bool = True
    fixed_c: tuple[float, ...] = ()

    def resistance_ohm(self, t_c: npt.ArrayLike) -> Array:
        """Zero-power resistance.

        Parameters
        ----------
        t_c : float or array
            Body temperature. [°C]

        Returns
        -------
        array, the shape of `t_c`
            Resistance, not a number where the curve does not reach. [Ω]
        """
        return self._where_known(t_c, self.extended_resistance_ohm(t_c))

    def temperature_c(self, r_ohm: npt.ArrayLike) -> Array:
        """Body temperature that belongs to a resistance: the inverse of `resistance_ohm` within 1e-6 K.

        Parameters
        ----------
        r_ohm : float or array
            Zero-power resistance. [Ω]

        Returns
        -------
        array, the shape of `r_ohm`
            Temperature, not a number where the curve does not reach. [°C]
        """
        t_c = self.extended_temperature_c(r_ohm)
        return self._where_known(t_c, t_c)

    @_quietly()
    def extended_resistance_ohm(self, t_c: npt.ArrayLike) -> Array:
        """As `resistance_ohm`, with the end's slope even where the curve is not to be extrapolated.

        A tolerance band's edges need it: a part at the limit of its tolerance lies a little beyond the nominal
        curve's end.

        Parameters
        ----------
        t_c : float or array
            Body temperature. [°C]

        Returns
        -------
        array, the shape of `t_c`
            Resistance, not a number where it is beyond e^±700. [Ω]
        """
        x = 1 / _above_zero_k(np.asarray(t_c, dtype=float))
        ends = np.array(self._span_per_k)
        inside = np.clip(x, *ends)
        ln_r = self.law.ln_resistance(inside)
        if np.any(x != inside):
            low_k, high_k = self.law.slope_k(ends)
            ln_r = ln_r + np.minimum(x - ends[0], 0) * low_k + np.maximum(x - ends[1], 0) * high_k
        return np.exp(np.where(np.abs(ln_r) < _LN_LARGEST, ln_r, np.nan))

    @_quietly()
    def extended_temperature_c(self, r_ohm: npt.ArrayLike) -> Array:
        """As `temperature_c`, with the end's slope even where the curve is not to be extrapolated.

        Parameters
        ----------
        r_ohm : float or array
            Zero-power resistance. [Ω]

        Returns
        -------
        array, the shape of `r_ohm`
            Temperature. [°C]
        """
        r_ohm = np.asarray(r_ohm, dtype=float)
        ends = np.array(self._span_per_k)
        y_low, y_high = self.law.ln_resistance(ends)
        ln_r = np.log(np.where((r_ohm > 0) & (r_ohm < np.inf), r_ohm, np.nan))
        inside = np.clip(ln_r, y_low, y_high)
        x = self.law.inverse_temperature(inside)
        if np.any(ln_r != inside):
            low_k, high_k = self.law.slope_k(ends)
            x = x + np.minimum(ln_r - y_low, 0) / low_k + np.maximum(ln_r - y_high, 0) / high_k
        return celsius(1 / np.where(x > 0, x, np.nan))

    @_quietly()
    def alpha_pct_per_k(self, t_c: npt.ArrayLike) -> Array:
        """Temperature coefficient (1/R)·dR/dT.

        Parameters
        ----------
        t_c : float or array
            Body temperature. [°C]

        Returns
        -------
        array, the shape of `t_c`
            Coefficient, negative; not a number where the resistance is none. [%/K]
        """
        x = 1 / _above_zero_k(np.asarray(t_c, dtype=float))
        alpha_pct_per_k = -100 * x**2 * self.law.slope_k(np.clip(x, *self._span_per_k))
        return np.where(np.isnan(self.resistance_ohm(t_c)), np.nan, alpha_pct_per_k)

    def b_value_k(self, t1_c: float, t2_c: float) -> float:
        """B-value between two temperatures.

        Parameters
        ----------
        t1_c, t2_c : float
            The pair. [°C]

        Returns
        -------
        float
            B(T1/T2). [K]
        """
        r1_ohm, r2_ohm = self.resistance_ohm([t1_c, t2_c])
        return float(b_value_k(r1_ohm, np.asarray(t1_c), r2_ohm, np.asarray(t2_c)))

    def extrapolated(self, t_c: npt.ArrayLike) -> Mask:
        """Where a temperature lies outside the span.

        Parameters
        ----------
        t_c : float or array
            Temperature. [°C]

        Returns
        -------
        array of bool, the shape of `t_c`
            True outside, by more than a rounding error of 1e-6 K, and where there is no temperature; no unit.
        """
        t_c = np.asarray(t_c, dtype=float)
        inside: Mask = (t_c >= self.span_c[0] - 1e-6) & (t_c <= self.span_c[1] + 1e-6)
        return ~inside

    @property
    def _span_per_k(self) -> tuple[float, float]:
        return 1 / kelvin(self.span_c[1]), 1 / kelvin(self.span_c[0])

    def _where_known(self, t_c: npt.ArrayLike, values: Array) -> Array:
        return values if self.extends else np.where(self.extrapolated(t_c), np.nan, values)


def _above_zero_k(t_c: Array) -> Array:
    t_k = kelvin(t_c)
    return np.where(t_k > 0, t_k, np.nan)
