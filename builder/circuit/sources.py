"""What makes a reading differ from board to board: one source for each limit that the records state."""

from __future__ import annotations

import itertools
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from builder.records import Position
from builder.records.position import VoltageReference
from builder.units import Array

REFERENCE_C = 25.0  # where a resistor has its stated value
QUANTISATION_LSB = 0.5

# Sources that act as one at the extremes. All of a group push one quantity the same way: the fixed resistance, or the
# code; a reading never turns back in either.
_TOGETHER = (
    ("thermistor",),
    ("fixed resistor", "fixed resistor tempco"),
    ("parallel resistor",),
    ("supply",),
    ("leakage", "reference", "offset", "gain", "nonlinearity", "quantisation"),
)
_LOWERS_THE_CODE = "reference"

Offsets = Mapping[str, Array]
"""Where each source stands: its limit times −1 to 1, in a column, so that cases are rows and temperatures columns."""


@dataclass(frozen=True)
class Source:
    """One limit ±: a share of the value, or in the unit of the record's field. None: the record does not state it.

    `only_warms` is True of what shows in nothing but the body's warmth.
    """

    name: str
    field: str
    limit: float | None
    only_warms: bool = False


def sources(position: Position) -> tuple[Source, ...]:
    """The sources that a position has."""
    fixed, adc = position.circuit.fixed, position.adc
    own = position.reference if isinstance(position.reference, VoltageReference) else None
    return (
        Source("thermistor", "", 1.0),
        Source("fixed resistor", "circuit.fixed.tolerance_pct", _share(fixed.tolerance_pct)),
        Source("fixed resistor tempco", "circuit.fixed.tempco_ppm_per_k", _drift(position)),
        *_parallel(position),
        Source("supply", "circuit.supply_tolerance_pct", _share(position.circuit.supply_tolerance_pct), own is None),
        *([Source("reference", "reference.tolerance_pct", _share(own.tolerance_pct))] if own else []),
        Source("leakage", "adc.leakage_na", None if adc.leakage_na is None else adc.leakage_na * 1e-9),
        Source("offset", "adc.offset_lsb", adc.offset_lsb),
        Source("gain", "adc.gain_pct", _share(adc.gain_pct)),
        Source("nonlinearity", "adc.nonlinearity_lsb", adc.nonlinearity_lsb),
        Source("quantisation", "", QUANTISATION_LSB),
    )


def _share(pct: float | None) -> float | None:
    return None if pct is None else pct / 100


def _parallel(position: Position) -> list[Source]:
    parallel = position.circuit.parallel
    if parallel is None:
        return []
    return [Source("parallel resistor", "circuit.parallel.tolerance_pct", _share(parallel.tolerance_pct))]


def _drift(position: Position) -> float | None:
    tempco = position.circuit.fixed.tempco_ppm_per_k
    ambient_c = position.ambient_c or position.range_c
    farthest_k = max(abs(t_c - REFERENCE_C) for t_c in ambient_c)
    return None if tempco is None else tempco * 1e-6 * farthest_k


def one_at_a_time(present: Sequence[Source]) -> Offsets:
    """Nominal first; then each source in turn at its lower limit, and each in turn at its upper one."""
    own = np.eye(len(present))
    signs = np.concatenate([np.zeros((1, len(present))), -own, own])
    return {source.name: (source.limit or 0.0) * signs[:, [i]] for i, source in enumerate(present)}


def corners(present: Sequence[Source]) -> Offsets:
    """Every combination of limits that can be an extreme."""
    limits = {source.name: source.limit or 0.0 for source in present}
    groups = [group for group in _TOGETHER if any(limits.get(name) for name in group)]
    signs = np.array(list(itertools.product((-1.0, 1.0), repeat=len(groups))))
    return {
        name: limits[name] * signs[:, [i]] * (-1 if name == _LOWERS_THE_CODE else 1)
        for i, group in enumerate(groups)
        for name in group
        if name in limits
    }
