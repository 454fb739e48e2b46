"""Resistance over temperature: numbers in, numbers out."""

from builder.curves.b_value import BentExponential, b_value_k
from builder.curves.band import AccuracyRange, Band, BTolerance
from builder.curves.curve import Basis, Curve
from builder.curves.monotone_cubic import MonotoneCubic, monotone_cubic
from builder.curves.steinhart_hart import SteinhartHartLaw, through_points

__all__ = [
    "AccuracyRange",
    "BTolerance",
    "Band",
    "Basis",
    "BentExponential",
    "Curve",
    "MonotoneCubic",
    "SteinhartHartLaw",
    "b_value_k",
    "monotone_cubic",
    "through_points",
]
