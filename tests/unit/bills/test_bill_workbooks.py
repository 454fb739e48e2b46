"""Bills as XLSX: their values, their sheets, and what only looks like a workbook."""

import datetime
import io
import subprocess
import sys
import zipfile
from pathlib import Path

import openpyxl
import pytest
from openpyxl.worksheet.worksheet import Worksheet

from builder.bills import BillLine, Unreadable, read_bill
from builder.bills.workbook import workbook_sheets

HEADINGS = ("Reference", "MPN", "Qty", "Description")
NO_WORKBOOK = "it is no XLSX workbook that can be read. Save it as XLSX, or export the bill as CSV."
LIBREOFFICE = Path(__file__).parent / "libreoffice"


def workbook(**sheets: list[tuple[object, ...]]) -> bytes:
    book = openpyxl.Workbook()
    book.remove(book.active)
    for name, rows in sheets.items():
        sheet: Worksheet = book.create_sheet(name)
        for row in rows:
            sheet.append(row)
    out = io.BytesIO()
    book.save(out)
    return out.getvalue()


def lines(data: bytes, **options: str) -> tuple[BillLine, ...]:
    return read_bill(data, name="bill.xlsx", **options).lines


def refusal(data: bytes, **options: str) -> tuple[int | None, str]:
    with pytest.raises(Unreadable) as refused:
        read_bill(data, name="bill.xlsx", **options)
    return refused.value.line, refused.value.message


def changed(data: bytes, member: str, change) -> bytes:
    """The workbook with one of its files changed."""
    out = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(data)) as old, zipfile.ZipFile(out, "w") as new:
        assert member in old.namelist()
        for name in old.namelist():
            new.writestr(name, change(old.read(name)) if name == member else old.read(name))
    return out.getvalue()


def test_cells_of_every_kind_are_text_and_rows_keep_their_numbers():
    rows = [
        ("Coolbox",),
        (),
        HEADINGS,
        ("RT1", 40512, 1.0, 0.1),
        (),
        ("RT2", datetime.datetime(2026, 3, 5), True),
    ]
    assert lines(workbook(Bill=rows)) == (
        BillLine(4, ("RT1",), "40512", quantity="1", description="0.1"),
        BillLine(6, ("RT2",), "2026-03-05T00:00:00", quantity="True"),
    )


def test_a_number_has_no_more_figures_than_a_sheet_shows():
    data = workbook(Bill=[HEADINGS, ("RT1", 40512, 1, 0.3)])
    noisy = changed(
        data,
        "xl/worksheets/sheet1.xml",
        lambda xml: xml.replace(b">40512<", b">40512.0<").replace(b">0.3<", b">0.30000000000000004<"),
    )
    assert noisy != data and lines(noisy) == lines(data)


def test_the_sheet_that_has_headings_is_read_and_of_several_the_named_one():
    bill, other = [HEADINGS, ("RT1", "A1", 1)], [HEADINGS, ("RT1", "B1", 1)]
    assert lines(workbook(Notes=[("Rev", "By")], Bill=bill))[0].number == "A1"
    assert lines(workbook(Bill=bill, Spare=other), sheet="spare")[0].number == "B1"


@pytest.mark.parametrize(
    ("sheet", "message"),
    [
        (None, "several of its sheets have headings: Bill, Spare. Choose one with --sheet."),
        ("Spair", "it has no sheet Spair. Did you mean Spare? Its sheets: Bill, Spare."),
    ],
)
def test_a_sheet_must_be_told(sheet, message):
    assert refusal(workbook(Bill=[HEADINGS], Spare=[HEADINGS]), sheet=sheet) == (None, message)


def test_a_sheet_that_is_wrong_about_its_size_is_read_whole():
    data = changed(
        workbook(Bill=[HEADINGS, ("RT1", "A1", 1)]),
        "xl/worksheets/sheet1.xml",
        lambda xml: xml.replace(b'ref="A1:D2"', b'ref="A1"'),
    )
    assert lines(data) == (BillLine(2, ("RT1",), "A1", quantity="1"),)


def test_blank_cells_behind_the_last_are_left_out():
    book = openpyxl.load_workbook(io.BytesIO(workbook(Bill=[HEADINGS, ("RT1", "A1", 1)])))
    for row in (1, 2):
        book.active.cell(row, 2000).number_format = "0.00"
    out = io.BytesIO()
    book.save(out)
    (sheet,) = workbook_sheets(out.getvalue())
    assert [len(row.cells) for row in sheet.rows] == [4, 3]


def test_formulas_without_values_are_refused_since_their_cells_look_empty():
    data = workbook(Bill=[HEADINGS, ("RT1", '="A"&1', 1)])
    message = "the formulas of the sheet Bill have no values. Open the file in a spreadsheet program and save it."
    assert refusal(data) == (2, message)


ARCHIVE = io.BytesIO()
with zipfile.ZipFile(ARCHIVE, "w") as archive:
    archive.writestr("bill.txt", "MPN\nA1\n")
GOOD = workbook(Bill=[HEADINGS, ("RT1", "A1", 1)])


@pytest.mark.parametrize(
    ("data", "message"),
    [
        (ARCHIVE.getvalue(), NO_WORKBOOK),
        (GOOD[: len(GOOD) // 2], NO_WORKBOOK),
        (b"PK\x03\x04", NO_WORKBOOK),
        (changed(GOOD, "xl/workbook.xml", lambda _: b"<broken"), NO_WORKBOOK),
        (changed(GOOD, "xl/worksheets/sheet1.xml", lambda xml: xml.replace(b"<row", b"<rwo", 1)), NO_WORKBOOK),
        (
            b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(2000),
            "it is an old or an encrypted workbook. Save it as XLSX without a password, or as CSV.",
        ),
        (
            changed(GOOD, "xl/worksheets/sheet1.xml", lambda xml: xml.replace(b'<row r="2"', b'<row r="99999999"')),
            "more than 100000 rows are no bill. Export the rows of the bill alone.",
        ),
    ],
    ids=["zip", "cut off", "first bytes", "broken", "broken sheet", "OLE", "far row"],
)
def test_what_is_no_workbook_is_refused_in_a_sentence(data, message):
    assert refusal(data) == (None, message)


def test_what_unpacks_to_too_much_is_not_unpacked():
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("xl/worksheets/sheet1.xml", bytes(200_000_001))
    message = "it unpacks to more than 200 MB, which is no bill. Export the bill as CSV."
    assert refusal(out.getvalue()) == (None, message)


def test_the_library_for_workbooks_is_imported_for_a_workbook_only():
    code = "import sys; from builder.bills import read_bill; read_bill(b'MPN\\nA1', name='x'); print('openpyxl' in sys.modules)"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout == "False\n"


def _libreoffice(name: str) -> tuple[BillLine, ...]:
    return read_bill((LIBREOFFICE / name).read_bytes(), name=name).lines


@pytest.mark.parametrize("name", ["english.csv", "german.csv", "bill.xlsx"])
def test_bills_that_libreoffice_wrote_are_read_without_options(name):
    """See libreoffice/write; German Windows-1252 has no Ω, so that LibreOffice puts a question mark there."""
    # A cell of two lines is two lines of a text, and one row of a sheet.
    assert [found.line for found in _libreoffice(name)] == [5, 6, *((7, 8, 9) if name == "bill.xlsx" else (8, 9, 10))]
    assert [
        (x.references, x.number, x.own_number, x.maker, x.count, x.is_fitted, x.description.replace("k?", "kΩ"))
        for x in _libreoffice(name)
    ] == [
        (("C1", "C2", "C3", "C4"), "MC-100N-0603", "HS-20011", "Brackwater", 4, True, "100 nF, 50 V, X7R"),
        (("R7",), "RC-22K-0603-B", "HS-20440", "Brackwater", 1, True, "22 kΩ ±0.1 %, beside RT1 25 ppm/K"),
        (("RT1",), "TB3A-103F38-TR", "HS-10473", "Tarnbrook Ceramics", 1, True, "NTC 10 kΩ ±1 %; 0603"),
        (("RT2",), "YC2-103H", "HS-10905", "Yarrowfield", 1, True, 'NTC 10 kΩ "small"'),
        (("J3",), "SOCKET-8", "", "Brackwater", 1, False, "not on all variants"),
    ]


def test_the_german_bill_has_what_german_offices_write():
    """Semicolons, decimal commas, Windows-1252: else the file above would prove nothing."""
    data = (LIBREOFFICE / "german.csv").read_bytes()
    assert b";0,012\n" in data and "Stückliste".encode("cp1252") in data
