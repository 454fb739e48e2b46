from __future__ import annotations

import numpy as np
import pytest

from builder.misprints.rounding import printed, significant_digits


def test_digits_are_counted_without_trailing_zeros() -> None:
    assert significant_digits(np.array([32650.0, 0.0123, 1.0, 47.05, 1 / 3])).tolist() == [4, 3, 1, 4, 8]


def test_a_zero_by_chance_does_not_make_a_row_coarser() -> None:
    assert printed(np.array([33210.0, 31520.0, 30000.0, 28470.0, 27080.0])).digits.tolist() == [4, 4, 4, 4, 4]


def test_rows_printed_more_coarsely_from_some_row_on_are_coarser() -> None:
    r_ohm = np.array([3321.4, 3152.3, 2992.8, 2840.0, 2710.0, 2580.0])
    assert printed(r_ohm).digits.tolist() == [5, 5, 5, 3, 3, 3]


def test_fixed_decimals_lose_a_digit_with_every_decade() -> None:
    assert printed(np.array([1.234, 1.055, 0.912, 0.784])).digits.tolist() == [4, 4, 3, 3]


def test_fixed_digits_stay_over_decades() -> None:
    assert printed(np.array([12.34, 10.55, 9.123, 7.841, 6.702])).digits.tolist() == [4, 4, 4, 4, 4]


def test_half_a_unit_is_a_share_of_the_value() -> None:
    assert printed(np.array([534.0, 521.0, 508.0])).half == pytest.approx([0.5 / 534, 0.5 / 521, 0.5 / 508])


def test_a_row_is_printed_as_finely_as_the_rows_around_it() -> None:
    three_digits = printed(np.array([2490.0, 2370.0, 2206.0, 2150.0, 2050.0, 1960.0]))
    assert three_digits.prints(2, 2260.0)
    assert not three_digits.prints(2, 2256.0)


def test_fixed_decimals_allow_more_digits_above_a_decade() -> None:
    two_decimals = printed(np.array([9.85, 9.41, 9.02, 8.66, 8.31]))
    assert two_decimals.prints(0, 10.25)
    assert not two_decimals.prints(0, 10.257)
