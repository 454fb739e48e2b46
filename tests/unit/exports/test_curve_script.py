"""The sampled curve that the browser gets."""

from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from scipy.interpolate import CubicHermiteSpline

from builder.curves import AccuracyRange, Band, Curve, SteinhartHartLaw
from builder.exports.curve_script import curve_script, values
from builder.part_curve import PartCurve, part_curve
from builder.records import PartRecord, read_catalog
from builder.units import kelvin

RECORDS = {record.part.part: record for record in read_catalog(Path(__file__).parents[3] / "parts").parts}


def data(script: str) -> Any:
    """What the script hands over."""
    return json.loads("[" + script.removeprefix("beadroll.curve(").removesuffix(");\n") + "]")[1]


def told(curve: PartCurve) -> Any:
    return data(curve_script("x", curve, []))


def steinhart_hart(c: float) -> PartCurve:
    """Holds from −10 to 90 °C, is made for −40 to 125 °C."""
    curve = Curve("steinhart-hart", SteinhartHartLaw(1.1e-3, 2.4e-4, c), (-10.0, 90.0), extends=c > 0)
    return PartCurve(curve, Band(curve, 25.0, 1.0), (-40.0, 125.0))


@pytest.mark.parametrize("record", RECORDS.values(), ids=RECORDS)
def test_scipys_hermite_spline_through_the_sample_is_the_curve(record: PartRecord) -> None:
    curve = part_curve(record).curve
    sample = told(part_curve(record))
    x, ln_r, slope_k = 1 / kelvin(values(sample["t_c"])), values(sample["ln_r"]), values(sample["slope_k"])
    spline = CubicHermiteSpline(x[::-1], ln_r[::-1], slope_k[::-1])
    t_c = np.linspace(*curve.span_c, 1001)
    assert np.abs(spline(1 / kelvin(t_c)) - np.log(curve.resistance_ohm(t_c))).max() < 3e-6  # 0.3 mK at 1 %/K


@pytest.mark.parametrize("record", RECORDS.values(), ids=RECORDS)
def test_a_part_takes_less_than_six_kilobytes(record: PartRecord) -> None:
    assert len(curve_script("some-maker/some-number", part_curve(record), ["not stated"] * 17)) < 6000


def test_a_table_is_told_by_its_own_rows() -> None:
    record = RECORDS["TB2A-103F38"]
    assert record.table is not None
    sample = told(part_curve(record))
    assert values(sample["t_c"]).tolist() == record.table.t_c.tolist()
    assert np.abs(np.exp(values(sample["ln_r"])) / record.table.r_ohm - 1).max() < 3e-7


def test_band_is_told_at_whole_degrees_of_span_and_operating_range() -> None:
    curve = part_curve(RECORDS["TB3A-103F38"])
    band = told(replace(curve, operating_c=(-50.5, 110.0)))["band"]
    low, high = values(band["low"]), values(band["high"])
    assert (band["from_c"], len(low), len(high)) == (-50, 176, 176)
    low_ohm, high_ohm = curve.band.edges_ohm(np.array([-50.0, 25.0]))
    nominal_ohm = curve.curve.resistance_ohm(np.array([-50.0, 25.0]))
    assert low[[0, 75]] == pytest.approx(np.log(low_ohm / nominal_ohm), abs=3e-7)
    assert high[[0, 75]] == pytest.approx(np.log(high_ohm / nominal_ohm), abs=3e-7)


def test_where_the_tolerance_is_incomplete_is_told_in_stretches() -> None:
    curve = part_curve(RECORDS["TB3A-103F38"])
    band = Band(curve.curve, 25.0, None, (), (AccuracyRange((0, 70), 0.2),))
    assert told(replace(curve, band=band))["band"]["incomplete"] == [[-40, -1], [71, 125]]
    assert told(curve)["band"]["incomplete"] == []


def test_a_curve_that_is_not_extrapolated_says_so_and_has_no_band_outside_its_span() -> None:
    sample = told(steinhart_hart(-3e-8))
    assert sample["extends"] is False
    assert (sample["band"]["from_c"], len(values(sample["band"]["low"]))) == (-10, 101)


def test_a_law_that_gives_no_resistance_within_its_span_is_told_without_points() -> None:
    sample = told(steinhart_hart(-3e-6))
    assert [sample[name][1:] for name in ("t_c", "ln_r", "slope_k")] == [[], [], []]
    assert sample["band"]["low"][1:] == []


def test_whole_numbers_have_no_point_and_text_is_safe_in_a_script() -> None:
    script = curve_script("maker/x", steinhart_hart(1e-7), ["</script><b>Ω", "10 kΩ"])
    assert script.startswith('beadroll.curve("maker/x",{"basis":"steinhart-hart","span_c":[-10,90],')
    assert script.isascii() and "<" not in script
    assert data(script)["facts"] == ["</script><b>Ω", "10 kΩ"]


def test_the_same_curve_gives_the_same_bytes() -> None:
    record = RECORDS["NV10-3435P"]
    assert curve_script("x", part_curve(record), []) == curve_script("x", part_curve(record), [])
