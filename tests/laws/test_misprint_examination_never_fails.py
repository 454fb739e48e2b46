"""Whatever is typed, the examination answers."""

from __future__ import annotations

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from builder.misprints import Rated, Table, findings

POSITIVE = st.floats(min_value=0.0, exclude_min=True, allow_infinity=False)
NUMBERS = st.one_of(
    POSITIVE,
    st.sampled_from([5e-324, 1e-320, 1e-300, 1e-9, 1e15, 1e300, 1.7e308]),
    st.floats(),
    st.floats(1.0, 1e6),
    st.sampled_from([0.0, -1.0, 1e4, 1e4]),
)
TEMPERATURES = st.one_of(st.floats(), st.integers(-60, 300).map(float), st.sampled_from([25.0, 25.0, -273.15]))
RATED = st.sampled_from(
    [None, Rated(), Rated(1e4), Rated(5e-324), Rated(1.7e308), Rated(1e4, 25.0, ((25.0, 85.0, 3900.0),))]
)


@given(st.lists(st.tuples(TEMPERATURES, NUMBERS, NUMBERS, NUMBERS), max_size=20), RATED)
@settings(max_examples=60, deadline=None, derandomize=True)
def test_any_columns_are_answered(rows: list[tuple[float, float, float, float]], rated: Rated | None) -> None:
    t_c, r_ohm, low, high = (np.array([row[i] for row in rows], dtype=float) for i in range(4))
    for found in findings(Table(t_c, r_ohm, low, high), rated):
        assert found.row is None or 0 <= found.row < len(rows)


@given(st.data())
@settings(max_examples=40, deadline=None, derandomize=True)
def test_any_spoilt_table_is_answered(data: st.DataObject) -> None:
    t_c = np.arange(-40.0, 126.0, 10.0)
    r_ohm = np.round(1e4 * np.exp(3900 * (1 / (t_c + 273.15) - 1 / 298.15)), 1)
    for _ in range(data.draw(st.integers(0, 6))):
        column = data.draw(st.sampled_from([t_c, r_ohm]))
        column[data.draw(st.integers(0, t_c.size - 1))] = data.draw(NUMBERS)
    with np.errstate(over="ignore"):
        table = Table(t_c, r_ohm, r_ohm * 0.9, r_ohm * 1.1)
    assert isinstance(findings(table, data.draw(RATED)), tuple)


@given(st.integers(0, 16), POSITIVE, RATED)
@settings(max_examples=100, deadline=None, derandomize=True)
def test_any_positive_number_in_one_cell_is_answered(row: int, value: float, rated: Rated | None) -> None:
    t_c = np.arange(-40.0, 126.0, 10.0)
    r_ohm = np.round(1e4 * np.exp(3900 * (1 / (t_c + 273.15) - 1 / 298.15)), 1)
    r_ohm[row] = value
    assert isinstance(findings(Table(t_c, r_ohm, r_ohm, r_ohm), rated), tuple)
