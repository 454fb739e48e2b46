"""Fitted equations: points of resistance over temperature in, coefficients and their error in kelvin out."""

from builder.fits.equation import Coefficients, Equation
from builder.fits.fitting import EQUATIONS, Fit, fit
from builder.fits.inverse_cubic import BValue
from builder.fits.rounding import PrintedCoefficients, printed_coefficients

__all__ = [
    "EQUATIONS",
    "BValue",
    "Coefficients",
    "Equation",
    "Fit",
    "PrintedCoefficients",
    "fit",
    "printed_coefficients",
]
