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

    `one_way` says that the error can only be larger than computed; `decide` that a limit met as computed may not be.
    """

    fields: tuple[str, ...]
    decide: bool
    one_way: bool

    def verdict(self, within: bool) -> bool | None:
        """Whether a limit is met, from whether it is as computed; None where the gaps leave it open."""
        open_question = self.decide if within else not self.one_way
        return None if open_question else within


def gaps(chain: Chain, t_c: Array) -> Gaps:
    """What is not stated.

    Parameters
    ----------
    chain : Chain
        The position with its thermistor; no unit.
    t_c : array
        True temperatures at which the reading matters. [°C]

    Returns
    -------
    Gaps
        Fields of the position, then of the part, by their place in the record.
    """
    of_position = [source for source in chain.sources if source.limit is None]
    of_part = tuple(_of_part(chain.thermistor, t_c))
    fields = (*(source.field for source in of_position), *of_part)
    # Self-heating reads high: without it a reading too low is not proven.
    one_way = chain.thermistor.dissipation_mw_per_k is not None
    return Gaps(fields, bool(of_part) or any(source.decides for source in of_position), one_way)


def _of_part(thermistor: Thermistor, t_c: Array) -> Iterator[str]:
    band = thermistor.made.band
    if band.incomplete(t_c).any():
        if band.rated_tolerance_pct is None:
            yield "rated.tolerance_pct"
        if not band.b_tolerances:
            yield "b_values.tolerance_pct"
    if thermistor.dissipation_mw_per_k is None:
        yield "limits.dissipation_mw_per_k"
