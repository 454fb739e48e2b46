"""Readings of one table through another, against scipy's PchipInterpolator in (1/T, ln R) and its root by brentq.

The tables are those of an RTOS's thermistor driver (the source stands in the data), and ceramics drawn at random.
"""

import itertools
import json
from pathlib import Path

import numpy as np
import pytest
from scipy.interpolate import PchipInterpolator
from scipy.optimize import brentq

from builder.comparisons import compared
from builder.part_curve import PartCurve, part_curve
from builder.records import Part, PartRecord, Source
from builder.records.table import TableData

DATA = json.loads((Path(__file__).parent / "data" / "comparisons_rtos_tables.json").read_text(encoding="utf-8"))
RTOS = [np.array(rows, dtype=float).T for rows in DATA["tables"]]
WITHIN_K = 0.002


def drawn(seed):
    """A ceramic's table: its own range, even or uneven rows, five digits."""
    random = np.random.default_rng(seed)
    low_c, step_k = random.uniform(-50, -20), random.choice([1.0, 5.0, 10.0])
    rows = int((random.uniform(90, 150) - low_c) / step_k)
    t_c = np.round(low_c + step_k * (np.arange(rows) + random.uniform(-0.3, 0.3, rows)), 1)
    d = 1 / (t_c + 273.15) - 1 / 298.15
    ln_ratio = random.normal(3700, 60) * d + random.uniform(-2.5e5, -1.2e5) * d**2
    r_ohm = 10e3 * np.exp(random.normal(0, 0.03) + ln_ratio)
    return np.stack([t_c, [float(f"{r:.5g}") for r in r_ohm]])


def part(t_c, r_ohm) -> PartCurve:
    fields = {"part": "X1", "maker": "Maker", "body": {"form": "bead"}, "rated": {"resistance_ohm": 10e3}}
    columns = {"columns": ["t_c", "r_ohm"], "rows": np.stack([t_c, r_ohm], axis=1).tolist()}
    table = TableData("X1.yaml", tuple(range(len(t_c))), t_c, r_ohm)
    return part_curve(
        PartRecord(Part.model_validate(fields | {"r_t_table": columns}), Source("X1.yaml", "X1.yaml", {}), table)
    )


def scipys_reads_k(reference, other, t_c):
    """Not a number where a resistance lies outside a table."""
    ln_r = PchipInterpolator(1 / (other[0][::-1] + 273.15), np.log(other[1][::-1]), extrapolate=False)
    x = 1 / (reference[0][::-1] + 273.15)
    own = PchipInterpolator(x, np.log(reference[1][::-1]))
    return np.array([_root_c(own, x, ln_r(1 / (t + 273.15))) - t for t in t_c])


def _root_c(own, x, ln_r):
    if not own(x[0]) <= ln_r <= own(x[-1]):
        return np.nan
    return 1 / brentq(lambda at: own(at) - ln_r, x[0], x[-1], xtol=1e-15, rtol=1e-14) - 273.15


def agree(reference, other, least):
    # Between the rows' tenths of a degree: at the very end of a table rounding would decide.
    t_c = np.arange(-49.03, 150.0, 1.7)
    expected_k = scipys_reads_k(reference, other, t_c)
    found = compared(part(*reference), part(*other), t_c)
    inside = np.isfinite(expected_k)
    assert inside.sum() >= least
    np.testing.assert_allclose(found.reads_k[inside], expected_k[inside], rtol=0, atol=WITHIN_K)
    beyond = ~inside | (t_c < reference[0][0]) | (t_c > reference[0][-1])
    np.testing.assert_array_equal(found.reference_extrapolated | found.other_extrapolated, beyond)


@pytest.mark.parametrize(("reference", "other"), list(itertools.permutations(range(3), 2)))
def test_rtos_tables_read_through_each_other_as_scipy_reads_them(reference, other):
    agree(RTOS[reference], RTOS[other], least=50)


@pytest.mark.parametrize("seed", range(20))
def test_drawn_tables_read_through_each_other_as_scipy_reads_them(seed):
    agree(drawn(seed), drawn(seed + 100), least=50)
