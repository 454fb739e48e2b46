"""The table against the record's ratings, and against the straight line of a single B-value."""

from __future__ import annotations

from math import exp, log

import numpy as np

from builder.misprints.smoothness import Smooth
from builder.misprints.table import ZERO_C_K, Finding, Rated

_RATED_K = 0.5  # 2 %: tables hold their rated resistance far better, tables of other parts do not
_B_SHARE = 0.01  # stated B-values are rounded, to 25 K at the worst
_SIGMAS = 4.0
_ROUNDINGS = 1.5
_STRAIGHT_K2 = 2e4  # the flattest bend of a real ceramic is −3e4 K²


def findings(curve: Smooth, span_c: tuple[float, float], rated: Rated) -> list[Finding]:
    """The rated resistance and the B-values that the table does not have, as far as it reaches to them."""
    at_c = np.array([rated.rated_c, *(t_c for t1_c, t2_c, _ in rated.b_values for t_c in (t1_c, t2_c))])
    inside = (span_c[0] <= at_c) & (at_c <= span_c[1])
    x, points = 1 / (at_c + ZERO_C_K), curve.points
    near = np.abs(points.x_per_k[:, None] - x).argmin(axis=0)
    ln_r, sigma, half = curve.ln_r(at_c), curve.expected_sigma[near], points.half[near]
    found = []
    if inside[0] and rated.rated_resistance_ohm is not None:
        off, slope_per_k = float(ln_r[0]) - log(rated.rated_resistance_ohm), float(points.slope_per_k[near[0]])
        if abs(off) > _RATED_K * slope_per_k + half[0] + _SIGMAS * sigma[0]:
            found.append(_rated_differs(rated, float(ln_r[0]), off, slope_per_k))
    for i, (t1_c, t2_c, stated_k) in enumerate(rated.b_values):
        one, two = 2 * i + 1, 2 * i + 2
        b_k, noise = (ln_r[one] - ln_r[two]) / (x[one] - x[two]), np.hypot(sigma[one], sigma[two])
        allowed_k = _B_SHARE * stated_k + _SIGMAS * noise / abs(x[one] - x[two])
        if inside[one] and inside[two] and abs(b_k - stated_k) > allowed_k:
            pair = f"{t1_c:g}/{t2_c:g}"
            found.append(Finding("b-differs", value=float(b_k), expected=stated_k, slip="another-part", about=pair))
    return found


def _rated_differs(rated: Rated, ln_r: float, off: float, slope_per_k: float) -> Finding:
    return Finding(
        "rated-differs", t_c=rated.rated_c, value=exp(ln_r), expected=rated.rated_resistance_ohm,
        reads_k=-off / slope_per_k, slip="another-part",
    )  # fmt: skip


def is_straight(curve: Smooth) -> bool:
    """Whether one B-value gives every row to within its rounding, and no bend of a real ceramic would.

    Rounding may hide a bend in a coarse, short table; such a table is not called straight.
    """
    points, kept = curve.points, curve.kept
    y, half = points.y[kept], points.half[kept]
    terms = np.vander((points.x_per_k[kept] - points.middle_per_k) / points.reach_per_k, 3, increasing=True)
    weighted = terms / half[:, None]
    normal, right = weighted.T @ weighted, weighted.T @ (y / half)
    line = np.linalg.solve(normal[:2, :2], right[:2])
    if (np.abs(y - terms[:, :2] @ line) > _ROUNDINGS * half + 1e-6).any():
        return False
    scatter = np.linalg.inv(normal)
    bend, sigma = float(scatter[2] @ right), float(np.sqrt(scatter[2, 2] / 3))
    return (abs(bend) + 3 * sigma) / points.reach_per_k**2 < _STRAIGHT_K2
