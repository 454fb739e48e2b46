"""Beadroll: reviewed records of NTC thermistors, checked, turned into curves and compared in kelvin.

The functions behind the commands, for Python callers.
"""

from builder.comparisons import compared, families, sentence
from builder.crosschecks import checked_catalog
from builder.decisions import swap
from builder.intake import record_text
from builder.part_curve import part_curve
from builder.part_fit import fitted
from builder.records import read_catalog

__all__ = [
    "checked_catalog",
    "compared",
    "families",
    "fitted",
    "part_curve",
    "read_catalog",
    "record_text",
    "sentence",
    "swap",
]
