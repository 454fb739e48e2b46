"""B(T1/T2) = ln(R1/R2)/(1/T1 − 1/T2), IEC 60539-1: the constant before the logarithm for the usual pairs."""

import numpy as np
import pytest
from curve_record import curve_of

from builder.curves import b_value_k

# °C, °C, K: 1/(1/T1 − 1/T2) with T = t + 273.15, to four decimals (298.15·348.15/50 is 2076.01845: on the half)
CONSTANTS = [(25, 50, 3853.8869), (25, 75, 2076.0184), (25, 85, 1779.7070), (25, 100, 1483.3956), (25, 125, 1187.0842), (0, 25, 3257.5869), (0, 50, 1765.3684), (0, 100, 1019.2592)]  # fmt: skip


@pytest.mark.parametrize(("t1_c", "t2_c", "constant_k"), CONSTANTS)
def test_b_value_is_the_constant_times_the_logarithm(t1_c, t2_c, constant_k):
    assert float(b_value_k(np.e, t1_c, 1.0, t2_c)) == pytest.approx(constant_k, rel=0, abs=5.0001e-5)


@pytest.mark.parametrize(("t1_c", "t2_c", "constant_k"), CONSTANTS)
@pytest.mark.parametrize("shape", ["typical", "plain"])
def test_curve_falls_by_the_stated_b_value_whichever_way_the_pair_is_written(tmp_path, t1_c, t2_c, constant_k, shape):
    for pair in ([t1_c, t2_c], [t2_c, t1_c]):
        stated = [{"between_c": pair, "b_k": 3600}]
        curve = curve_of(tmp_path, {"resistance_ohm": 4700, "at_c": t1_c}, b_values=stated, shape=shape).curve
        r1_ohm, r2_ohm = curve.resistance_ohm([t1_c, t2_c])
        assert constant_k * np.log(r1_ohm / r2_ohm) == pytest.approx(3600, rel=5e-8)
        assert r1_ohm == pytest.approx(4700, rel=1e-12)
