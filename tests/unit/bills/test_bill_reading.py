"""Bills as text: whatever divides them and however they are headed, the same lines come back; or a sentence says why not."""

import pytest

from builder.bills import BillLine, Unreadable, read_bill

LINES = (
    BillLine(2, ("RT1", "RT2"), "TB3A-103F38", "HS-10473", "Tarnbrook", "2", "NTC, 10 kΩ"),
    BillLine(3, ("R7",), "RC-22K", "", "Brackwater", "1", "22 kΩ"),
)
CELLS = (
    ("Reference", "MPN", "Own number", "Manufacturer", "Qty", "Description"),
    ("RT1, RT2", "TB3A-103F38", "HS-10473", "Tarnbrook", "2", "NTC, 10 kΩ"),
    ("R7", "RC-22K", "", "Brackwater", "1", "22 kΩ"),
)


def text(delimiter=",", end="\n", cells=CELLS):
    """The cells as a spreadsheet writes them: those that hold the delimiter are quoted."""
    quoted = ([f'"{cell}"' if delimiter in cell or "\n" in cell else cell for cell in row] for row in cells)
    return end.join(map(delimiter.join, quoted)) + end


def lines(content, **options):
    data = content if isinstance(content, bytes) else content.encode()
    return read_bill(data, name="bill.csv", **options).lines


def refusal(content, name="bill.csv", **options):
    data = content if isinstance(content, bytes) else content.encode()
    with pytest.raises(Unreadable) as refused:
        read_bill(data, name=name, **options)
    return refused.value.line, refused.value.message


@pytest.mark.parametrize("delimiter", [",", ";", "\t", "|"])
@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"], ids=["unix", "windows", "old mac"])
def test_each_delimiter_and_line_end_is_read(delimiter, end):
    assert lines(text(delimiter, end)) == LINES


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16"])
def test_each_encoding_is_read(encoding):
    assert lines(text().encode(encoding)) == LINES


def test_windows_1252_is_read():
    assert lines(text().replace("Ω", "Ohm ±1 %").encode("cp1252"))[1].description == "22 kOhm ±1 %"


def test_title_lines_stand_above_the_headings_and_lines_keep_the_numbers_of_the_file():
    titled = f'Coolbox; rev C, 2026\nsep=,\n\n"Main\nboard"\n{text()}'
    assert [line.line for line in lines(titled)] == [7, 8]


def test_a_quoted_cell_may_hold_line_ends_and_quotation_marks():
    content = 'Part number,Description\nA1,"10 k\n""small"""\nA2,5" cable\n'
    assert [(line.line, line.number, line.description) for line in lines(content)] == [
        (2, "A1", '10 k "small"'),
        (4, "A2", '5" cable'),
    ]


def test_a_cell_that_was_kept_from_being_a_number_is_its_text():
    assert lines('Part number;Description\n="0603";=1+1\n')[0].number == "0603"


def test_a_line_that_has_a_quantity_is_a_line_and_a_title_is_none():
    content = "Part number;Description;Qty\n;NTC thermistors;\n;NTC 10 k;2\n"
    assert lines(content) == (BillLine(3, quantity="2", description="NTC 10 k"),)


def test_spaces_before_a_quotation_mark_do_not_matter():
    assert lines('Reference, Part number\n"RT1, RT2", "A1"\n')[0].number == "A1"


def test_lines_that_name_nothing_and_rows_that_are_short_are_no_trouble():
    assert [line.line for line in lines("Part number,Reference,Qty\nA1\n,,3\n\nA2,R1,1\n")] == [2, 5]


SPOKEN = {
    "references": "Reference, References, RefDes, ref. des., REF DES, Designator, Reference designator, Ref, Referenz, Referenzbezeichner, "
    "Bauteilreferenz, Repère, Repères, Designador, Referencia, Position",
    "number": "MPN, Manufacturer part number, manufacturer_part_number, Manufacturer P/N, Mfr. Part #, Mfg Part No., Maker's number, "
    "Manufacturer Part Number 1, Part number, PART NO, P/N, Herstellernummer, Hersteller-Teilenummer, Hersteller-Nr., Teilenummer, "
    "Référence fabricant, Réf. fabricant, N° fabricant, Numéro de pièce, Referencia del fabricante, Número de fabricante, Número de pieza",
    "maker": "Maker, Manufacturer, MFR, Mfg., Manufacturer name, Manufacturer 1, Hersteller, Fabricant, Fabricante, Marque, Marca",
    "own_number": "Internal number, Internal part number, Own number, Item number, Item No., Our P/N, IPN, Stock code, Article number, "
    "Interne Nummer, Artikelnummer, Sachnummer, Materialnummer, Référence interne, Code article, Référence interne, "
    "Número interno, Código de artículo",
    "quantity": "Quantity, QTY, Qty., Quantity [pcs], Qty per board, Count, Menge, Anzahl, Stückzahl, Stk., Quantité, Qté, Nb, Nbre, Cantidad, Cant.",
    "description": "Description, Desc., Value, Comment, Beschreibung, Bezeichnung, Désignation, Descripción",
}  # fmt: skip


@pytest.mark.parametrize(
    ("role", "heading"), [(role, word) for role, listed in SPOKEN.items() for word in listed.split(", ")]
)
@pytest.mark.parametrize("spelt", [str, str.upper, str.lower])
def test_what_people_write_above_a_column_is_understood(role, heading, spelt):
    other = "MPN" if role == "own_number" else "Internal number"
    (line,) = lines(f"{spelt(heading)};{other};Price\nX1;N1;2\n")
    assert getattr(line, role) == (("X1",) if role == "references" else "X1")


@pytest.mark.parametrize(
    ("headings", "number", "own_number", "references"),
    [
        ("Part number;MPN;Designator", "b", "a", ("c",)),
        ("Référence;Fabricant;Repère", "a", "", ("c",)),
        ("Référence;Référence fabricant;Repère", "b", "a", ("c",)),
        ("Referencia;Designador;Cant.", "a", "", ("b",)),
        ("Pos.;Teilenummer;Artikelnummer", "b", "c", ()),
        ("Type;MPN;Ref", "b", "", ("c",)),
    ],
)
def test_a_heading_of_several_meanings_means_what_no_other_column_does(headings, number, own_number, references):
    (line,) = lines(f"{headings}\na;b;c\n")
    assert (line.number, line.own_number, line.references) == (number, own_number, references)


def test_a_column_is_chosen_by_its_heading():
    content = "Place;Value;MPN\nRT1;TB3A-103F38;RC-1\n"
    assert lines(content, chosen={"number": "value"})[0].number == "TB3A-103F38"
    assert lines("Reference;Qty\nA1;2\n", chosen={"number": "Reference"}) == (BillLine(2, number="A1", quantity="2"),)
    assert lines("Wo;Was\nRT1;A1\n", chosen={"reference": "WO", "number": "Was"}) == (BillLine(2, ("RT1",), "A1"),)


@pytest.mark.parametrize(
    ("headings", "cells", "fitted"),
    [
        ("DNP", ["x", "", "no", "DNP", "0", "1"], [False, True, True, False, True, False]),
        ("Do not fit", ["yes", "-", "variant B"], [False, True, False]),
        ("nicht bestückt", ["ja", "nein", ""], [False, True, True]),
        ("Fitted", ["yes", "no", ""], [True, False, False]),
        ("Fitted", ["", "no", "DNP"], [True, False, False]),
        ("Bestückung", ["✓", "", "n.b."], [True, False, False]),
        ("Qty", ["1", "0", "DNF"], [True, False, False]),
        ("Comment", ["do not populate", "0R", ""], [False, True, True]),
    ],
)
def test_marks_say_what_is_not_fitted(headings, cells, fitted):
    rows = "".join(f"A1;{cell}\n" for cell in cells)
    assert [line.is_fitted for line in lines(f"Part number;{headings}\n{rows}")] == fitted


@pytest.mark.parametrize(
    ("quantity", "count"),
    [
        ("4", 4),
        ("4.0", 4),
        ("4,00", 4),
        ("4 pcs", 4),
        ("4x", 4),
        ("4 Stk.", 4),
        ("four", None),
        ("1.5", None),
        ("", None),
    ],
)
def test_a_quantity_is_read_with_its_unit(quantity, count):
    assert lines(f"Part number;Qty\nA1;{quantity}\n")[0].count == count


NO_HEADING = (
    "none of its first 100 rows has a heading for part numbers, such as part number. "
    "Name the column with --number HEADING or --own-number HEADING."
)


@pytest.mark.parametrize(
    ("content", "line", "message"),
    [
        (b"", None, "it is empty. Export the bill again."),
        (b"\n \r\n", None, "it is empty. Export the bill again."),
        ("\ufeff".encode(), None, NO_HEADING),
        ("just some prose, with commas\nand no headings\n", None, NO_HEADING),
        ("Reference,Qty\nRT1,1\n", None, NO_HEADING),
        (
            b"\x7fELF\x02\x01\x01\x00\x00",
            1,
            "it holds the control character U+007F, so it is no text. Export the bill as CSV or XLSX.",
        ),
        (
            b"Part number\nA\x81",
            2,
            "byte 0x81 is neither UTF-8, UTF-16 nor Windows-1252. Export the bill as CSV in UTF-8.",
        ),
        (b"\xff\xfeP\x00a", None, "it begins as UTF-16, and is cut off or damaged. Export the bill anew."),
        (
            'Part number,Description\nA1,"10 k\nA2,\n',
            2,
            "a quotation mark that opens here is not closed. Close it, or remove it.",
        ),
        (
            "Part number,Description\nA1,10 k\nA2," + "9" * 200_000 + "\n",
            3,
            "a cell has more than 131072 characters. Is a quotation mark not closed?",
        ),
        (
            "Reference,Part number\n" + "R1-R9 " * 2000 + ",A1\n",
            2,
            "11999 characters are too many for the references of a line. Divide it into several lines.",
        ),
        (
            "Reference,Part number\n" + "R1-R999,A1\n" * 201,
            202,
            "more than 200000 references are no bill. Export the bill of one board.",
        ),
        (
            "Part number\n" + "A1\n" * 100_001,
            None,
            "more than 100000 lines are no bill. Export the lines of the bill alone.",
        ),
        (
            "MPN;Manufacturer's number\nA1;A2\n",
            1,
            "the headings MPN and Manufacturer's number both say number. Choose one with --number, or rename one.",
        ),
        (b" " * 20_000_001, None, "it is larger than 20 MB, which is no bill. Export the bill alone."),
    ],
    ids=lambda value: "" if not isinstance(value, str) else value[:20],
)
def test_what_is_no_bill_is_refused_in_a_sentence(content, line, message):
    assert refusal(content) == (line, message)


def test_headings_without_lines_are_no_bill():
    assert refusal("Ref,MPN,Qty\n,,\n") == (1, "no line of parts follows the headings. Export the bill again.")


def test_a_heading_that_was_chosen_must_be_there():
    assert refusal(text(), chosen={"number": "Type", "maker": "Who"}) == (
        None,
        "no row has the heading Type and Who and one for part numbers. Write it as it stands in the file.",
    )


def test_text_has_no_sheets():
    assert refusal(text(), sheet="Bill") == (None, "it is text, which has no sheets. Leave --sheet out.")


def test_a_text_that_is_called_a_workbook_is_refused():
    assert refusal(text(), name="bill.XLSX") == (
        None,
        "its name says XLSX, but it is no workbook. Save it as XLSX, or name it after what it is.",
    )
