"""R–T tables: what keeps their rows from making a curve, in the record and in the CSV beside it."""

import numpy as np
import pytest
from factory import CSV, PART, WITH_CSV, inline_table

HEADER = "Name the columns t_c,r_ohm or t_c,r_ohm,r_min_ohm,r_max_ohm or t_c,ratio, separated by commas."
SEPARATORS = (
    "the columns are separated by semicolons or tabs. Separate them by commas, and write a point as decimal sign."
)
EMPTY = "the file is empty. Give a header row such as t_c,r_ohm and the rows below it."
ROW = "where 2 must stand: t_c, r_ohm. Check for a missing comma, or a comma too many: a point is the decimal sign."
CELL = "stands where a number must stand. Write the figure without unit, with a point as decimal sign and a hyphen as minus."
NOT_FINITE = "is not a finite number. Check the figure in the data sheet."
NOT_OHMS = "Ω is outside 1e−6 to 1e9 Ω. Check the decimal point, and k or M."
NO_TEMPERATURE = "is no temperature of a thermistor. Check the figure and its unit."
ORDER = "Temperatures rise, or fall, from row to row; compare with the data sheet."
FALLS = "An NTC's resistance falls; compare both rows with the data sheet."
TWO_ROWS = "A curve needs at least two."


@pytest.mark.parametrize(
    ("header", "message"),
    [
        ("t,r", f'the header row has "t", which is not a column. {HEADER}'),
        ("T_C,R_ohm", 'the header row has "T_C", which is not a column. Did you mean t_c?'),
        ("t_c,r_ohm,", f'the header row has "", which is not a column. {HEADER}'),
        ("0,32000", "the first row holds figures. Give a header row above it, such as t_c,r_ohm."),
        ("t_c;r_ohm", SEPARATORS),
        ("t_c\tr_ohm", SEPARATORS),
        ("t_c", "t_c makes no table. Give t_c with either r_ohm or ratio."),
        ("t_c,r_ohm,ratio", "t_c, r_ohm, ratio makes no table. Give t_c with either r_ohm or ratio."),
        ("t_c,r_ohm,r_ohm", "t_c, r_ohm, r_ohm names a column twice. Name each column once."),
        (
            "t_c,r_ohm,r_min_ohm",
            "t_c, r_ohm, r_min_ohm makes no band. Give r_ohm with both r_min_ohm and r_max_ohm, or neither.",
        ),
        (
            "t_c,ratio,r_min_ohm,r_max_ohm",
            "t_c, ratio, r_min_ohm, r_max_ohm makes no band. Give r_ohm with both r_min_ohm and r_max_ohm, or neither.",
        ),
    ],
)
def test_a_header_row_names_the_columns_of_a_table(messages, header, message):
    assert messages({"part.yaml": WITH_CSV, "table.csv": f"{header}\n0,32000\n25,10000\n"}) == [
        f"parts/table.csv:1: {message}"
    ]


@pytest.mark.parametrize("text", ["", "\n\n", "# only a remark\n", ",\n"])
def test_a_csv_without_rows_is_called_empty(messages, text):
    assert messages({"part.yaml": WITH_CSV, "table.csv": text}) == [f"parts/table.csv:1: {EMPTY}"]


ROWS = {
    "too short": ("0\n25,10000", [f"2: r_t_table: the row has 1 value, {ROW}"]),
    "too long": ("0,1,2\n25,10000", [f"2: r_t_table: the row has 3 values, {ROW}"]),
    "decimal commas": (
        "0,32000,1\n25,10000,5",
        [f"2: r_t_table: the row has 3 values, {ROW}", f"3: r_t_table: the row has 3 values, {ROW}"],
    ),
    "decimal commas in quotes": ('0,"32000,1"\n25,10000', [f"2: r_t_table: the row has 3 values, {ROW}"]),
    "semicolon": ("0;32000\n25,10000", [f"2: r_t_table: the row has 1 value, {ROW}"]),
    "one row": ("0,32000", [f"2: r_t_table: the table has 1 row. {TWO_ROWS}"]),
    "no row": ("", [f"1: r_t_table: the table has 0 rows. {TWO_ROWS}"]),
    "unit": ("0,32 kΩ\n25,10000", [f'2: r_ohm: "32 kΩ" {CELL}']),
    "empty cell": ("0,\n25,10000", [f"2: r_ohm: nothing {CELL}"]),
    "underscore": ("0,32_000\n25,10000", [f'2: r_ohm: "32_000" {CELL}']),
    "digits of another script": ("0,٣٢٠٠٠\n25,10000", [f'2: r_ohm: "٣٢٠٠٠" {CELL}']),
    "typographic minus": ("−10,32000\n25,10000", [f'2: t_c: "−10" {CELL}']),
    "code as temperature": ("0,32k\n1k,10k", [f'3: t_c: "1k" {CELL}']),
    "zero byte": ("0,32\x000\n25,10000", [f'2: r_ohm: "32\\x000" {CELL}']),
    "words for numbers": ("0,nan\n25,inf", [f'2: r_ohm: "nan" {CELL}', f'3: r_ohm: "inf" {CELL}']),
    "too large for a float": ("0,1e999\n25,10000", [f'2: r_ohm: "1e999" {NOT_FINITE}']),
    "a million digits": (f"0,{'9' * 900_000}\n25,10000", [f'2: r_ohm: "{"9" * 59}…" {NOT_FINITE}']),
    "a very long line": (f"0,{'a' * 900_000}\n25,10000", [f'2: r_ohm: "{"a" * 59}…" {CELL}']),
    "zero and below": ("0,32000\n25,0\n50,-4", [f"3: r_ohm: 0 {NOT_OHMS}", f"4: r_ohm: −4 {NOT_OHMS}"]),
    "too small and too large": ("0,1.1e9\n25,32000\n50,9e-7", [f"2: r_ohm: 1.1e9 {NOT_OHMS}", f"4: r_ohm: 9e−7 {NOT_OHMS}"]),
    "code too large": ("0,2000M\n25,32000", [f"2: r_ohm: 2e9 {NOT_OHMS}"]),
    "below absolute zero": ("-300,32000\n25,10000", [f"2: t_c: −300 °C {NO_TEMPERATURE}"]),
    "hotter than any": ("0,32000\n2500,10000", [f"3: t_c: 2500 °C {NO_TEMPERATURE}"]),
    "temperature twice": ("0,32000\n0,31000\n25,10000", [f"3: t_c: 0 °C stands twice. {ORDER}"]),
    "temperature that falls back": (
        "0,32000\n25,10000\n20,12000\n50,4000",
        [f"4: t_c: 20 °C is out of order beside 25 °C. {ORDER}"],
    ),
    "temperature out of a falling order": (
        "50,4000\n20,12000\n25,10000\n0,32000",
        [f"3: t_c: 20 °C is out of order beside 25 °C. {ORDER}"],
    ),
    "resistance that does not fall": (
        "0,32000\n25,32000\n50,40000",
        [
            f"3: r_ohm at 25 °C: 32 kΩ is not below 32 kΩ at 0 °C. {FALLS}",
            f"4: r_ohm at 50 °C: 40 kΩ is not below 32 kΩ at 25 °C. {FALLS}",
        ],
    ),
    "resistance that does not fall, in a falling order": (
        "50,40000\n25,32000\n0,33000",
        [f"2: r_ohm at 50 °C: 40 kΩ is not below 32 kΩ at 25 °C. {FALLS}"],
    ),
    "several kinds": ("0,x\n25\n50,0", [f'2: r_ohm: "x" {CELL}', f"3: r_t_table: the row has 1 value, {ROW}", f"4: r_ohm: 0 {NOT_OHMS}"]),
}  # fmt: skip


@pytest.mark.parametrize(("rows", "expected"), ROWS.values(), ids=ROWS)
def test_a_row_that_makes_no_curve_is_told_with_its_line(messages, rows, expected):
    told = messages({"part.yaml": WITH_CSV, "table.csv": f"t_c,r_ohm\n{rows}\n"})
    assert told == [f"parts/table.csv:{line}" for line in expected]


@pytest.mark.parametrize("column", ["r_min_ohm", "r_max_ohm"])
def test_limits_fall_as_the_nominal_does(messages, column):
    header = "t_c,r_ohm,r_min_ohm,r_max_ohm"
    rows = {
        "r_min_ohm": "0,32000,9000,33000\n25,10000,9900,10100",
        "r_max_ohm": "0,32000,31000,10000\n25,10000,9900,10100",
    }
    pair = {
        "r_min_ohm": "9.9 kΩ is not below 9 kΩ at 0 °C",
        "r_max_ohm": "10.1 kΩ is not below 10 kΩ at 0 °C",
    }
    assert messages({"part.yaml": WITH_CSV, "table.csv": f"{header}\n{rows[column]}\n"}) == [
        f"parts/table.csv:3: {column} at 25 °C: {pair[column]}. {FALLS}"
    ]


INLINE = {
    "too short": (["[0]", "[25, 10k]"], f"16: r_t_table: the row has 1 value, {ROW}"),
    "decimal comma": (["[0, 32,5]", "[25, 10k]"], f"16: r_t_table: the row has 3 values, {ROW}"),
    "text": (["[0, 32k]", "[25, x]"], f'17: r_ohm: "x" {CELL}'),
    "zero": (["[0, 32k]", "[25, 0]"], f"17: r_ohm: 0 {NOT_OHMS}"),
    "order": (["[0, 5]", "[2, 7]"], f"17: r_ohm at 2 °C: 7 Ω is not below 5 Ω at 0 °C. {FALLS}"),
    "one row": (["[0, 5]"], f"16: r_t_table: the table has 1 row. {TWO_ROWS}"),
    "true": (
        ["[0, true]", "[25, 10k]"],
        "16: r_t_table.rows[0][1]: true stands where a number must stand. Write the figure alone, without unit or quotes.",
    ),
    "null": (
        ["[0, 32k]", "[25, null]"],
        "17: r_t_table.rows[1][1]: nothing stands where a number must stand. Write the figure, or remove the field.",
    ),
    "no list": (
        ["0", "[25, 10k]"],
        "16: r_t_table.rows[0]: 0 stands where a list must stand. Write it in brackets, or with a dash on each line.",
    ),
}


@pytest.mark.parametrize(("rows", "message"), INLINE.values(), ids=INLINE)
def test_a_row_in_the_record_is_told_with_its_line(messages, rows, message):
    assert messages(inline_table(*rows)) == [f"parts/part.yaml:{message}"]


@pytest.mark.parametrize(
    ("columns", "message"),
    [
        ("[t_c]", "columns: t_c makes no table. Give t_c with either r_ohm or ratio."),
        ("[]", "columns: nothing makes no table. Give t_c with either r_ohm or ratio."),
        (
            "[t_c, rohm]",
            'columns[1]: "rohm" is none of t_c, r_ohm, r_min_ohm, r_max_ohm, ratio. Did you mean r_ohm?',
        ),
    ],
)
def test_columns_in_the_record_make_a_table(messages, columns, message):
    assert messages(inline_table("[0, 2]", "[1, 1]", columns=columns)) == [f"parts/part.yaml:14: r_t_table.{message}"]


def test_columns_in_the_record_agree_with_the_header_row(messages):
    text = PART + "r_t_table: {file: table.csv, columns: [t_c, ratio]}\n"
    assert messages({"part.yaml": text, "table.csv": CSV}) == [
        "parts/part.yaml:13: r_t_table.columns: t_c, ratio is not what the header row of the CSV says: t_c, r_ohm. "
        "Correct one of the two, or leave columns out."
    ]


@pytest.mark.parametrize(
    ("given", "what"), [("{}", "neither rows nor file"), ("{file: t.csv, rows: []}", "both rows and file")]
)
def test_a_table_has_either_rows_or_a_file(messages, given, what):
    assert messages(f"{PART}r_t_table: {given}\n") == [
        f"parts/part.yaml:13: r_t_table: the table has {what}. Give one of the two."
    ]


SAME = {
    "as it is": CSV,
    "falling order": "t_c,r_ohm\n50,4000\n25,10000\n0,32000\n",
    "line ends of Windows": CSV.replace("\n", "\r\n"),
    "line ends of old Macs": CSV.replace("\n", "\r"),
    "byte order mark": "\ufeff" + CSV,
    "remarks and blank lines": "# 25 °C\n\n" + CSV.replace("25,", "#x\n25,"),
    "quotes and spaces": 't_c, "r_ohm"\n 0 ,"32000"\n25,1e4\n50,4k\n',
    "columns the other way round": "r_ohm,t_c\n32000,0\n10000,25\n4000,50\n",
    "ratio to the rated 10 kΩ": "t_c,ratio\n0,3.2\n25,1\n50,0.4\n",
}


@pytest.mark.parametrize("text", SAME.values(), ids=SAME)
def test_these_are_one_table(records, text):
    catalog = records({"part.yaml": WITH_CSV, "table.csv": text})
    assert [str(problem) for problem in catalog.problems] == []
    table = catalog.parts[0].table
    np.testing.assert_array_equal(table.t_c, [0, 25, 50])
    np.testing.assert_array_equal(table.r_ohm, [32000, 10000, 4000])


def test_lines_stay_with_their_rows_when_the_order_is_turned(records):
    table = records({"part.yaml": WITH_CSV, "table.csv": "t_c,r_ohm\n50,4000\n\n25,10000\n"}).parts[0].table
    assert (table.file, table.lines) == ("parts/table.csv", (4, 2))


def test_a_table_cannot_be_written_to(records):
    table = records({"part.yaml": WITH_CSV, "table.csv": CSV}).parts[0].table
    with pytest.raises(ValueError, match="read-only"):
        table.r_ohm[0] = 1.0


def test_rows_are_read_even_when_the_record_has_errors_elsewhere(messages):
    text = WITH_CSV.replace("form: chip", "form: chp")
    assert messages({"part.yaml": text, "table.csv": "t_c,r_ohm\n0,x\n25,10000\n"}) == [
        'parts/part.yaml:3: body.form: "chp" is none of chip, leaded, bead, probe, lug, disc. Did you mean chip?',
        f'parts/table.csv:2: r_ohm: "x" {CELL}',
    ]


def test_a_ratio_that_no_part_has_is_told(messages):
    cure = "is outside 1e−7 to 1e7. Check the decimal point."
    rows = "-40,2e7\n25,1\n125,1e-8\n"
    assert messages({"part.yaml": WITH_CSV, "table.csv": f"t_c,ratio\n{rows}"}) == [
        f"parts/table.csv:2: ratio: 2e7 {cure}",
        f"parts/table.csv:4: ratio: 1e−8 {cure}",
    ]


def test_the_least_and_the_largest_resistance_and_ratio_are_taken(messages):
    for rows in ("t_c,r_ohm\n-90,1e9\n300,0.01\n", "t_c,ratio\n-90,1e7\n300,1e-7\n"):
        assert messages({"part.yaml": WITH_CSV, "table.csv": rows}) == []
