"""Bills that name second sources in columns of their own: each is judged as the first one is."""

import pytest
from test_bill_findings import FILES

from builder.bills import boards, judgement, named_board, read_bill


@pytest.fixture
def found(records):
    """What is found at coolbox-main/RT1 on lines of a bill: number, part, finding, severity, message."""
    catalog = records(FILES)

    def judged(text, **options):
        bill = read_bill(text.encode(), name="bill.csv", **options)
        answer = judgement(bill, catalog, named_board(boards(catalog), "coolbox-main"))
        return [
            (f.number, f.part, f.finding, f.severity, f.message)
            for f in answer.findings
            if f.finding[-9:] != "reference"
        ]

    return judged


@pytest.mark.parametrize(
    ("first", "second"),
    [
        ("MPN", "MPN 2"), ("MPN 1", "MPN 2"), ("MPN1", "mpn_2"), ("MPN", "Alternate MPN"), ("MPN", "Alt. MPN"), ("MPN", "MPN alt 1"),
        ("MPN", "Alternative P/N"), ("Part number", "Alternate part number"), ("Part number 1", "Part number 2"),
        ("Manufacturer part number", "2nd source manufacturer part number"), ("MPN", "Second source"), ("MPN", "Alternate"),
        ("Herstellernummer", "Alternative Herstellernummer"), ("Teilenummer", "Zweitquelle"), ("MPN", "Manufacturer P/N 3"),
        ("Item number", "Alternate MPN"), ("Internal number", "Alternate internal number"),
    ],
)  # fmt: skip
def test_a_second_source_that_is_not_approved_there_blocks_and_its_column_is_named(found, first, second):
    assert found(f"Ref;{first};{second}\nRT1;TB3A-103F38;WD-1000\n") == [
        (
            "TB3A-103F38",
            "TB3A-103F38",
            "approved",
            "ok",
            "TB3A-103F38 is what coolbox-main/RT1 is made for, approved since 2026-02-10.",
        ),
        (
            "WD-1000",
            "WD-1000",
            "withdrawn",
            "blocks",
            f"{second}: WD-1000 was withdrawn on 2026-02-10: it says so. Fit another part.",
        ),
    ]


def test_every_column_of_a_number_is_judged(found):
    text = "Ref;MPN 1;MPN 2;MPN 3;MPN 4\nRT1;TB3A-103F38;YC3-103H;NV10-3435;QX-77\n"
    assert [finding[1:4] for finding in found(text)] == [
        ("TB3A-103F38", "approved", "ok"),
        ("YC3-103H", "differs", "ok"),
        ("NV10-3435", "differs", "blocks"),
        (None, "unknown-number", "blocks"),
    ]


@pytest.mark.parametrize("cell", ["", "-", "n/a", "none"])
def test_a_second_source_that_is_left_blank_is_none(found, cell):
    assert len(found(f"Ref;MPN;MPN 2\nRT1;TB3A-103F38;{cell}\n")) == 1


def test_where_the_first_number_is_blank_the_others_are_judged_alone(found):
    assert [finding[1:4] for finding in found("Ref;MPN 1;MPN 2\nRT1;;YC3-103H\n")] == [("YC3-103H", "differs", "ok")]


def test_a_second_source_of_the_catalog_makes_the_line_a_thermistor_s(found):
    message = "QX-77 is not a part of the catalog. Give the number of a part that has a record, or write its record."
    assert found("Ref;MPN;MPN 2\nX9;QX-77;TB3A-103F38\n")[0] == ("QX-77", None, "unknown-number", "blocks", message)


def test_a_second_source_has_the_maker_of_its_count_and_no_own_number(found):
    text = "Ref;Manufacturer 1;MPN 1;Manufacturer 2;MPN 2;Own number\nRT1;Tarnbrook;TB3A-103F38;{};YC3-103H;HS-10473\n"
    assert [finding[2] for finding in found(text.format("Yarrowfield"))] == ["approved", "differs"]
    assert [finding[2] for finding in found(text.format("Tarnbrook"))] == ["approved", "maker-differs", "differs"]
    text = "Ref;Maker;MPN;Alt. maker;Alternate MPN\nRT1;Tarnbrook;TB3A-103F38;Tarnbrook;YC3-103H\n"
    assert [finding[2] for finding in found(text)] == ["approved", "maker-differs", "differs"]


def test_a_column_that_is_chosen_is_judged_alone(found):
    text = "Ref;MPN 1;MPN 2\nRT1;WD-1000;TB3A-103F38\n"
    assert [finding[2] for finding in found(text, chosen={"number": "MPN 2"})] == ["approved"]


def test_other_columns_with_a_count_are_no_second_source(found):
    text = "Ref;MPN;Supplier 1;Supplier part number 1;Value 2;Alternate allowed\nRT1;TB3A-103F38;Someone;77-1;10k;yes\n"
    assert [finding[2] for finding in found(text)] == ["approved"]
