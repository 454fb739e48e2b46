"""Bytes to numbered lines, with the look-alikes of signs and spaces made one."""

from __future__ import annotations

import codecs
import re
from dataclasses import dataclass

from builder.intake.unreadable import Unreadable

NARROW_SPACE = "\u202f"
LONGEST_LINE = 2000
_UTF_16 = (codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE)
_LINE_END = re.compile(r"\r\n|\n|\r")
_PIECE_END = re.compile("[\f\v\x1c-\x1e\x85\u2028\u2029]")
_FIXED_SPACE = re.compile("[\u00a0\u2007\u2009\u202f]")
_FIXED_SPACE_IN_NUMBER = re.compile("(?<=[0-9])[\u00a0\u2007\u2009\u202f](?=[0-9]{3}(?![0-9]))")
_LOOKALIKES = str.maketrans(
    {
        "\u2212": "-", "\u2010": "-", "\u2011": "-", "\u2013": "-", "\ufe63": "-", "\uff0d": "-",
        "\u2126": "Ω", "\u00ba": "°", "\u02da": "°", "\u2103": "°C", "\u2109": "°F",
        "\u2019": "'", "\u02bc": "'", "│": "|", "┃": "|", "║": "|", "\ufeff": None, "\u200b": None,
    }
)  # fmt: skip


@dataclass(frozen=True)
class Line:
    """One line of the file, or one piece of it where a page break falls inside."""

    number: int
    text: str


@dataclass(frozen=True)
class Text:
    """The file as lines, with the encoding they were read in and the number of form feeds."""

    lines: tuple[Line, ...]
    encoding: str
    page_breaks: int


def text(data: bytes) -> Text:
    """The lines of a file in UTF-8, UTF-16 with a byte order mark, or Windows-1252."""
    decoded, encoding = _decoded(data)
    if "\0" in decoded:
        raise Unreadable(None, "the file holds zero bytes, so it is not plain text. Export the table as CSV in UTF-8.")
    lines = [
        Line(number, _plain(piece))
        for number, line in enumerate(_LINE_END.split(decoded), start=1)
        for piece in _PIECE_END.split(line)
    ]
    long = next((line for line in lines if len(line.text) > LONGEST_LINE), None)
    if long:
        raise Unreadable(
            long.number, f"{len(long.text)} characters are too many for a row. Give each row its own line."
        )
    return Text(tuple(lines), encoding, decoded.count("\f"))


def _decoded(data: bytes) -> tuple[str, str]:
    if data.startswith(_UTF_16):
        return _strictly(data, "utf-16"), "UTF-16"
    try:
        return data.decode("utf-8-sig"), "UTF-8"
    except UnicodeDecodeError:
        return _strictly(data, "cp1252"), "Windows-1252, since it is not valid UTF-8"


def _strictly(data: bytes, encoding: str) -> str:
    try:
        return data.decode(encoding)
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        raise Unreadable(
            line, f"byte 0x{data[error.start]:02X} is neither UTF-8, UTF-16 nor Windows-1252. Save the file as UTF-8."
        ) from None


def _plain(line: str) -> str:
    grouped = _FIXED_SPACE_IN_NUMBER.sub("\x1f", line)
    return _FIXED_SPACE.sub(" ", grouped).replace("\x1f", NARROW_SPACE).translate(_LOOKALIKES)
