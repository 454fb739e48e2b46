"""What an instrument made for one part reads with another one fitted."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt

from builder.curves.curve import Mask
from builder.part_curve import PartCurve, whole_steps_c
from builder.units import Array, range_text

DEFAULT_STEP_K = 5.0
# Bands of equal parts differ by rounding errors of this size.
_SAME_RATIO = 1e-9


class NoCommonRange(ValueError):
    """The operating ranges of two parts do not meet."""


@dataclass(frozen=True, eq=False)
class Comparison:
    """The other part read as if it were the reference, at some temperatures; arrays of one shape.

    `reads_k` is T_reference(R_other(T)) − T: positive where the instrument shows too much. `reads_min_k` and
    `reads_max_k` are the same for the other part at its highest and lowest resistance; `reference_min_k` and
    `reference_max_k` for the reference itself. There is no number where one of the two curves has none; a reading
    that lies beyond the end of the reference's curve follows its end slope and is marked.
    """

    reference: PartCurve
    other: PartCurve
    t_c: Array
    r_ref_ohm: Array
    r_ohm: Array
    reads_k: Array
    reads_min_k: Array
    reads_max_k: Array
    reference_min_k: Array
    reference_max_k: Array

    @cached_property
    def ratio_pct(self) -> Array:
        """Resistance above the reference's. [%]"""
        return (self.r_ohm / self.r_ref_ohm - 1) * 100

    @cached_property
    def known(self) -> Mask:
        """Where there is a reading."""
        known: Mask = np.isfinite(self.reads_k)
        return known

    @cached_property
    def reference_extrapolated(self) -> Mask:
        """Where the reference's curve is used beyond its span, at the true temperature or at the reading."""
        curve = self.reference.curve
        return curve.extrapolated(self.t_c) | curve.extrapolated(self.t_c + self.reads_k)

    @cached_property
    def other_extrapolated(self) -> Mask:
        """Where the other part's curve is used beyond its span."""
        return self.other.curve.extrapolated(self.t_c)

    @property
    def worst_k(self) -> float:
        """The nominal reading farthest from the truth, with its sign; not a number if there is none. [K]"""
        return float(self.reads_k[self._worst]) if self.known.any() else np.nan

    @property
    def worst_at_c(self) -> float:
        """Where that is. [°C]"""
        return float(self.t_c[self._worst]) if self.known.any() else np.nan

    @property
    def worst_with_tolerance_k(self) -> float:
        """Largest distance from the truth, either way, of any part within the other's tolerance. [K]"""
        ends_k = np.abs([self.reads_min_k, self.reads_max_k])
        return float(np.nanmax(ends_k)) if np.isfinite(ends_k).any() else np.nan

    @property
    def within_reference_band(self) -> bool:
        """Whether no part within the other's tolerance lies outside the reference's, at any temperature.

        A band that lacks a tolerance is narrower than the truth, so nothing is claimed of it.
        """
        (ref_low, ref_high), (low, high) = self._bands_ohm
        inside = (low >= ref_low * (1 - _SAME_RATIO)) & (high <= ref_high * (1 + _SAME_RATIO))
        return bool(self.known.any() and inside[self.known].all()) and not self.tolerance_incomplete

    @property
    def bands_overlap(self) -> bool:
        """Whether at every temperature some part within one tolerance is within the other."""
        (ref_low, ref_high), (low, high) = self._bands_ohm
        overlap = (low <= ref_high * (1 + _SAME_RATIO)) & (high >= ref_low * (1 - _SAME_RATIO))
        return bool(self.known.any() and overlap[self.known].all())

    @cached_property
    def tolerance_incomplete(self) -> bool:
        """Whether the other part's record lacks a tolerance somewhere, so that its band is too narrow."""
        return bool(self.other.band.incomplete(self.t_c).any())

    @cached_property
    def _worst(self) -> int:
        return int(np.nanargmax(np.abs(self.reads_k)))

    @cached_property
    def _bands_ohm(self) -> tuple[tuple[Array, Array], tuple[Array, Array]]:
        return self.reference.band.edges_ohm(self.t_c), self.other.band.edges_ohm(self.t_c)


def compared(reference: PartCurve, other: PartCurve, t_c: npt.ArrayLike | None = None) -> Comparison:
    """One part against the one that the instrument was made for.

    Parameters
    ----------
    reference : PartCurve
        The part whose curve the firmware has; no unit.
    other : PartCurve
        The part fitted instead; no unit.
    t_c : array of shape (n,), optional
        True temperatures; without them whole steps of 5 K, and both ends, of the range that both parts are made
        for. [°C]

    Returns
    -------
    Comparison
        Readings at those temperatures, nominal and with tolerance.

    Raises
    ------
    NoCommonRange
        No temperatures are given, and the operating ranges do not meet.
    """
    if t_c is None:
        t_c = whole_steps_c(common_range_c(reference, other), DEFAULT_STEP_K)
    t_c = np.asarray(t_c, dtype=float)
    r_ref_ohm, r_ohm = reference.curve.resistance_ohm(t_c), other.curve.resistance_ohm(t_c)
    low_ohm, high_ohm = other.band.edges_ohm(t_c)
    shown_c = reference.curve.extended_temperature_c(np.stack([r_ohm, high_ohm, low_ohm]))
    reads_k, reads_min_k, reads_max_k = np.where(np.isfinite(r_ref_ohm + r_ohm), shown_c - t_c, np.nan)
    own_min_k, own_max_k = reference.band.reads_k(t_c)
    return Comparison(reference, other, t_c, r_ref_ohm, r_ohm, reads_k, reads_min_k, reads_max_k, own_min_k, own_max_k)


def common_range_c(*parts: PartCurve) -> tuple[float, float]:
    """The temperatures that all of some parts are made for.

    Parameters
    ----------
    *parts : PartCurve
        One part or more; no unit.

    Returns
    -------
    tuple of two floats
        The overlap of their operating ranges. [°C]

    Raises
    ------
    NoCommonRange
        There is none.
    """
    low = max(part.operating_c[0] for part in parts)
    high = min(part.operating_c[1] for part in parts)
    if low > high:
        ranges = " and ".join(dict.fromkeys(range_text(part.operating_c) for part in parts))
        raise NoCommonRange(f"the operating ranges do not meet: {ranges}. Give the temperatures to compare at.")
    return low, high
