"""The power in a thermistor, held to the largest that its record allows."""

from __future__ import annotations

import numpy as np

from builder.circuit.chain import Chain
from builder.circuit.sources import corners
from builder.circuit.thermistor import Thermistor
from builder.units import Array, compared_text, number_text, temperature_text


def can_overload(chain: Chain) -> bool:
    """Whether the circuit could give its thermistor more than the record allows, whatever its resistance.

    Parameters
    ----------
    chain : Chain
        The position with its thermistor; no unit.

    Returns
    -------
    bool
        False where no limit is stated, or where the power into a resistance as large as the one that the thermistor
        sees, the most that any takes, is allowed on every board; no unit.
    """
    allowed_mw = chain.thermistor.max_power_mw
    if allowed_mw is None:
        return False
    divider = chain.divider(corners(chain.sources))
    return bool((divider.thermistor_w(np.asarray(divider.seen_ohm)) * 1e3 > allowed_mw).any())


def overload_text(thermistor: Thermistor, t_c: Array, largest_mw: Array) -> str | None:
    """What is to be said of a power that is too large.

    Parameters
    ----------
    thermistor : Thermistor
        Knows the largest power that is allowed, if that is stated; no unit.
    t_c : array of shape (n,)
        True temperatures. [°C]
    largest_mw : array of shape (n,)
        The largest power on any board there; not a number where the curve ends. [mW]

    Returns
    -------
    str or None
        Both figures in words, None where the power is allowed or no limit is stated; no unit.
    """
    allowed_mw = thermistor.max_power_mw
    if allowed_mw is None or not (largest_mw > allowed_mw).any():
        return None
    at = int(np.nanargmax(largest_mw))
    takes = (
        f"takes up to {compared_text(float(largest_mw[at]), allowed_mw, 3)} mW at {temperature_text(float(t_c[at]))}"
    )
    return f"{takes}, at most {number_text(allowed_mw)} mW is allowed"
