"""Offset-exponential against NIST's certified least squares (StRD, MGH10, higher level of difficulty)."""

import json
from pathlib import Path

import numpy as np
import pytest

from builder.fits import fit
from builder.fits.offset_exponential import OffsetExponential

MGH10 = json.loads((Path(__file__).parent / "data" / "nist_mgh10.json").read_text(encoding="utf-8"))
T_C, R_OHM = np.array(MGH10["t_c"]), np.array(MGH10["r_ohm"])


# The certificate prints ten digits of the first constant and eleven of the others; half a unit of the last is 9e-11.
@pytest.mark.parametrize("start", [*MGH10["starts"], None])
def test_certified_constants_are_reached_from_both_published_starts_and_from_none(start):
    begin = start and dict(zip("abc", start, strict=True))
    found = OffsetExponential().coefficients_by_ohm(T_C, R_OHM, begin)
    assert list(found.values()) == pytest.approx(MGH10["certified"], rel=9e-11)


# The first has its pole among the points, the second begins with resistances too large for a float.
@pytest.mark.parametrize("start", [{"b": 19.82, "c": -83.88}, {"b": 777152.0, "c": 207.0}])
def test_hopeless_starts_are_refused_not_answered_wrongly(start):
    with np.errstate(over="raise"), pytest.raises(ValueError, match="found no minimum"):
        OffsetExponential().coefficients_by_ohm(T_C, R_OHM, start)


def test_fit_in_ohm_leaves_the_certified_residual_sum_of_squares():
    fitted = fit("offset-exponential", T_C, R_OHM, minimise="ohm")
    left = np.sum((fitted.resistance_ohm(T_C) - R_OHM) ** 2)
    assert left == pytest.approx(MGH10["residual_sum_of_squares"], abs=5e-10)


def test_fit_in_kelvin_leaves_less_kelvin_than_the_certified_constants():
    a, b, c = MGH10["certified"]
    certified_k = b / np.log(R_OHM / a) - c - T_C
    assert np.sum(fit("offset-exponential", T_C, R_OHM).residuals_k ** 2) < np.sum(certified_k**2)
