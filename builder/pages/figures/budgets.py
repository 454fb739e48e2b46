"""A budget in two figures: errors against the limit, and what each source adds."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from builder.circuit import Budget
from builder.pages.figures import Band, Limit, Line, Mark, reads_figure, stack_figure
from builder.pages.figures.scales import FloatArray
from builder.units import compared_text, number_text, range_text, temperature_text

# As many layers as hatching keeps apart.
_MOST_LAYERS = 6


def budget_figure(budget: Budget) -> str:
    """Bias, statistical band and worst case of a budget over its range, against the limit."""
    rows, position = budget.rows, budget.position
    middle_k = rows.bias_k + rows.shift_k
    far = rows.extrapolated
    marks: list[Mark] = [
        Band("worst case", rows.t_c, rows.worst_min_k, rows.worst_max_k, far, series=2),
        Band("statistical, k = 2", rows.t_c, middle_k - rows.expanded_k, middle_k + rows.expanded_k, far),
        Line("bias", rows.t_c, rows.bias_k, far),
        Limit(f"limit ±{number_text(position.limit_k)} K", position.limit_k),
    ]
    title = f"Error of the reading at {position.position} from {range_text(position.range_c)}"
    described = (
        f"Worst case {compared_text(budget.worst_k, position.limit_k, 3)} K at {temperature_text(budget.worst_at_c)}, "
        f"limit ±{number_text(position.limit_k)} K."
    )
    return reads_figure(title, described, marks)


def sources_figure(budget: Budget) -> str:
    """Half the band of every source of a budget, stacked over its range, the largest at the bottom."""
    widths_k = layers_k(budget)
    title = f"What each source adds at {budget.position.position}"
    largest = ", ".join(f"{name} {number_text(float(np.nanmax(k)), 3)} K" for name, k in widths_k.items())
    return stack_figure(title, f"Largest half-widths: {largest}.", budget.rows.t_c, widths_k, label="Half-width (K)")


def layers_k(budget: Budget) -> Mapping[str, FloatArray]:
    """Half the band of each source by its name, the largest first; the smallest of many are put together."""
    halves_k = {name: (high - low) / 2 for name, (low, high) in budget.rows.sources_k.items()}
    names = sorted(halves_k, key=lambda name: -float(np.nan_to_num(halves_k[name]).max()))
    if len(names) <= _MOST_LAYERS:
        return {name: halves_k[name] for name in names}
    alone, rest = names[: _MOST_LAYERS - 1], names[_MOST_LAYERS - 1 :]
    together: FloatArray = np.sum([halves_k[name] for name in rest], axis=0)
    return {name: halves_k[name] for name in alone} | {" + ".join(rest): together}
