"""Fitted equations on a part's page."""

from __future__ import annotations

import re
from pathlib import Path

import numpy as np
import pytest
from small_site import read, rows

from builder.pages.fits_section import fits_section
from builder.part_curve import whole_steps_c

MADE = {
    "steinhart_hart": {"a": 1.129241e-3, "b": 2.341077e-4, "c": 8.775468e-8, "span_c": [-40, 125]},
    "limits": {"operating_c": [-40, 125]},
}


def coefficients(cell: str) -> list[float]:
    return [float(number.replace("−", "-")) for number in re.findall(r"= (\S+?)(?:,|$)", cell)]


def test_every_equation_is_fitted_over_the_operating_range_and_each_position_s(tmp_path: Path) -> None:
    places = ({"position": "a"}, {"position": "b"}, {"position": "c", "range_c": [-30, 60]})
    context = read(tmp_path, MADE, positions=places)
    found = rows(fits_section(context.catalog.parts[0], context), "Fitted equations")
    equations = ["b-value", "steinhart-hart", "four-term", "offset-exponential"]
    assert [row[:2] for row in found] == [
        [span, name] for span in ("−40 to 125 °C", "0 to 60 °C", "−30 to 60 °C") for name in equations
    ]


def test_the_printed_coefficients_read_what_the_page_says(tmp_path: Path) -> None:
    context = read(tmp_path, MADE)
    record = context.catalog.parts[0]
    (_, _, worst, printed), *_ = [
        row for row in rows(fits_section(record, context), "Fitted") if row[1] == "steinhart-hart"
    ]
    # The definition, 1/T = a + b·ln R + c·(ln R)³, on the resistances of the maker's own coefficients.
    a, b, c = coefficients(printed)
    t_c = whole_steps_c((-40.0, 125.0), 1.0)
    y = np.log(context.curve(record).curve.resistance_ohm(t_c))
    off_k = 1 / (a + b * y + c * y**3) - 273.15 - t_c
    assert np.abs(off_k).max() < 0.001 and worst.startswith("0.000 K at ")
    assert (a, b, c) == pytest.approx((1.129241e-3, 2.341077e-4, 8.775468e-8), rel=1e-4)


def test_a_curve_known_over_too_short_a_range_says_that_nothing_fits(tmp_path: Path) -> None:
    bent = {"a": 5.8e-4, "b": 3.3e-4, "c": -3.404e-7, "span_c": [0, 2]}
    context = read(tmp_path, {"steinhart_hart": bent, "limits": {"operating_c": [100, 125]}})
    assert "No equation fits" in fits_section(context.catalog.parts[0], context)
