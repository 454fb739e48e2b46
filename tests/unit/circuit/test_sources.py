"""What may be off at a position."""

import numpy as np
import pytest
from circuit_records import position, real_position

from builder.circuit.sources import corners, one_at_a_time, sources


def limits(place) -> dict[str, float | None]:
    return {source.name: source.limit for source in sources(place)}


def test_sources_are_those_of_the_circuit():
    assert list(limits(position())) == ["thermistor", "fixed resistor", "fixed resistor tempco", "supply", "leakage", "offset", "gain", "nonlinearity", "quantisation"]  # fmt: skip
    more = position(circuit={"parallel": {"resistance_ohm": "47k"}}, reference={"volts": 2.5})
    assert set(limits(more)) - set(limits(position())) == {"parallel resistor", "reference"}


def test_limits_are_shares_counts_and_amperes():
    found = limits(real_position(range_c=[-20, 80]))
    assert found == pytest.approx({
        "thermistor": 1, "fixed resistor": 0.005, "fixed resistor tempco": 50e-6 * 55, "supply": 0.02,
        "leakage": 50e-9, "offset": 2, "gain": 0.001, "nonlinearity": 1.5, "quantisation": 0.5,
    })  # fmt: skip


@pytest.mark.parametrize(("ambient_c", "farthest_k"), [([-30, 60], 55), ([0, 85], 60), ([25, 30], 5)])
def test_resistor_drifts_from_25_c_to_the_farther_end_of_the_ambient(ambient_c, farthest_k):
    drift = limits(real_position(ambient_c=ambient_c))["fixed resistor tempco"]
    assert drift == pytest.approx(50e-6 * farthest_k)


def test_figure_that_is_not_stated_has_no_limit():
    unstated = limits(position(fixed={"tempco_ppm_per_k": None}, adc={"leakage_na": None}))
    assert [name for name, limit in unstated.items() if limit is None] == ["fixed resistor tempco", "leakage"]


def test_one_at_a_time_is_nominal_then_every_source_down_then_up():
    off = one_at_a_time(sources(real_position()))
    table = np.hstack(list(off.values()))
    assert table.shape == (19, 9)
    assert not table[0].any()
    assert (table[1:10] == -table[10:]).all()
    assert (table[1:10] <= 0).all()
    assert np.count_nonzero(table) == 18


def test_corners_hold_together_what_pushes_one_way():
    off = corners(sources(real_position(reference={"volts": 2.5, "tolerance_pct": 1})))
    assert {column.shape for column in off.values()} == {(16, 1)}
    assert (np.sign(off["fixed resistor"]) == np.sign(off["fixed resistor tempco"])).all()
    assert (np.sign(off["reference"]) == -np.sign(off["offset"])).all()


def test_source_of_no_width_makes_no_corners():
    assert len(corners(sources(position()))["offset"]) == 4  # thermistor and quantisation
