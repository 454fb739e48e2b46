"""The thermistor at a position: a part's curve and band, and the body that its own power warms."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.circuit.divider import Divider, Figure
from builder.part_curve import PartCurve, part_curve
from builder.records import PartRecord
from builder.units import Array

_ARRIVED_K = 1e-9
# A slope that is so little old costs a step of Newton's at most, and less than a new one.
_SLOPE_HOLDS_K = 0.5
_NEWTON_STEPS = 12
_BISECTIONS = 40


@dataclass(frozen=True, eq=False)
class Thermistor:
    """A part as its circuit knows it. Without a dissipation factor its body stays at the true temperature."""

    made: PartCurve
    dissipation_mw_per_k: float | None
    max_power_mw: float | None

    def resistance_ohm(self, body_c: Array, edge: Figure = 0.0) -> Array:
        """Zero-power resistance, nominal or at an edge of the tolerance band.

        Parameters
        ----------
        body_c : array
            Body temperature. [°C]
        edge : float or array
            −1 for the band's minimum, 0 for nominal, 1 for its maximum; no unit.

        Returns
        -------
        array, broadcast
            Resistance. [Ω]
        """
        edge = np.asarray(edge)
        if not edge.any():
            return self.made.curve.resistance_ohm(body_c)
        low_ohm, high_ohm = self.made.band.edges_ohm(body_c)
        edge_ohm = np.where(edge < 0, low_ohm, high_ohm)
        return edge_ohm if edge.all() else np.where(edge == 0, self.made.curve.resistance_ohm(body_c), edge_ohm)

    def warmed(self, t_c: Array, divider: Divider, edge: Figure = 0.0) -> tuple[Array, Array]:
        """Temperature of the body, warmed by its own power, and its resistance there.

        Parameters
        ----------
        t_c : array
            True temperature. [°C]
        divider : Divider
            What the thermistor stands in; no unit.
        edge : float or array
            As for `resistance_ohm`; no unit.

        Returns
        -------
        tuple of two arrays, broadcast
            The balance body − T = P(R(body))/δ, within 1e-9 K; of several the coolest, which a sensor that is
            switched on comes to first [°C], and R(body) [Ω].

        Notes
        -----
        Newton's method from T up, with the nominal curve's slope. What it leaves, such as a balance where the band has a
        step, is bisected between T and T + the largest power that the divider can give over δ.
        """
        r_ohm = self.resistance_ohm(t_c, edge)
        coldest_c = t_c + 0 * divider.thermistor_w(r_ohm)
        if self.dissipation_mw_per_k is None:
            return coldest_c, r_ohm
        seen_ohm = divider.seen_ohm
        hottest_c = coldest_c + self._warming_k(divider, np.asarray(seen_ohm))
        body_c, alpha_per_k = coldest_c, self.made.curve.alpha_pct_per_k(t_c) / 100
        for _ in range(_NEWTON_STEPS):
            warming_k = self._warming_k(divider, r_ohm)
            power_slope = (seen_ohm - r_ohm) / (seen_ohm + r_ohm)  # d ln P / d ln R
            slope = 1 - warming_k * power_slope * alpha_per_k
            step_k = (body_c - t_c - warming_k) / slope
            arrived = ~(np.abs(step_k) > _ARRIVED_K)
            if arrived.all():
                return body_c, r_ohm
            body_c = np.clip(body_c - step_k, coldest_c, hottest_c)
            r_ohm = self.resistance_ohm(body_c, edge)
            if np.any(np.abs(step_k) > _SLOPE_HOLDS_K):
                alpha_per_k = self.made.curve.alpha_pct_per_k(body_c) / 100
        left = ~arrived
        own_edge = np.broadcast_to(edge, left.shape)[left]
        body_c[left] = self._bisected_c(coldest_c[left], hottest_c[left], divider.at(left), own_edge)
        return body_c, self.resistance_ohm(body_c, edge)

    def _bisected_c(self, coldest_c: Array, hottest_c: Array, divider: Divider, edge: Figure) -> Array:
        low_c, high_c = coldest_c, hottest_c
        for _ in range(_BISECTIONS):
            middle_c = (low_c + high_c) / 2
            too_cold = middle_c - coldest_c < self._warming_k(divider, self.resistance_ohm(middle_c, edge))
            low_c, high_c = np.where(too_cold, middle_c, low_c), np.where(too_cold, high_c, middle_c)
        return (low_c + high_c) / 2

    def _warming_k(self, divider: Divider, r_ohm: Array) -> Array:
        assert self.dissipation_mw_per_k is not None
        return divider.thermistor_w(r_ohm) * 1e3 / self.dissipation_mw_per_k


def thermistor(record: PartRecord) -> Thermistor:
    """The thermistor that a part's record stands for."""
    limits = record.part.limits
    return Thermistor(part_curve(record), limits.dissipation_mw_per_k, limits.max_power_mw)
