from __future__ import annotations

import pytest

from builder.misprints import Slip
from builder.misprints.slips import edits, explanations, temperature_edits


@pytest.mark.parametrize(
    ("typed", "digits", "kind", "was"),
    [
        (6830.0, 4, "one-digit", 6530.0),
        (6350.0, 4, "two-digits-swapped", 6530.0),
        (65.3, 4, "decimal-place", 653.0),
        (65300.0, 4, "decimal-place", 6530.0),
        (6530000.0, 4, "comma-for-point", 6530.0),
        (6.53, 4, "kilo-missed", 6530.0),
        (145.0, 3, "two-digits-swapped", 1045.0),
        (32650.0, 5, "one-digit", 32651.0),
    ],
)
def test_every_single_slip_is_undone(typed: float, digits: int, kind: str, was: float) -> None:
    assert Slip(kind, was) in [slip for slip, _ in edits(typed, digits)]


def every(_: float) -> bool:
    return True


def test_the_only_likely_slip_is_named_alone() -> None:
    assert explanations(6830.0, 4, expected=6529.6, sigma=2e-4, most=3e-3, prints=every) == (Slip("one-digit", 6530.0),)


def test_slips_that_explain_equally_well_are_all_given() -> None:
    found = explanations(6537.0, 4, expected=6530.5, sigma=5e-4, most=3e-3, prints=every)
    assert {Slip("one-digit", 6530.0), Slip("one-digit", 6531.0)} <= set(found)


def test_no_slip_is_given_where_none_explains_the_value() -> None:
    assert explanations(6830.0, 4, expected=4711.0, sigma=2e-4, most=1e-3, prints=every) == ()


def test_a_value_that_the_table_would_not_print_is_no_explanation() -> None:
    among = {"expected": 2258.0, "sigma": 2e-3, "most": 1e-2}
    assert Slip("one-digit", 2256.0) in explanations(2206.0, 4, **among, prints=every)
    found = explanations(2206.0, 4, **among, prints=lambda value: value % 10 == 0)
    assert found == (Slip("two-digits-swapped", 2260.0),)


def test_slips_of_a_temperature_are_signs_digits_and_swaps() -> None:
    found = {slip.restored for slip in temperature_edits(-35.0)}
    assert {35.0, -55.0, -53.0, -30.0} <= found
