"""Figures that a budget needs and the records do not state: never taken for zero in silence."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from builder.circuit.chain import Chain
from builder.circuit.thermistor import Thermistor
from builder.units import Array


@dataclass(frozen=True)
class Gaps:
    """The fields that lack a figure, and what that leaves open.

    A limit that is met as computed may not be: `of_position` says so of whichever part is fitted, `of_part` of this one.
    `one_way` says that the error can only be larger than computed.
    """

    fields: tuple[str, ...]
    of_position: bool
    of_part: bool
    one_way: bool

    def verdict(self, within: bool) -> bool | None:
        """Whether a limit is met, from whether it is as computed; None where the gaps leave it open."""
        open_question = self.of_position or self.of_part if within else not self.one_way
        return None if open_question else within


# A supply within ±10 %, of which nobody speaks, changes the warmth by a fifth: that is then below a fiftieth of the limit.
_WARMTH_COUNTS = 0.1


def gaps(chain: Chain, t_c: Array, limit_k: float) -> Gaps:
    """What is not stated.

    Parameters
    ----------
    chain : Chain
        The position with its thermistor; no unit.
    t_c : array
        True temperatures at which the reading matters. [°C]
    limit_k : float
        How far off it may be there. [K]

    Returns
    -------
    Gaps
        Fields of the position, then of the part, by their place in the record.
    """
    missing = [source for source in chain.sources if source.limit is None]
    of_part = tuple(_of_part(chain.thermistor, t_c))
    warms = any(source.only_warms for source in missing) and _warming_k(chain, t_c) > _WARMTH_COUNTS * limit_k
    # Self-heating reads high: without it a reading too low is not proven.
    one_way = chain.thermistor.dissipation_mw_per_k is not None
    return Gaps(
        (*(source.field for source in missing), *of_part),
        of_position=any(not source.only_warms for source in missing),
        of_part=bool(of_part) or warms,
        one_way=one_way,
    )


def _warming_k(chain: Chain, t_c: Array) -> float:
    return float((chain.signal(t_c).body_c - t_c).max())


def _of_part(thermistor: Thermistor, t_c: Array) -> Iterator[str]:
    band = thermistor.made.band
    if band.incomplete(t_c).any():
        if band.rated_tolerance_pct is None:
            yield "rated.tolerance_pct"
        if not band.b_tolerances:
            yield "b_values.tolerance_pct"
    if thermistor.dissipation_mw_per_k is None:
        yield "limits.dissipation_mw_per_k"
