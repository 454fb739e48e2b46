"""From a pasted or exported R–T table to a record to be filled in; nothing is guessed silently."""

from __future__ import annotations

from builder.intake import decoding, record
from builder.intake.choices import choices
from builder.intake.readings import reading
from builder.intake.unreadable import Unreadable

__all__ = ["Unreadable", "record_text"]


def record_text(
    data: bytes,
    *,
    name: str,
    unit: str | None = None,
    temperature_unit: str | None = None,
    decimal: str | None = None,
    column: str | None = None,
    part: str | None = None,
    maker: str | None = None,
) -> str:
    """The record that a file's R–T table makes, as YAML with comments.

    Parameters
    ----------
    data : bytes
        The file: text in UTF-8, UTF-16 with a byte order mark, or Windows-1252. (no unit)
    name : str
        The file's name, for the record's first comment. (no unit)
    unit : str, optional
        Unit of resistance where the file states none: ohm, kohm or Mohm. (no unit)
    temperature_unit : str, optional
        Unit of temperature where the file states none: C, F or K. (no unit)
    decimal : str, optional
        Decimal sign where the file does not settle it: point or comma. (no unit)
    column : str, optional
        Which resistance to take: its heading, a fragment of it, or the column's number from 1. (no unit)
    part, maker : str, optional
        The part number and its maker; without them a placeholder stands there. (no unit)

    Returns
    -------
    str
        The record; temperatures in °C, resistances in Ω, with every digit typed. (no unit)

    Raises
    ------
    Unreadable
        The file cannot be read without guessing; the message says where, why, and what to do.
    """
    chosen = choices(unit=unit, temperature_unit=temperature_unit, decimal=decimal, column=column)
    text = decoding.text(data)
    return record.yaml(
        reading(text.lines, chosen),
        encoding=text.encoding,
        page_breaks=text.page_breaks,
        name=name,
        part=part,
        maker=maker,
    )
