"""Conversions from a code to degrees."""

import numpy as np
import pytest
from circuit_records import plain_thermistor, position

from builder.circuit import Chain, firmware_part


def chain(**changes) -> Chain:
    fitted = plain_thermistor(b_k=3435)
    place = position(range_c=[-30, 60], **changes)
    return Chain(place, fitted, fitted.made.curve, place.circuit.fixed.resistance_ohm)


def code_of(r_ohm: float) -> float:
    return 4096 * r_ohm / (r_ohm + 10e3)


def test_firmware_has_the_curve_of_the_part_it_names_or_of_the_fitted_one():
    methods = [{"method": "curve"}, {"method": "curve", "part": "X2"}, {"method": "table", "step_k": 5, "part": "X2"}, {"method": "b-value", "resistance_ohm": 1, "b_k": 3900}]  # fmt: skip
    assert [firmware_part(position(firmware=method)) for method in methods] == ["X1", "X2", "X2", "X1"]


def test_table_has_whole_codes_from_the_lower_end_of_the_range_on_and_its_upper_end():
    table = chain(firmware={"method": "table", "step_k": 20}).conversion
    assert table.t_c.tolist() == [60, 50, 30, 10, -10, -30]
    ideal = 4096 / (1 + 10e3 / plain_thermistor(b_k=3435).made.curve.resistance_ohm(table.t_c))
    assert table.code.tolist() == [round(code) for code in ideal]


def test_table_goes_straight_on_beyond_its_ends():
    table = chain(firmware={"method": "table", "step_k": 5}).conversion
    hottest, second = table.code[:2]
    assert table.reading_c(np.array(hottest - (second - hottest))) == pytest.approx(65.0)


def test_rows_that_share_a_code_do_not_stop_the_table():
    # Six bits, 1 K: many rows have the code of the row before.
    conversion = chain(adc={"bits": 6, "full_scale": 64}, firmware={"method": "table", "step_k": 1}).conversion
    inner = np.unique(conversion.code)[1:-1]
    reading_c = conversion.reading_c(inner)
    assert len(inner) < 60
    assert (np.diff(reading_c) < 0).all()
    # At a shared code stands the last of its rows, the coldest here.
    assert reading_c.tolist() == [conversion.t_c[conversion.code == code].min() for code in inner]


def test_table_of_a_curve_that_ends_goes_on_with_its_slope():
    # c below 0: no number beyond the span.
    stated = {"a": 1.0e-3, "b": 2.6e-4, "c": -1e-8, "span_c": [0, 60]}
    curve = plain_thermistor(steinhart_hart=stated, curve_from="steinhart-hart").made.curve
    assert np.isnan(curve.resistance_ohm(-20))
    place = position(range_c=[-30, 60], firmware={"method": "table", "step_k": 5})
    table = Chain(place, plain_thermistor(), curve, 10e3).conversion
    assert np.isfinite(table.code).all()
    assert (np.diff(table.code) > 0).all()


def test_b_value_reads_what_its_law_says():
    firmware = {"method": "b-value", "resistance_ohm": "10k", "at_c": 25, "b_k": 3400}
    reading_c = chain(firmware=firmware).conversion.reading_c(np.array(code_of(10e3 * np.exp(3400 * (1 / 263.15 - 1 / 298.15)))))  # fmt: skip
    assert reading_c == pytest.approx(-10, abs=1e-9)


def test_steinhart_hart_reads_what_a_numerical_methods_textbook_says():
    # Coefficients of Kaw's open textbook: R(0 °C) = 32649.91892 Ω.
    firmware = {"method": "steinhart-hart", "a": 1.129241e-3, "b": 2.341077e-4, "c": 8.775468e-8}
    assert chain(firmware=firmware).conversion.reading_c(np.array(code_of(32649.91892))) == pytest.approx(0, abs=1e-6)


@pytest.mark.parametrize("method", [{"method": "curve"}, {"method": "b-value", "resistance_ohm": "10k", "b_k": 3435}])
@pytest.mark.parametrize("changes", [
    {"circuit": {"thermistor": "high side"}},
    {"circuit": {"thermistor": "low side", "parallel": {"resistance_ohm": "47k", "tolerance_pct": 0}, "wire_ohm": 20}},
    {"reference": {"volts": 2.5, "tolerance_pct": 0}, "circuit": {"thermistor": "high side", "supply_v": 2.4}},
    {"adc": {"full_scale": 4095}},
])  # fmt: skip
def test_firmware_knows_the_nominal_circuit(method, changes):
    t_c = np.linspace(-30, 60, 31)
    np.testing.assert_allclose(chain(firmware=method, **changes).signal(t_c).reading_c, t_c, atol=1e-4)
