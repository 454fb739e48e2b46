"""The command: what it answers on which stream, and with which exit code."""

import csv
import io
import json
import math
import os
import subprocess
import sys
from pathlib import Path

import pytest
from click.testing import CliRunner

from builder.cli import main

HEAD = "maker: Maker\nbody: {form: bead}\nrated: {resistance_ohm: 10k, tolerance_pct: 1}\n"
DOCUMENTS = "documents: [{title: data sheet}]\n"
B = "b_values: [{between_c: [25, 85], b_k: 3950, tolerance_pct: 1}]\nshape: plain\n"
GOOD = f"part: X-103\n{HEAD}{DOCUMENTS}{B}limits: {{operating_c: [-12.5, 5]}}\n"
FAULTY = f"part: Y-103\n{HEAD}{DOCUMENTS}b_values: [{{between_c: [25, 85], b_k: 34350}}]\n"
FAULT = (
    "parts/y.yaml:6: b_values[0].b_k: 34350 K is outside 1000 to 10000 K. "
    "Check the decimal point; data sheets print B in kelvin."
)


@pytest.fixture
def run(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)

    def invoke(*arguments, **files):
        Path("parts").mkdir(exist_ok=True)
        for name, text in (files or {"x": GOOD}).items():
            Path("parts", f"{name}.yaml").write_text(text, encoding="utf-8")
        return CliRunner().invoke(main, [str(argument) for argument in arguments])

    return invoke


def _told(result):
    return result.exit_code, result.stdout, result.stderr


def _usage(command, arguments, error):
    return 2, "", f"Usage: main {command} [OPTIONS] {arguments}\nTry 'main {command} --help' for help.\n\nError: {error}\n"  # fmt: skip


# check


def test_check_of_good_records_exits_0(run):
    assert _told(run("check")) == (0, "1 part, 0 positions: 0 errors, 0 warnings.\n", "")


def test_check_with_an_error_says_it_and_exits_1(run):
    out = f"{FAULT} [error: out-of-bounds]\n1 part, 0 positions: 1 error, 0 warnings.\n"
    assert _told(run("check", x=GOOD, y=FAULTY)) == (1, out, "")


def test_check_with_warnings_only_exits_0(run):
    result = run("check", x=GOOD.replace(DOCUMENTS, ""))
    assert result.exit_code == 0
    assert result.stdout.endswith("[warning: document-missing]\n1 part, 0 positions: 0 errors, 1 warning.\n")


def test_check_answers_json_alone(run):
    result = run("check", "--format", "json", x=GOOD, y=FAULTY)
    assert result.stderr == ""
    assert json.loads(result.stdout) == {
        "problems": [
            {
                "file": "parts/y.yaml",
                "line": 6,
                "field": "b_values[0].b_k",
                "severity": "error",
                "rule": "out-of-bounds",
                "message": FAULT.partition("b_k: ")[2],
            }
        ],
        "parts": 1,
        "positions": 0,
    }


def test_check_names_the_row_of_a_table_in_json(run):
    table = "r_t_table: {rows: [[0, 32000], [25, 10000], [50, 10500], [75, 1700]]}\n"
    answer = json.loads(run("check", "--format", "json", x=GOOD + table).stdout)
    (found,) = [problem for problem in answer["problems"] if problem["rule"] == "not-falling"]
    assert found["row"] == 50
    assert set(found) <= {"file", "line", "field", "severity", "rule", "message", "row", "expected"}


def test_check_answers_csv_with_one_line_a_problem(run):
    lines = list(csv.reader(io.StringIO(run("check", "--format", "csv", x=GOOD, y=FAULTY).stdout)))
    assert lines == [
        ["file", "line", "field", "severity", "rule", "message", "row", "expected"],
        ["parts/y.yaml", "6", "b_values[0].b_k", "error", "out-of-bounds", FAULT.partition("b_k: ")[2], "", ""],
    ]


def test_check_of_a_path_tells_of_that_path_only(run):
    assert _told(run("check", "parts/x.yaml", x=GOOD, y=FAULTY))[0] == 0
    assert run("check", "parts/y.yaml").exit_code == 1
    assert run("check", "parts").exit_code == 1


def test_check_of_a_record_tells_of_the_csv_beside_it(run):
    Path("parts").mkdir(exist_ok=True)
    Path("parts", "x.csv").write_text("t_c,r_ohm\n0,30000\n25,10000\n50,12000\n")
    result = run("check", "parts/x.yaml", x=GOOD + "r_t_table: {file: x.csv}\n")
    assert (result.exit_code, result.stdout.partition(":")[0]) == (1, "parts/x.csv")


def test_check_of_a_file_that_is_no_record_is_a_usage_error(run):
    run("check")
    Path("parts", "README.md").write_text("no record")
    error = "parts/README.md is no record. Name a .yaml file, or a folder."
    assert _told(run("check", "parts/README.md")) == _usage("check", "[PATH]...", error)


def test_a_part_that_check_refuses_gives_no_curve(run):
    rows = "".join(
        f"    - [{t_c}, {10 * math.exp(3950 / (t_c + 273.15) - 3950 / 298.15):.5g}]\n" for t_c in range(-10, 90, 5)
    )
    table = f"r_t_table:\n  columns: [t_c, r_ohm]\n  rows:\n{rows}"
    result = run("curve", "X-103", x=GOOD + table)
    assert (result.exit_code, result.stdout) == (1, "")
    assert "typed in kΩ" in result.stderr


def test_check_of_a_path_that_is_not_there_is_a_usage_error(run):
    error = "there is no parts/z.yaml. Name a record or a folder of records."
    assert _told(run("check", "parts/z.yaml")) == _usage("check", "[PATH]...", error)


def test_check_of_a_path_elsewhere_is_a_usage_error(run, tmp_path):
    (tmp_path / "elsewhere.yaml").write_text(GOOD, encoding="utf-8")
    error = "elsewhere.yaml is not below parts. Name the folder of the records with --records."
    assert _told(run("check", "elsewhere.yaml")) == _usage("check", "[PATH]...", error)


def test_check_judges_by_the_day_given(run):
    standing = "standing: [{state: approved, on: 2026-01-10, by: us, because: tested, review_due: 2026-06-01}]\n"
    texts = {"x": GOOD + standing}
    assert "0 warnings" in run("check", "--today", "2026-06-01", **texts).stdout
    assert "[warning: review-overdue]" in run("check", "--today", "2026-06-02", **texts).stdout


@pytest.mark.parametrize("command", [["check"], ["curve", "X-103"], ["temperature", "X-103", "10k"]])
def test_records_folder_that_is_not_there_is_a_usage_error(run, command):
    result = run(*command, "--records", "nowhere")
    assert (result.exit_code, result.stdout) == (2, "")
    assert result.stderr.endswith("Error: Invalid value for '--records': Directory 'nowhere' does not exist.\n")


# curve


# The figures of this page are the law's own, 10 kΩ·exp(3950 K·(1/T − 1/298.15 K)) and its inverse, at ±1 % and ±1 %,
# worked out with Python's math module.
def test_curve_answers_a_table(run):
    assert _told(run("curve", "X-103")) == (
        0,
        "Maker X-103: from a single B-value, estimated away from its two temperatures, −12.5 to 85 °C\n"
        "   °C    R in Ω  min in Ω  max in Ω  α in %/K  reads low K  reads high K\n"
        "−12.5  67265.12  65335.20  69245.12    −5.814       −0.498        +0.502\n"
        "−10    58245.71  56656.08  59873.96    −5.704       −0.482        +0.486\n"
        " −5    44026.05  42944.52  45130.29    −5.493       −0.450        +0.454\n"
        "  0    33620.60  32883.24  34371.06    −5.294       −0.416        +0.420\n"
        "  5    25924.56  25421.99  26434.43    −5.106       −0.381        +0.384\n",
        "",
    )


def test_curve_answers_json_alone_under_the_names_agreed(run):
    result = run("curve", "x-103", "--format", "json", "--step", 10)
    answer = json.loads(result.stdout)
    assert result.stderr == ""
    assert list(answer) == ["part", "basis", "span_c", "rows"]
    assert {key: answer[key] for key in ("part", "basis", "span_c")} == {"part": "X-103", "basis": "b-value", "span_c": [-12.5, 85.0]}  # fmt: skip
    names = ["t_c", "r_ohm", "r_min_ohm", "r_max_ohm", "alpha_pct_per_k", "reads_min_k", "reads_max_k", "extrapolated"]
    assert [list(row) for row in answer["rows"]] == [names] * 4
    assert [row["t_c"] for row in answer["rows"]] == [-12.5, -10, 0, 5]
    # R·exp(B·(1/T − 1/298.15)) at 0 °C, of the definition in IEC 60539-1
    assert answer["rows"][2]["r_ohm"] == pytest.approx(33620.60372, abs=5e-6)


def test_curve_answers_csv(run):
    lines = run("curve", "X-103", "--format", "csv", "--from", 25, "--to", 25).stdout.split("\n")
    assert lines[0] == "t_c,r_ohm,r_min_ohm,r_max_ohm,alpha_pct_per_k,reads_min_k,reads_max_k,extrapolated"
    assert lines[1].startswith("25,10000,9900,10100,-4.443523366,-0.223") and lines[1].endswith(",no")
    assert lines[2:] == [""]


@pytest.mark.parametrize(
    ("arguments", "rows_c"),
    [
        (["--from", "20"], [20]),
        (["--to", "-60"], [-60]),
        (["--from", "-11"], [-11, -6, -1, 4, 5]),
        (["--to", "-9"], [-12.5, -10, -9]),
        (["--from", "−20", "--to", "−12"], [-20, -15, -12]),
        (["--from=-20", "--to=-12", "--step", "2.5"], [-20, -17.5, -15, -12.5, -12]),
        (["--from", "1e2", "--to", "100"], [100]),
    ],
)
def test_rows_of_curve(run, arguments, rows_c):
    answer = json.loads(run("curve", "X-103", "--format", "json", *arguments).stdout)
    assert [row["t_c"] for row in answer["rows"]] == rows_c


@pytest.mark.parametrize(
    ("arguments", "error"),
    [
        (["--from", 50, "--to", -20], "--from 50 lies above --to −20. Exchange them."),
        (["--step", "0.0001"], "that is more than 100000 rows. Choose a larger --step."),
        (["--step", "1e-320"], "that is more than 100000 rows. Choose a larger --step."),
        *((["--step", step], f"Invalid value for '--step': {step} is not a step. Write a number of kelvin above 0, at most 1000.") for step in ("0", "-5", "nan", "inf", "five")),
        (["--from", "warm"], "Invalid value for '--from': warm is not a temperature. Write a number in °C, such as -40."),
        (["--to", "nan"], "Invalid value for '--to': nan °C is outside −273.15 to 1000 °C. Check the unit."),
        (["--from", "-300"], "Invalid value for '--from': -300 °C is outside −273.15 to 1000 °C. Check the unit."),
    ],
)  # fmt: skip
def test_rows_that_cannot_be_are_a_usage_error(run, arguments, error):
    assert _told(run("curve", "X-103", *arguments)) == _usage("curve", "PART", error)


def test_curve_without_a_tolerance_says_so_on_standard_error(run):
    text = GOOD.replace(", tolerance_pct: 1}\n", "}\n", 1)
    result = run("curve", "X-103", "--format", "json", x=text)
    assert result.stderr == "The tolerance band is incomplete: a tolerance that it needs is not stated.\n"
    assert json.loads(result.stdout)["part"] == "X-103"


@pytest.mark.parametrize("form", ["table", "json", "csv"])
def test_what_is_no_number_is_never_printed_as_one(run, form):
    coefficients = "steinhart_hart: {a: 8.0e-4, b: 2.8e-4, c: -2.0e-8, span_c: [0, 70]}\n"
    texts = {"x": GOOD + coefficients}
    results = [
        run("curve", "X-103", "--from", -20, "--to", 90, "--format", form, **texts),
        run("temperature", "X-103", "1e9", "1e-9", "10k", "--format", form, **texts),
        run("curve", "X-103", "--from", -273, "--to", -240, "--step", 4, "--format", form),
    ]
    for result in results:
        assert (result.exit_code, result.stderr) == (0, "")
        assert "nan" not in result.stdout.casefold() and "inf" not in result.stdout.casefold()
    nothing = {"table": "–", "json": "null", "csv": ",,"}[form]
    assert all(nothing in result.stdout for result in results)


# temperature


def test_temperature_answers_a_table(run):
    assert _told(run("temperature", "X-103", "10k", "4k7", "33620.6", "350", "1e-9")) == (
        0,
        " R in Ω       °C\n"
        "10000     25.000\n"
        " 4700     43.018\n"
        "33620.6    0.000\n"
        "  350    126.003  extrapolated\n"
        " 1e−9      –      extrapolated\n",
        "",
    )


def test_temperature_answers_json_alone(run):
    result = run("temperature", "X-103", "10k", "350", "--format", "json")
    answer = json.loads(result.stdout)
    assert result.stderr == ""
    assert answer == {
        "part": "X-103",
        "rows": [
            {"r_ohm": 10000.0, "t_c": 25.0, "extrapolated": False},
            {
                "r_ohm": 350.0,
                "t_c": pytest.approx(1 / (1 / 298.15 + math.log(350 / 10000) / 3950) - 273.15, abs=5e-8),
                "extrapolated": True,
            },
        ],
    }


def test_temperature_answers_csv(run):
    out = run("temperature", "X-103", "10k", "1e-9", "--format", "csv").stdout
    assert out == "r_ohm,t_c,extrapolated\n10000,25,no\n1e-09,,yes\n"


@pytest.mark.parametrize(
    ("ohm", "error"),
    [
        ("0", "0 Ω is not a resistance above zero."),
        ("nan", "nan is not a resistance: write ohms as a number, or an R-K-M code such as 4k7."),
        ("warm", "warm is not a resistance: write ohms as a number, or an R-K-M code such as 4k7."),
    ],
)
def test_what_is_no_resistance_is_a_usage_error(run, ohm, error):
    told = _told(run("temperature", "X-103", ohm))
    assert told == _usage("temperature", "PART OHM...", f"Invalid value for 'OHM...': {error}")


def test_negative_resistance_after_two_hyphens_is_refused_as_such(run):
    told = _told(run("temperature", "--", "X-103", "-5"))
    error = "Invalid value for 'OHM...': -5 Ω is not a resistance above zero."
    assert told == _usage("temperature", "PART OHM...", error)


# the part that is named


def test_unknown_part_suggests_the_nearest(run):
    told = _told(run("curve", "X-130"))
    assert told == _usage("curve", "PART", "X-130 is not a part of the catalog. Did you mean X-103?")


def test_number_of_two_makers_asks_for_the_maker(run):
    texts = {"x": GOOD, "z": GOOD.replace("Maker", "Other")}
    error = "X-103 is the number of 2 parts: Maker X-103, Other X-103. Name the maker too."
    assert _told(run("curve", "X-103", **texts)) == _usage("curve", "PART", error)
    assert run("curve", "other x-103").stdout.startswith("Other X-103: ")


def test_own_number_finds_the_part(run):
    assert run("curve", "HS-1", x=GOOD + "own_number: HS-1\n").stdout.startswith("Maker X-103: ")


def test_part_of_a_faulty_record_answers_with_its_faults_and_exits_1(run):
    result = run("curve", "Y-103", x=GOOD, y=FAULTY)
    assert (result.exit_code, result.stdout) == (1, "")
    assert result.stderr.startswith(f"{FAULT}\n")


def test_part_whose_readable_record_has_an_error_answers_with_it_and_exits_1(run):
    told = _told(
        run("temperature", "X-103", "10k", x=GOOD.replace("title: data sheet", "title: data sheet, file: x.pdf"))
    )
    error = "parts/x.yaml:5: documents[0].file: there is no file x.pdf beside the record. Check the name, or remove the field.\n"
    assert told == (1, "", error)


def test_faults_of_other_records_are_noted_on_standard_error_only(run):
    result = run("temperature", "X-103", "10k", "--format", "json", x=GOOD, y=FAULTY)
    assert result.exit_code == 0
    assert json.loads(result.stdout)["rows"][0]["t_c"] == 25
    assert result.stderr == "Other records have 1 error; beadroll check shows them.\n"


# the program


@pytest.mark.parametrize("command", [["check"], ["curve", "X-103"], ["temperature", "X-103", "10k"]])
def test_commands_do_without_the_sites_packages(run, command):
    run("check")
    script = (
        "import sys\nfrom builder.cli import main\n"
        f"try:\n    main({command!r})\nexcept SystemExit:\n    pass\n"
        "print('curves' if 'builder.part_curve' in sys.modules else '', file=sys.stderr)\n"
        "print(*sorted({'matplotlib', 'mkdocs', 'material', 'jinja2', 'scipy'} & set(sys.modules)), file=sys.stderr)\n"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, encoding="utf-8", check=True)
    assert done.stderr == "curves\n\n"


def test_output_is_utf_8_whatever_the_code_page(run):
    run("check")
    command = [sys.executable, "-c", "from builder.cli import main; main()", "curve", "X-103"]
    environment = {**os.environ, "PYTHONIOENCODING": "cp1252"}
    done = subprocess.run(command, capture_output=True, env=environment, check=True)
    assert "R in Ω" in done.stdout.decode("utf-8")
    wrong = subprocess.run([*command, "--step", "−1"], capture_output=True, env=environment, check=False)
    assert "−1 is not a step" in wrong.stderr.decode("utf-8")
