"""How many codes remain for telling an open or a shorted sensor from a real temperature."""

from __future__ import annotations

import numpy as np

from builder.circuit.chain import Chain
from builder.circuit.sources import corners
from builder.units import Array

_OPEN_AND_SHORT_OHM = np.array([np.inf, 0.0])


def margins_codes(chain: Chain, lowest_code: Array, highest_code: Array) -> tuple[float, float]:
    """Codes between all real temperatures and a faulty sensor.

    Parameters
    ----------
    chain : Chain
        The position with its thermistor; no unit.
    lowest_code, highest_code : array
        Of any board, at the temperatures that matter. [LSB]

    Returns
    -------
    tuple of two floats
        Whole codes to an open and to a shorted sensor, at least so many on any board: the firmware's threshold is one
        and the same on all. Not above 0 where none is left. [LSB]
    """
    limits = corners(chain.sources)
    faulty = chain.code(chain.divider(limits).junction_v(_OPEN_AND_SHORT_OHM), limits)
    (open_low, short_low), (open_high, short_high) = faulty.min(axis=0), faulty.max(axis=0)
    if chain.divider().high_side:
        gaps = lowest_code.min() - open_high, short_low - highest_code.max()
    else:
        gaps = open_low - highest_code.max(), lowest_code.min() - short_high
    return float(np.floor(gaps[0])), float(np.floor(gaps[1]))
