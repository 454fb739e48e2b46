"""A table of NIST's thermistor data (StRD, MGH10) against NIST's certified curve."""

import json
from pathlib import Path

import numpy as np
import pytest
from curve_record import curve_of

MGH10 = json.loads((Path(__file__).parent / "data" / "nist_mgh10.json").read_text(encoding="utf-8"))


@pytest.fixture
def curve(tmp_path):
    rows = [list(row) for row in zip(MGH10["t_c"], MGH10["r_ohm"], strict=True)]
    return curve_of(tmp_path, {"resistance_ohm": 34780, "at_c": 50}, r_t_table={"rows": rows}).curve


# The rows lie up to 0.02 K off the certified curve themselves (residual standard deviation 2.6 Ω).
def test_table_stays_within_30_mk_of_the_certified_curve_between_its_rows(curve):
    b1, b2, b3 = MGH10["certified"]
    t_c = np.linspace(50, 125, 7501)
    assert np.abs(curve.temperature_c(b1 * np.exp(b2 / (t_c + b3))) - t_c).max() < 0.03


def test_table_goes_through_every_row(curve):
    assert curve.resistance_ohm(MGH10["t_c"]) == pytest.approx(MGH10["r_ohm"], rel=1e-12)
    assert curve.temperature_c(MGH10["r_ohm"]) == pytest.approx(MGH10["t_c"], abs=1e-9)
