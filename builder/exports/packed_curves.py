"""A part's curve and band in a few hundred characters, for a page that needs those of all parts at once.

ln R, ln(R_min/R) and ln(R_max/R) are told in pieces, since a band has steps and corners. A piece has points at whole
steps and at both its ends; between them goes the cubic in 1/T through their values, with the slopes of the parabolas
through three of them. Its steps are the widest that keep every half degree within a millikelvin.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache, lru_cache
from itertools import pairwise

import numpy as np
import numpy.typing as npt

from builder.curves import BentExponential
from builder.part_curve import PartCurve, whole_steps_c
from builder.units import Array, celsius, kelvin

# In ln R and in what the edges differ from it. A firmware's table rounds codes made from ln R: the closer that is, the
# fewer of them are rounded the other way.
LN_QUANTA = (2e-6, 3e-5, 3e-5)
T_QUANTUM_K = 0.001
# Without steps a piece is a straight line between its ends; smooth laws are told every 10 K.
STEPS_K = (1000.0, 10.0, 2.5, 1.0, 0.5)
# Printable, without what would end the text or the script that it stands in. A digit has two characters: the second
# says that its number goes on.
ALPHABET = "".join(chr(code) for code in range(33, 126) if chr(code) not in '"&<\\')[:88]
BASE = len(ALPHABET) // 2
SMALL = 4
ALONE = ALPHABET[(2 * SMALL + 1) ** 2]
Indices = npt.NDArray[np.intp]

_WITHIN_K = (2e-4, 9e-4, 9e-4)
_BEYOND_K = 60.0
_BESIDE_K = 1e-6


def packed_curve(curve: PartCurve) -> str:
    """The curve as characters of `ALPHABET`.

    Parameters
    ----------
    curve : PartCurve
        A part's curve and band; no unit.

    Returns
    -------
    str
        Where the first piece begins; then of each piece twice its end (one more where the point there is its own), the
        places of its functions' steps in `STEPS_K`, the values of ln R as third differences, and those of each edge as
        second differences, two in a character where they are small. Empty where the curve has no resistance somewhere
        in its own span; no unit.
    """
    ends_c = _ends_c(curve)
    frames = [_frame(begin_c, end_c) for begin_c, end_c in pairwise(ends_c)]
    sizes = [len(frame.t_c) for frame in frames]
    sampled = _functions(curve, np.concatenate([*(frame.beside_c for frame in frames), ends_c[1:]]))
    if not np.isfinite(sampled[:, : sum(sizes)]).all():
        return ""
    *pieces, at_ends = np.split(sampled, np.cumsum(sizes), axis=1)
    after = [piece[:, 0] for piece in pieces[1:]] + [at_ends[:, -1]]
    text = _characters(_quanta(ends_c[0]))
    for end_c, frame, piece, at_end, behind in zip(ends_c[1:], frames, pieces, at_ends.T, after, strict=True):
        closed = np.abs(at_end - piece[:, -1]).max() < np.abs(at_end - behind).max()
        text += _characters(2 * _quanta(end_c) + bool(closed)) + _told(frame, piece)
    return text


def _quanta(t_c: float) -> int:
    return round(t_c / T_QUANTUM_K)


def _ends_c(curve: PartCurve) -> list[float]:
    """Where the pieces end: at the steps and corners of the band and of the curve, and some way beyond."""
    known, band = curve.curve, curve.band
    low_c, high_c = known.span_c
    places = [low_c, high_c]
    if band.columns is None:
        others_c = sorted({b.other_c for b in band.b_tolerances})
        places += [band.rated_c, *((a + b) / 2 for a, b in pairwise(others_c))]
        places += [t_c for stated in band.accuracy for t_c in stated.between_c]
        places += [known.law.t1_c, *known.law.pair_c] if isinstance(known.law, BentExponential) else []
    if known.extends:
        low_c, high_c = min(low_c, curve.operating_c[0]), max(high_c, curve.operating_c[1])
        low_c, high_c = celsius(kelvin(low_c) - min(_BEYOND_K, kelvin(low_c) / 4)), high_c + _BEYOND_K
    inside = {round(t_c, 3) for t_c in (low_c, *places, high_c) if low_c <= t_c <= high_c}
    return sorted(inside)


@dataclass(frozen=True, eq=False)
class _Frame:
    """A piece's half degrees, and for each of `STEPS_K` its points among them; for all but the last, where every half
    degree is a point, how much the points' values count at each half degree.

    `beside_c` has the ends a little within, where a step of the band at an end is not seen yet.
    """

    t_c: Array
    beside_c: Array
    points: tuple[Indices, ...]
    weights: tuple[Array, ...]


@lru_cache(maxsize=64)
def _frame(begin_c: float, end_c: float) -> _Frame:
    t_c = whole_steps_c((begin_c, end_c), STEPS_K[-1])
    points = tuple(np.searchsorted(t_c, whole_steps_c((begin_c, end_c), step_k)) for step_k in STEPS_K)
    weights = tuple(_weights(1 / kelvin(t_c[places]), 1 / kelvin(t_c)) for places in points[:-1])
    return _Frame(t_c, np.clip(t_c, begin_c + _BESIDE_K, end_c - _BESIDE_K), points, weights)


def _weights(x: Array, at: Array) -> Array:
    """How much each point's value counts at each place: the cubics through points at falling x, parabolas' slopes."""
    values = np.eye(len(x))
    width = np.diff(x)
    chord = np.diff(values) / width
    slope = _slopes(width, chord)
    i = np.clip(np.searchsorted(-x, -at, side="right") - 1, 0, len(width) - 1)
    dx = at - x[i]
    bend = (3 * chord - 2 * slope[:, :-1] - slope[:, 1:]) / width
    twist = (slope[:, :-1] + slope[:, 1:] - 2 * chord) / width**2
    weights: Array = values[:, i] + dx * (slope[:, i] + dx * (bend[:, i] + dx * twist[:, i]))
    return weights


def _slopes(width: Array, chord: Array) -> Array:
    if len(width) == 1:
        return np.repeat(chord, 2, axis=1)
    before, after = width[:-1], width[1:]
    inner = (after * chord[:, :-1] + before * chord[:, 1:]) / (before + after)
    return np.column_stack([2 * chord[:, 0] - inner[:, 0], inner, 2 * chord[:, -1] - inner[:, -1]])


def _functions(curve: PartCurve, t_c: Array) -> Array:
    """ln R, and how far the band's edges lie below and above it."""
    nominal_ohm = curve.curve.resistance_ohm(t_c)
    low_ohm, high_ohm = curve.band.edges_ohm(t_c)
    functions: Array = np.log([nominal_ohm, low_ohm / nominal_ohm, high_ohm / nominal_ohm])
    return functions


def _told(frame: _Frame, functions: Array) -> str:
    """The places of the widest steps that do, and the functions' values at their points."""
    kelvin_each = np.abs(np.gradient(functions[0], frame.t_c))
    places = [
        _place(frame, values, quantum, within_k * kelvin_each)
        for values, quantum, within_k in zip(functions, LN_QUANTA, _WITHIN_K, strict=True)
    ]
    nominal, *edges = (
        _rounded(values, frame.points[place], quantum)
        for values, place, quantum in zip(functions, places, LN_QUANTA, strict=True)
    )
    each = np.diff(nominal, 3, prepend=[0, 0, 0]).astype(int).tolist()
    pairs = [_pairs(np.diff(edge, 2, prepend=[0, 0]).astype(int).tolist()) for edge in edges]
    return "".join([*map(_characters, [*places, *each]), *pairs])


def _place(frame: _Frame, values: Array, quantum: float, allowed: Array) -> int:
    for place, weights in enumerate(frame.weights):
        off = quantum * _rounded(values, frame.points[place], quantum) @ weights - values
        if (np.abs(off) <= allowed).all():
            return place
    return len(STEPS_K) - 1


def _rounded(values: Array, points: Indices, quantum: float) -> Array:
    quanta: Array = np.rint(values[points] / quantum)
    return quanta


@cache
def _characters(integer: int) -> str:
    """An integer by its digits, the lowest first, its sign in the lowest bit."""
    value, text = 2 * abs(integer) + (integer < 0), ""
    while value >= BASE:
        value, digit = divmod(value, BASE)
        text += ALPHABET[BASE + digit]
    return text + ALPHABET[value]


def _pairs(integers: list[int]) -> str:
    """Two small integers a character; one that is not small stands alone behind `ALONE`."""
    text, i = "", 0
    while i < len(integers):
        first, second = integers[i], integers[i + 1] if i + 1 < len(integers) else 0
        if max(abs(first), abs(second)) <= SMALL:
            text += ALPHABET[(first + SMALL) * (2 * SMALL + 1) + second + SMALL]
            i += 2
        else:
            text += ALONE + _characters(first)
            i += 1
    return text
