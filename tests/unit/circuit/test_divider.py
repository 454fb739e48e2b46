"""The divider by itself."""

import numpy as np
import pytest

from builder.circuit.divider import Divider

R_OHM = np.array([120.0, 10e3, 330e3])
SIDES = pytest.mark.parametrize("high_side", [False, True])


@SIDES
@pytest.mark.parametrize("parallel_ohm", [np.inf, 47e3])
def test_resistance_comes_back_from_the_junction(high_side, parallel_ohm):
    divider = Divider(high_side, 10e3, 3.3, parallel_ohm, wire_ohm=2.0)
    np.testing.assert_allclose(divider.thermistor_ohm(divider.junction_v(R_OHM) / 3.3), R_OHM, rtol=1e-9)


@SIDES
def test_open_and_shorted_thermistor_leave_the_ends_of_the_supply(high_side):
    ends_v = Divider(high_side, 10e3, 3.3).junction_v(np.array([np.inf, 0.0]))
    assert ends_v.tolist() == ([0.0, 3.3] if high_side else [3.3, 0.0])


@SIDES
def test_parallel_resistor_and_wire_remain_where_the_thermistor_fails(high_side):
    open_v, short_v = Divider(high_side, 10e3, 3.0, 20e3, wire_ohm=100.0).junction_v(np.array([np.inf, 0.0]))
    of_branch_v = np.array([3.0 * 20 / 30, 3.0 * (2000 / 20.1) / (10e3 + 2000 / 20.1)])
    expected_v = 3.0 - of_branch_v if high_side else of_branch_v
    np.testing.assert_allclose([open_v, short_v], expected_v, rtol=1e-12)


@SIDES
def test_no_thermistor_gives_a_share_beyond_the_parallel_resistors(high_side):
    share = 1 - 0.7 if high_side else 0.7
    assert np.isnan(Divider(high_side, 10e3, 3.0, 20e3).thermistor_ohm(np.array(share)))


@SIDES
def test_leakage_lifts_the_junction_by_its_source_resistance(high_side):
    divider, leaking = Divider(high_side, 10e3, 3.3), Divider(high_side, 10e3, 3.3, leakage_a=50e-9)
    lifted_v = leaking.junction_v(R_OHM) - divider.junction_v(R_OHM)
    np.testing.assert_allclose(lifted_v, 50e-9 * R_OHM * 10e3 / (R_OHM + 10e3), rtol=1e-6)


@SIDES
def test_power_is_that_of_the_thermistors_own_voltage(high_side):
    divider = Divider(high_side, 10e3, 3.3, 47e3, wire_ohm=100.0, leakage_a=2e-6)
    across_v = np.abs((3.3 if high_side else 0.0) - divider.junction_v(R_OHM)) * R_OHM / (R_OHM + 100)
    np.testing.assert_allclose(divider.thermistor_w(R_OHM), across_v**2 / R_OHM, rtol=1e-9)
