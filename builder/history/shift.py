"""By how much an edit moves a part's curve and its band, in kelvin."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.comparisons import NoCommonRange, common_range_c, compared
from builder.part_curve import part_curve, whole_steps_c
from builder.records import PartRecord
from builder.units import Array

_STEP_K = 1.0
# What there and back through a curve leaves; such a shift is none.
_ROUNDING_K = 1e-6
# An edit that moves curve or band by more than this asks for a new entry of the ledger.
MOVED_K = 1e-3


@dataclass(frozen=True)
class Shift:
    """The largest shifts of the nominal curve and of the band's edges, with their signs, and where they are.

    What an instrument made for the curve before reads with a part of the curve now, minus what it should read: the
    true temperature for the nominal curve, the edge before for each edge. Not a number where there is nothing to compare; no place where nothing moved.
    """

    worst_k: float
    at_c: float | None
    band_worst_k: float
    band_at_c: float | None

    @property
    def moved(self) -> bool:
        """Whether curve or band moved by more than the part's standing covers."""
        return not max(abs(self.worst_k), abs(self.band_worst_k)) <= MOVED_K


NOTHING_MOVED = Shift(0.0, None, 0.0, None)
NOT_KNOWN = Shift(np.nan, None, np.nan, None)


def shift(before: PartRecord, now: PartRecord) -> Shift:
    """The shift between two states of a part.

    Parameters
    ----------
    before, now : PartRecord
        The part as it was and as it is; no unit.

    Returns
    -------
    Shift
        Over the range that both are made for: every 1 K, both ends, and every row of a table, since an edited row
        between two whole degrees moves nothing at these.
    """
    curves = part_curve(before), part_curve(now)
    try:
        range_c = common_range_c(*curves)
    except NoCommonRange:
        return NOT_KNOWN
    rows_c = [record.table.t_c for record in (before, now) if record.table is not None]
    t_c = np.unique(np.concatenate([whole_steps_c(range_c, _STEP_K), *rows_c]))
    found = compared(*curves, t_c[(t_c >= range_c[0]) & (t_c <= range_c[1])])
    edges_k = np.stack([found.reads_min_k - found.reference_min_k, found.reads_max_k - found.reference_max_k])
    return Shift(*_largest(found.reads_k, found.t_c), *_largest(edges_k, np.tile(found.t_c, 2)))


def _largest(shift_k: Array, t_c: Array) -> tuple[float, float | None]:
    shift_k = shift_k.ravel()
    if not np.isfinite(shift_k).any():
        return np.nan, None
    worst = int(np.nanargmax(np.abs(shift_k)))
    if abs(shift_k[worst]) < _ROUNDING_K:
        return 0.0, None
    return float(shift_k[worst]), float(t_c[worst])
