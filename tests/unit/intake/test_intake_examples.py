"""Every example file comes to the numbers, or the refusal, that expected.yaml says; some to a whole golden record."""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any

import pytest
import yaml

from builder import intake
from builder.records.catalog import read_catalog
from builder.records.yaml_text import read_yaml

HERE = Path(__file__).parent
EXAMPLES = HERE / "examples"
CASES: list[dict[str, Any]] = yaml.load((HERE / "expected.yaml").read_text("utf-8"), yaml.BaseLoader)
READ = [case for case in CASES if "rows" in case]
REFUSED = [case for case in CASES if "refused" in case]


def record(case: dict[str, Any]) -> str:
    return intake.record_text((EXAMPLES / case["file"]).read_bytes(), name=case["file"], **case.get("options", {}))


def named(case: dict[str, Any]) -> str:
    return " ".join([case["file"], *(f"{option}={value}" for option, value in case.get("options", {}).items())])


def comments(text: str, **options: str) -> list[str]:
    """The notes above the table of a record made from a text."""
    made = intake.record_text(text.encode(), name="x", **options)
    return [line.removeprefix("# - ") for line in made.splitlines() if line.startswith("# - ")]


def filled(text: str) -> str:
    """A record with its placeholders filled as a person would."""
    text = text.replace("form: FILL-IN", 'form: chip, size_code: "0603"').replace(
        "tolerance_pct: FILL-IN", "tolerance_pct: 1"
    )
    text = text.replace("resistance_ohm: FILL-IN", "resistance_ohm: 10k").replace("revision: FILL-IN", 'revision: "C"')
    text = text.replace("dated: FILL-IN", "dated: 2026-01-05").replace("on: FILL-IN", "on: 2026-01-12")
    return text.replace("link: FILL-IN", "link: https://example.com/a.pdf").replace("FILL-IN", "as told")


@pytest.mark.parametrize("case", READ, ids=named)
def test_an_example_comes_to_its_numbers_with_every_digit(case: dict[str, Any]) -> None:
    loaded = yaml.load(record(case), yaml.BaseLoader)
    assert loaded["r_t_table"] == {"columns": case["columns"], "rows": case["rows"]}
    assert loaded["rated"]["resistance_ohm"] == case["rated_ohm"]


@pytest.mark.parametrize("case", REFUSED, ids=named)
def test_an_example_that_needs_guessing_is_refused_with_line_and_cure(case: dict[str, Any]) -> None:
    with pytest.raises(intake.Unreadable) as refusal:
        record(case)
    assert (refusal.value.line, refusal.value.message) == (
        None if case["line"] == "null" else int(case["line"]),
        case["refused"],
    )


def test_every_example_file_has_its_outcome() -> None:
    assert {path.name for path in EXAMPLES.iterdir()} == {case["file"] for case in CASES}


@pytest.mark.parametrize("golden", sorted((HERE / "golden").iterdir()), ids=lambda path: path.name)
def test_the_whole_record_is_the_golden_one(golden: Path) -> None:
    assert record({"file": golden.stem}) == golden.read_text("utf-8")


@pytest.mark.parametrize("case", READ, ids=named)
def test_a_filled_record_is_valid(case: dict[str, Any], tmp_path: Path) -> None:
    (tmp_path / "part.yaml").write_text(filled(record(case)), "utf-8")
    catalog = read_catalog(tmp_path)
    assert [p for p in catalog.problems if p.severity == "error"] == []
    assert len(catalog.parts) == 1


@pytest.mark.parametrize("case", READ, ids=named)
def test_the_record_reads_as_yaml_1_2_without_faults(case: dict[str, Any]) -> None:
    assert not read_yaml(record(case)).faults


@pytest.mark.parametrize(
    "field", ["part", "maker", "form", "tolerance_pct", "revision", "dated", "on", "by", "because"]
)
def test_what_the_table_does_not_say_is_left_to_fill_in(field: str) -> None:
    made = record({"file": "comma.csv"})
    assert re.search(rf"\b{field}: FILL-IN\b", made)


def test_part_and_maker_that_are_given_stand_in_quotes() -> None:
    made = intake.record_text(b"T (C);R (ohm)\n0;28500\n25;10000\n", name="x", part="0603", maker='A "B" & Co')
    assert yaml.safe_load(made)["part"] == "0603"
    assert yaml.safe_load(made)["maker"] == 'A "B" & Co'


def test_a_comment_cannot_be_left_by_what_the_file_holds() -> None:
    made = intake.record_text("x\u2028part: evil\nT (°C);R (Ω)\n0;3\n25;1\n".encode(), name="a\npart: evil")
    assert yaml.safe_load(made)["part"] == "FILL-IN"


def test_b_values_are_computed_from_the_rows_as_comments() -> None:
    # R25/R50 = 10000/4160 by hand: ln 2.403846 = 0.877070; 1/298.15 − 1/323.15 = 2.594795e-4 1/K; B = 3380.1 K.
    made = intake.record_text("T (°C);R (Ω)\n25;10000\n50;4160\n".encode(), name="x")
    assert "#   - {between_c: [25, 50], b_k: 3380.1}\n" in made
    assert "b_values" not in yaml.safe_load(made)


@pytest.mark.parametrize(
    ("text", "note"),
    [
        ("T;R (Ω)\n0;3\n25;1\n", "temperatures are in °C: nothing states their unit"),
        ("T (°C);R (Ω)\n25;1\n0;3\n", "the rows were in falling temperature and are turned round"),
        ("T (°C);R (Ω)\n0;3\n25;1\n0;3\n", "line 4: 0 °C repeats line 2 and is dropped"),
        ("T (°C);R (Ω)\n0;3\n\n17\n\fT (°C);R (Ω)\n25;1\n", "page breaks: 1"),
        ("T (°C);R (Ω)\n0;3\n\n17\n\fT (°C);R (Ω)\n25;1\n", "line 4: taken as page numbers"),
        ("T (°C);R (Ω)\n0;3\n\n17\n\fT (°C);R (Ω)\n25;1\n", "line 5: repeated from above the table"),
        ("T (°C);R (Ω);B25/T (K)\n0;3;3400\n25;1;-\n", '"B25/T (K)" left out: B-value'),
        ("T (°C);R (Ω)\n0*;3\n25;1†\n", "lines 2, 3: footnote marks beside the values"),
        ("All resistances in Ω\n\nT (°C);R\n0;3\n25;1\n", "resistance in Ω: as line 1 says"),
        ("T (°C);R (Ω);Rmax (Ω)\n0;3;4\n25;1;2\n", "the maximum column is left out: it has no counterpart"),
        (
            "0;3\n25;1\n",
            "no heading names the temperature: the first column is taken as temperature, the second as resistance",
        ),
    ],
)
def test_what_was_recognised_and_assumed_is_said(text: str, note: str) -> None:
    assert note in comments(text, **({} if "Ω" in text else {"unit": "ohm"}))


def test_twelve_kilohm_and_a_third_has_no_float_noise() -> None:
    made = intake.record_text("T (°C);R (kΩ)\n0;12.34\n25;1.1\n50;0.0700\n".encode(), name="x")
    assert yaml.load(made, yaml.BaseLoader)["r_t_table"]["rows"] == [["0", "12340"], ["25", "1100"], ["50", "70.0"]]


def test_the_heading_words_of_many_hands_mean_the_same() -> None:
    for heading in [
        "R (kΩ)",
        "kohm",
        "R (k ohms)",
        "R/kΩ",
        "Resistance [kOhm]",
        "R (k)",
        "Widerstand in kΩ",
        "r_kohm",
        "R, kiloohm",
    ]:
        made = intake.record_text(f"T (°C);{heading}\n0;28.5\n25;10.0\n".encode(), name="x")
        assert yaml.safe_load(made)["r_t_table"]["rows"] == [[0, 28500], [25, 10000]], heading
    for heading in ["T (°F)", "Temp. [°F]", "T/F", "Fahrenheit", "deg F", "temperature, degrees F"]:
        made = intake.record_text(f"{heading};R (Ω)\n32;28500\n77;10000\n".encode(), name="x")
        assert yaml.safe_load(made)["r_t_table"]["rows"] == [[0, 28500], [25, 10000]], heading


def outcome(text: str, **options: str) -> list[list[float]] | str:
    """The rows that a text comes to, or the refusal's message."""
    try:
        made = intake.record_text(text.encode(), name="x", **options)
    except intake.Unreadable as refusal:
        return f"{refusal.line}: {refusal.message}"
    rows: list[list[float]] = yaml.safe_load(made)["r_t_table"]["rows"]
    return rows


def refusal(text: str, **options: str) -> str:
    """The refusal of a text, with its line."""
    refused = outcome(text, **options)
    assert isinstance(refused, str), refused
    return refused


TWO_ROWS = [[0, 28500], [25, 10000]]


@pytest.mark.parametrize("divided", ["@", ";", "\t", "|", "  "])
@pytest.mark.parametrize(
    "slip", ["-10@55.3O", "l0@19.9", "-40@336O50", "-40@>336", "-40@336:05", "10-@55.3", "lO@19.9", "x@55.3"]
)
def test_a_slip_in_the_first_row_is_refused_as_in_any_other(divided: str, slip: str) -> None:
    mark = "," if divided == "@" else divided
    text = f"T (°C)@R (Ω)\n{slip}\n50@15\n75@12\n".replace("@", mark)
    assert refusal(text).startswith(f"2: {' '.join(slip.replace('@', mark).split())!r} looks like a row, but ")


def test_a_first_row_that_lacks_its_temperature_is_refused() -> None:
    assert refusal("T (°C);R (Ω)\n;55.3\n50;15\n75;12\n").startswith("2: ';55.3' looks like a row")


def test_a_first_row_with_a_slip_is_refused_without_a_heading_too() -> None:
    assert refusal("-10;55.3O\n-5;42.3\n0;32.65\n", unit="kohm").startswith("1: '-10;55.3O' looks like a row")


@pytest.mark.parametrize("divided", [";", "  "])
@pytest.mark.parametrize(
    "heading",
    [
        "T@R\n(°C)@(kΩ)",
        "T (°C)@R (kΩ)\nR25 = 10 kΩ",
        "T (°C)@R (kΩ)\nR25@10 kΩ",
        "T (°C)@R (kΩ)\nB25/85@3435 K",
        "T (°C)@R (kΩ)\nB25/85 3435 K",
        "T (°C)@R (kΩ)\n°C@10 kΩ",
        "T (°C)@R (kΩ)\n25 °C is the rated temperature",
        "T (°C)@R (kΩ)\n\n- 4 -",
    ],
)
def test_a_second_heading_line_with_figures_is_no_row(divided: str, heading: str) -> None:
    assert outcome(f"{heading}\n0@28.5\n25@10.0\n".replace("@", divided)) == TWO_ROWS


def test_a_page_number_under_the_heading_is_no_row() -> None:
    assert outcome("T (°C)   R (Ω)\n- 4 -\n0   28 500\n25   10 000\n") == TWO_ROWS


@pytest.mark.parametrize(
    "caption",
    ["All resistances in kΩ", "Table 2 (kΩ)", "R in kΩ", "Values in kΩ", "°C, kΩ"],
)
def test_a_unit_above_the_table_counts_where_the_text_speaks_of_the_table(caption: str) -> None:
    assert outcome(f"{caption}\n\nT;R\n0;28.5\n25;10.0\n") == TWO_ROWS


@pytest.mark.parametrize(
    "caption", ["Pull-up in kΩ: 10", "Pull-up values in kΩ", "Load in kΩ", "Reference resistance in kΩ: 10"]
)
def test_a_unit_of_another_resistor_is_not_the_tables(caption: str) -> None:
    assert "nothing states the unit" in refusal(f"{caption}\n\nT;R\n0;28500\n25;10000\n")


def test_emphasis_is_no_footnote_mark() -> None:
    assert not [n for n in comments("|T (°C)|R (Ω)|\n|-|-|\n|0|**3**|\n|25|*1*|\n") if "footnote" in n]


@pytest.mark.parametrize("divided", [";", "  "])
def test_tables_side_by_side_headed_with_different_resistances_are_refused(divided: str) -> None:
    body = "T (°C)@R25=10k@T (°C)@R25=100k\n0@28500@50@41400\n25@10000@85@14800\n"
    message = refusal(body.replace("@", divided), unit="ohm")
    assert "the tables side by side are of different resistances" in message


def test_tables_side_by_side_captioned_with_one_resistance_are_one_part() -> None:
    text = "10k part;;10 kΩ part;\nT (°C);R (kΩ);T (°C);R (kΩ)\n0;28.5;25;10.0\n"
    assert outcome(text) == TWO_ROWS


def test_a_heading_given_whole_is_chosen_before_those_that_contain_it() -> None:
    text = "T (°C);10 kΩ;110 kΩ\n0;28500;300000\n25;10000;110000\n"
    assert outcome(text, column="10 kΩ", unit="ohm") == TWO_ROWS


def test_a_sentence_above_an_empty_line_is_no_heading() -> None:
    assert outcome("Resistance of a thermistor, zero power\n\n0,28500\n25,10000\n", unit="ohm") == TWO_ROWS


def test_columns_divided_by_commas_are_not_taken_to_alternate() -> None:
    assert outcome("0,9,25,3\n5,8,30,2\n", unit="ohm") == (
        "1: column 2, column 3, column 4 are 3 columns of nominal resistance with different values, and no headings tell "
        "them apart. Choose one by the option column, by its heading or by its number from 1, or head them minimum, "
        "nominal and maximum."
    )


@pytest.mark.parametrize(
    "text",
    [
        "T (°F);T (°C);R (kΩ)\n32;0;28.5\n77;25;10\n",
        "# exported 2024\n# T_c, R_ohm\n0, 28500\n25, 10000\n",
        "Temperature Resistance\n(°C) (kΩ)\n0 28.5\n25 10.0\n",
        "Part:;TB3A\nR25:;10 kΩ\n;\nT;R\n0;28,5\n25;10,0\n",
        "R-T table\nT R (kΩ)\n0 28.5\n25 10.0\n",
        "T (°C) | R/R25 | R (Ω)\n0|2.85|28500\n25|1|10000\n",
        "T (°C);R (kΩ);B\n0;28,5;3400\n25;10,0;3410\n",
        "T;R25=10kΩ;R25=47kΩ\n0;28.5;140.2\n25;10.00;47.00\n",
        "T[K];R\n273.15;28.5k\n298.15;10k\n",
        "T (°C)   R (Ω)\n0   28500\n25   -\n25   10000\n",
        "T (°C)  R (kΩ)  T (°C)  R (kΩ)\n0  28.5  25  10.0\n",
    ],
)
def test_a_table_as_people_have_it_comes_to_its_rows(text: str) -> None:
    assert outcome(text, **({"column": "R25=10kΩ"} if "47kΩ" in text else {})) == TWO_ROWS


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (
            "10.0;25\n8.3;30\n6.9;35\n",
            "3: the values taken as resistance have even steps, and the temperatures have not, as if they stood in each "
            "other's column. Write headings above the rows, such as T (°C) and R (kΩ).",
        ),
        (
            "T (°C)\tR (kΩ)\n0\t28.5\n25  10.0\n50\t4.1\n",
            "3: '25 10.0' looks like a row, but is not divided as the rows are. Correct it, or delete the line or the column.",
        ),
        (
            "T (°C)  R (kΩ)\n0 28.5\n25 10.0 (rated)\n50 4.1\n",
            "3: '25 10.0 (rated)' looks like a row, but '(rated)' cannot be read as one of its values. "
            "Correct it, or delete the line or the column.",
        ),
        (
            "T,R (Ω)\n0,28,5\n25,10,0\n",
            "1: 'T,R (Ω)' heads 2 columns, but rows have up to 3 values. Head every column, or delete what has no "
            "heading; where commas are decimal signs too, divide by semicolons.",
        ),
        (
            "T (°C),R (Ω),note\n0,28,5\n25,10\n",
            "3: '25,10' has 2 values between commas where the first line has 3. Complete the row; where commas are "
            "decimal signs too, divide the columns by semicolons.",
        ),
        (
            "0,2 172\n1,2 100\n",
            "1: '0,2 172' may be divided by its comma or by its space. Divide the columns by semicolons.",
        ),
        (
            "T (°C);R/R25\n0;28,500\n25;10,000\n",
            "2: the ratio at 25 °C is 10000 and no row has 1, so it is not resistance over rated resistance. "
            "Head the column with what it is, such as R (kΩ).",
        ),
        (
            "T (°C);Rmin (Ω);R (Ω);Rmax (Ω)\n0;3;4;2\n25;2;3;1\n",
            "2: in no row does the nominal value lie between minimum and maximum. "
            "Check that each heading stands over its own column, and the decimal sign.",
        ),
        ("x" * 2001, "1: 2001 characters are too many for a row. Give each row its own line."),
        (
            "T (°C);R (Ω)\n0;28500\n2000;10\n",
            "3: 2000 °C is no temperature of a thermistor. Check the unit and which column is the temperature.",
        ),
        (
            "T (°C);R (Ω)\n0;28500\n25;083\n",
            "3: '083' begins with a zero, as the rear half of a divided number does. Close up the number, or write it without the zero.",
        ),
    ],
)
def test_what_would_have_to_be_guessed_is_refused(text: str, message: str) -> None:
    assert outcome(text, **({} if "Ω" in text or "R25" in text else {"unit": "kohm"})) == message
