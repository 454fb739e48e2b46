"""Every kind of finding, each shown by a bill that has it; whole messages."""

import pytest
from factory import changed, part, position

from builder.bills import UnknownBoard, boards, guessed_board, judgement, named_board, read_bill
from builder.bills.numbers import Numbers

STANDING = "standing:\n  - {state: proposed, on: 2026-01-12, by: sensors, because: first samples}\n"
HEADINGS = "Ref;MPN;Own number;Maker;Qty;Description;DNP\n"


def standing(state, more=""):
    return f"standing:\n  - {{state: {state}, on: 2026-02-10, by: quality, because: it says so., {more}}}\n"


def record(number, stands, *, own="", suffixes="", maker="Tarnbrook Ceramics"):
    text = part("part: TB3A-103F38\nmaker: Tarnbrook Ceramics\n", f"part: {number}\nmaker: {maker}\n{own}{suffixes}")
    return changed(text, STANDING, stands)


def place(name, board, fitted, alternates="[]"):
    text = position("position: coolbox-main/RT1\nboard: Coolbox logger\n", f"position: {name}\nboard: {board}\n")
    text = changed(text, "fitted: TB3A-103F38\n", f"fitted: {fitted}\n")
    return changed(text, "alternates:\n  - {part: TB3A-103F38, standing: []}\n", f"alternates: {alternates}\n")


ALTERNATES = """
  - {part: YC3-103H, standing: [{state: approved, on: 2026-03-01, by: sensors, because: measured}]}
  - {part: NV10-3435, standing: [{state: proposed, on: 2026-03-01, by: buying, because: lead time}]}
"""
FILES = {
    "a.yaml": record("TB3A-103F38", standing("approved"), own="own_number: HS-10473\n", suffixes='packaging_suffixes: ["-TR", "/500"]\n'),
    "b.yaml": record("YC3-103H", standing("approved"), own="own_number: HS-10904\n", maker="Yarrowfield Sensors"),
    "c.yaml": record("NV10-3435", standing("approved"), maker="Nordvell Elements"),
    "d.yaml": record("TB3A-103J38", standing("restricted", "only_for: [charger/RT1, Dock battery]")),
    "e.yaml": record("WD-1000", standing("withdrawn")),
    "f.yaml": record("PR-1000", standing("proposed")),
    "g.yaml": record("NS-1000", "standing: []\n"),
    "h.yaml": record("TWIN-103", standing("approved"), maker="Ostrel Sensing"),
    "i.yaml": record("TWIN-103", standing("approved"), own="own_number: HS-11\n", maker="Quillhaven Devices"),
    "rt1.yaml": place("coolbox-main/RT1", "Coolbox logger", "TB3A-103F38", ALTERNATES),
    "rt2.yaml": place("coolbox-main/RT2", "Coolbox logger", "PR-1000"),
    "rt3.yaml": place("charger/RT1", "Charger, output board", "TB3A-103J38"),
    "rt4.yaml": place("dock/RT9", "Dock battery", "NS-1000"),
}  # fmt: skip


@pytest.fixture
def catalog(records):
    found = records(FILES)
    assert not found.problems, [str(problem) for problem in found.problems]
    return found


@pytest.fixture
def found(catalog):
    """What is found on lines of a bill, of a board or of none: line, reference, part, finding, severity, message."""

    def judged(lines, board=None, headings=HEADINGS):
        bill = read_bill((headings + lines).encode(), name="bill.csv")
        answer = judgement(bill, catalog, named_board(boards(catalog), board) if board else None)
        return [(f.line, f.reference, f.part, f.finding, f.severity, f.message) for f in answer.findings]

    return judged


RT2 = "RT2;;;;;;x\n"  # says nothing more of the board's other position
RT2_FOUND = (
    "not-fitted",
    "blocks",
    "the line says that nothing is fitted; coolbox-main/RT2 is made for PR-1000. Fit it, or take the position out of the records.",
)


def of_rt1(found, line):
    """What is found at coolbox-main/RT1 alone."""
    rest = (3, "RT2", None, *RT2_FOUND)
    findings = found(f"{line}\n{RT2}", "coolbox-main")
    assert findings[-1] == rest
    return findings[:-1]


@pytest.mark.parametrize(
    ("line", "part", "finding", "severity", "message"),
    [
        (
            "RT1;TB3A-103F38",
            "TB3A-103F38",
            "approved",
            "ok",
            "TB3A-103F38 is what coolbox-main/RT1 is made for, approved since 2026-02-10.",
        ),
        (
            "RT1;YC3-103H",
            "YC3-103H",
            "differs",
            "ok",
            "YC3-103H is an approved alternate for TB3A-103F38 at coolbox-main/RT1, since 2026-03-01.",
        ),
        (
            "RT1;NV10-3435",
            "NV10-3435",
            "differs",
            "blocks",
            "coolbox-main/RT1 is made for TB3A-103F38; the alternate NV10-3435 is not approved there. Fit the part on record, or have it approved.",
        ),
        (
            "RT1;PR-1000",
            "PR-1000",
            "differs",
            "blocks",
            "coolbox-main/RT1 is made for TB3A-103F38, and PR-1000 is no alternate there. Fit the part on record, or propose an alternate.",
        ),
        (
            "RT1;TB3A-103J38",
            "TB3A-103J38",
            "restricted",
            "blocks",
            "TB3A-103J38 is approved for charger/RT1, Dock battery only, not for coolbox-main/RT1. Fit another part, or have it approved here.",
        ),
        (
            "RT1;WD-1000",
            "WD-1000",
            "withdrawn",
            "blocks",
            "WD-1000 was withdrawn on 2026-02-10: it says so. Fit another part.",
        ),
        (
            "RT1;RC-22K-0603",
            None,
            "unknown-number",
            "blocks",
            "RC-22K-0603 is not a part of the catalog. Give the number of a part that has a record, or write its record.",
        ),
        (
            "RT1;TB3A-103F3B",
            None,
            "unknown-number",
            "blocks",
            "TB3A-103F3B is not a part of the catalog. Did you mean TB3A-103F38?",
        ),
        (
            "RT1;",
            None,
            "unknown-number",
            "blocks",
            "a thermistor's line has no part number. Give the number of a part that has a record, or write its record.",
        ),
    ],
)
def test_a_part_at_a_position_is_judged_by_the_ledger(found, line, part, finding, severity, message):
    assert of_rt1(found, line) == [(2, "RT1", part, finding, severity, message)]


@pytest.mark.parametrize(
    ("number", "board", "finding", "message"),
    [
        ("PR-1000", None, "proposed", "PR-1000 is proposed since 2026-02-10, not approved. Have it approved, or fit another part."),
        ("NS-1000", None, "no-standing", "nobody has decided about NS-1000 yet. Propose it, and have it approved."),
        ("WD-1000", None, "withdrawn", "WD-1000 was withdrawn on 2026-02-10: it says so. Fit another part."),
        (
            "TB3A-103J38",
            None,
            "restricted",
            "TB3A-103J38 is approved for charger/RT1, Dock battery only, not for this board. Fit another part, or have it approved here.",
        ),
        (
            "TB3A-103J38",
            "charger",
            "restricted",
            "TB3A-103J38 is approved for charger/RT1, Dock battery only, not for charger/X5. Fit another part, or have it approved here.",
        ),
        ("TB3A-103J38", "dock", "approved", "TB3A-103J38 is approved since 2026-02-10."),
        ("TB3A-103F38", None, "approved", "TB3A-103F38 is approved since 2026-02-10."),
    ],
)  # fmt: skip
def test_where_no_position_is_on_record_the_part_s_own_standing_decides(found, number, board, finding, message):
    severity = "ok" if finding == "approved" else "blocks"
    assert found(f"X5;{number}\n", board)[0] == (2, "X5", number, finding, severity, message)


def test_the_fitted_part_may_be_not_approved_itself(found):
    findings = found("RT1;TB3A-103F38\nRT2;PR-1000\n", "coolbox-main")
    message = "PR-1000 is proposed since 2026-02-10, not approved. Have it approved, or fit another part."
    assert findings[1] == (3, "RT2", "PR-1000", "proposed", "blocks", message)
    (_, no_standing) = found("X1;TB3A-103F38\nRT9;NS-1000\n", "dock")
    assert no_standing[3:5] == ("no-standing", "blocks")


@pytest.mark.parametrize(
    "number",
    ["tb3a-103f38", " TB3A - 103F38 ", "TB3A–103F38", "TB3A-103F38-TR", "tb3a-103f38/500", "Tarnbrook Ceramics TB3A-103F38", "HS-10473"],
)  # fmt: skip
def test_a_number_is_known_in_any_case_with_spaces_dashes_and_listed_suffixes(found, number):
    assert [finding[2:5] for finding in of_rt1(found, f"RT1;{number}")] == [("TB3A-103F38", "approved", "ok")]


def test_a_maker_s_number_is_hidden_by_no_own_number_and_no_suffix(records):
    own = record("OWN-1", "standing: []\n", own="own_number: YC3-103H\n")
    packed = record("YC3", "standing: []\n", suffixes='packaging_suffixes: ["-103H"]\n')
    catalog = records(FILES | {"1.yaml": own, "2.yaml": packed})
    assert [part.name for part in Numbers(catalog.parts).parts("YC3-103H")] == ["Yarrowfield Sensors YC3-103H"]


def test_an_own_number_alone_names_the_part(found):
    assert [finding[2:5] for finding in of_rt1(found, "RT1;;hs-10473")] == [("TB3A-103F38", "approved", "ok")]


@pytest.mark.parametrize(
    ("number", "cure"),
    [
        ("TB3A-103F39", "Did you mean TB3A-103F38?"),
        ("TB3A 103F38", "Did you mean TB3A-103F38?"),
        ("TB3A-130F38", "Did you mean TB3A-103F38?"),
        ("TB3A-103F388", "Did you mean TB3A-103F38? If the rest is its packaging, add it to the record's packaging_suffixes."),
        ("TB3A-103F38-T1", "Did you mean TB3A-103F38? If the rest is its packaging, add it to the record's packaging_suffixes."),
        ("TB3A-103G38", "Did you mean TB3A-103F38 or TB3A-103J38?"),
    ],
)  # fmt: skip
def test_a_number_that_looks_like_a_known_one_warns_wherever_it_stands(found, number, cure):
    message = f"{number} is not a part of the catalog. {cure}"
    assert found(f"R9;{number};;;1;10 k\n") == [(2, "R9", None, "unknown-number", "warning", message)]


@pytest.mark.parametrize("number", ["RC-103", "TB3A", "103F38", "TB3A-104F42", "WD-1", ""])
def test_other_parts_are_counted_and_not_listed(found, catalog, number):
    assert found(f"R9;{number};HS-1;Someone;7;10 k\n") == []
    bill = read_bill(f"{HEADINGS}R9;{number}\nRT1;TB3A-103F38\n".encode(), name="bill.csv")
    judged = judgement(bill, catalog, None)
    assert (judged.thermistor_lines, judged.other_lines) == (1, 1)


@pytest.mark.parametrize(
    ("description", "blocks"),
    [
        ("NTC 10k", True), ("thermistor, 0603", True), ("NTC-Widerstand", True), ("Heißleiter 10 k", True), ("Thermistance CTN", True),
        ("termistor 10 k", True), ("NTC10K", True), ("PTC thermistor", False), ("Kaltleiter", False), ("SYNTC", False), ("contact", False),
    ],
)  # fmt: skip
def test_a_line_described_as_a_thermistor_must_name_a_known_part(found, description, blocks):
    message = "QX-77 is not a part of the catalog. Give the number of a part that has a record, or write its record."
    expected = [(2, "X7", None, "unknown-number", "blocks", message)] if blocks else []
    assert found(f"X7;QX-77;;;1;{description}\n") == expected


def test_two_numbers_of_different_parts_block(found):
    message = "HS-10904 is Yarrowfield Sensors YC3-103H, TB3A-103F38 is Tarnbrook Ceramics TB3A-103F38. Correct one of the two numbers."
    differs, approved = of_rt1(found, "RT1;TB3A-103F38;HS-10904")
    assert differs == (2, "RT1", "TB3A-103F38", "own-number-differs", "blocks", message)
    assert approved[3] == "approved"


def test_an_own_number_that_is_not_the_part_s_warns_unless_it_counts_the_lines(found):
    message = "HS-10437 is not the own number of Tarnbrook Ceramics TB3A-103F38, HS-10473. Correct it in the bill or in the record."
    assert of_rt1(found, "RT1;TB3A-103F38;HS-10437")[0] == (
        2,
        "RT1",
        "TB3A-103F38",
        "own-number-differs",
        "warning",
        message,
    )
    assert [finding[3] for finding in of_rt1(found, "RT1;TB3A-103F38;12")] == ["approved"]


def test_an_own_number_does_not_stand_in_for_an_unknown_number(found):
    message = "QX-77 is not a part of the catalog, while HS-10473 is Tarnbrook Ceramics TB3A-103F38. Give the number of a part that has a record, or write its record."
    assert found("X1;QX-77;HS-10473\n") == [(2, "X1", None, "unknown-number", "blocks", message)]


def test_a_number_of_two_makers_needs_the_maker(found):
    message = (
        "TWIN-103 is the number of 2 parts: Ostrel Sensing TWIN-103, Quillhaven Devices TWIN-103. Name the maker too."
    )
    assert found("X1;TWIN-103\n") == [(2, "X1", None, "unknown-number", "blocks", message)]
    assert [finding[2:4] for finding in found("X1;TWIN-103;;quillhaven\n")] == [("TWIN-103", "approved")]


def test_a_number_of_two_makers_is_settled_by_the_own_number(found):
    assert [finding[2:4] for finding in found("X1;TWIN-103;HS-11\n")] == [("TWIN-103", "approved")]


@pytest.mark.parametrize(
    "maker",
    ["Other Ceramics", "Ceramics", "Ceramics Tarnbrook", "Tarn Ceramics", "Tarnbrooks", "Other GmbH", "various"],
)
def test_another_maker_than_the_record_s_blocks(found, maker):
    message = f"{maker} is not the maker on record, Tarnbrook Ceramics. Fit that maker's part, or correct the bill."
    differs, approved = found(f"X1;TB3A-103F38;;{maker}\n")
    assert differs == (2, "X1", "TB3A-103F38", "maker-differs", "blocks", message)
    assert approved[3] == "approved"


@pytest.mark.parametrize(
    "maker",
    [
        "TARNBROOK GmbH", "The Tarnbrook Co.", "tarnbrook", "Tarnbrook-Ceramics, Inc.", "TarnbrookCeramics", "Tarn brook ceramics Ltd.",
        "Tarn-Brook", "TARNBROOK CERAMICS S.A.", "Tarnbrook Ceramics GmbH & Co. KG", "Tarnbrook Sensors", "-", "",
    ],
)  # fmt: skip
def test_a_maker_goes_by_its_first_word_in_any_spelling(found, maker):
    assert [finding[3] for finding in found(f"X1;TB3A-103F38;;{maker}\n")] == ["approved"]


@pytest.mark.parametrize(
    ("quantity", "message"),
    [
        ("2", "the quantity is 2, for 3 references. Correct one of the two."),
        ("some", "some is not a whole number. Write 3, for its 3 references."),
        ("3", None),
        ("", None),
    ],
)
def test_a_quantity_that_is_not_the_number_of_references_warns(found, quantity, message):
    findings = found(f"X1-X3;TB3A-103F38;;;{quantity}\n")
    expected = [(2, "X1, X2, X3", "TB3A-103F38", "quantity", "warning", message)] if message else []
    assert [finding for finding in findings if finding[3] != "approved"] == expected
    assert [finding[1] for finding in findings if finding[3] == "approved"] == ["X1", "X2", "X3"]


def test_a_reference_on_two_lines_blocks(found):
    message = "X2 stands on line 2 already. Take it from one of the two."
    findings = found("X1, X2;TB3A-103F38\nx2;RC-22K\nR1;RC-1\nR1;RC-2\n")
    assert findings[2:] == [(3, "x2", None, "repeated-reference", "blocks", message.replace("X2", "x2"))]


def test_a_reference_twice_on_one_line_blocks(found):
    message = "X1 stands 2 times on the line. Leave it once."
    assert found("x1 X1;TB3A-103F38\n")[-1] == (2, "X1", "TB3A-103F38", "repeated-reference", "blocks", message)


def test_a_position_that_is_not_on_the_bill_blocks(found):
    message = (
        "coolbox-main/RT2 is not on the bill; it is made for PR-1000. Add it, or take the position out of the records."
    )
    assert found("RT1;TB3A-103F38\n", "coolbox-main")[1:] == [
        (None, "RT2", "PR-1000", "missing-reference", "blocks", message)
    ]


def test_what_is_missing_is_told_by_its_number_on_record(records):
    catalog = records(FILES | {"rt1.yaml": place("coolbox-main/RT1", "Coolbox logger", "HS-10473", ALTERNATES)})
    bill = read_bill(b"Reference,MPN\nRT2,PR-1000\n", name="bill.csv")
    missing = judgement(bill, catalog, named_board(boards(catalog), "coolbox-main")).findings[-1]
    assert (missing.finding, missing.part) == ("missing-reference", "TB3A-103F38")


def test_a_part_that_is_not_fitted_is_told_and_blocks_only_where_a_position_stays_empty(found):
    assert found("RT1;TB3A-103F38\nRT2;PR-1000;;;0\n", "coolbox-main")[1] == (3, "RT2", "PR-1000", *RT2_FOUND)
    two = found("RT1;TB3A-103F38\nRT1;WD-1000;;;1;;DNP\n" + RT2, "coolbox-main")
    assert two[1] == (3, "RT1", "WD-1000", "not-fitted", "ok", "the line says that nothing is fitted.")
    assert [finding[3] for finding in two] == ["approved", "not-fitted", "not-fitted"]
    first = found("RT1;WD-1000;;;1;;DNP\nRT1;TB3A-103F38\n" + RT2, "coolbox-main")
    assert [finding[3] for finding in first] == ["not-fitted", "approved", "not-fitted"]
    assert found(";WD-1000;;;0\n") == [(2, "", "WD-1000", "not-fitted", "ok", "the line says that nothing is fitted.")]


def test_every_reference_of_a_line_is_judged_by_itself(found):
    findings = found("RT1, RT2, RT3;TB3A-103F38\n", "coolbox-main")
    assert [finding[1:5:2] for finding in findings] == [("RT1", "approved"), ("RT2", "differs"), ("RT3", "approved")]


# Boards


@pytest.mark.parametrize("name", ["coolbox-main", "COOLBOX-MAIN", "coolbox logger"])
def test_a_board_goes_by_its_short_name_and_by_what_its_positions_call_it(catalog, name):
    assert named_board(boards(catalog), name).short_name == "coolbox-main"


@pytest.mark.parametrize(
    ("name", "message"),
    [
        ("coolbox-mian", "coolbox-mian is not a board of the catalog. Did you mean coolbox-main?"),
        ("x", "x is not a board of the catalog. Its boards: charger, coolbox-main, dock."),
    ],
)
def test_an_unknown_board_is_told(catalog, name, message):
    with pytest.raises(UnknownBoard) as unknown:
        named_board(boards(catalog), name)
    assert str(unknown.value) == message


def test_a_name_of_several_boards_is_told(records):
    files = FILES | {"rt5.yaml": place("coolbox-probe/RT1", "Coolbox logger", "TB3A-103F38")}
    with pytest.raises(UnknownBoard) as unknown:
        named_board(boards(records(files)), "Coolbox logger")
    assert (
        str(unknown.value)
        == "Coolbox logger is the name of several boards: coolbox-main, coolbox-probe. Use one of these."
    )


def test_the_board_is_the_one_that_has_all_the_references_that_any_board_has(catalog):
    known = boards(catalog)
    assert guessed_board(known, ["RT1", "rt2", "R9"]).short_name == "coolbox-main"
    assert guessed_board((), ["RT1"]) is None


@pytest.mark.parametrize(
    ("references", "message"),
    [
        (["RT1"], "RT1 may stand on several boards: charger, coolbox-main."),
        (["RT2", "RT9"], "RT2, RT9 may stand on no single board of the catalog."),
        (["R1", "R9"], "no reference of the bill is one of the catalog's positions."),
        ([], "no reference of the bill is one of the catalog's positions."),
    ],
)
def test_a_board_is_not_guessed_where_several_may_be_meant(catalog, references, message):
    with pytest.raises(UnknownBoard) as unknown:
        guessed_board(boards(catalog), references)
    assert str(unknown.value) == message
