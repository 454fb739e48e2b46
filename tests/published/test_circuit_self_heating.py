"""Self-heating solved: a case that ngspice agrees with, and a figure from a handbook."""

import numpy as np
import pytest
from circuit_records import plain_thermistor, position

from builder.circuit import Chain


def signal_at_25_c(mw_per_k, **changes):
    fitted = plain_thermistor(dissipation_mw_per_k=mw_per_k)
    place = position(**changes)
    return Chain(place, fitted, fitted.made.curve, place.circuit.fixed.resistance_ohm).signal(np.array([25.0]))


def test_body_and_junction_of_an_ordinary_divider():
    # 3.3 V, 10 kΩ over 10 kΩ of B = 3950 K, 2 mW/K; solved to convergence, ngspice agrees.
    signal = signal_at_25_c(2.0)
    assert signal.body_c[0] == pytest.approx(25.1361237561, abs=1e-9)
    assert signal.junction_v[0] == pytest.approx(1.6450121225, abs=1e-9)


def test_thermistor_reads_high_as_the_handbook_says():
    # Measurement, Instrumentation and Sensors Handbook: 10 kΩ, 10 mW/K, 100 µA reads 0.01 K high.
    signal = signal_at_25_c(10.0, circuit={"supply_v": 1000}, fixed={"resistance_ohm": 9.99e6})
    assert signal.body_c[0] - 25 == pytest.approx(0.01, abs=5e-5)
