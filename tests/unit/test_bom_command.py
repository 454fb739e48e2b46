"""The command `bom`: what it answers on which stream, with which exit code, and what it leaves alone."""

import csv
import io
import json
import shutil
import subprocess
import sys
from pathlib import Path

import pytest
from click.testing import CliRunner

from builder.cli import main

ROOT = Path(__file__).parents[2]
HEADINGS = "Reference,Part number,Maker,Own number,Quantity\n"
GOOD = "RT1,TB3A-103F38-TR,Tarnbrook,HS-10473,1\nRT2,YC2-103H,,,1\nR1,RC-1,Brackwater,,1\n"
USAGE = "Usage: main bom [OPTIONS] FILE\nTry 'main bom --help' for help.\n\nError: "
NAME_IT = "Name the board with --board, or say --no-board where it has no positions on record."


@pytest.fixture
def run(tmp_path, monkeypatch):
    """The command on a bill of this text, with the demo records; it writes nothing beside the bill."""
    monkeypatch.chdir(tmp_path)

    def invoke(bill, *options, name="bill.csv", records=ROOT / "parts"):
        Path(name).write_bytes(bill if isinstance(bill, bytes) else bill.encode())
        done = CliRunner().invoke(main, ["bom", name, "--records", str(records), *options])
        assert {path.name for path in tmp_path.iterdir()} <= {name, "parts", ".beadroll-cache"}
        return done.exit_code, done.stdout, done.stderr

    return invoke


def test_a_bill_where_nothing_blocks_exits_0(run):
    assert run(HEADINGS + GOOD, "--board", "coolbox-main") == (
        0,
        "line  severity  finding   reference  number\n"
        "   2  ok        approved  RT1        TB3A-103F38-TR  TB3A-103F38 is what coolbox-main/RT1 is made for, approved since 2025-05-19.\n"
        "   3  ok        differs   RT2        YC2-103H        YC2-103H is an approved alternate for TB2A-103F38 at coolbox-main/RT2, since 2026-05-12.\n"
        "coolbox-main: 2 lines of thermistors, 1 other line; nothing blocks, 0 warnings.\n",
        "",
    )


def test_json_stands_alone_on_standard_output_and_a_finding_that_blocks_exits_1(run):
    code, out, err = run(HEADINGS + GOOD.replace("RT2", "RT3"), "--board", "coolbox-main", "--format", "json")
    answer = json.loads(out)
    missing = answer["lines"].pop()
    assert (code, err) == (
        1,
        "coolbox-main: 2 lines of thermistors, 1 other line; 1 finding blocks, 0 warnings.\n",
    )
    assert missing == {
        "line": None,
        "reference": "RT2",
        "number": "",
        "part": "TB2A-103F38",
        "finding": "missing-reference",
        "severity": "blocks",
        "message": "coolbox-main/RT2 is not on the bill; it is made for TB2A-103F38. Add it, or take the position out of the records.",
    }
    assert answer == {
        "board": "coolbox-main",
        "lines": [
            {
                "line": 2,
                "reference": "RT1",
                "number": "TB3A-103F38-TR",
                "part": "TB3A-103F38",
                "finding": "approved",
                "severity": "ok",
                "message": "TB3A-103F38 is what coolbox-main/RT1 is made for, approved since 2025-05-19.",
            },
            {
                "line": 3,
                "reference": "RT3",
                "number": "YC2-103H",
                "part": "YC2-103H",
                "finding": "approved",
                "severity": "ok",
                "message": "YC2-103H is approved since 2026-04-07.",
            },
        ],
        "thermistor_lines": 2,
        "other_lines": 1,
        "blocks": 1,
        "warnings": 0,
    }


def test_csv_has_the_same_columns(run):
    code, out, _ = run(HEADINGS + GOOD.replace("RT2", "RT3"), "--board", "coolbox-main", "--format", "csv")
    rows = list(csv.DictReader(io.StringIO(out)))
    assert (code, list(rows[0])) == (1, ["line", "reference", "number", "part", "finding", "severity", "message"])
    assert [(row["line"], row["finding"]) for row in rows] == [
        ("2", "approved"),
        ("3", "approved"),
        ("", "missing-reference"),
    ]


def test_the_board_is_found_by_its_references_or_must_be_named(run):
    board = HEADINGS + "RT1,NV10-3435,,,1\nRT2,TB3A-104F42,,,1\nRT3,QG2-1041,,,1\nRT4,OSL6-103,,,1\n"
    assert run(board)[1].endswith(
        "\ncharger-power: 4 lines of thermistors, 0 other lines; nothing blocks, 0 warnings.\n"
    )
    code, out, err = run(HEADINGS + GOOD)
    assert (code, out) == (2, "")
    assert err == (
        f"{USAGE}RT1, RT2 may stand on several boards: charger-dc, charger-power, coolbox-main, dock-pack, vial-carrier. {NAME_IT}\n"
    )


def test_a_bill_without_any_position_s_reference_needs_the_board_or_no_board(run):
    for bill in (HEADINGS + "TH1,YC2-103H,,,1\n", "MPN\nYC2-103H\n"):
        message = f"no reference of the bill is one of the catalog's positions. {NAME_IT}"
        assert run(bill) == (2, "", f"{USAGE}{message}\n")


def test_a_part_for_some_places_only_blocks_without_a_board(run):
    code, out, _ = run(HEADINGS + "TH1,NV10-3435,,,1\n", "--no-board")
    assert (code, out.splitlines()[1].split()[:3]) == (1, ["2", "blocks", "restricted"])


def test_without_positions_the_parts_alone_are_looked_at(run, tmp_path):
    answer = (
        0,
        "line  severity  finding   reference  number\n"
        "   2  ok        approved  TH1        YC2-103H  YC2-103H is approved since 2026-04-07.\n"
        "No board named: 1 line of thermistors, 0 other lines; nothing blocks, 0 warnings.\n",
    )
    bill = HEADINGS + "TH1,YC2-103H,,,1\n"
    assert run(bill, "--no-board")[:2] == answer
    shutil.copytree(ROOT / "parts", tmp_path / "parts", ignore=shutil.ignore_patterns("boards"))
    assert run(bill, records="parts")[:2] == answer


@pytest.mark.parametrize(
    ("options", "message"),
    [
        (["--board", "coolbox-mian"], "coolbox-mian is not a board of the catalog. Did you mean coolbox-main?"),
        (["--board", "dock-pack", "--no-board"], "--board and --no-board exclude each other. Leave one out."),
    ],
)
def test_options_that_do_not_go_exit_2(run, options, message):
    assert run(HEADINGS + GOOD, *options) == (2, "", f"{USAGE}{message}\n")


def test_positions_need_a_column_of_references(run):
    message = "no column of the bill is headed as references. Name it with --reference HEADING."
    assert run("Part number\nTB3A-103F38\n", "--board", "coolbox-main") == (2, "", f"{USAGE}{message}\n")


def test_columns_are_named_by_options(run):
    bill = "Where;What;Who;House;Many\nRT1;TB3A-103F38;Someone;HS-10474;2\nRT2;YC2-103H;Yarrowfield;;1\n"
    options = [
        "--reference",
        "where",
        "--number",
        "WHAT",
        "--maker",
        "Who",
        "--own-number",
        "House",
        "--quantity",
        "many",
    ]
    _, out, _ = run(bill, *options, "--board", "coolbox-main", "--format", "csv")
    assert [row["finding"] for row in csv.DictReader(io.StringIO(out))] == [
        "own-number-differs", "maker-differs", "approved", "quantity", "differs",
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("bill", "name", "said"),
    [
        (b"", "bill.csv", "bill.csv: it is empty. Export the bill again.\n"),
        (
            b"MPN,Comment\nA1,\"open\n",
            "bill.csv",
            "bill.csv:2: a quotation mark that opens here is not closed. Close it, or remove it.\n",
        ),
        (
            HEADINGS + GOOD,
            "bill.xlsx",
            "bill.xlsx: its name says XLSX, but it is no workbook. Save it as XLSX, or name it after what it is.\n",
        ),
    ],
)  # fmt: skip
@pytest.mark.parametrize("form", ["table", "json", "csv"])
def test_a_file_that_is_no_bill_exits_2_and_answers_nothing(run, bill, name, said, form):
    assert run(bill, "--format", form, name=name) == (2, "", said)


def test_a_folder_and_a_file_that_is_not_there_exit_2(tmp_path):
    for name in (tmp_path, tmp_path / "bill.csv"):
        done = CliRunner().invoke(main, ["bom", str(name), "--records", str(ROOT / "parts")])
        assert (done.exit_code, done.stdout) == (2, "")


def test_a_bill_is_read_from_standard_input():
    command = [sys.executable, "-c", "from builder.cli import main; main()", "bom", "-", "--no-board"]
    for bill, code, said in (
        (f"{HEADINGS}TH1,YC2-103H,,,1\n", 0, ""),
        ("", 2, "standard input: it is empty. Export the bill again.\n"),
    ):
        done = subprocess.run(command, cwd=ROOT, input=bill, capture_output=True, text=True, check=False)
        assert (done.returncode, done.stderr) == (code, said)


def test_records_with_errors_are_shown_and_exit_1(run, tmp_path):
    shutil.copytree(ROOT / "parts" / "tarnbrook", tmp_path / "parts")
    Path("parts/broken.yaml").write_text("part: X\n")
    code, out, err = run(HEADINGS + GOOD, "--no-board", records="parts")
    assert (code, out) == (1, "")
    assert err.startswith("parts/broken.yaml:1: ")
    assert err.endswith("\nThe records have 3 errors, shown above. Correct them first.\n")
