"""Every source's standard uncertainty, and their sum, against GTC, which propagates them through the whole chain."""

import GTC
import numpy as np
import pytest
from circuit_records import plain_thermistor, position

from builder.circuit import budget

T_C = np.array([-20.0, 10.0, 25.0, 60.0, 80.0])
# Small limits: GTC is linear, the budget's bands are exact.
ADC = {"bits": 16, "full_scale": 65535, "offset_lsb": 3, "gain_pct": 0.02, "nonlinearity_lsb": 4, "leakage_na": 20}
FIXED = {"resistance_ohm": 12e3, "tolerance_pct": 0.1, "tempco_ppm_per_k": 10}
CIRCUIT = {"supply_tolerance_pct": 0.05, "wire_ohm": 3.0, "parallel": {"resistance_ohm": 68e3, "tolerance_pct": 0.2}}


def by_gtc(t_c, high_side):
    """Reading and its inputs, as uncertain numbers with rectangular limits."""

    def limit(value, half_width, name):
        source = GTC.ureal(value, half_width / np.sqrt(3), label=name)
        inputs[name] = source
        return source

    inputs = {}
    r_ohm = 10e3 * np.exp(3950 * (1 / (t_c + 273.15) - 1 / 298.15)) * limit(1, 0.002, "thermistor")
    fixed_ohm = 12e3 * limit(1, 0.001, "fixed resistor") * limit(1, 10e-6 * 55, "fixed resistor tempco")
    parallel_ohm = limit(68e3, 136, "parallel resistor")
    supply_v, reference_v = limit(3.3, 0.00165, "supply"), limit(3.0, 0.003, "reference")
    branch_ohm = 1 / (1 / (r_ohm + 3) + 1 / parallel_ohm)
    source_ohm = 1 / (1 / branch_ohm + 1 / fixed_ohm)
    junction_v = supply_v * source_ohm / (branch_ohm if high_side else fixed_ohm)
    junction_v = junction_v + limit(0, 20e-9, "leakage") * source_ohm
    code = junction_v / reference_v * 65535 * limit(1, 0.0002, "gain")
    code = code + limit(0, 3, "offset") + limit(0, 4, "nonlinearity") + limit(0, 0.5, "quantisation")
    share = code / 65535 * 3.0 / 3.3
    seen_ohm = 12e3 * (1 - share) / share if high_side else 12e3 * share / (1 - share)
    back_ohm = 1 / (1 / seen_ohm - 1 / 68e3) - 3
    return 1 / (1 / 298.15 + GTC.log(back_ohm / 10e3) / 3950) - 273.15, inputs


@pytest.mark.parametrize("side", ["low side", "high side"])
def test_every_contribution_and_their_sum_are_gtcs(side):
    place = position(
        range_c=[-20, 80],
        circuit=CIRCUIT | {"thermistor": side},
        fixed=FIXED,
        adc=ADC,
        reference={"volts": 3.0, "tolerance_pct": 0.1},
    )
    fitted = plain_thermistor(tolerance_pct=0.2)
    rows = budget(place, fitted, fitted.made).rows
    for t_c in T_C:
        row = list(rows.t_c).index(t_c)
        reading, inputs = by_gtc(t_c, side == "high side")
        assert set(inputs) == set(rows.standard_k)
        for name, source in inputs.items():
            assert rows.standard_k[name][row] == pytest.approx(abs(GTC.component(reading, source)), rel=1e-4)
        assert rows.expanded_k[row] == pytest.approx(2 * reading.u, rel=1e-4)
