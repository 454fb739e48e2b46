"""Curves from B-values against fourteen public R–T tables, each reduced to its own rounded B-values."""

import json
from pathlib import Path

import numpy as np
import pytest
from curve_record import curve_of

TABLES = json.loads((Path(__file__).parent / "data" / "curves_fourteen_tables.json").read_text(encoding="utf-8"))[
    "tables"
]
SINGLES = [pair for table in TABLES for pair in table["pairs"]]


def _r_ohm(pair, t_c, bend_k2, r25_ohm=10e3):
    """The table's resistance: its bend put into the law that the bend was taken from."""
    d, d2 = 1 / (t_c + 273.15) - 1 / 298.15, 1 / (pair["between_c"][1] + 273.15) - 1 / 298.15
    return r25_ohm * np.exp(pair["b_k"] * d + bend_k2 * (d**2 - d * d2))


def _missed_k(folder, table, count, at_c, r25_ohm):
    """What a curve from the first B-values reads at a temperature, minus it; None where the table does not go."""
    stated = [{"between_c": pair["between_c"], "b_k": pair["b_k"]} for pair in table["pairs"][:count]]
    made = curve_of(folder, {"resistance_ohm": r25_ohm}, b_values=stated)
    assert made.curve.basis == "b-values"
    bends = [bend_k2 for t_c, bend_k2, _ in table["pairs"][1]["bends"] if t_c == at_c]
    return [float(made.curve.temperature_c(_r_ohm(table["pairs"][1], at_c, c, r25_ohm))) - at_c for c in bends]


# A ceramic's shape does not depend on how large the part is, the bend of the Steinhart–Hart law does: the figures are
# those of 10 kΩ parts, and low resistances keep them because their law is taken in a smaller unit than 1 Ω.
@pytest.mark.parametrize("r25_ohm", [10e3, 100.0, 3.0])
@pytest.mark.parametrize(("count", "at_c", "within_k"), [(2, -40, 1.0), (2, 125, 0.95), (3, -40, 1.5), (3, 125, 0.95)])
def test_several_b_values_come_back(tmp_path, count, at_c, within_k, r25_ohm):
    missed_k = [k for table in TABLES for k in _missed_k(tmp_path, table, count, at_c, r25_ohm)]
    assert len(missed_k) == (14 if at_c == -40 else 12)
    assert np.abs(missed_k).max() < within_k


def test_single_b_value_used_plainly_reads_2_to_5_k_high_at_40_below_zero(tmp_path):
    for pair in SINGLES:
        stated = [{"between_c": pair["between_c"], "b_k": pair["b_k"]}]
        curve = curve_of(tmp_path, {"resistance_ohm": 10000}, b_values=stated, shape="plain").curve
        for t_c, bend_k2, reads_high_k in pair["bends"]:
            assert float(curve.temperature_c(_r_ohm(pair, t_c, bend_k2))) - t_c == pytest.approx(reads_high_k, abs=6e-3)
    cold = [reads_high_k for pair in SINGLES for t_c, _, reads_high_k in pair["bends"] if t_c == -40]
    assert (min(cold), max(cold)) == (2.24, 4.70)


def test_shape_allowance_holds_every_table_on_both_sides(tmp_path):
    held = 0
    for pair in SINGLES:
        stated = [{"between_c": pair["between_c"], "b_k": pair["b_k"]}]
        made = curve_of(tmp_path, {"resistance_ohm": 10000}, b_values=stated)
        for t_c, bend_k2, _ in pair["bends"]:
            low_ohm, high_ohm = made.band.edges_ohm(t_c)
            held += low_ohm <= _r_ohm(pair, t_c, bend_k2) <= high_ohm
    assert held == 162
