"""A part's curve as the browser gets it: a script with a sample that gives the curve back, inside its span and beyond.

The laws of curves and bands stay in Python. The browser is told points (t_c, ln R) with the slope d ln R / d(1/T) at
each: between two of them ln R is the cubic in 1/T that both slopes fix, beyond them it goes on with the end's slope.
The band is told at whole degrees, as ln(R_min/R) and ln(R_max/R).
"""

from __future__ import annotations

import json
from collections.abc import Sequence
from typing import Any

import numpy as np

from builder.curves import Curve, MonotoneCubic
from builder.curves.curve import Mask
from builder.part_curve import PartCurve
from builder.units import Array, celsius, kelvin

# In ln R, half of this is 0.03 mK at 1 %/K, about the least that thermistors fall by where they are used.
LN_QUANTUM = 5e-7
# With half of this an end's slope, followed to where a swap reads 1000 °C, is 1 mK off.
SLOPE_QUANTUM_K = 0.002
T_QUANTUM_K = 1e-6
_LARGEST_ERROR = 2e-6
_MOST_POINTS = 513


def curve_script(key: str, curve: PartCurve, facts: Sequence[str]) -> str:
    """The script: it hands `beadroll.curve` the part's key, its curve and its facts.

    Parameters
    ----------
    key : str
        The part's name in addresses; no unit.
    curve : PartCurve
        The part's curve; no unit.
    facts : sequence of str
        What else is said of the part, in the order of the page that shows it; no unit.

    Returns
    -------
    str
        JavaScript, ASCII only; the same for the same record; no unit.
    """
    made = curve.curve
    data = {
        "basis": made.basis,
        "span_c": made.span_c,
        "operating_c": curve.operating_c,
        "extends": made.extends,
        **_points(made),
        "band": _band(curve),
        "facts": list(facts),
    }
    return f"beadroll.curve({script_json(key)},{script_json(data)});\n"


def _points(curve: Curve) -> dict[str, list[float]]:
    if isinstance(curve.law, MonotoneCubic):
        return _told_points(curve, celsius(1 / curve.law.x[::-1]))
    points = 3
    while points < _MOST_POINTS and _largest_error(curve, np.linspace(*curve.span_c, points)) > _LARGEST_ERROR:
        points = 2 * points - 1
    return _told_points(curve, np.linspace(*curve.span_c, points))


def _told_points(curve: Curve, t_c: Array) -> dict[str, list[float]]:
    t_told = _steps(t_c, 1.0 if np.all(np.abs(t_c - np.rint(t_c)) < T_QUANTUM_K / 2) else T_QUANTUM_K)
    # What the sample says holds at the temperatures as they are told, which are rounded.
    x_per_k = 1 / kelvin(values(t_told))
    ln_r, slope_k = curve.law.ln_resistance(x_per_k), curve.law.slope_k(x_per_k)
    if not np.isfinite(ln_r + slope_k).all():
        # Stated coefficients may give no resistance within their own span: such a curve is not compared.
        t_told, ln_r, slope_k = [T_QUANTUM_K], ln_r[:0], slope_k[:0]
    return {"t_c": t_told, "ln_r": _steps(ln_r, LN_QUANTUM), "slope_k": _steps(slope_k, SLOPE_QUANTUM_K)}


def _largest_error(curve: Curve, t_c: Array) -> float:
    """How far, in ln R, the told cubics are from the law halfway between their points, where they are farthest."""
    told = _told_points(curve, t_c)
    x_per_k, ln_r, slope_k = 1 / kelvin(values(told["t_c"])), values(told["ln_r"]), values(told["slope_k"])
    middle = (x_per_k[1:] + x_per_k[:-1]) / 2
    cubic = (ln_r[1:] + ln_r[:-1]) / 2 - np.diff(slope_k) * np.diff(x_per_k) / 8
    return float(np.abs(cubic - curve.law.ln_resistance(middle)).max(initial=0))


def _band(curve: PartCurve) -> dict[str, Any]:
    """The band at the whole degrees of the span and of the operating range that the curve reaches."""
    ends_c = np.array([curve.curve.span_c, curve.operating_c])
    t_c = np.arange(np.ceil(ends_c[:, 0].min()), np.floor(ends_c[:, 1].max()) + 1)
    nominal_ohm = curve.curve.resistance_ohm(t_c)
    known = np.isfinite(nominal_ohm)
    t_c, nominal_ohm = t_c[known], nominal_ohm[known]
    low_ohm, high_ohm = curve.band.edges_ohm(t_c)
    return {
        "from_c": t_c[0] if len(t_c) else 0,
        "low": _steps(np.log(low_ohm / nominal_ohm), LN_QUANTUM),
        "high": _steps(np.log(high_ohm / nominal_ohm), LN_QUANTUM),
        "incomplete": _stretches(t_c, curve.band.incomplete(t_c)),
    }


def _steps(of: Array, quantum: float) -> list[float]:
    """A quantum, then from each value to the next how many of them: short, since neighbours are alike."""
    return [quantum, *np.diff(np.rint(of / quantum), prepend=0).astype(int).tolist()]


def values(steps: Sequence[float]) -> Array:
    """The values that a list of the script stands for: the sums of its steps, in its quantum, which comes first."""
    quantum, *rest = steps
    told: Array = np.cumsum(rest) * quantum
    return told


def _stretches(t_c: Array, mask: Mask) -> list[list[float]]:
    """First and last temperature of each stretch where a mask is true."""
    framed = np.concatenate([[False], mask, [False]])
    starts, stops = np.flatnonzero(framed[1:] & ~framed[:-1]), np.flatnonzero(~framed[1:] & framed[:-1])
    return [[float(t_c[start]), float(t_c[stop - 1])] for start, stop in zip(starts, stops, strict=True)]


def script_json(value: Any) -> str:
    """JSON that may stand in a script and needs no encoding stated, whole numbers without a point."""
    return json.dumps(_short(value), separators=(",", ":"), allow_nan=False).replace("<", "\\u003c")


def _short(value: Any) -> Any:
    if isinstance(value, dict):
        return {key: _short(inner) for key, inner in value.items()}
    if isinstance(value, list | tuple):
        return [_short(inner) for inner in value]
    return int(value) if isinstance(value, float) and value.is_integer() else value
