"""A record and a table in which the cross-checks find nothing, and ways to break one thing in them."""

from __future__ import annotations

from collections.abc import Callable, Mapping

from builder.problems import Problem

# A published 10 kΩ set of coefficients, 1.129241e-3, 2.341077e-4, 8.775468e-8, solved for R and printed to four digits.
ROWS_OHM: Mapping[int, float] = {
    -20: 97000, -15: 72910, -10: 55300, -5: 42320, 0: 32650, 5: 25390, 10: 19900, 15: 15710, 20: 12490, 25: 10000,
    30: 8056, 35: 6530, 40: 5325, 45: 4367, 50: 3601, 55: 2985, 60: 2487, 65: 2082, 70: 1752, 75: 1480, 80: 1256,
    85: 1070,
}  # fmt: skip

RECORD = """\
part: PX-1
maker: Pellworm
body: {form: leaded}
rated: {resistance_ohm: 10k, tolerance_pct: 1}
b_values:
  - {between_c: [25, 50], b_k: 3936, tolerance_pct: 1}
  - {between_c: [25, 85], b_k: 3977, tolerance_pct: 1}
limits: {operating_c: [-20, 85]}
documents: [{title: data sheet}]
standing:
  - {state: proposed, on: 2026-01-01, by: sensors, because: tested, review_due: 2027-01-01}
"""
COEFFICIENTS = "steinhart_hart: {a: 1.129241e-3, b: 2.341077e-4, c: 8.775468e-8, span_c: [-20, 85]}\n"
CLEAN = tuple(ROWS_OHM.items())

Check = Callable[..., tuple[Problem, ...]]


def with_row(t_c: int, *row: object) -> list[tuple[object, ...]]:
    """The clean table with another row, or none, in place of that of a temperature."""
    place = [*ROWS_OHM].index(t_c)
    return [*CLEAN[:place], *([row] if row else []), *CLEAN[place + 1 :]]
