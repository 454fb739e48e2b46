"""Records made without files: only what the ledger looks at differs from the least that is valid."""

from __future__ import annotations

from typing import Any

from builder.records import Catalog, Part, PartRecord, Position, PositionRecord, Source

NO_LINES: dict[Any, int] = {}


def entry(state: str, on: str = "2026-03-02", **more: Any) -> dict[str, Any]:
    return {"state": state, "on": on, "by": "us", "because": "tested here", **more}


def part(number: str = "PX-1", *standing: dict[str, Any], lines: dict[Any, int] = NO_LINES, **more: Any) -> PartRecord:
    least = {"maker": "Pellworm", "body": {"form": "leaded"}, "rated": {"resistance_ohm": "10k"}}
    b_values = [{"between_c": [25, 85], "b_k": 3435}]
    model = Part.model_validate({"part": number, "b_values": b_values, "standing": list(standing)} | least | more)
    return PartRecord(model, Source(f"parts/{number}.yaml", f"{number}.yaml", lines))


def place(
    name: str = "box/RT1", *, fitted: str = "PX-1", lines: dict[Any, int] = NO_LINES, **alternates: list[dict[str, Any]]
) -> PositionRecord:
    """A position of the board Box; alternates by their numbers, underscores for hyphens."""
    model = Position.model_validate(
        {
            "position": name,
            "board": "Box",
            "purpose": "air",
            "range_c": [0, 60],
            "limit_k": 1,
            "circuit": {"thermistor": "low side", "fixed": {"resistance_ohm": "10k"}, "supply_v": 3.3},
            "adc": {"bits": 12},
            "firmware": {"method": "curve"},
            "fitted": fitted,
            "alternates": [{"part": n.replace("_", "-"), "standing": own} for n, own in alternates.items()],
        }
    )
    return PositionRecord(model, Source(f"parts/{name}.yaml", f"{name}.yaml", lines))


def catalog(*records: PartRecord | PositionRecord) -> Catalog:
    return Catalog(
        tuple(r for r in records if isinstance(r, PartRecord)),
        tuple(r for r in records if isinstance(r, PositionRecord)),
    )
