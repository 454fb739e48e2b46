"""What a column's heading says: what the column holds, and in which unit."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Literal

from builder.intake.unreadable import Unreadable, clipped

Role = Literal["temperature", "nominal", "minimum", "maximum", "ratio", "tolerance", "B-value", "alpha", "other"]
RESISTANCE_ROLES: tuple[Role, ...] = ("nominal", "minimum", "maximum", "ratio")

_OHM = re.compile(
    r"(?<![A-Za-z])(?P<prefix>kilo|[Mm]ega?|[kKMmGgµμn])?[ -]?(?:Ω|[Oo][Hh][Mm][Ss]?)(?![A-Za-z])"
    r"|[\[(] ?(?P<bare>k) ?[\])]"
)
_NUMBER_BEFORE = re.compile(r"(?<![\w.,])[0-9][0-9.,' ]*$")
_NUMBER_AFTER = re.compile(r"[)\]]? ?[:=]? ?[0-9]")
_LETTER = re.compile(r"[^\W\d_]")
_OF_ANOTHER = re.compile(r"pull|divider|shunt", re.I)
_OF_THE_TABLE = re.compile(r"\b(?:r|rt|r_?25|resistances?|résistances?|widerst[aä]nde?|values?|tables?|units?)\b", re.I)
_DEGREES = re.compile(
    r"(?:°|\bdeg(?:rees?|\.)?) ?(?P<letter>[CFK])(?![A-Za-z])|(?P<word>celsius|centigrade|fahrenheit|kelvin)", re.I
)
_BRACKETED = re.compile(r"(?:[\[(/_,] ?|\bin |^)([CFKcfk])(?![A-Za-z0-9])|\b([CFK])$")
_ROLES: tuple[tuple[Role, re.Pattern[str]], ...] = (
    ("alpha", re.compile(r"alpha|α|\btcr?\b|coeff|ppm|% ?/ ?(?:k|°)")),
    ("tolerance", re.compile(r"±|\+/-|tol|δ|∆|delta|\bdev|error|accuracy|%|\bd[rt]\b")),
    ("B-value", re.compile(r"^b ?[\[(,/] ?k|^b ?_?\(?[0-9]|beta|β|\bb[- ]?(?:value|const)")),
)
_RATIO = re.compile(r"\br[^/ ]* ?/ ?r[^a-z]|\br[^/ ]* ?/ ?r$|ratio")
_PER_CENT = re.compile(r"(?:±|\+/-)? ?[0-9]+(?:[.,][0-9]+)? ?%(?! ?/)")
_NOMINAL = re.compile(r"nom|typ|cent|norm|mean|nenn")
_MINIMUM = re.compile(r"min|low")
_MAXIMUM = re.compile(r"max|high|upp")
_RESISTANCE = re.compile(r"^r\b|^r[_ (\[/0-9]|^rt\b|^rntc|resist|résist|widerst")
_TEMPERATURE = re.compile(r"temp|^t\b|^t[_ (\[/]|^ta\b|^tamb|ϑ|θ|^[cf]$|°|^deg|celsius|centigrade|fahrenheit|kelvin")


@dataclass(frozen=True)
class Heading:
    """A column's heading as typed, what it says the column holds, and its unit, None where it states none."""

    text: str
    role: Role
    unit: str | None


def heading(text: str, line: int) -> Heading:
    """What a heading says."""
    resistance = resistance_unit(text, line)
    role = _role(text.casefold(), resistance is not None)
    return temperature_heading(text) if role == "temperature" else Heading(text, role, resistance)


def temperature_heading(text: str) -> Heading:
    """What the heading of a temperature says."""
    return Heading(text, "temperature", temperature_unit(text, bracketed=True))


def _role(text: str, in_ohms: bool) -> Role:
    if (_MINIMUM.search(text) or _MAXIMUM.search(text)) and not _NOMINAL.search(text):
        text = _PER_CENT.sub("", text)  # "R min 1 %" is a limit, not a tolerance
    for role, pattern in _ROLES:
        if pattern.search(text) and not (role == "B-value" and in_ohms):
            return role
    if _RATIO.search(text):
        return "other" if _MINIMUM.search(text) or _MAXIMUM.search(text) else "ratio"
    if _TEMPERATURE.search(text) and not in_ohms and not _RESISTANCE.search(text):
        return "temperature"
    if _NOMINAL.search(text):  # before minimum: the word no-min-al holds "min"
        return "nominal"
    if _MINIMUM.search(text):
        return "minimum"
    if _MAXIMUM.search(text):
        return "maximum"
    return "nominal" if in_ohms or _RESISTANCE.search(text) else "other"


def resistance_unit(text: str, line: int) -> str | None:
    """The unit of resistance that a text states for other numbers than its own; "10 kΩ" states none."""
    found = {_ohm_unit(m, text, line) for m in _OHM.finditer(text) if not _NUMBER_BEFORE.search(text[: m.start()])}
    if len(found) > 1:
        raise Unreadable(
            line, f"{clipped(text)!r} names {' and '.join(sorted(found))}. Leave the one that the values have."
        )
    return next(iter(found), None)


def caption_unit(text: str, line: int) -> str | None:
    """The unit that a text above the table states for the table's resistances; "Pull-up in kΩ: 10" states none."""
    names_nothing = not _LETTER.search(_DEGREES.sub("", _OHM.sub("", text)))
    if _OF_ANOTHER.search(text) or any(_NUMBER_AFTER.match(text, m.end()) for m in _OHM.finditer(text)):
        return None
    return resistance_unit(text, line) if names_nothing or _OF_THE_TABLE.search(text) else None


def _ohm_unit(match: re.Match[str], text: str, line: int) -> str:
    prefix = match["prefix"] or match["bare"] or ""
    if prefix in ("m", "G", "g", "µ", "μ", "n"):
        raise Unreadable(
            line,
            f"the unit {match[0].strip()!r} in {clipped(text)!r} is not one that NTC tables have. Write Ω, kΩ or MΩ.",
        )
    if prefix:
        return "kΩ" if prefix[0] in "kK" else "MΩ"
    return "Ω"


def temperature_unit(text: str, *, bracketed: bool = False) -> str | None:
    """The unit of temperature that a text states for other numbers than its own: °C, °F or K.

    `bracketed` also takes the letter alone, as in "T (K)" or "t_c", which only a temperature's heading can mean so.
    """
    found = {
        (m["letter"] or m["word"])[0].upper()
        for m in _DEGREES.finditer(text)
        if not _NUMBER_BEFORE.search(text[: m.start()])
    }
    if not found and bracketed:
        found = {(m[1] or m[2]).upper() for m in _BRACKETED.finditer(text)}
    if len(found) != 1:
        return None
    return {"C": "°C", "F": "°F", "K": "K"}[found.pop()]
