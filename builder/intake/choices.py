"""What the person asking says about the file, where the file does not."""

from __future__ import annotations

from dataclasses import dataclass

from builder.intake.unreadable import Unreadable, clipped

_RESISTANCE = {
    "ohm": "Ω", "ohms": "Ω", "Ω": "Ω", "kohm": "kΩ", "kohms": "kΩ", "kΩ": "kΩ",
    "Mohm": "MΩ", "MOhm": "MΩ", "Megohm": "MΩ", "megohm": "MΩ", "MΩ": "MΩ",
}  # fmt: skip
_TEMPERATURE = {"C": "°C", "°C": "°C", "F": "°F", "°F": "°F", "K": "K"}
_DECIMAL = {".": ".", "point": ".", ",": ",", "comma": ","}


@dataclass(frozen=True)
class Choices:
    """The options in the form the reader works with."""

    resistance_unit: str | None
    temperature_unit: str | None
    decimal: str | None
    column: str | None


def choices(*, unit: str | None, temperature_unit: str | None, decimal: str | None, column: str | None) -> Choices:
    """The options, each checked against what it may be."""
    return Choices(
        _known("unit", unit, _RESISTANCE, "ohm, kohm or Mohm"),
        _known("temperature_unit", temperature_unit, _TEMPERATURE, "C, F or K"),
        _known("decimal", decimal, _DECIMAL, "point or comma"),
        column,
    )


def _known(option: str, value: str | None, meanings: dict[str, str], cure: str) -> str | None:
    if value is None:
        return None
    # MΩ and mΩ differ by their capital, so the text is not folded as a whole.
    meaning = meanings.get(value.strip()) or (
        meanings.get(value.strip().lower()) or meanings.get(value.strip().upper()) if value[:1] not in "mM" else None
    )
    if meaning is None:
        raise Unreadable(None, f"the option {option} is {clipped(value)!r}. Give {cure}.")
    return meaning
