"""What the text around the table states as the resistance at 25 °C."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from decimal import Decimal

from builder.intake.numerals import RESISTANCE_POWER, numeral, resistance_unit, shifted
from builder.intake.sheets import SheetLine

_VALUE = r"(?P<value>[0-9][0-9.,']*(?:[kKM][0-9]+)? ?(?:[kKM]? ?(?:Ω|[Oo]hms?)|[kKMR](?![A-Za-z])|(?<=[kKM][0-9])))"
_NAMED = re.compile(
    rf"(?:\bR_?\(?25\b|\b(?:rated|nominal|zero-power) resistance\b(?: at 25 ?°? ?C)?)[^0-9]{{0,20}}?{_VALUE}", re.I
)
_AT_25 = re.compile(rf"{_VALUE}[^0-9.;]{{0,12}}(?:\bat|@) ?25(?:\.0+)? ?(?:°|deg)", re.I)


_PART = re.compile(
    r"(?<![\w.,])[0-9][0-9.,]*(?:[kMR][0-9]+| ?[kKM]?(?:Ω|[Oo]hms?)| ?[kM]|R)(?![A-Za-z0-9])"
)  # no capital K alone, which is a kelvin as well


@dataclass(frozen=True)
class Statement:
    """A resistance at 25 °C that a line of text states."""

    line: int
    text: str
    ohm: Decimal


def named_ohms(text: str) -> set[Decimal]:
    """The resistances that a text names, such as 10k in "10k part"."""
    named: set[Decimal] = set()
    for match in _PART.finditer(text):
        try:
            number = numeral(match[0].replace(",", "."), ".")
        except ValueError:
            continue
        unit = resistance_unit(number.suffix)
        if unit:
            named.add(shifted(number.value, RESISTANCE_POWER[unit]))
    return named


def statements(lines: Iterable[SheetLine], decimal: str) -> Iterator[Statement]:
    """Every statement of the resistance at 25 °C, read with one decimal sign."""
    for line in lines:
        for match in (*_NAMED.finditer(line.text), *_AT_25.finditer(line.text)):
            try:
                number = numeral(match["value"].strip(), decimal)
            except ValueError:
                continue
            unit = resistance_unit(number.suffix)
            if unit:
                yield Statement(line.number, match[0].strip(), shifted(number.value, RESISTANCE_POWER[unit]))
