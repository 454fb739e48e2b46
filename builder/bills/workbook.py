"""A bill as an XLSX workbook: its sheets as rows of text."""

from __future__ import annotations

import datetime
import io
import warnings
import zipfile
from collections.abc import Iterator
from contextlib import closing
from typing import Any

from builder.bills.sheet import MOST_LINES, Row, Sheet
from builder.bills.unreadable import Unreadable

ZIP = b"PK\x03\x04"
COMPOUND_FILE = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
# A sheet of a hundred thousand rows has some 50 MB; what unpacks to more is no bill.
_LARGEST_BYTES = 200_000_000
_NO_WORKBOOK = "it is no XLSX workbook that can be read. Save it as XLSX, or export the bill as CSV."


def workbook_sheets(data: bytes) -> list[Sheet]:
    """The workbook's sheets with their values; of formulas the values that were saved with them."""
    try:
        has_formulas = _has_formulas(data)
        values = _sheets(data, values=True)
        formulas = _sheets(data, values=False) if has_formulas else values
    except Unreadable:
        raise
    except Exception:  # what a damaged workbook makes zipfile, the XML parser and openpyxl raise is not listed anywhere
        raise Unreadable(_NO_WORKBOOK) from None
    for shown, typed in zip(values, formulas, strict=True):
        _refuse_uncalculated(shown, typed)
    return values


def _has_formulas(data: bytes) -> bool:
    """Whether any sheet has one, told from its XML, since reading a workbook twice costs as much again."""
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        if sum(member.file_size for member in archive.infolist()) > _LARGEST_BYTES:
            size = f"{_LARGEST_BYTES / 1e6:.0f} MB"
            raise Unreadable(f"it unpacks to more than {size}, which is no bill. Export the bill as CSV.")
        sheets = [name for name in archive.namelist() if name.startswith("xl/worksheets/")]
        return any(mark in text for text in map(archive.read, sheets) for mark in (b"<f>", b"<f ", b":f>", b":f "))


def _sheets(data: bytes, *, values: bool) -> list[Sheet]:
    import openpyxl  # here, since only this kind of bill needs it

    with warnings.catch_warnings():
        warnings.simplefilter("ignore")  # it tells which styles and extensions it leaves out; no cell is lost by that
        book = openpyxl.load_workbook(io.BytesIO(data), read_only=True, data_only=values)
        with closing(book):
            return [Sheet(sheet.title, tuple(_rows(sheet))) for sheet in book.worksheets]


def _rows(sheet: Any) -> Iterator[Row]:
    sheet.reset_dimensions()  # what a sheet says of its size is not always so
    for line, values in enumerate(sheet.iter_rows(values_only=True), start=1):
        if line > MOST_LINES:
            raise Unreadable(f"more than {MOST_LINES} rows are no bill. Export the rows of the bill alone.")
        # A format that was given to whole rows makes thousands of blank cells.
        filled = max((column for column, value in enumerate(values, start=1) if value is not None), default=0)
        cells = tuple(map(_text, values[:filled]))
        if any(cell.strip() for cell in cells):
            yield Row(line, cells)


def _text(value: Any) -> str:
    """A cell's value as its sheet shows it in the plain format."""
    if isinstance(value, float):
        return f"{value:.15g}"
    if isinstance(value, datetime.datetime | datetime.date | datetime.time):
        return value.isoformat()
    return "" if value is None else str(value)


def _refuse_uncalculated(shown: Sheet, typed: Sheet) -> None:
    """Refuse a sheet whose formulas were written by a program that did not calculate them: its cells look empty."""
    rows = {row.line: row for row in shown.rows}
    formulas = [
        (row.line, rows[row.line].cell(column) if row.line in rows else "")
        for row in typed.rows
        for column, cell in enumerate(row.cells)
        if cell.startswith("=")
    ]
    if formulas and not any(value for _, value in formulas):
        message = f"the formulas of the sheet {shown.name} have no values. Open the file in a spreadsheet program and save it."
        raise Unreadable(message, formulas[0][0])
