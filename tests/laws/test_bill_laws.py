"""Laws of bills: whatever stands in a file, lines come back or a sentence says why not; one slip in a number is found."""

import csv
import io
import zipfile

import openpyxl
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from builder.bills import Bill, Unreadable, read_bill
from builder.bills.numbers import Numbers
from builder.bills.references import references
from builder.records import Part, PartRecord, Source

seeded = settings(derandomize=True, deadline=None, max_examples=300)

PIECES = st.sampled_from(
    [
        "Reference", "MPN", "Part number", "Qty", "DNP", "Description", "RT1", "RT1-RT4", "TB3A-103F38", "1", "x", ",", ";", "\t", "|", '"', '""', "\n",
        "\r\n", "\r", " ", "\ufeff", "=1+1", "\x0b", "\x0c", "\x85", "\u2028", "\0", "\x1b", "İ", "ß", "Ω", "٣", "\U0001f321", "9" * 300, "-", "…", "°", "#", "(", "[",
    ]
)  # fmt: skip
TEXTS = st.lists(PIECES, max_size=60).map("".join)
NAMES = st.sampled_from(["bill.csv", "bill.xlsx", ""])


def assert_lawful(data: bytes, name: str = "bill.csv", **options: object) -> None:
    try:
        bill = read_bill(data, name=name, **options)
    except Unreadable as refused:
        assert refused.message.isprintable() and refused.message.endswith((".", "?"))
        assert refused.line is None or refused.line > 0
    else:
        assert isinstance(bill, Bill)
        numbers = [line.line for line in bill.lines]
        assert numbers == sorted(set(numbers))


@seeded
@given(st.binary(max_size=400), NAMES)
def test_no_bytes_make_the_reader_raise_anything_else(data, name):
    assert_lawful(data, name)
    assert_lawful(b"PK\x03\x04" + data, name)
    assert_lawful(b"MPN,Reference\n" + data, name)


@seeded
@given(TEXTS, st.sampled_from(["utf-8", "utf-16", "cp1252"]))
def test_no_text_makes_the_reader_raise_anything_else(text, encoding):
    assert_lawful(text.encode(encoding, "replace"))
    assert_lawful(f"Reference;MPN;DNP\n{text}".encode(encoding, "replace"))
    assert_lawful(text.encode(encoding, "replace"), chosen={"number": "Qty"})


def _workbook() -> dict[str, bytes]:
    book = openpyxl.Workbook()
    for row in (("Reference", "MPN", "Qty"), ("RT1", "TB3A-103F38", 1), ("RT2", "=A1", 1.5)):
        book.active.append(row)
    out = io.BytesIO()
    book.save(out)
    with zipfile.ZipFile(out) as archive:
        return {name: archive.read(name) for name in archive.namelist()}


MEMBERS = _workbook()


@seeded
@given(
    st.sampled_from(sorted(MEMBERS)),
    st.integers(0, 5000),
    st.integers(0, 40),
    st.one_of(st.binary(max_size=8), TEXTS.map(str.encode)),
)
def test_no_damaged_workbook_makes_the_reader_raise_anything_else(member, place, length, piece):
    content = MEMBERS[member]
    at = place % (len(content) + 1)
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w") as archive:
        for name, kept in MEMBERS.items():
            archive.writestr(name, content[:at] + piece + content[at + length :] if name == member else kept)
    assert_lawful(out.getvalue(), "bill.xlsx")


CELLS = st.text(st.characters(codec="utf-8", exclude_categories=("Cc", "Cs")), max_size=12)


@seeded
@given(st.lists(st.tuples(CELLS, CELLS), min_size=1, max_size=8), st.sampled_from(",;\t|"))
def test_what_a_csv_writer_wrote_comes_back(rows, delimiter):
    plain = [tuple(" ".join(cell.split()) for cell in row) for row in rows]
    assume(any(map(any, plain)))  # a bill without a line is refused
    out = io.StringIO()
    csv.writer(out, delimiter=delimiter, quoting=csv.QUOTE_ALL).writerows([("MPN", "Internal number"), *rows])
    read = [(line.number, line.own_number) for line in read_bill(out.getvalue().encode(), name="bill.csv").lines]
    assert read == [row for row in plain if any(row)]


@seeded
@given(st.integers(1, 300), st.integers(0, 60), st.sampled_from(["-", "–", " - ", "..", " to "]))
def test_a_range_names_every_reference_once(first, more, dash):
    assert references(f"RT{first}{dash}RT{first + more}") == tuple(f"RT{first + i}" for i in range(more + 1))


def _record(number: str) -> PartRecord:
    stated = {
        "part": number,
        "maker": "Maker",
        "body": {"form": "bead"},
        "rated": {"resistance_ohm": 1e4},
        "b_values": [{"between_c": [25, 85], "b_k": 3435}],
    }
    return PartRecord(Part.model_validate(stated), Source("x.yaml", "x.yaml", {}))


NUMBERS = st.text("ABCXYZ0123456789", min_size=6, max_size=14)


@seeded
@given(st.lists(NUMBERS, min_size=1, max_size=6, unique=True), st.data())
def test_a_number_one_slip_away_is_told(known, data):
    """The slip is made here, sign by sign: another, one too many, one missing, or two exchanged."""
    number = data.draw(st.sampled_from(known))
    at, sign = data.draw(st.integers(0, len(number) - 1)), data.draw(st.sampled_from("ABC019"))
    slips = [
        number[:at] + sign + number[at + 1 :],
        number[:at] + sign + number[at:],
        number[:at] + number[at + 1 :],
        number[:at] + number[at : at + 2][::-1] + number[at + 2 :],
    ]
    numbers = Numbers(map(_record, known))
    for slip in slips:
        assert number in numbers.alike(slip) or slip in known
