"""From YAML files to checked, frozen records, and every problem on the way."""

from builder.records.catalog import Catalog, PartRecord, PositionRecord, Source, UnknownPart, read_catalog
from builder.records.part import Part
from builder.records.position import Position

__all__ = ["Catalog", "Part", "PartRecord", "Position", "PositionRecord", "Source", "UnknownPart", "read_catalog"]
