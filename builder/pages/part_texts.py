"""A part in a few words: rated resistance, body, summary."""

from __future__ import annotations

from builder.decisions.requirements import body_text
from builder.records import Part
from builder.units import number_text, resistance_text, temperature_text

__all__ = ["body_text", "rated_text", "summary"]


def summary(part: Part) -> str:
    """What a part is, in a line."""
    return part.description or f"{rated_text(part)} {body_text(part)} thermistor of {part.maker}"


def rated_text(part: Part) -> str:
    """The rated resistance, with its temperature where that is not 25 °C, and its tolerance."""
    rated = part.rated
    at = "" if rated.at_c == 25 else f" at {temperature_text(rated.at_c)}"
    tolerance = "" if rated.tolerance_pct is None else f" ±{number_text(rated.tolerance_pct)} %"
    return f"{resistance_text(rated.resistance_ohm)}{at}{tolerance}"
