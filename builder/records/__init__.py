"""From YAML files to checked, frozen records, and every problem on the way."""

from builder.records.catalog import Catalog, LooseStanding, LooseTable, UnknownPart, read_catalog
from builder.records.part import Part
from builder.records.position import Position
from builder.records.record import DocumentFile, PartRecord, PositionRecord, Source

__all__ = [
    "Catalog",
    "DocumentFile",
    "LooseStanding",
    "LooseTable",
    "Part",
    "PartRecord",
    "Position",
    "PositionRecord",
    "Source",
    "UnknownPart",
    "read_catalog",
]
