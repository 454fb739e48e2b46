"""Parts against one another, in kelvin."""

from builder.comparisons.comparison import Comparison, NoCommonRange, common_range_c, compared
from builder.comparisons.families import Families, families
from builder.comparisons.nearest import NearestParts, Neighbour
from builder.comparisons.sentence import sentence

__all__ = [
    "Comparison",
    "Families",
    "NearestParts",
    "Neighbour",
    "NoCommonRange",
    "common_range_c",
    "compared",
    "families",
    "sentence",
]
