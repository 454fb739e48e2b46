"""A common 10 kΩ Steinhart–Hart set, with the resistances that Kaw's open numerical-methods textbook prints for it."""

import pytest
from curve_record import answered, written

ABC = {"a": 1.129241e-3, "b": 2.341077e-4, "c": 8.775468e-8}
# °C, ohm, half a unit of the last digit printed
PRINTED = [(-40, 336049.695, 5e-4), (0, 32649.91892, 5e-6), (19, 13072.48310, 5e-6), (25, 9999.98626, 5e-6), (100, 678.416487, 5e-7)]  # fmt: skip


@pytest.fixture
def folder(tmp_path):
    return written(tmp_path, {"resistance_ohm": 10000}, steinhart_hart={**ABC, "span_c": [-40, 125]})


@pytest.mark.parametrize(("t_c", "r_ohm", "half_digit"), PRINTED)
def test_curve_command_gives_the_printed_resistance(folder, t_c, r_ohm, half_digit):
    answer = answered(folder, "curve", "--from", str(t_c), "--to", str(t_c))
    assert answer["basis"] == "steinhart-hart"
    assert answer["rows"][0]["r_ohm"] == pytest.approx(r_ohm, rel=0, abs=half_digit)


@pytest.mark.parametrize(("t_c", "r_ohm", "_"), PRINTED)
def test_temperature_command_gives_the_printed_temperature_back(folder, t_c, r_ohm, _):
    row = answered(folder, "temperature", str(r_ohm))["rows"][0]
    assert row["t_c"] == pytest.approx(t_c, abs=1e-7)
    assert not row["extrapolated"]
