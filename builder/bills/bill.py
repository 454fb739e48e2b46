"""A bill of materials: its lines, read from whatever a spreadsheet or a layout program wrote."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace

from builder.bills.headings import Columns, Role, columns
from builder.bills.marks import Marks
from builder.bills.references import references
from builder.bills.sheet import Row, Sheet
from builder.bills.spelling import word_key
from builder.bills.text_file import text_sheets
from builder.bills.unreadable import Unreadable
from builder.bills.workbook import COMPOUND_FILE, ZIP, workbook_sheets
from builder.problems import clipped, nearest

LARGEST_BYTES = 20_000_000
# Titles and addresses stand above the headings; nobody writes more of them.
_TITLE_ROWS = 100
_LONGEST_REFERENCES = 10_000
_MOST_REFERENCES = 200_000
_IN_ORDER: tuple[Role, ...] = ("reference", "number", "own-number", "maker", "quantity")
_NO_NUMBER = frozenset(("", "na", "no", "none"))
_QUANTITY = re.compile(r"([0-9]{1,9})(?:[.,]0+)?\s?(?:x|×|pcs?\.?|pieces?|ea\.?|stk\.?|stück|pi?è?ces?|uds?\.?)?", re.I)


@dataclass(frozen=True)
class BillLine:
    """What one line says; `line` is the line of the file, or the row of the sheet.

    `seconds` is the line once more for each second source that it names, with the heading of that one's `column`.
    """

    line: int
    references: tuple[str, ...] = ()
    number: str = ""
    own_number: str = ""
    maker: str = ""
    quantity: str = ""
    description: str = ""
    is_marked_fitted: bool = True
    column: str = ""
    seconds: tuple[BillLine, ...] = ()

    @property
    def is_fitted(self) -> bool:
        """Whether anything is fitted: it is not marked otherwise, and the quantity is not 0."""
        return self.is_marked_fitted and self.count != 0

    @property
    def is_numbered(self) -> bool:
        """Whether it has a number of its own, beside those of second sources."""
        return bool(self.number or self.own_number)

    @property
    def count(self) -> int | None:
        """The quantity as a whole number; None where it is none."""
        found = _QUANTITY.fullmatch(self.quantity)
        return int(found[1]) if found else None


@dataclass(frozen=True)
class Bill:
    """A bill's lines, and whether it has a column of references at all."""

    lines: tuple[BillLine, ...]
    has_references: bool


def read_bill(data: bytes, *, name: str, sheet: str | None = None, chosen: Mapping[Role, str] | None = None) -> Bill:
    """The lines of a bill.

    Parameters
    ----------
    data : bytes
        The file: CSV, or text divided otherwise, or an XLSX workbook. (no unit)
    name : str
        The file's name, which says what the file should be. (no unit)
    sheet : str, optional
        The workbook's sheet to read, where several have headings. (no unit)
    chosen : mapping, optional
        The heading of the column that has a role, where the words alone do not tell. (no unit)

    Returns
    -------
    Bill
        Its lines, in their order. (no unit)

    Raises
    ------
    Unreadable
        The file is no bill that can be read without guessing.
    """
    found, heading, read = _headed(_sheets(data, name, sheet), chosen or {})
    if read.doubt:
        raise Unreadable(read.doubt, heading.line)
    lines = tuple(_lines([row for row in found.rows if row.line > heading.line], read))
    if not lines:
        raise Unreadable("no line of parts follows the headings. Export the bill again.", heading.line)
    return Bill(lines, "reference" in read.of)


def _sheets(data: bytes, name: str, sheet: str | None) -> list[Sheet | Unreadable]:
    """The sheets that may hold the bill: those of a workbook, or the text under each delimiter."""
    if len(data) > LARGEST_BYTES:
        raise Unreadable(f"it is larger than {LARGEST_BYTES / 1e6:.0f} MB, which is no bill. Export the bill alone.")
    if not data.strip():
        raise Unreadable("it is empty. Export the bill again.")
    if data.startswith(COMPOUND_FILE):
        raise Unreadable("it is an old or an encrypted workbook. Save it as XLSX without a password, or as CSV.")
    if data.startswith(ZIP):
        return [*_named(workbook_sheets(data), sheet)]
    if name.casefold().endswith((".xlsx", ".xlsm")):
        raise Unreadable("its name says XLSX, but it is no workbook. Save it as XLSX, or name it after what it is.")
    if sheet is not None:
        raise Unreadable("it is text, which has no sheets. Leave --sheet out.")
    return list(text_sheets(data))


def _named(sheets: list[Sheet], name: str | None) -> list[Sheet]:
    if name is None:
        return sheets
    found = [sheet for sheet in sheets if sheet.name.casefold() == name.strip().casefold()]
    if not found:
        names = [sheet.name for sheet in sheets]
        shown = ", ".join(map(clipped, names))
        raise Unreadable(f"it has no sheet {clipped(name)}.{nearest(name, names)} Its sheets: {shown}.")
    return found


def _headed(sheets: Sequence[Sheet | Unreadable], chosen: Mapping[Role, str]) -> tuple[Sheet, Row, Columns]:
    """The sheet that has usable headings, their row, and what they say."""
    usable = [(sheet, *found) for sheet in sheets if isinstance(sheet, Sheet) and (found := _heading(sheet, chosen))]
    named = [clipped(sheet.name) for sheet, _, _ in usable if sheet.name]
    if len(named) > 1:
        raise Unreadable(f"several of its sheets have headings: {', '.join(named)}. Choose one with --sheet.")
    if not usable:
        raise next((sheet for sheet in sheets if isinstance(sheet, Unreadable)), _no_heading(chosen))
    # Of the delimiters of a text the right one makes the most of its headings.
    return max(usable, key=lambda found: found[2].count)


def _heading(sheet: Sheet, chosen: Mapping[Role, str]) -> tuple[Row, Columns] | None:
    """The row among a sheet's first that says most as headings."""
    rows = [(row, columns(row.cells, chosen)) for row in sheet.rows[:_TITLE_ROWS]]
    usable = [(row, read) for row, read in rows if read is not None and read.are_usable]
    return max(usable, key=lambda found: found[1].count, default=None)


def _no_heading(chosen: Mapping[Role, str]) -> Unreadable:
    if chosen:
        names = " and ".join(clipped(heading) for heading in chosen.values())
        return Unreadable(
            f"no row has the heading {names} and one for part numbers. Write it as it stands in the file."
        )
    return Unreadable(
        f"none of its first {_TITLE_ROWS} rows has a heading for part numbers, such as part number. "
        "Name the column with --number HEADING or --own-number HEADING."
    )


def _lines(rows: Sequence[Row], read: Columns) -> Iterator[BillLine]:
    marks, count = Marks(rows, read), 0
    for row in rows:
        line = _line(row, read, marks)
        count += len(line.references)
        if count > _MOST_REFERENCES:
            raise Unreadable(
                f"more than {_MOST_REFERENCES} references are no bill. Export the bill of one board.", row.line
            )
        # A description without so much as a quantity is a title.
        if line.references or line.is_numbered or line.seconds or (line.quantity and line.description):
            yield line


def _line(row: Row, read: Columns, marks: Marks) -> BillLine:
    reference, number, own_number, maker, quantity = (row.cell(read.of.get(role)) for role in _IN_ORDER)
    if len(reference) > _LONGEST_REFERENCES:
        message = (
            f"{len(reference)} characters are too many for the references of a line. Divide it into several lines."
        )
        raise Unreadable(message, row.line)
    description = ", ".join(filter(None, map(row.cell, read.descriptions)))
    fitted = marks.say_fitted(row)
    line = BillLine(row.line, references(reference), number, own_number, maker, quantity, description, fitted)
    seconds = tuple(_seconds(line, row, read))
    return replace(line, seconds=seconds) if seconds else line


def _seconds(line: BillLine, row: Row, read: Columns) -> Iterator[BillLine]:
    for second in read.seconds:
        number = row.cell(second.number)
        if word_key(number) not in _NO_NUMBER:
            yield replace(line, number=number, own_number="", maker=row.cell(second.maker), column=second.heading)
