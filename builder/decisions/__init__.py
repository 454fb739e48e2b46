"""The decisions at a position: an alternate in place of the fitted part, the best fixed resistor, the best part."""

from builder.decisions.requirements import About, Reason
from builder.decisions.resistors import BestResistor, best_resistor
from builder.decisions.series import Series, series_ohm
from builder.decisions.shortlist import Excluded, Ranked, Shortlist, shortlist
from builder.decisions.swap import Swap, Verdict, swap

__all__ = [
    "About",
    "BestResistor",
    "Excluded",
    "Ranked",
    "Reason",
    "Series",
    "Shortlist",
    "Swap",
    "Verdict",
    "best_resistor",
    "series_ohm",
    "shortlist",
    "swap",
]
