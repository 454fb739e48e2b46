"""What an instrument made for one part reads with another fitted, against the definition of the B-value by hand."""

import numpy as np
import pytest
from drawn_parts import ceramic_ohm, coefficients, plain, tabled
from numpy.testing import assert_allclose, assert_array_equal

from builder.comparisons import NoCommonRange, common_range_c, compared

T0_K, T1_K = 273.15, 298.15
T_C = np.array([-40.0, -10.0, 25.0, 60.0, 125.0])


def shown_c(r_ohm, r1_ohm, b_k):
    """T of R = r1·exp(B·(1/T − 1/T1)): IEC 60539-1's definition of the B-value, solved for T."""
    return 1 / (1 / T1_K + np.log(r_ohm / r1_ohm) / b_k) - T0_K


def other_ohm(t_c, factor=1.0, b_factor=1.0):
    return 10.2e3 * factor * np.exp(3380 * b_factor * (1 / (t_c + T0_K) - 1 / T1_K))


def test_reads_is_the_others_resistance_through_the_references_law_minus_the_temperature():
    found = compared(plain(10e3, 3435), plain(10.2e3, 3380), T_C)
    assert_allclose(found.reads_k, shown_c(other_ohm(T_C), 10e3, 3435) - T_C, atol=1e-6)
    assert_allclose(found.r_ohm, other_ohm(T_C), rtol=1e-12)
    assert_allclose(found.ratio_pct, 100 * (other_ohm(T_C) / found.r_ref_ohm - 1), rtol=1e-9)
    assert found.ratio_pct[2] == pytest.approx(2)


def test_band_is_the_others_corners_through_the_references_nominal_law():
    found = compared(plain(10e3, 3435, pct=5), plain(10.2e3, 3380, pct=2, b_pct=1.5), T_C)
    wider = np.where(T_C < 25, 1.015, 0.985)
    assert_allclose(found.reads_min_k, shown_c(other_ohm(T_C, 1.02, wider), 10e3, 3435) - T_C, atol=1e-6)
    assert_allclose(found.reads_max_k, shown_c(other_ohm(T_C, 0.98, 2 - wider), 10e3, 3435) - T_C, atol=1e-6)


def test_references_own_band_stands_beside_it():
    reference = plain(pct=2)
    found = compared(reference, plain(pct=1), T_C)
    assert_array_equal([found.reference_min_k, found.reference_max_k], reference.band.reads_k(T_C))


def test_summary_names_the_largest_reading_with_its_sign_and_temperature():
    found = compared(plain(10e3, 3435), plain(10e3, 3500), T_C)
    assert (found.worst_k, found.worst_at_c) == (found.reads_k[4], 125.0)
    assert found.worst_k > 0
    turned = compared(plain(10e3, 3435), plain(10e3, 3380), T_C)
    assert (turned.worst_k, turned.worst_at_c) == (turned.reads_k[4], 125.0)
    assert turned.worst_k < 0


def test_worst_with_tolerance_is_the_larger_end_of_the_band():
    found = compared(plain(), plain(10.5e3), T_C)
    assert found.worst_with_tolerance_k == -found.reads_min_k.min() > abs(found.worst_k)


def test_without_temperatures_the_common_range_is_taken_in_whole_steps_with_both_ends():
    found = compared(plain(operating_c=(-40, 83)), plain(operating_c=(-12, 125)))
    assert_array_equal(found.t_c, [-12, *range(-10, 81, 5), 83])


def test_common_range_is_what_all_parts_are_made_for():
    parts = [plain(operating_c=ends) for ends in ((-40, 105), (-55, 125), (-30, 150))]
    assert common_range_c(*parts) == (-30, 105)


def test_ranges_that_do_not_meet_are_named():
    with pytest.raises(NoCommonRange) as refused:
        compared(plain(operating_c=(-40, 50)), plain(operating_c=(60, 125)))
    message = "the operating ranges do not meet: −40 to 50 °C and 60 to 125 °C. Give the temperatures to compare at."
    assert str(refused.value) == message


@pytest.mark.parametrize(
    ("other", "inside", "overlap"),
    [
        (plain(pct=1), True, True),
        (plain(pct=0.5), True, True),
        (plain(pct=1.01), False, True),
        (plain(10.04e3, pct=0.5), True, True),
        (plain(10.06e3, pct=0.5), False, True),
        (plain(b_k=3500, pct=0.5), False, True),
        (plain(10.3e3, pct=1), False, False),
    ],
)
def test_bands_are_inside_or_overlap_at_every_temperature(other, inside, overlap):
    found = compared(plain(pct=1), other, T_C)
    assert (found.within_reference_band, found.bands_overlap) == (inside, overlap)


def test_extrapolation_of_either_curve_is_marked():
    t_c = np.arange(-20.0, 101, 20)
    reference = tabled(t_c, ceramic_ohm(t_c, 10e3, 3435, 0), operating_c=(-40, 120))
    other = coefficients(span_c=(0, 60))
    found = compared(reference, other, [-30.0, -10.0, 0.0, 60.0, 100.0])
    assert_array_equal(found.other_extrapolated, [True, True, False, False, True])
    # At 100 °C the reference's table still holds, but the reading lies beyond its end.
    assert found.reads_k[4] > 0
    assert_array_equal(found.reference_extrapolated, [True, False, False, False, True])


@pytest.mark.parametrize("swapped", [False, True])
def test_there_is_no_reading_where_one_of_the_curves_ends(swapped):
    ends = coefficients(a=1.0e-3, b=2.6e-4, c=-1e-8, span_c=(0, 80))
    parts = (plain(), ends)
    found = compared(*(parts[::-1] if swapped else parts), [-20.0, 0.0, 40.0, 80.0, 100.0])
    for values in (found.reads_k, found.reads_min_k, found.reads_max_k):
        assert_array_equal(np.isfinite(values), [False, True, True, True, False])
    assert found.worst_k == found.reads_k[np.nanargmax(np.abs(found.reads_k))]


def test_where_no_curve_reaches_there_is_no_worst():
    ends = coefficients(a=1.0e-3, b=2.6e-4, c=-1e-8, span_c=(0, 80))
    found = compared(plain(), ends, [-20.0, 100.0])
    assert np.isnan([found.worst_k, found.worst_at_c, found.worst_with_tolerance_k]).all()
    assert (found.within_reference_band, found.bands_overlap) == (False, False)


def test_nothing_is_claimed_of_a_band_that_lacks_a_tolerance():
    assert compared(plain(pct=1), plain(pct=0.5), T_C).within_reference_band
    assert not compared(plain(pct=1), plain(pct=None), T_C).within_reference_band


def test_tolerance_that_the_other_does_not_state_is_noted():
    assert not compared(plain(), plain()).tolerance_incomplete
    assert compared(plain(), plain(pct=None)).tolerance_incomplete
    assert not compared(plain(pct=None), plain()).tolerance_incomplete
