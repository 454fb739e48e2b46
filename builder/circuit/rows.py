"""A budget's rows: bias, one band for each source, and their worst and statistical sums."""

from __future__ import annotations

import dataclasses
from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from builder.circuit.chain import Chain
from builder.circuit.sources import one_at_a_time
from builder.curves.curve import Mask
from builder.units import Array

Span = tuple[Array, Array]

_COVERAGE = 2.0
_SLOPE_K = 0.01


@dataclass(frozen=True, eq=False)
class Rows:
    """A budget at some true temperatures; arrays of one shape.

    `biases_k` are the parts of the nominal reading's error and add up to it. `sources_k` is how far each source alone
    moves the nominal reading, down and up. `worst_min_k` and `worst_max_k` are the error of the worst boards;
    `extrapolated` marks where a curve is used beyond its span, the part's or the one that the firmware has.
    """

    t_c: Array
    code: Array
    codes_per_k: Array
    biases_k: Mapping[str, Array]
    sources_k: Mapping[str, Span]
    worst_min_k: Array
    worst_max_k: Array
    extrapolated: Mask

    @property
    def bias_k(self) -> Array:
        """Nominal reading minus true temperature. [K]"""
        bias_k: Array = np.sum(list(self.biases_k.values()), axis=0)
        return bias_k

    @property
    def resolution_k(self) -> Array:
        """What one code means. [K]"""
        with np.errstate(divide="ignore"):
            return 1 / self.codes_per_k

    @property
    def standard_k(self) -> Mapping[str, Array]:
        """Standard uncertainty of each source: half its band over √3, a rectangular limit (JCGM 100:2008, 4.3.7). [K]"""
        return {name: (high - low) / 2 / np.sqrt(3) for name, (low, high) in self.sources_k.items()}

    @property
    def shift_k(self) -> Array:
        """How far the bands' middles lie beside the nominal reading, together (JCGM 100:2008, 4.3.8). [K]"""
        shift_k: Array = np.sum([(low + high) / 2 for low, high in self.sources_k.values()], axis=0)
        return shift_k

    @property
    def expanded_k(self) -> Array:
        """Expanded uncertainty with k = 2, about bias and shift. [K]"""
        variance_k2: Array = np.sum([u_k**2 for u_k in self.standard_k.values()], axis=0)
        return _COVERAGE * np.sqrt(variance_k2)


def budget_rows(chain: Chain, t_c: Array, worst_min_k: Array, worst_max_k: Array) -> Rows:
    """The rows at some temperatures whose worst cases are known.

    Parameters
    ----------
    chain : Chain
        The position with its thermistor; no unit.
    t_c : array of shape (n,)
        True temperatures. [°C]
    worst_min_k, worst_max_k : array of shape (n,)
        Error of the worst boards there. [K]

    Returns
    -------
    Rows
        A source that the records do not state is left out.
    """
    readings_c = chain.signal(t_c, one_at_a_time(chain.sources)).reading_c
    moved_k = (readings_c[1:] - readings_c[0]).reshape(2, -1, len(t_c))
    low_k, high_k = moved_k.min(axis=0), moved_k.max(axis=0)
    around_c = np.stack([t_c - _SLOPE_K, t_c, t_c + _SLOPE_K])
    colder, code, hotter = chain.signal(around_c).code
    return Rows(
        t_c,
        code,
        np.abs(hotter - colder) / (2 * _SLOPE_K),
        _biases_k(chain, t_c, readings_c[0]),
        {s.name: (low_k[i], high_k[i]) for i, s in enumerate(chain.sources) if s.limit is not None},
        worst_min_k,
        worst_max_k,
        np.any([curve.extrapolated(t_c) for curve in chain.curves.values()], axis=0),
    )


def _biases_k(chain: Chain, t_c: Array, reading_c: Array) -> dict[str, Array]:
    """Why the nominal board is off: the curve of another part, the firmware's approximation, its own warmth."""
    unwarmed = dataclasses.replace(chain.thermistor, dissipation_mw_per_k=None)
    unwarmed_c = dataclasses.replace(chain, thermistor=unwarmed).signal(t_c).reading_c
    curve_k = chain.firmware_curve.temperature_c(chain.thermistor.resistance_ohm(t_c)) - t_c
    return {
        "curve": curve_k,
        "firmware": unwarmed_c - t_c - curve_k,
        "self-heating": reading_c - unwarmed_c,
    }
