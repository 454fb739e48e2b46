"""Beadroll: reviewed records of NTC thermistors, checked, turned into curves and compared in kelvin.

The functions behind the commands, for Python callers.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from builder.comparisons import compared, families, sentence
    from builder.crosschecks import checked_catalog
    from builder.decisions import best_resistor, shortlist, swap
    from builder.intake import record_text
    from builder.part_fit import fitted
    from builder.records import read_catalog

__all__ = [
    "best_resistor",
    "checked_catalog",
    "compared",
    "families",
    "fitted",
    "read_catalog",
    "record_text",
    "sentence",
    "shortlist",
    "swap",
]

# Imported when first asked for: a command starts without what the others need.
_MODULES = {
    "best_resistor": "decisions",
    "checked_catalog": "crosschecks",
    "compared": "comparisons",
    "families": "comparisons",
    "fitted": "part_fit",
    "read_catalog": "records",
    "record_text": "intake",
    "sentence": "comparisons",
    "shortlist": "decisions",
    "swap": "decisions",
}


def __getattr__(name: str) -> object:
    if name in _MODULES:
        return getattr(import_module(f"builder.{_MODULES[name]}"), name)
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
