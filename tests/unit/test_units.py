"""Temperatures, R-K-M codes, and numbers as people read them."""

import math

import numpy as np
import pytest

from builder.units import (
    celsius,
    compared_text,
    kelvin,
    number_text,
    ohms_from_text,
    range_text,
    resistance_from_code,
    resistance_text,
    signed_text,
    temperature_text,
)

# Examples of IEC 60062 as two public pages give them (en.wikipedia.org/wiki/IEC/EN_60062 and probsee.com/p/RKM_code);
# the standard itself was not read.
CODES = {
    "R47": 0.47, "4R7": 4.7, "470R": 470.0, "4K7": 4700.0, "47K": 47000.0, "47K3": 47300.0, "470K": 470000.0,
    "4M7": 4700000.0, "R10": 0.1, "1K0": 1000.0, "2M2": 2200000.0,
}  # fmt: skip


@pytest.mark.parametrize(("code", "r_ohm"), CODES.items())
def test_a_code_is_the_resistance_that_the_standard_gives_it(code, r_ohm):
    assert resistance_from_code(code) == r_ohm
    assert ohms_from_text(code) == r_ohm


@pytest.mark.parametrize("code", ["4k7", "4K7", "4r7", "4R7"])
def test_a_small_k_or_r_is_read_as_the_large_one(code):
    assert resistance_from_code(code) == resistance_from_code(code.upper())


@pytest.mark.parametrize("text", ["1m0", "k", "R", "", "4.7k", "4k7J", "10KK", "1L0", "10", " 4k7", "4k7\n", "-4k7", "٤k٧", "1" * 13 + "k"])  # fmt: skip
def test_what_is_no_code_is_refused(text):
    with pytest.raises(ValueError, match="is no R-K-M code"):
        resistance_from_code(text)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("1_000", "1_000 is not a resistance: write ohms as a number, or an R-K-M code such as 4k7"),
        ("10 kΩ", "10 kΩ is not a resistance: write ohms as a number, or an R-K-M code such as 4k7"),
        ("6,8", "6,8 is not a resistance: write ohms as a number, or an R-K-M code such as 4k7"),
        ("nan", "nan is not a resistance: write ohms as a number, or an R-K-M code such as 4k7"),
        ("٣", "٣ is not a resistance: write ohms as a number, or an R-K-M code such as 4k7"),
        ("0", "0 Ω is not a resistance above zero"),
        ("-5", "-5 Ω is not a resistance above zero"),
        ("0R0", "0R0 Ω is not a resistance above zero"),
        ("1e999", "1e999 Ω is not a resistance above zero"),
    ],
)
def test_typed_text_that_is_no_resistance_is_told(text, message):
    with pytest.raises(ValueError) as refused:
        ohms_from_text(text)
    assert str(refused.value) == message


# The ice point and the triple point of water, by the definition of the Celsius scale (SI brochure, 9th edition, 2.3.1).
@pytest.mark.parametrize(("t_c", "t_k"), [(0.0, 273.15), (0.01, 273.16), (-273.15, 0.0)])
def test_celsius_and_kelvin_are_273_15_apart(t_c, t_k):
    assert kelvin(t_c) == pytest.approx(t_k, abs=1e-12)
    assert celsius(t_k) == pytest.approx(t_c, abs=1e-12)


def test_arrays_of_temperatures_keep_their_shape():
    t_c = np.array([[-40.0, 25.0], [85.0, 125.0]])
    np.testing.assert_allclose(celsius(kelvin(t_c)), t_c, rtol=0, atol=1e-12)


@pytest.mark.parametrize(
    ("value", "digits", "text"),
    [
        (6830.0, 6, "6830"), (0.25, 6, "0.25"), (-40.0, 6, "−40"), (0.0, 6, "0"), (-0.0, 6, "0"), (1234567.0, 6, "1234567"),
        (1e9, 6, "1e9"), (1e12, 6, "1e12"), (8.775e-8, 6, "8.775e−8"), (-1.5e-7, 3, "−1.5e−7"), (0.0001, 6, "0.0001"), (99999.96, 6, "100000"),
        (1 / 3, 6, "0.333333"), (2 / 3, 2, "0.67"), (math.nan, 6, "–"), (math.inf, 6, "inf"), (-math.inf, 6, "−inf"), (1, 6, "1"),
    ],
)  # fmt: skip
def test_a_number_is_as_short_as_its_digits_allow(value, digits, text):
    assert number_text(value, digits) == text


@pytest.mark.parametrize(
    ("r_ohm", "text"),
    [(4700.0, "4.7 kΩ"), (99.6, "99.6 Ω"), (2.2e6, "2.2 MΩ"), (0.47, "0.47 Ω"), (999.999, "1 kΩ"), (999_999.9, "1 MΩ"), (999.98, "999.98 Ω"), (336049.695, "336.05 kΩ"), (0.0, "0 Ω")],
)  # fmt: skip
def test_a_resistance_has_the_prefix_for_what_is_printed(r_ohm, text):
    assert resistance_text(r_ohm) == text


def test_temperatures_have_a_true_minus_and_their_unit():
    assert temperature_text(-40.0) == "−40 °C"
    assert range_text((-40, 124.5)) == "−40 to 124.5 °C"


@pytest.mark.parametrize(
    ("difference_k", "text"),
    [(0.251, "+0.25"), (-1.1, "−1.10"), (0.0, "0.00"), (-0.0001, "0.00"), (0.004, "0.00"), (0.006, "+0.01"), (math.nan, "–")],
)  # fmt: skip
def test_a_difference_has_its_sign_unless_it_is_zero(difference_k, text):
    assert signed_text(difference_k) == text


@pytest.mark.parametrize(
    ("value", "limit", "text"),
    [
        (1.6004, 1.6, "1.6004"),
        (1.598, 1.5985, "1.598"),
        (1.6, 1.6, "1.6"),
        (1.59999, 1.6, "1.6"),
        (np.nextafter(1.6, 2), 1.6, "1.6000000000000003"),
        (math.nan, 1.6, "–"),
    ],
)
def test_number_beside_a_limit_stays_on_its_side(value, limit, text):
    assert compared_text(value, limit, 3) == text
