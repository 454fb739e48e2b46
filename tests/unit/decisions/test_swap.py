"""An alternate in place of the fitted part: its budgets, its verdict and every reason."""

import math
import re

import numpy as np
import pytest
from places import APPROVED, PROPOSED, WITHDRAWN, catalog, part, place

from builder.circuit import budget, thermistor
from builder.decisions import Swap, swap
from builder.part_curve import part_curve
from builder.records import UnknownPart

TRIP = {"name": "warm", "at_c": 45, "when": "rising", "within_k": 2}


def swapped(alternate=None, fitted=None, **fields) -> Swap:
    fitted, alternate = fitted or part(), alternate or part("X2")
    return swap(place(**fields), alternate, catalog(fitted, alternate))


def told(found: Swap, against) -> list[tuple[str, str]]:
    return [(reason.about, reason.message) for reason in found.reasons if reason.against is against]


def same(one, other) -> bool:
    return all(
        np.array_equal(getattr(one.rows, column), getattr(other.rows, column))
        for column in ("t_c", "code", "worst_min_k", "worst_max_k", "expanded_k")
    ) and (one.worst_k, one.trips, one.missing) == (other.worst_k, other.trips, other.missing)


def test_alternate_of_the_same_figures_fits():
    found = swapped(trips=[TRIP])
    assert found.verdict == "fits"
    assert told(found, True) == told(found, None) == []
    assert told(found, False) == [
        ("error", "worst case 1.17 K at 60 °C is within ±2 K"),
        ("trips", "warm acts between 44.09 °C and 45.7 °C, within ±2 K of 45 °C"),
    ]


@pytest.mark.parametrize("method", ["curve", "table"])
def test_budgets_are_those_of_exchanged_parts(method):
    firmware = {"method": method} | ({"step_k": 5} if method == "table" else {})
    fitted, alternate = part(), part("X2", b_k=3700)
    found = swapped(alternate, fitted, firmware=firmware, trips=[TRIP])
    position = found.position.position
    assert same(found.before, budget(position, thermistor(fitted), part_curve(fitted)))
    assert same(found.after, budget(position, thermistor(alternate), part_curve(fitted)))
    assert same(found.new_firmware, budget(position, thermistor(alternate), part_curve(alternate)))


def test_firmware_in_the_field_is_that_of_the_part_it_was_made_for():
    made_for, fitted, alternate = part("X0", b_k=3700), part(), part("X2")
    firmware = {"method": "table", "part": "X0", "step_k": 5}
    found = swap(place(firmware=firmware), alternate, catalog(made_for, fitted, alternate))
    assert same(found.after, budget(found.position.position, thermistor(alternate), part_curve(made_for)))
    assert found.new_firmware.worst_k < found.after.worst_k


EQUATIONS = {
    "b-value": {"method": "b-value", "resistance_ohm": "10k", "b_k": 3950},
    "steinhart-hart": {"method": "steinhart-hart", "a": 7.8e-4, "b": 2.76e-4, "c": 1e-9},
}


@pytest.mark.parametrize("firmware", EQUATIONS.values(), ids=EQUATIONS)
def test_equation_made_anew_reads_the_alternates_own_curve(firmware):
    # A plain law is a B-value itself, and Steinhart–Hart with c = 0: what is left is the boards' scatter.
    alternate = part("X2", b_k=3600)
    found = swapped(alternate, firmware=firmware)
    ideal = budget(place().position, thermistor(alternate), part_curve(alternate))
    assert found.new_firmware.worst_k == pytest.approx(ideal.worst_k, abs=1e-6)
    assert found.after.worst_k > 2 * ideal.worst_k


def test_b_value_made_anew_keeps_its_reference_temperature():
    found = swapped(part("X2", b_k=3600), firmware=EQUATIONS["b-value"] | {"at_c": 40})
    firmware = found.new_firmware.position.firmware
    assert (firmware.at_c, firmware.b_k) == (40, pytest.approx(3600, abs=1e-4))


def test_steinhart_hart_made_anew_has_the_coefficients_that_the_alternates_maker_states():
    # A common 10 kΩ set; Kaw's open numerical-methods textbook uses it.
    stated = {"a": 1.129241e-3, "b": 2.341077e-4, "c": 8.775468e-8}
    alternate = part("X2", steinhart_hart=stated | {"span_c": [-40, 125]})
    firmware = swapped(alternate, firmware=EQUATIONS["steinhart-hart"]).new_firmware.position.firmware
    assert {name: getattr(firmware, name) for name in "abc"} == pytest.approx(stated, rel=1e-6)


def test_part_of_another_curve_fits_with_new_firmware():
    found = swapped(part("X2", b_k=3700), trips=[TRIP])
    assert found.verdict == "fits with new firmware"
    assert told(found, True) == [
        ("error", "worst case 3.39 K at 60 °C exceeds ±2 K"),
        ("trips", "warm acts between 45.47 °C and 47.21 °C, not within ±2 K of 45 °C"),
    ]
    assert told(found, False) == [
        ("error", "with new firmware: worst case 1.21 K at 60 °C is within ±2 K"),
        ("trips", "with new firmware: warm acts between 44.05 °C and 45.74 °C, within ±2 K of 45 °C"),
    ]


def test_error_that_new_firmware_does_not_cure_does_not_fit():
    found = swapped(part("X2", rated={"resistance_ohm": "10k", "tolerance_pct": 10}))
    assert found.verdict == "does not fit"
    assert told(found, True) == [
        ("error", "worst case 3.9 K at 60 °C exceeds ±2 K"),
        ("error", "with new firmware: worst case 3.9 K at 60 °C exceeds ±2 K"),
    ]


def test_trip_alone_decides_too():
    found = swapped(part("X2", b_k=3850), trips=[TRIP | {"within_k": 1.2}])
    assert found.verdict == "fits with new firmware"
    assert [about for about, _ in told(found, True)] == ["trips"]


def test_trip_that_no_board_reaches_is_told():
    found = swapped(part("X2", rated={"resistance_ohm": "100R", "tolerance_pct": 1}), trips=[TRIP | {"at_c": 0}])
    assert ("trips", "warm does not act on every board, not within ±2 K of 0 °C") in told(found, True)


NO_FIRMWARE_CURES = {
    "body": part("X2", body={"form": "chip", "size_code": "0402"}),
    "range": part("X2", limits={"operating_c": [-40, 50]}),
    "standing": part("X2", standing=[WITHDRAWN]),
    "lifecycle": part("X2", lifecycle="obsolete"),
}


@pytest.mark.parametrize(("about", "alternate"), NO_FIRMWARE_CURES.items())
def test_what_no_firmware_cures_does_not_fit(about, alternate):
    found = swapped(alternate)
    assert found.verdict == "does not fit"
    assert [reason for reason, _ in told(found, True)] == [about]


def test_other_form_than_the_fitted_part_is_told_where_no_size_is_required():
    found = swapped(part("X2", body={"form": "bead"}))
    assert told(found, True) == [("body", "its body is bead, the fitted part's chip 0603")]


def test_required_size_counts_and_the_fitted_part_then_does_not():
    lead = part(body={"form": "leaded"})
    assert swapped(fitted=lead, requires={"size_code": "0603"}).verdict == "fits"


def test_alternate_withdrawn_at_this_position_does_not_fit():
    found = swapped(alternates=[{"part": "x2", "standing": [APPROVED, WITHDRAWN]}])
    assert found.verdict == "does not fit"
    message = "the alternate at board/RT1 is withdrawn since 2026-03-30 (quality: It cracks)"
    assert told(found, True) == [("standing", message)]


TO_BE_KNOWN = {
    "proposed": (
        [{"part": "X2", "standing": [PROPOSED]}],
        "the alternate at board/RT1 is proposed since 2026-01-12 (purchasing: It is cheap)",
    ),
    "no entry": ([{"part": "X2"}], "the alternate at board/RT1 has no entry in its ledger"),
    "not named": ([], "board/RT1 does not name it as an alternate"),
}


@pytest.mark.parametrize(("alternates", "message"), TO_BE_KNOWN.values(), ids=TO_BE_KNOWN)
def test_alternate_nobody_has_approved_fits_and_that_is_told(alternates, message):
    found = swapped(alternates=alternates)
    assert (found.verdict, told(found, False)[-1]) == ("fits", ("standing", message))


OPEN = {
    "tolerance": (
        {"rated": {"resistance_ohm": "10k"}},
        ("error", "worst case 0.887 K at 60 °C against ±2 K is undecided, not stated: rated.tolerance_pct"),
    ),
    "time constant": (
        {"limits": {"time_constant_s": None}},
        ("time constant", "the part's time constant is not stated (limits.time_constant_s)"),
    ),
    "operating range": (
        {"limits": {"operating_c": None}},
        ("range", "the part's operating range is not stated (limits.operating_c)"),
    ),
}


@pytest.mark.parametrize(("lacks", "reason"), OPEN.values(), ids=OPEN)
def test_missing_figure_that_decides_leaves_the_verdict_open(lacks, reason):
    found = swapped(part("X2", **lacks), requires={"time_constant_max_s": 10})
    assert (found.verdict, told(found, None)) == ("undecided", [reason])


def test_trip_is_open_where_a_figure_is_missing():
    found = swapped(part("X2", limits={"dissipation_mw_per_k": None}), trips=[TRIP])
    lacking = "is undecided, not stated: limits.dissipation_mw_per_k"
    assert told(found, None) == [
        ("error", f"worst case 1.08 K at 60 °C against ±2 K {lacking}"),
        ("trips", f"warm acts between 44.21 °C and 45.81 °C against ±2 K of 45 °C {lacking}"),
    ]


def test_what_speaks_against_is_stronger_than_what_is_open():
    found = swapped(part("X2", lifecycle="obsolete", limits={"operating_c": None}))
    assert found.verdict == "does not fit"


def test_what_is_open_is_stronger_than_new_firmware():
    found = swapped(part("X2", b_k=3700, limits={"operating_c": None}))
    assert found.verdict == "undecided"
    assert found.new_firmware.meets_limit


def test_fitted_part_that_misses_the_limit_itself_is_told():
    found = swapped(limit_k=0.5)
    assert ("error", "the fitted part itself: worst case 1.17 K at 60 °C exceeds ±0.5 K") in told(found, False)


def test_lost_margin_to_an_open_sensor_is_told():
    found = swapped(part("X2", rated={"resistance_ohm": "10M", "tolerance_pct": 1}))
    assert ("sensor faults", "no code is left for telling an open sensor from a real temperature") in told(found, False)


def test_board_without_a_reading_is_told_with_its_temperature():
    found = swapped(part("X2", rated={"resistance_ohm": 9e8, "tolerance_pct": 1}), limit_k=100)
    assert math.isnan(found.after.worst_k)
    assert ("error", "some boards have no reading at 0 °C") in told(found, True)


def test_equation_that_fits_no_curve_there_is_told():
    # A Steinhart–Hart law with c ≤ 0 is known over its span only: nothing is left to fit an equation to.
    bent = {"a": 1.2e-3, "b": 2.2e-4, "c": -4e-8, "span_c": [70, 90]}
    found = swapped(part("X2", steinhart_hart=bent), firmware=EQUATIONS["b-value"])
    assert ("error", "no b-value equation fits its curve over 0 to 60 °C, so no firmware can be made") in told(
        found, True
    )
    assert found.new_firmware is found.after


def test_position_that_names_an_unknown_part_is_refused():
    with pytest.raises(UnknownPart, match=r"X1 is not a part of the catalog\."):
        swap(place(), part("X2"), catalog(part("X2")))


def test_rows_stand_at_the_step_asked_for():
    fitted, alternate = part(), part("X2")
    found = swap(place(), alternate, catalog(fitted, alternate), step_k=20)
    assert found.after.rows.t_c.tolist() == found.new_firmware.rows.t_c.tolist() == [0, 20, 40, 60]


def test_worst_case_just_beyond_the_limit_is_not_told_as_the_limit():
    worst_k = swapped().after.worst_k
    ((_, message),) = [reason for reason in told(swapped(limit_k=worst_k - 1e-5), True) if "with new" not in reason[1]]
    worst, limit = re.findall(r"[0-9.]+(?= K)", message)
    assert float(worst) > float(limit)
