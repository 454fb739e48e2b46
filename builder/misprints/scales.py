"""Units typed wrong: kΩ for Ω, °F or kelvin for °C, and parts of a table in another unit."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import log

import numpy as np

from builder.misprints.sequence import Sequence
from builder.misprints.table import ZERO_C_K, Finding, Rated, middle, usual_slope
from builder.units import Array

_LN_1000 = log(1000.0)
_AXES: dict[str, Callable[[Array], Array]] = {
    "": lambda t_c: t_c,
    "fahrenheit-for-celsius": lambda t_f: (t_f - 32.0) / 1.8,
    "kelvin-for-celsius": lambda t_k: t_k - ZERO_C_K,
}
_FACTORS = {"": 1.0, "kilo-missed": 1e3, "mega-missed": 1e6, "kilo-typed-twice": 1e-3}
_FEWEST_ROWS = 3
_QUARTER = 8
_OFF_LEVEL = 0.2  # in powers of 1000: a factor of 25 to 40 is no unit
_WINDOW = 5
_CLOSE = 0.07  # in ln R; far above what tables differ by, far below a wrong unit
_NATURAL_B_K = (1500.0, 7000.0)
_NATURAL_BEND_K = (-118.0, 60.0)  # c over B: real ceramics lie between −110 and −5 K, °F axes below −113 K
_SURE_BEND_K = (-112.0, 60.0)


@dataclass(frozen=True, eq=False)
class Scale:
    """What turns a table as typed into °C and Ω."""

    t_c: Array
    to_c: Callable[[Array], Array]
    factor: float
    axis: str
    unit: str


def scale(axis_t: Array, y: Array, rated: Rated | None) -> Scale:
    """The first reading of the table's units that makes a thermistor of it, and the rated one if it is stated.

    The table is taken as typed wherever that is possible at all, and its axis as typed wherever that makes a
    thermistor: another rated resistance is no other axis.
    """
    typed = Scale(axis_t, _AXES[""], 1.0, "", "")
    off = _off(typed, y, rated)
    if _is_natural(axis_t, y) if off is None else abs(off) < _CLOSE:
        return typed
    axes = [""] if _is_natural(axis_t, y, _SURE_BEND_K) else list(_AXES)
    for axis in axes:
        to_c = _AXES[axis]
        for unit, factor in _FACTORS.items():
            other = Scale(to_c(axis_t), to_c, factor, axis, unit)
            if other.t_c.min() > -ZERO_C_K and _is_natural(other.t_c, y) and abs(_off(other, y, rated) or 0.0) < _CLOSE:
                return other
    return typed


def _is_natural(t_c: Array, y: Array, bend_k: tuple[float, float] = _NATURAL_BEND_K) -> bool:
    """Whether B and the bend of ln R over 1/T are those of a real ceramic, from chords of a quarter of the table."""
    typed_x = 1 / (t_c + ZERO_C_K)
    x = np.linspace(typed_x[-1], typed_x[0], 4 * _QUARTER)
    even_y = np.interp(x, typed_x[::-1], y[::-1])
    chords = (even_y[_QUARTER:] - even_y[:-_QUARTER]) / (x[_QUARTER] - x[0])
    centres = (x[_QUARTER:] + x[:-_QUARTER]) / 2
    half = chords.size // 2
    bend_k2 = middle((chords[:half] - chords[-half:]) / (centres[:half] - centres[-half:])) / 2
    b_k = middle(chords)
    return _NATURAL_B_K[0] < b_k < _NATURAL_B_K[1] and bend_k[0] < bend_k2 / b_k < bend_k[1]


def _off(other: Scale, y: Array, rated: Rated | None) -> float | None:
    """How far, in ln R, the rows near the rated temperature lie above the rated resistance, if that can be told."""
    if rated is None or rated.rated_resistance_ohm is None:
        return None
    if not other.t_c.min() <= rated.rated_c <= other.t_c.max():
        return None
    return _near(other.t_c, y, rated.rated_c) + log(other.factor / rated.rated_resistance_ohm)


def _near(t_c: Array, y: Array, at_c: float) -> float:
    """ln R at a temperature from the five rows next to it, one or two of which may be wrong."""
    x, at_x = 1 / (t_c + ZERO_C_K), 1 / (at_c + ZERO_C_K)
    near = np.sort(np.argsort(np.abs(t_c - at_c))[:5])
    return middle(y[near] + usual_slope(x[near], y[near]) * (at_x - x[near]))


def levels(x_per_k: Array, y: Array) -> Array:
    """Powers of 1000 by which each row stands off the first row's unit; a run of one or two rows is a slip, not a
    unit, and has the level of the row before."""
    flat = (y - usual_slope(x_per_k, y) * x_per_k) / _LN_1000
    jumps = np.rint(np.diff(flat))
    jumps[np.abs(np.diff(flat) - jumps) > _OFF_LEVEL] = 0.0
    for i in np.flatnonzero(jumps):
        if np.rint(_middle_jump(flat, int(i) + 1)) != jumps[i]:
            jumps[i] = 0.0
    if not jumps.any():
        return np.zeros(y.size)
    level = np.concatenate([[0.0], np.cumsum(jumps)])
    starts = np.flatnonzero(np.diff(level, prepend=np.nan) != 0)
    lengths = np.diff(np.append(starts, level.size))
    units = np.repeat(lengths >= _FEWEST_ROWS, lengths)
    if not units.any():
        return np.zeros(y.size)
    last = np.maximum.accumulate(np.where(units, np.arange(y.size), -1))
    level = level[np.where(last < 0, np.argmax(units), last)]
    powers: Array = level - level[0]
    return powers


def _middle_jump(flat: Array, row: int) -> float:
    """From the middle of the rows before a row to the middle of those from it on: one or two wrong rows do not count."""
    return float(np.median(flat[row : row + _WINDOW]) - np.median(flat[max(row - _WINDOW, 0) : row]))


def whole_table(found: Scale) -> list[Finding]:
    """The axis or the unit of the whole table, where either is not as typed."""
    axis = [Finding("units-look-wrong", column="t_c", slip=found.axis)] if found.axis else []
    unit = [Finding("units-look-wrong", slip=found.unit)] if found.unit else []
    return axis + unit


def parts(seq: Sequence, name: str, r_ohm: Array, factor: Array) -> list[Finding]:
    """Rows from which on a column stands in another unit than the rest of it."""
    if (factor == factor[0]).all():
        return []
    starts = np.flatnonzero((np.diff(factor, prepend=1.0) != 0) & (factor != 1.0))
    return [
        Finding(
            "units-look-wrong", int(seq.rows[i]), float(seq.t_c[i]), name, value=float(r_ohm[i]),
            expected=float(r_ohm[i] * factor[i]), restored=float(r_ohm[i] * factor[i]),
            slip="kilo-missed" if factor[i] > 1 else "kilo-typed-twice",
        )
        for i in starts
    ]  # fmt: skip
