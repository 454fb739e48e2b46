"""The fixed resistor with which a position's worst case is smallest."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
import numpy.typing as npt

from builder.circuit import Chain, Thermistor
from builder.circuit.budget import CLOSE_K
from builder.circuit.sources import Offsets, corners
from builder.decisions.new_firmware import with_new_firmware
from builder.decisions.series import Series, series_ohm
from builder.part_curve import PartCurve, whole_steps_c
from builder.records import Position
from builder.units import Array, range_text

# How far beyond the thermistor's resistances over the range the series is tried, each way: where leakage or self-heating
# weigh most, the best value lies more than half a decade beyond.
_BEYOND = 10.0
# How closely values are looked at, one look after the other: at how many temperatures (None: at all), whether at all
# corners of the limits, and how many values in one go. Only the time taken hangs on it: a few temperatures rule most
# values out, and 23 over a range do not fall together with the rows of a table.
_LOOKS: tuple[tuple[int | None, bool, int], ...] = (
    (2, False, 10_000),
    (23, False, 16),
    (None, False, 4),
    (None, True, 1),
)
_Places = npt.NDArray[np.intp]


@dataclass(frozen=True)
class BestResistor:
    """The value of a series that makes the worst case smallest, and the one of the common rule beside it.

    The common rule takes the value nearest to the thermistor's resistance in the middle of the range. A worst case is
    not a number where some board has no reading with that resistor.
    """

    fixed_ohm: float
    worst_k: float
    worst_at_c: float
    common_ohm: float
    common_worst_k: float
    series: Series


def best_resistor(position: Position, part: Thermistor, curve: PartCurve, series: Series = "E96") -> BestResistor:
    """The best fixed resistor for a part at a position.

    Parameters
    ----------
    position : Position
        Its own resistor lends tolerance and tempco, its firmware the method; no unit.
    part : Thermistor
        In the circuit; no unit.
    curve : PartCurve
        What the firmware is made for, together with each resistor; no unit.
    series : str
        `E24` or `E96`; no unit.

    Returns
    -------
    BestResistor
        The lowest of several values that are equally good.

    Raises
    ------
    ValueError
        The firmware's equation does not fit the curve over the range.

    Notes
    -----
    The values tried reach from a tenth of the thermistor's smallest resistance over the range to ten times its largest.
    The worst case over some temperatures and some corners of the limits is never above the one over all of them. So the
    values are looked at more and more closely, always those first that promise most, until the best of those looked at
    wholly is better than what any other promises: it is the best of all.
    """
    errors = _errors(position, part, curve, series)
    fixed_ohm = np.ravel(errors.chain.fixed_ohm)
    best, common = errors.smallest()[0], int(np.abs(fixed_ohm - _middle_ohm(position, part)).argmin())
    worst_k, at_c = errors.worst_k(np.array([best, common]))
    return BestResistor(
        float(fixed_ohm[best]), float(worst_k[0]), float(at_c[0]), float(fixed_ohm[common]), float(worst_k[1]), series
    )


def best_value(position: Position, part: Thermistor, curve: PartCurve, series: Series = "E96") -> tuple[float, float]:
    """As `best_resistor`, and only what a list of many parts needs.

    Parameters
    ----------
    position, part, curve, series : Position, Thermistor, PartCurve, str
        As for `best_resistor`; no unit.

    Returns
    -------
    tuple of two floats
        The fixed resistance [Ω] and the worst case with it, infinite where some board has no reading [K].

    Raises
    ------
    ValueError
        As `best_resistor`.
    """
    errors = _errors(position, part, curve, series)
    best, worst_k = errors.smallest()
    return float(np.ravel(errors.chain.fixed_ohm)[best]), worst_k


def _errors(position: Position, part: Thermistor, curve: PartCurve, series: Series) -> _Errors:
    place = with_new_firmware(position, curve)
    ends_ohm = part.made.curve.resistance_ohm(np.array(position.range_c))
    if not np.isfinite(ends_ohm).all():
        raise ValueError(f"the curve does not reach over {range_text(position.range_c)}")
    tried_ohm = series_ohm(series, ends_ohm.min() / _BEYOND, ends_ohm.max() * _BEYOND)
    return _Errors(Chain(place, part, curve.curve, tried_ohm[:, None, None]))


def _middle_ohm(position: Position, part: Thermistor) -> float:
    return float(part.made.curve.resistance_ohm(sum(position.range_c) / 2))


@dataclass(frozen=True, eq=False)
class _Errors:
    """The errors of a chain with one resistor after the other, over the temperatures of a budget."""

    chain: Chain

    def smallest(self) -> tuple[int, float]:
        """Which resistor has the smallest worst case, and that worst case. [K]"""
        count = np.size(self.chain.fixed_ohm)
        promised_k, looks = np.zeros(count), np.zeros(count, int)
        while (look := looks[promised_k.argmin()]) < len(_LOOKS):
            temperatures, wholly, at_once = _LOOKS[look]
            alike = np.flatnonzero(looks == look)
            first = alike[promised_k[alike].argsort(kind="stable")[:at_once]]
            errors_k = self._errors_k(first, self._places(temperatures), wholly)
            promised_k[first] = np.where(np.isnan(errors_k), np.inf, errors_k).max(axis=(1, 2))
            looks[first] += 1
        best = int(promised_k.argmin())
        return best, float(promised_k[best])

    def worst_k(self, which: _Places) -> tuple[Array, Array]:
        """The worst cases of some of the resistors, not a number where a board has no reading, and where they are [°C]."""
        largest_k = self._errors_k(which, self._places(None), wholly=True).max(axis=1)
        at = largest_k.argmax(axis=1)
        return largest_k.max(axis=1), self._t_c[at]

    def _errors_k(self, which: _Places, places: _Places, wholly: bool) -> Array:
        chain = replace(self.chain, fixed_ohm=np.asarray(self.chain.fixed_ohm)[which])
        t_c = self._t_c[places]
        reading_c = chain.signal(t_c, self._corners if wholly else self._likely_corners).reading_c
        return np.abs(reading_c - t_c)

    def _places(self, count: int | None) -> _Places:
        last = len(self._t_c) - 1
        return np.unique(np.linspace(0, last, count or last + 1).round().astype(np.intp))

    @cached_property
    def _t_c(self) -> Array:
        return whole_steps_c(self.chain.position.range_c, CLOSE_K)

    @cached_property
    def _corners(self) -> Offsets:
        return corners(self.chain.sources)

    @cached_property
    def _likely_corners(self) -> Offsets:
        """Corners that are the extremes as a rule: everything pushes the reading down, or everything up.

        Of a ratiometric reading a higher supply warms the thermistor, and a lower one lets leakage weigh more.
        """
        place = self.chain.position
        higher_code = -1 if place.circuit.thermistor == "high side" else 1
        colder = {
            "thermistor": 1,
            "fixed resistor": -1,
            "fixed resistor tempco": -1,
            "parallel resistor": 1,
            "supply": -0.5 if place.reference == "ratiometric" else higher_code,
            "reference": -higher_code,
        }
        pushes = sum(np.sign(limit) * colder.get(name, higher_code) for name, limit in self._corners.items())
        likely = np.ravel(pushes).argsort()[[0, 1, -1]]
        return {name: limit[likely] for name, limit in self._corners.items()}
