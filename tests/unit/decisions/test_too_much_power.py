"""A part that takes more power than its record allows."""

import pytest
from places import catalog, part, place

from builder.decisions import shortlist, swap

SUPPLY = {"supply_v": 12, "supply_tolerance_pct": 5}


def limited(number: str, max_power_mw: float | None):
    return part(number, limits={"max_power_mw": max_power_mw, "dissipation_mw_per_k": 20})


def test_alternate_that_takes_too_much_power_does_not_fit_with_any_firmware():
    fitted, alternate = part(limits={"dissipation_mw_per_k": 20}), limited("X2", 3)
    found = swap(place(circuit=SUPPLY), alternate, catalog(fitted, alternate))
    (reason,) = [reason for reason in found.reasons if reason.about == "power"]
    # 12.6 V over 9.93 kΩ, the resistor less 0.5 % and its drift: V²/4R where the part has as much.
    assert (reason.message, reason.against) == ("takes up to 4 mW at 25 °C, at most 3 mW is allowed", True)
    assert (found.verdict, found.after.meets_limit) == ("does not fit", True)


@pytest.mark.parametrize("max_power_mw", [4.1, None])
def test_power_that_is_allowed_or_not_limited_decides_nothing(max_power_mw):
    fitted, alternate = part(limits={"dissipation_mw_per_k": 20}), limited("X2", max_power_mw)
    found = swap(place(circuit=SUPPLY), alternate, catalog(fitted, alternate))
    assert found.verdict == "fits"
    assert "power" not in [reason.about for reason in found.reasons]


def test_part_that_takes_too_much_power_with_its_best_resistor_is_out():
    found = shortlist(place(circuit=SUPPLY), catalog(limited("A", 3), limited("B", 6), limited("C", None)))
    assert [one.part.part.part for one in found.ranked] == ["B", "C"]
    ((because,),) = [one.because for one in found.excluded]
    assert because == "with its best resistor, 13 kΩ, it takes up to 3.07 mW at 19.5 °C, at most 3 mW is allowed"
