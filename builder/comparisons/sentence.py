"""A comparison in one sentence, to be pasted into a message."""

from __future__ import annotations

from collections.abc import Iterator

from builder.comparisons.comparison import Comparison
from builder.units import number_text, range_text, temperature_text

# Below this two parts read the same: hundredths of a kelvin are what the sentence shows.
_SAME_K = 0.01


def sentence(reference_name: str, other_name: str, comparison: Comparison) -> str:
    """What a swap does to the reading: what, where, how many kelvin.

    Parameters
    ----------
    reference_name, other_name : str
        Maker and number of the two parts; no unit.
    comparison : Comparison
        The other part against the reference; no unit.

    Returns
    -------
    str
        One sentence, plain text; no unit.
    """
    swap = f"{other_name} in place of {reference_name}"
    if not comparison.known.any():
        return f"{swap} cannot be compared {_where(comparison.t_c.min(), comparison.t_c.max())}: a curve ends before."
    t_c = comparison.t_c[comparison.known]
    clauses = [f"{swap} {_nominal(comparison, _where(t_c.min(), t_c.max()))}", *_tolerance(comparison)]
    return "; ".join([", ".join(clauses), *_doubts(reference_name, other_name, comparison)]) + "."


def _where(low_c: float, high_c: float) -> str:
    return f"at {temperature_text(low_c)}" if low_c == high_c else f"from {range_text((low_c, high_c))}"


def _nominal(comparison: Comparison, where: str) -> str:
    worst_k = comparison.worst_k
    if abs(worst_k) < _SAME_K:
        return f"reads the same within {_SAME_K} K {where}"
    amount = f"{abs(worst_k):.2f} K {'high' if worst_k > 0 else 'low'}"
    if where.startswith("at "):
        return f"reads {amount} {where}"
    return f"reads at most {amount} (at {temperature_text(comparison.worst_at_c)}) {where}"


def _tolerance(comparison: Comparison) -> Iterator[str]:
    with_tolerance_k = comparison.worst_with_tolerance_k
    if with_tolerance_k > abs(comparison.worst_k) + 1e-6:
        yield f"up to {with_tolerance_k:.2f} K off with its tolerance"


def _doubts(reference_name: str, other_name: str, comparison: Comparison) -> Iterator[str]:
    """What the figures leave open."""
    if comparison.tolerance_incomplete:
        yield f"the tolerance of {other_name} is not stated in full"
    if comparison.reference_extrapolated.any():
        span = range_text(comparison.reference.curve.span_c)
        yield f"readings outside {span} extrapolate the curve of {reference_name}"
    if comparison.other_extrapolated.any():
        yield f"the curve of {other_name} is extrapolated outside {range_text(comparison.other.curve.span_c)}"
    if not comparison.known.all():
        low, high = (number_text(t_c) for t_c in (comparison.t_c.min(), comparison.t_c.max()))
        yield f"a curve ends within the {low} to {high} °C asked for"
