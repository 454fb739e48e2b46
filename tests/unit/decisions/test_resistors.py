"""The best fixed resistor, against brute force over the whole series and against scipy's continuous minimum."""

from pathlib import Path

import numpy as np
import pytest
from places import part, place
from scipy.optimize import minimize_scalar

from builder.circuit import Chain, budget, thermistor
from builder.decisions import best_resistor, resistors, series_ohm
from builder.decisions.new_firmware import with_new_firmware
from builder.part_curve import whole_steps_c
from builder.records import read_catalog

DEMO = read_catalog(Path(__file__).parents[3] / "parts")
PLACES = {record.position.position: record.position for record in DEMO.positions}
# Each method of the firmware, both sides, a parallel resistor, a reference of its own.
TELLING = ("bench-ice/RT1", "charger-dc/RT2", "charger-power/RT2", "coolbox-probe/RT1", "vial-carrier/RT2")


def worst_k(position, fitted, fixed_ohm):
    """The worst case with each resistor, all of it computed; infinite where a board has no reading."""
    made = with_new_firmware(position, fitted.made)
    t_c = whole_steps_c(position.range_c, 0.5)
    chain = Chain(made, fitted, fitted.made.curve, np.asarray(fixed_ohm)[:, None, None])
    lowest, highest = chain.extremes(t_c)
    largest_k = np.maximum(t_c - lowest.reading_c, highest.reading_c - t_c).max(axis=-1)
    return np.where(np.isnan(largest_k), np.inf, largest_k)


def every_ohm(position, fitted, series):
    """More values than are tried: half a decade more each way."""
    r_ohm = fitted.made.curve.resistance_ohm(whole_steps_c(position.range_c, 1.0))
    return series_ohm(series, r_ohm.min() / 30, r_ohm.max() * 30)


def check_against_brute_force(position, record, series):
    fitted = thermistor(record)
    found = best_resistor(position, fitted, fitted.made, series)
    fixed_ohm = every_ohm(position, fitted, series)
    every_k = np.concatenate([worst_k(position, fitted, some) for some in np.array_split(fixed_ohm, 40)])
    if np.isinf(every_k).all():
        assert np.isnan(found.worst_k)
        return
    assert found.worst_k == pytest.approx(every_k.min(), abs=1e-6)
    # Of values that are equally good within the solution of self-heating, any may be named.
    assert every_k[fixed_ohm == found.fixed_ohm] == pytest.approx(every_k.min(), abs=1e-6)


@pytest.mark.parametrize("i", range(len(DEMO.parts)), ids=[record.part.part for record in DEMO.parts])
def test_best_of_e24_is_that_of_brute_force_for_every_demo_part(i):
    check_against_brute_force(PLACES[TELLING[i % len(TELLING)]], DEMO.parts[i], "E24")


@pytest.mark.parametrize("name", TELLING)
def test_best_of_e96_is_that_of_brute_force_at_telling_positions(name):
    check_against_brute_force(PLACES[name], DEMO.part(PLACES[name].fitted), "E96")


# The rounded codes of a table make a worst case with steps in it, which a search by slopes does not see through.
@pytest.mark.parametrize("name", [n for n in TELLING if PLACES[n].firmware.method != "table"])
def test_best_of_e96_is_within_a_step_of_scipys_continuous_minimum(name):
    position, record = PLACES[name], DEMO.part(PLACES[name].fitted)
    fitted = thermistor(record)
    found = best_resistor(position, fitted, fitted.made)

    def error_k(ln_ohm):
        return float(worst_k(position, fitted, [np.exp(ln_ohm)])[0])

    about = np.log(found.fixed_ohm)
    bound = minimize_scalar(error_k, bounds=(about - 0.5, about + 0.5), method="bounded", options={"xatol": 1e-4})
    # No value of the series is better than the best of all, and a step of 2.4 % costs little near a minimum.
    assert found.worst_k >= bound.fun - 2e-3
    assert found.worst_k == pytest.approx(bound.fun, rel=0.02)


@pytest.mark.parametrize("method", ["curve", "table"])
def test_worst_case_is_that_of_the_budget_with_that_resistor(method):
    firmware = {"method": method} | ({"step_k": 5} if method == "table" else {})
    position, fitted = place(firmware=firmware).position, thermistor(part())
    found = best_resistor(position, fitted, fitted.made)
    for fixed_ohm, found_k in ((found.fixed_ohm, found.worst_k), (found.common_ohm, found.common_worst_k)):
        fixed = position.circuit.fixed.model_copy(update={"resistance_ohm": fixed_ohm})
        circuit = position.circuit.model_copy(update={"fixed": fixed})
        own = budget(position.model_copy(update={"circuit": circuit}), fitted, fitted.made)
        assert own.worst_k == pytest.approx(found_k, abs=1e-6)
        if fixed_ohm == found.fixed_ohm:
            assert own.worst_at_c == found.worst_at_c


def test_common_rule_takes_the_value_nearest_to_the_thermistor_in_the_middle():
    # B = 3950 K from 10 kΩ at 25 °C: 8057.2 Ω at 30 °C, by the plain law; E24 has 8200, E96 has 8060.
    fitted = thermistor(part())
    assert best_resistor(place().position, fitted, fitted.made, "E24").common_ohm == 8200
    assert best_resistor(place().position, fitted, fitted.made, "E96").common_ohm == 8060


def test_best_resistor_is_never_worse_than_the_common_rule():
    for record in DEMO.parts[::8]:
        fitted = thermistor(record)
        for position in PLACES.values():
            found = best_resistor(position, fitted, fitted.made, "E24")
            assert not found.worst_k > found.common_worst_k + 1e-6


def test_part_that_no_resistor_gives_a_reading_has_no_worst_case():
    # Of sixteen codes, offset and non-linearity take more than half.
    position = place(adc={"bits": 4, "full_scale": 16, "offset_lsb": 8}).position
    fitted = thermistor(part())
    assert np.isnan(best_resistor(position, fitted, fitted.made).worst_k)


def test_curve_that_does_not_reach_over_the_range_is_refused():
    bent = {"a": 1.2e-3, "b": 2.2e-4, "c": -4e-8, "span_c": [20, 90]}
    fitted = thermistor(part(steinhart_hart=bent))
    with pytest.raises(ValueError, match=r"^the curve does not reach over 0 to 60 °C$"):
        best_resistor(place().position, fitted, fitted.made)


def test_answer_does_not_hang_on_the_corners_that_are_looked_at_first(monkeypatch):
    position, fitted = PLACES["charger-power/RT2"], thermistor(DEMO.part("TB3A-104F42"))
    expected = best_resistor(position, fitted, fitted.made, "E24")

    def one_corner(errors):
        return {name: limit[:1] for name, limit in errors._corners.items()}

    monkeypatch.setattr(resistors._Errors, "_likely_corners", property(one_corner))
    assert best_resistor(position, fitted, fitted.made, "E24") == expected


def test_answer_does_not_hang_on_how_closely_values_are_looked_at_first(monkeypatch):
    position, fitted = PLACES["coolbox-main/RT1"], thermistor(DEMO.part("TB3A-103F38"))
    expected = best_resistor(position, fitted, fitted.made, "E24")
    monkeypatch.setattr(resistors, "_LOOKS", ((5, False, 7), (None, True, 2)))
    assert best_resistor(position, fitted, fitted.made, "E24") == expected
