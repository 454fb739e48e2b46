"""Numbers as people write them, to exact decimals."""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal

RESISTANCE_POWER = {"Ω": 0, "kΩ": 3, "MΩ": 6}
_RESISTANCE_SUFFIX = r"(?:kilo|[Mm]ega?|[kKM])?[ -]?(?:Ω|[Oo][Hh][Mm][Ss]?)|[kKMR]"
_TEMPERATURE_SUFFIX = r"(?:°|deg\.?) ?[CFK]|[CFK]"
_IGNORED_SUFFIX = r"(?:%|ppm)(?: ?/ ?(?:K|° ?C))?"
SUFFIX = rf"(?:{_RESISTANCE_SUFFIX}|{_TEMPERATURE_SUFFIX}|{_IGNORED_SUFFIX})"
PLUS_MINUS = r"(?:±|\+/-)"
_BODY = r"(?:[0-9]+(?:[.,][0-9]+|[ '\u202f][0-9]{3}(?![0-9]))*\.?|[.,][0-9]+)"
_EXPONENT = r"(?:[eE][+-]?[0-9]{1,2})"
_NUMERAL = re.compile(
    rf"(?P<sign>{PLUS_MINUS}|[+-]?) ?(?P<body>{_BODY})(?P<exponent>{_EXPONENT}?) ?(?P<suffix>{SUFFIX}?)"
    rf"(?P<tolerance> ?{PLUS_MINUS} ?{_BODY} ?{SUFFIX}?)?"
)
_LETTER_FOR_POINT = re.compile(r"([0-9]+)([kKMR])([0-9]+)")  # IEC 60062: 4k7
MOST_DIGITS = 24


@dataclass(frozen=True)
class Numeral:
    """One cell: its exact value and the unit written behind it, both as typed."""

    value: Decimal
    suffix: str = ""


def is_numeral(cell: str) -> bool:
    """Whether the cell is a number under one decimal sign or the other."""
    return bool(_NUMERAL.fullmatch(cell) or _LETTER_FOR_POINT.fullmatch(cell))


def is_tolerance(cell: str) -> bool:
    """Whether the cell says by its own marks that it is a tolerance or a percentage."""
    match = _NUMERAL.fullmatch(cell)
    return match is not None and (match["sign"] in ("±", "+/-") or match["suffix"].startswith(("%", "ppm")))


def has_tolerance(cell: str) -> bool:
    """Whether a tolerance follows the number in the same cell."""
    match = _NUMERAL.fullmatch(cell)
    return match is not None and match["tolerance"] is not None


def numeral(cell: str, decimal: str) -> Numeral:
    """The number in a cell, when `decimal` is the decimal sign.

    Raises
    ------
    ValueError
        The cell is no number then, or has more digits than a measurement can.
    """
    if len(cell) > 4 * MOST_DIGITS:
        raise ValueError(cell)
    if coded := _LETTER_FOR_POINT.fullmatch(cell):
        return Numeral(Decimal(f"{coded[1]}.{coded[3]}"), coded[2])
    match = _NUMERAL.fullmatch(cell)
    if match is None:
        raise ValueError(cell)
    minus = "-" if match["sign"] == "-" else ""
    value = Decimal(f"{minus}{_digits(match['body'], decimal)}{match['exponent']}")
    if abs(int(value.as_tuple().exponent)) > MOST_DIGITS:
        raise ValueError(cell)
    return Numeral(value, match["suffix"])


def _digits(body: str, decimal: str) -> str:
    thousands = "," if decimal == "." else "."
    point = re.escape(decimal)
    plain = rf"[0-9]+(?:{point}[0-9]*)?|{point}[0-9]+"
    grouped = rf"[1-9][0-9]{{0,2}}([{thousands}' \u202f])[0-9]{{3}}(?:\1[0-9]{{3}})*(?:{point}[0-9]*)?"
    if not re.fullmatch(rf"(?:{grouped}|{plain})", body):
        raise ValueError(body)
    digits = re.sub(rf"[{thousands}' \u202f]", "", body).replace(decimal, ".")
    if len(digits) > MOST_DIGITS:
        raise ValueError(body)
    return digits


def resistance_unit(suffix: str) -> str | None:
    """The unit of resistance a suffix means, or None."""
    if not re.fullmatch(_RESISTANCE_SUFFIX, suffix):
        return None
    if suffix[0] in "kK":
        return "kΩ"
    return "MΩ" if suffix[0] in "mM" else "Ω"


def temperature_unit(suffix: str) -> str | None:
    """The unit of temperature a suffix means, °C, °F or K, or None."""
    if not re.fullmatch(_TEMPERATURE_SUFFIX, suffix):
        return None
    return {"C": "°C", "F": "°F", "K": "K"}[suffix[-1]]


def shifted(value: Decimal, power: int) -> Decimal:
    """The value times a power of ten, with exactly the digits typed."""
    sign, digits, exponent = value.as_tuple()
    return Decimal((sign, digits, int(exponent) + power))


def printed(value: Decimal) -> str:
    """The value in digits, without exponent and without a minus sign before zero."""
    return f"{abs(value) if value == 0 else value:f}"
