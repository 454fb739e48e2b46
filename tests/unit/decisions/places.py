"""A part and a position that agree, for tests of decisions: each test changes one thing."""

from __future__ import annotations

from typing import Any

import circuit_records

from builder.records import Catalog, Part, PartRecord, PositionRecord, Source

APPROVED = {"state": "approved", "on": "2026-02-10", "by": "sensors", "because": "Measured."}
WITHDRAWN = {"state": "withdrawn", "on": "2026-03-30", "by": "quality", "because": "It cracks."}
PROPOSED = {"state": "proposed", "on": "2026-01-12", "by": "purchasing", "because": "It is cheap."}


def part(number: str = "X1", b_k: float = 3950.0, *, limits: Any = None, **fields: Any) -> PartRecord:
    """A chip of the plain law, approved, within 1 %."""
    plain = {
        "part": number,
        "maker": "Maker",
        "body": {"form": "chip", "size_code": "0603"},
        "rated": {"resistance_ohm": "10k", "tolerance_pct": 1},
        "b_values": [{"between_c": [25, 85], "b_k": b_k, "tolerance_pct": 1}],
        "shape": "plain",
        "limits": {"operating_c": [-40, 125], "dissipation_mw_per_k": 2.0, "time_constant_s": 4} | (limits or {}),
        "standing": [APPROVED],
    }
    return PartRecord(Part.model_validate(plain | fields), Source(f"{number}.yaml", f"{number}.yaml", {}))


def place(**fields: Any) -> PositionRecord:
    """A position for it over 0 to 60 °C, within 2 K, that names X2 as an approved alternate."""
    plain: dict[str, Any] = {
        "range_c": [0, 60],
        "limit_k": 2.0,
        "alternates": [{"part": "X2", "standing": [APPROVED]}],
    }
    position = circuit_records.real_position(**plain | fields)
    return PositionRecord(position, Source("place.yaml", "place.yaml", {}))


def catalog(*parts: PartRecord, positions: tuple[PositionRecord, ...] = ()) -> Catalog:
    """A catalog of these records."""
    return Catalog(parts, positions)
