"""How long a million R(T) and a million T(R) take, on a curve from a table and on one from Steinhart–Hart coefficients."""

from __future__ import annotations

import tempfile
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np
from make_catalog import make_catalog

from builder.part_curve import part_curve
from builder.records import read_catalog
from builder.units import Array

COUNT = 1_000_000
ROUNDS = 5


def fastest_s(evaluate: Callable[[Array], Array], values: Array) -> float:
    """CPU time of the fastest of some rounds: one thread does it, and it is steadier than wall time. [s]"""
    times_s = []
    for _ in range(ROUNDS):
        start_s = time.process_time()
        evaluate(values)
        times_s.append(time.process_time() - start_s)
    return min(times_s)


def main() -> None:
    with tempfile.TemporaryDirectory() as folder:
        make_catalog(Path(folder), parts=2, seed=1, curves=("csv", "steinhart-hart"))
        curves = [part_curve(record).curve for record in read_catalog(Path(folder)).parts]
    print("| curve from | a million R(T), CPU s | a million T(R), CPU s |\n| --- | ---: | ---: |")
    for curve in sorted(curves, key=lambda curve: curve.basis, reverse=True):
        # In no order: sorted temperatures would be kinder to the caches than a catalog is.
        t_c = np.random.default_rng(1).uniform(*curve.span_c, COUNT)
        there_s = fastest_s(curve.resistance_ohm, t_c)
        back_s = fastest_s(curve.temperature_c, curve.resistance_ohm(t_c))
        print(f"| {curve.basis} | {there_s:.3f} | {back_s:.3f} |")


if __name__ == "__main__":
    main()
