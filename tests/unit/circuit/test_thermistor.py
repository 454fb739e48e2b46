"""The thermistor's own warmth."""

import numpy as np
import pytest
from circuit_records import plain_thermistor

from builder.circuit.divider import Divider

T_C = np.linspace(-40, 120, 33)


def imbalance_k(fitted, divider, t_c, edge=0.0):
    body_c, _ = fitted.warmed(t_c, divider, edge)
    return body_c - t_c - divider.thermistor_w(fitted.resistance_ohm(body_c, edge)) * 1e3 / fitted.dissipation_mw_per_k


@pytest.mark.parametrize("supply_v", [1.0, 5.0, 24.0, 60.0])
def test_body_is_in_balance_with_its_power(supply_v):
    fitted = plain_thermistor(dissipation_mw_per_k=1.0, limits={"operating_c": [-55, 500], "dissipation_mw_per_k": 1.0})
    assert np.abs(imbalance_k(fitted, Divider(False, 10e3, supply_v), T_C)).max() < 1e-6


def test_body_without_a_dissipation_factor_stays_at_the_temperature():
    fitted = plain_thermistor(dissipation_mw_per_k=None)
    assert fitted.warmed(T_C, Divider(False, 10e3, 5.0))[0].tolist() == T_C.tolist()


def test_every_edge_of_the_band_warms_by_its_own_power():
    fitted = plain_thermistor(tolerance_pct=10, dissipation_mw_per_k=1.0)
    edges = np.array([[-1.0], [0.0], [1.0]])
    body_c, _ = fitted.warmed(T_C, Divider(False, 10e3, 5.0), edges)
    assert body_c.shape == (3, len(T_C))
    assert np.ptp(body_c, axis=0).min() > 1e-3
    assert np.abs(imbalance_k(fitted, Divider(False, 10e3, 5.0), T_C, edges)).max() < 1e-6


def test_balance_at_a_step_of_the_band_is_found():
    # Colder than 0 °C the band is ten times as wide: there is a temperature whose body would stand on the step.
    stated = [{"between_c": [-40, 0], "within_k": 5}, {"between_c": [0, 80], "within_k": 0.5}]
    fitted = plain_thermistor(dissipation_mw_per_k=1.0, accuracy=stated)
    divider = Divider(False, 5e3, 5.0)
    body_c, _ = fitted.warmed(np.linspace(-1, 0, 201), divider, -1.0)
    assert (np.diff(body_c) >= -1e-9).all()
    assert np.abs(body_c).min() < 1e-9


@pytest.mark.parametrize("supply_v", [12.0, 36.0, 90.0])
@pytest.mark.parametrize("fixed_ohm", [100.0, 4.7e3, 33e3])
def test_of_several_balances_the_coolest_is_found(supply_v, fixed_ohm):
    fitted = plain_thermistor(limits={"operating_c": [-55, 500], "dissipation_mw_per_k": 2.0})
    divider = Divider(False, fixed_ohm, supply_v)
    most_k = supply_v**2 / (4 * fixed_ohm) * 1e3 / 2.0
    warmer_k = np.linspace(0, most_k * 1.001, 4001)[:, None]
    power_k = divider.thermistor_w(fitted.resistance_ohm(T_C + warmer_k)) * 1e3 / 2.0
    first_k = warmer_k[(warmer_k >= power_k).argmax(axis=0), 0]
    np.testing.assert_allclose(fitted.warmed(T_C, divider)[0] - T_C, first_k, atol=most_k / 3900)
