"""The decisions at a position: an alternate in place of the fitted part, the best fixed resistor, the best part."""

from builder.decisions.requirements import About, Reason
from builder.decisions.swap import Swap, Verdict, swap

__all__ = ["About", "Reason", "Swap", "Verdict", "swap"]
