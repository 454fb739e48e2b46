"""The curve and tolerance band that a part's record stands for."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, fields

import numpy as np
import numpy.typing as npt

from builder.curves import (
    AccuracyRange,
    Band,
    Basis,
    BentExponential,
    BTolerance,
    Curve,
    SteinhartHartLaw,
    monotone_cubic,
    through_points,
)
from builder.curves.b_value import TYPICAL_BEND_K2
from builder.curves.curve import Mask
from builder.records import Part, PartRecord
from builder.records.part import BValue, SteinhartHart
from builder.records.table import TableData
from builder.units import Array, kelvin

# Where a record states no operating range: what most thermistors on boards are made for (common practice, no source).
USUAL_RANGE_C = (-40.0, 125.0)
# More than rounding leaves of a Steinhart–Hart c where all B-values are equal, and too little to bend a curve by 1 mK.
_NO_BEND_PER_K = 1e-12
# The Steinhart–Hart law's bend is 6·c·ln R: near 1 Ω it has none, and through a 100 Ω part's three points it is 2 K
# off at −40 °C, where one of 10 kΩ is 0.9 K off (fourteen public tables). So low resistances are taken in a smaller unit.
_LOW_OHM, _PROVEN_OHM = 500.0, 10e3


@dataclass(frozen=True, eq=False)
class Sample:
    """A curve at some temperatures; arrays of one shape. `reads_*_k` is the band in kelvin."""

    t_c: Array
    r_ohm: Array
    r_min_ohm: Array
    r_max_ohm: Array
    alpha_pct_per_k: Array
    reads_min_k: Array
    reads_max_k: Array
    extrapolated: Mask

    def at(self, places: Mask) -> Sample:
        """The sample at some of its temperatures only."""
        return Sample(*(getattr(self, column.name)[places] for column in fields(self)))


@dataclass(frozen=True, eq=False)
class PartCurve:
    """A part's nominal curve, its band, and the range that the part is made for."""

    curve: Curve
    band: Band
    operating_c: tuple[float, float]

    def sample(self, t_c: npt.ArrayLike) -> Sample:
        """The curve and its band at some temperatures.

        Parameters
        ----------
        t_c : float or array
            Body temperature. [°C]

        Returns
        -------
        Sample
            Arrays of the shape of `t_c`.
        """
        t_c = np.asarray(t_c, dtype=float)
        low_ohm, high_ohm = self.band.edges_ohm(t_c)
        reads_min_k, reads_max_k = self.band.read_edges_k(t_c, low_ohm, high_ohm)
        return Sample(
            t_c,
            self.curve.resistance_ohm(t_c),
            low_ohm,
            high_ohm,
            self.curve.alpha_pct_per_k(t_c),
            reads_min_k,
            reads_max_k,
            self.curve.extrapolated(t_c),
        )


def part_curve(record: PartRecord) -> PartCurve:
    """The curve of a part: from the first source that its record has, or the one it asks for."""
    part = record.part
    source = part.curve_from or part.curve_sources()[0]
    operating_c = part.limits.operating_c or _usual_range_c(record)
    curve = _SOURCES[source](record, operating_c)
    return PartCurve(curve, _band(record, curve), operating_c)


def whole_steps_c(span_c: tuple[float, float], step_k: float) -> Array:
    """Temperatures at whole steps within a span, and both its ends.

    Parameters
    ----------
    span_c : tuple of two floats
        Lower and upper end. [°C]
    step_k : float
        Distance of the steps. [K]

    Returns
    -------
    array of shape (n,)
        Rising temperatures. [°C]

    Examples
    --------
    >>> whole_steps_c((-12.0, 3.0), 5.0).tolist()
    [-12.0, -10.0, -5.0, 0.0, 3.0]
    """
    low, high = span_c
    first, last = np.ceil(low / step_k - 1e-9), np.floor(high / step_k + 1e-9)
    steps_c = np.arange(first, last + 1) * step_k
    return np.unique(np.concatenate([[low], np.round(steps_c, 9), [high]])) + 0.0  # no −0


def steps_from_c(span_c: tuple[float, float], step_k: float) -> Array:
    """Temperatures at steps from the lower end of a span on, and its upper end.

    Parameters
    ----------
    span_c : tuple of two floats
        Lower and upper end. [°C]
    step_k : float
        Distance of the steps. [K]

    Returns
    -------
    array of shape (n,)
        Rising temperatures. [°C]

    Examples
    --------
    >>> steps_from_c((-12.0, 3.0), 5.0).tolist()
    [-12.0, -7.0, -2.0, 3.0]
    """
    low, high = span_c
    steps_c = low + step_k * np.arange(np.ceil((high - low) / step_k - 1e-9))
    return np.append(np.round(steps_c, 9), high) + 0.0


def _usual_range_c(record: PartRecord) -> tuple[float, float]:
    if record.table is not None:
        return float(record.table.t_c[0]), float(record.table.t_c[-1])
    return record.part.steinhart_hart.span_c if record.part.steinhart_hart else USUAL_RANGE_C


def _table_curve(t_c: Array, r_ohm: Array) -> Curve:
    law = monotone_cubic(1 / kelvin(t_c[::-1]), np.log(r_ohm[::-1]))
    return Curve("table", law, (float(t_c[0]), float(t_c[-1])))


def _from_table(record: PartRecord, operating_c: tuple[float, float]) -> Curve:  # noqa: ARG001
    assert record.table is not None
    return _table_curve(record.table.t_c, record.table.r_ohm)


def _from_steinhart_hart(record: PartRecord, operating_c: tuple[float, float]) -> Curve:  # noqa: ARG001
    stated = record.part.steinhart_hart
    assert stated is not None
    return stated_curve(stated)


def stated_curve(stated: SteinhartHart) -> Curve:
    """The curve of stated coefficients, whatever else the record has."""
    law = SteinhartHartLaw(stated.a, stated.b, stated.c)
    return Curve("steinhart-hart", law, stated.span_c, extends=stated.c > 0)


def _from_b_values(record: PartRecord, operating_c: tuple[float, float]) -> Curve:
    part = record.part
    points_c, points_ohm = fixed_points(part)
    rated_ohm = part.rated.resistance_ohm
    law = through_points(points_c, points_ohm, rated_ohm / _PROVEN_OHM if rated_ohm < _LOW_OHM else 1.0)
    fixed_c = tuple(points_c.tolist())
    # Bent against what ceramics do, the law may turn back: trusted between its points only.
    span_c = (fixed_c[0], fixed_c[-1]) if law.c < -_NO_BEND_PER_K else _widened(operating_c, fixed_c)
    return Curve("b-values", law, span_c, fixed_c=fixed_c)


def _from_b_value(record: PartRecord, operating_c: tuple[float, float]) -> Curve:
    part = record.part
    stated = _single_b_value(part)
    bend_k2 = TYPICAL_BEND_K2 if part.shape == "typical" else 0.0
    rated = part.rated
    law = BentExponential(float(np.log(rated.resistance_ohm)), rated.at_c, stated.between_c, stated.b_k, bend_k2)
    # A pair away from the rated temperature fixes a ratio of two resistances, not the resistances.
    fixed_c = tuple(sorted({rated.at_c, part.other_c(stated)} if part.b_values_at_rated() else {rated.at_c}))
    low_c, high_c = _widened(operating_c, (rated.at_c, *stated.between_c))
    return Curve("b-value", law, (max(low_c, law.coldest_c), high_c), fixed_c=fixed_c)


_SOURCES: dict[Basis, Callable[[PartRecord, tuple[float, float]], Curve]] = {
    "table": _from_table,
    "steinhart-hart": _from_steinhart_hart,
    "b-values": _from_b_values,
    "b-value": _from_b_value,
}


def fixed_points(part: Part) -> tuple[Array, Array]:
    """The points that a part's B-values at its rated temperature fix.

    Parameters
    ----------
    part : Part
        With B-values that share the rated temperature; no unit.

    Returns
    -------
    tuple of two arrays of shape (n,)
        Temperatures [°C] and resistances [Ω], in rising temperature.
    """
    rated = part.rated
    stated = part.b_values_at_rated()
    other_c = np.array([part.other_c(b) for b in stated])
    b_k = np.array([b.b_k for b in stated])
    other_ohm = rated.resistance_ohm * np.exp(b_k * (1 / kelvin(other_c) - 1 / kelvin(rated.at_c)))
    t_c, r_ohm = np.append(other_c, rated.at_c), np.append(other_ohm, rated.resistance_ohm)
    order = t_c.argsort()
    return t_c[order], r_ohm[order]


def _single_b_value(part: Part) -> BValue:
    """The B-value to use alone: one at the rated temperature if there is one, the first otherwise."""
    return (*part.b_values_at_rated(), *part.b_values)[0]


def _widened(span_c: tuple[float, float], points_c: tuple[float, ...]) -> tuple[float, float]:
    return min(*span_c, *points_c), max(*span_c, *points_c)


def _band(record: PartRecord, curve: Curve) -> Band:
    part = record.part
    tolerances = tuple(
        BTolerance(max(b.between_c, key=lambda t_c: abs(t_c - part.rated.at_c)), b.b_k, b.tolerance_pct)
        for b in part.b_values
        if b.tolerance_pct is not None
    )
    accuracy = tuple(AccuracyRange(a.between_c, a.within_k) for a in part.accuracy)
    columns = _columns(record.table) if curve.basis == "table" else None
    return Band(curve, part.rated.at_c, part.rated.tolerance_pct, tolerances, accuracy, columns)


def _columns(table: TableData | None) -> tuple[Curve, Curve] | None:
    if table is None or table.r_min_ohm is None or table.r_max_ohm is None:
        return None
    return _table_curve(table.t_c, table.r_min_ohm), _table_curve(table.t_c, table.r_max_ohm)
