"""One divider's uncertainties and worst case, against three uncertainty libraries and all 16 corners (see the data)."""

import json
from pathlib import Path

import numpy as np
import pytest
from circuit_records import plain_thermistor, position

from builder.circuit import Rows, Thermistor, budget

POINTS = json.loads((Path(__file__).parent / "data" / "circuit_corners.json").read_text(encoding="utf-8"))["points"]
T_C = np.array([point["t_c"] for point in POINTS])
FIXED, ADC = {"tolerance_pct": 0.1}, {"offset_lsb": 2}


def rows(fitted: Thermistor, **changes) -> Rows:
    """The budget at the nine temperatures, in 5 K rows."""
    found = budget(position(**changes), fitted, fitted.made).rows
    assert set(T_C) <= set(found.t_c)
    return found


def at_points(found: Rows, values) -> np.ndarray:
    return np.asarray(values)[..., np.searchsorted(found.t_c, T_C)]


# What the libraries take as two limits, of R25 and of B, is one band here: each alone is compared.
PARTS = {
    "R25": ("thermistor", plain_thermistor(tolerance_pct=1)),
    "B": ("thermistor", plain_thermistor(b_tolerance_pct=1)),
    "RF": ("fixed resistor", plain_thermistor()),
    "code": ("offset", plain_thermistor()),
}


def standard_k(part: str) -> np.ndarray:
    source, fitted = PARTS[part]
    found = rows(fitted, fixed=FIXED, adc=ADC)
    return at_points(found, found.standard_k[source])


@pytest.mark.parametrize("part", PARTS)
def test_standard_uncertainty_of_a_source_is_the_libraries(part):
    expected_k = np.array([point["parts_k"][part] for point in POINTS])
    # The libraries are linear; a band's half width is exact, and 2 LSB of the 99 that remain at −40 °C are not little.
    within = 2e-4 if part == "code" else 5e-5
    assert standard_k(part) == pytest.approx(expected_k, rel=within, abs=5e-7)


def test_root_sum_of_squares_is_the_libraries():
    summed_k = np.sqrt(sum(standard_k(part) ** 2 for part in PARTS))
    assert summed_k == pytest.approx([point["u_k"] for point in POINTS], rel=5e-5)


def test_worst_case_is_that_of_the_16_corners():
    # ±2 LSB in all: offset and the half LSB of quantisation together.
    found = rows(plain_thermistor(tolerance_pct=1, b_tolerance_pct=1), fixed=FIXED, adc={"offset_lsb": 1.5})
    ends_k = at_points(found, [found.worst_min_k, found.worst_max_k]).T
    assert ends_k == pytest.approx(np.array([point["worst_k"] for point in POINTS]), abs=1e-3)


def test_codes_and_codes_per_kelvin_are_those_of_the_divider():
    found = rows(plain_thermistor())
    assert at_points(found, found.code) == pytest.approx([point["code"] for point in POINTS], rel=1e-6)
    assert at_points(found, found.codes_per_k) == pytest.approx([point["codes_per_k"] for point in POINTS], rel=1e-5)
