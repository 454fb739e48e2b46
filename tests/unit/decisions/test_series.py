"""The preferred numbers, against the library eseries and the products of IEC 60063's formula."""

import numpy as np
import pytest
from eseries import ESeries, erange
from eseries import series as values_of

from builder.decisions import series_ohm

LIBRARY = {"E24": ESeries.E24, "E96": ESeries.E96}


@pytest.mark.parametrize("name", LIBRARY)
def test_values_are_those_of_the_library(name):
    digits = 10 if name == "E24" else 100
    assert series_ohm(name, digits, 10 * digits - 1).tolist() == list(values_of(LIBRARY[name]))


@pytest.mark.parametrize("name", LIBRARY)
@pytest.mark.parametrize(("low_ohm", "high_ohm"), [(0.47, 5.6), (9.76, 10.2), (220, 1e6), (3.3e6, 9.1e8)])
def test_values_over_decades_are_those_of_the_library(name, low_ohm, high_ohm):
    expected_ohm = [value for value in erange(LIBRARY[name], low_ohm, high_ohm) if low_ohm <= value <= high_ohm]
    assert series_ohm(name, low_ohm, high_ohm) == pytest.approx(np.array(expected_ohm), rel=1e-12)


def test_values_are_the_decimals_that_are_printed_on_them():
    assert series_ohm("E96", 10.1, 10.3).tolist() == [10.2]
    assert series_ohm("E24", 0.043, 0.043).tolist() == [0.043]


def test_both_ends_belong_to_a_range():
    assert series_ohm("E24", 4700, 5600).tolist() == [4700, 5100, 5600]
