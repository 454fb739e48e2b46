"""A bill as text: bytes to rows of cells, under each sign that may divide them."""

from __future__ import annotations

import codecs
import csv
import io
import re
from collections.abc import Iterator

from builder.bills.sheet import MOST_LINES, Row, Sheet
from builder.bills.unreadable import Unreadable

_DELIMITERS = (",", ";", "\t", "|")
_UTF_16 = (codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE)
_CONTROL = re.compile("[\x00-\x08\x0e-\x1f\x7f]")
# A row of its own behind the last: where it is not found again, a quotation mark was left open.
_LAST_ROW = "\x00last row"


def text_sheets(data: bytes) -> Iterator[Sheet | Unreadable]:
    """The file divided by each delimiter, or why it cannot be."""
    text = _text(data)
    for delimiter in _DELIMITERS:
        try:
            yield Sheet("", tuple(_rows(text, delimiter)))
        except Unreadable as refused:
            yield refused


def _text(data: bytes) -> str:
    text = _decoded(data)
    control = _CONTROL.search(text)
    if control:
        shown = f"U+{ord(control[0]):04X}"
        raise Unreadable(
            f"it holds the control character {shown}, so it is no text. Export the bill as CSV or XLSX.",
            text.count("\n", 0, control.start()) + 1,
        )
    return text


def _decoded(data: bytes) -> str:
    encoding = "utf-16" if data.startswith(_UTF_16) else "utf-8-sig"
    try:
        return data.decode(encoding)
    except UnicodeDecodeError:
        if encoding == "utf-16":
            raise Unreadable("it begins as UTF-16, and is cut off or damaged. Export the bill anew.") from None
    try:
        return data.decode("cp1252")
    except UnicodeDecodeError as error:
        line, byte = data.count(b"\n", 0, error.start) + 1, data[error.start]
        raise Unreadable(
            f"byte 0x{byte:02X} is neither UTF-8, UTF-16 nor Windows-1252. Export the bill as CSV in UTF-8.", line
        ) from None


def _rows(text: str, delimiter: str) -> Iterator[Row]:
    reader = csv.reader(io.StringIO(f"{text}\n{_LAST_ROW}", newline=""), delimiter=delimiter, skipinitialspace=True)
    line = 1
    try:
        for cells in reader:
            if cells == [_LAST_ROW]:
                return
            if line > MOST_LINES:
                raise Unreadable(f"more than {MOST_LINES} lines are no bill. Export the lines of the bill alone.")
            if any(cell.endswith(_LAST_ROW) for cell in cells):
                raise Unreadable("a quotation mark that opens here is not closed. Close it, or remove it.", line)
            if any(cell.strip() for cell in cells):
                yield Row(line, tuple(cells))
            line = reader.line_num + 1
    except csv.Error:
        limit = csv.field_size_limit()
        raise Unreadable(f"a cell has more than {limit} characters. Is a quotation mark not closed?", line) from None
