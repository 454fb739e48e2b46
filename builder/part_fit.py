"""Equations fitted to a part's curve over a range."""

from __future__ import annotations

import numpy as np

from builder.fits import Fit, fit
from builder.part_curve import PartCurve, whole_steps_c
from builder.records import PartRecord
from builder.units import Array

_FEWEST_ROWS = 8
_STEP_K = 1.0


def fitted(
    record: PartRecord,
    curve: PartCurve,
    equation: str,
    span_c: tuple[float, float] | None = None,
    *,
    minimise: str = "kelvin",
) -> Fit:
    """An equation fitted to a part over a range.

    Parameters
    ----------
    record : PartRecord
        The part; no unit.
    curve : PartCurve
        Its curve; no unit.
    equation : str
        A name in `builder.fits.EQUATIONS`; no unit.
    span_c : tuple of two floats, optional
        The range; default the operating range. It is cut to what the curve is known for. [°C]
    minimise : str
        `kelvin`, or `ohm` for an equation that offers it; no unit.

    Returns
    -------
    Fit
        Least squares in kelvin over the rows of the part's table, or over its curve every 1 K where it has no table
        or too few rows in the range. [K]

    Raises
    ------
    ValueError
        The curve is not known in the range, or no such equation fits it.
    """
    return fit(equation, *fit_points(record, curve, span_c or curve.operating_c), minimise=minimise)


def fit_points(record: PartRecord, curve: PartCurve, span_c: tuple[float, float]) -> tuple[Array, Array]:
    """The points that an equation is fitted to.

    Parameters
    ----------
    record : PartRecord
        The part; no unit.
    curve : PartCurve
        Its curve; no unit.
    span_c : tuple of two floats
        The range. [°C]

    Returns
    -------
    tuple of two arrays of shape (n,)
        Temperatures [°C] and resistances [Ω].

    Raises
    ------
    ValueError
        The curve is not known in the range.
    """
    known_c = curve.curve.span_c
    low, high = max(span_c[0], known_c[0]), min(span_c[1], known_c[1])
    if low >= high:
        raise ValueError(f"the curve is known from {known_c[0]:g} to {known_c[1]:g} °C only")
    if record.table is not None and curve.curve.basis == "table":
        inside = (record.table.t_c >= low) & (record.table.t_c <= high)
        if np.count_nonzero(inside) >= _FEWEST_ROWS:
            return record.table.t_c[inside], record.table.r_ohm[inside]
    t_c = whole_steps_c((low, high), _STEP_K)
    return t_c, curve.curve.resistance_ohm(t_c)
