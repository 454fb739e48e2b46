"""R–T tables of an RTOS's thermistor driver: two real ceramics left alone, one computed from a single B-value named.

Source: Zephyr RTOS, drivers/sensor/ntc_thermistor/ntc_thermistor.c (Apache-2.0), its three tables in file order.
"""

from __future__ import annotations

import numpy as np
import pytest

from builder.misprints import Rated, Table, findings

T_C = np.arange(-25.0, 126.0, 10.0)
TABLE_1_OHM = np.array(
    [
        146676, 78875, 44424, 26075, 15881, 10000, 6488, 4326,
        2956, 2066, 1474, 1072, 793, 596, 454, 351,
    ],
    dtype=float,
)  # fmt: skip
TABLE_2_OHM = np.array(
    [
        655802, 360850, 206463, 122259, 74730, 47000, 30334, 20048,
        13539, 9328, 6544, 4674, 3388, 2494, 1860, 1406,
    ],
    dtype=float,
)  # fmt: skip
TABLE_3_OHM = np.array(
    [
        86560, 53460, 33930, 22070, 14700, 10000, 6942, 4911,
        3536, 2588, 1924, 1451, 1110, 860, 674, 534,
    ],
    dtype=float,
)  # fmt: skip


@pytest.mark.parametrize(("r_ohm", "rated_ohm"), [(TABLE_2_OHM, 47e3), (TABLE_3_OHM, 10e3)])
def test_tables_of_real_ceramics_are_left_alone(r_ohm: np.ndarray, rated_ohm: float) -> None:
    assert findings(Table(T_C, r_ohm), Rated(rated_ohm)) == ()


def test_the_table_computed_from_one_b_value_is_named() -> None:
    (found,) = findings(Table(T_C, TABLE_1_OHM), Rated(10e3))
    assert (found.rule, found.slip, found.row) == ("b-order", "constant-b", None)


@pytest.mark.parametrize("row", range(16))
@pytest.mark.parametrize("r_ohm", [TABLE_2_OHM, TABLE_3_OHM])
def test_three_per_cent_in_any_row_of_a_real_table_is_reported_there_alone(r_ohm: np.ndarray, row: int) -> None:
    spoilt = r_ohm.copy()
    spoilt[row] = np.rint(spoilt[row] * 1.03)
    assert [(one.rule, one.row) for one in findings(Table(T_C, spoilt))] == [("row-out-of-line", row)]
