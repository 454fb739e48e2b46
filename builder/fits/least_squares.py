"""Least squares by Gauss–Newton with step halving."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from builder.units import Array

Model = Callable[[Array], tuple[Array, Array]]

_STEPS = 200
_HALVINGS = 40
_CONVERGED = 1e-13


def solution(matrix: Array, right: Array) -> Array:
    """The x that makes ``matrix @ x`` closest to ``right``."""
    return np.asarray(np.linalg.lstsq(matrix, right, rcond=None)[0], dtype=np.float64)


def centred(values: Array) -> tuple[Array, float, float]:
    """Values brought to −1…1, and the middle and half width that were taken out; powers of them condition well."""
    middle, half = float(values.max() + values.min()) / 2, float(values.max() - values.min()) / 2
    return (values - middle) / half, middle, half


def minimum(model: Model, start: Array, observed: Array) -> Array:
    """Parameters that bring a model closest to observed values.

    Parameters
    ----------
    model : callable
        Takes parameters of about equal effect; returns the values, NaN where the parameters make no sense, and
        their derivatives by each parameter, one column each; the model's own; no unit.
    start : array of shape (p,)
        Parameters to begin with; the model's own; no unit.
    observed : array of shape (n,)
        Values to come close to, as the model gives them; no unit.

    Returns
    -------
    array of shape (p,)
        Parameters at the minimum of the sum of squares; the model's own units.

    Raises
    ------
    ValueError
        No minimum found.

    Notes
    -----
    Each Gauss–Newton step is halved until the sum of squares does not grow. Converged means that a whole step
    would move the values by less than 1e-13 of the observed ones, both as root sums of squares: the errors
    are then orthogonal to everything the parameters can change (Bates and Watts' criterion of orthogonality),
    which a small change of the sum of squares would not show.
    """
    noise = _CONVERGED * float(np.linalg.norm(observed))
    point = start
    values, slopes = model(point)
    for _ in range(_STEPS):
        if not np.isfinite(values).all():
            break
        step = solution(slopes, observed - values)
        if np.linalg.norm(slopes @ step) <= noise:
            return np.asarray(point + step)
        # Close to the minimum a fall of the errors can no longer be told from noise.
        bound = float(np.linalg.norm(observed - values)) + noise
        point, values, slopes = _shortened(model, point, step, observed, bound)
    raise ValueError("the least squares found no minimum for these points")


def _shortened(model: Model, point: Array, step: Array, observed: Array, bound: float) -> tuple[Array, Array, Array]:
    """The model after the longest halved step that keeps the errors in bounds; after a tiny one if none does."""
    for halvings in range(_HALVINGS):
        trial = point + step * 0.5**halvings
        values, slopes = model(trial)
        if np.linalg.norm(observed - values) <= bound:
            break
    return trial, values, slopes
