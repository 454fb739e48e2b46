"""`beadroll new`: whole conversations, what they write, and that nothing is written over or by halves.

`BEADROLL_REWRITE=1 pytest tests/unit/questions` rewrites the conversations; read the difference before trusting it.
"""

import os
import subprocess
import sys
from pathlib import Path

import click
import pytest
from click.testing import CliRunner

from builder.cli import main
from builder.questions import NotWritten, write_new
from builder.records import read_catalog
from tests.factory import PART

CONVERSATIONS = Path(__file__).parent / "conversations"
SHORT = {
    "part": ["XN4-103F"],
    "maker": ["Exemplar Ceramics"],
    "body.form": ["bead"],
    "rated.resistance_ohm": ["10k"],
    "rated.tolerance_pct": ["1"],
    "b_values[0].between_c": ["25 85"],
    "b_values[0].b_k": ["3435"],
    "b_values[0].tolerance_pct": ["1"],
    "documents[0].title": ["data sheet"],
    "documents[0].revision": ["C"],
}
TABLE = "T (°C),R (kΩ)\n0,32.65\n25,10.00\n50,3.603\n85,1.0700\n"


@pytest.fixture(autouse=True)
def folder(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    Path("parts/tarnbrook").mkdir(parents=True)
    Path("parts/tarnbrook/TB3A-103F38.yaml").write_text(PART, "utf-8")
    Path("table.csv").write_text(TABLE, "utf-8")


@pytest.fixture
def told(monkeypatch):
    """Answers by the field that is asked for, Enter to all others; the input ends where a field has no answer left."""

    def run(answers, *arguments, end_at=None):
        left = {field: list(values) for field, values in answers.items()}

        def ask(question):
            field = question.splitlines()[-1]
            if field == end_at or left.get(field) == []:
                raise click.Abort
            return left[field].pop(0) if field in left else ""

        monkeypatch.setattr("builder.commands.new_record._ask", ask)
        return CliRunner().invoke(main, ["new", "--today", "2026-06-01", *arguments])

    return run


def conversation(answers, *arguments):
    return CliRunner().invoke(main, ["new", "--today", "2026-06-01", *arguments], input=answers)


def files():
    return sorted(path.as_posix() for path in Path("parts").rglob("*") if path.is_file())


@pytest.mark.parametrize(
    ("name", "arguments"),
    [
        ("part", []),
        ("part-from-table", ["--from", "table.csv"]),
        ("part-from-table-csv", ["--from", "table.csv", "--csv"]),
        ("position", ["--position"]),
    ],
)
def test_a_conversation_goes_as_written_down(name, arguments):
    result = conversation((CONVERSATIONS / f"{name}.answers.txt").read_text("utf-8"), *arguments)
    written = CONVERSATIONS / f"{name}.txt"
    if os.environ.get("BEADROLL_REWRITE"):
        written.write_text(result.stdout, "utf-8")
    assert (result.exit_code, result.stderr) == (0, "")
    assert result.stdout == written.read_text("utf-8")


def test_the_written_record_reads_as_the_answers(told):
    assert told(SHORT).exit_code == 0
    part = read_catalog(Path("parts")).part("XN4-103F").part
    assert (part.maker, part.body.form, part.rated.resistance_ohm) == ("Exemplar Ceramics", "bead", 10000)
    assert (part.b_values[0].between_c, part.b_values[0].b_k) == ((25, 85), 3435)
    assert "resistance_ohm: 10k" in Path("parts/exemplar-ceramics/XN4-103F.yaml").read_text("utf-8")


ENDED = "\nThe answers ended before the record did. Nothing was written.\n"


@pytest.mark.parametrize("end_at", ["part", "maker", "b_values[0].b_k", "notes"])
def test_answers_that_end_early_write_nothing(told, end_at):
    before = files()
    result = told(SHORT, end_at=end_at)
    assert (result.exit_code, result.stderr) == (1, ENDED)
    assert files() == before


def test_the_end_of_the_input_is_the_end_of_the_answers():
    result = conversation("XN4-103F\n")
    assert (result.exit_code, result.stderr) == (1, ENDED)


def test_control_c_writes_nothing(monkeypatch):
    before = files()

    def interrupted(_question):
        raise KeyboardInterrupt

    monkeypatch.setattr("builder.commands.new_record._ask", interrupted)
    result = CliRunner().invoke(main, ["new"])
    assert (result.exit_code, result.stderr) == (1, ENDED)
    assert files() == before


def test_answers_that_are_not_utf_8_are_refused():
    result = CliRunner().invoke(main, ["new"], input=b"XN4\nM\xfcller\n")
    assert (result.exit_code, result.stderr) == (
        2,
        "\nThe answers are not UTF-8. Save them as UTF-8. Nothing was written.\n",
    )


def test_answers_that_are_not_utf_8_are_refused_in_the_c_locale_too():
    """There Python takes such bytes for text that it cannot write."""
    command = [sys.executable, "-c", "from builder.cli import main; main(['new'])"]
    result = subprocess.run(command, input=b"XN4\nM\xfcller\n", capture_output=True, env=os.environ | {"LC_ALL": "C"})
    assert (result.returncode, result.stderr.decode()) == (
        2,
        "\nThe answers are not UTF-8. Save them as UTF-8. Nothing was written.\n",
    )


def test_enter_ends_a_list_only_where_its_next_item_begins(monkeypatch):
    answers = SHORT | {"documents[1].title": ["app note"], "qualification[0]": ["AEC-Q200"]}
    asked = {}

    def ask(question):
        *_, text, field = question.splitlines()
        asked.setdefault(field, text)
        return answers.get(field, [""])[0]

    monkeypatch.setattr("builder.commands.new_record._ask", ask)
    assert CliRunner().invoke(main, ["new", "--today", "2026-06-01"]).exit_code == 0
    assert [field for field, text in asked.items() if text.endswith("Enter ends the list.")] == [
        "b_values[1].between_c",
        "qualification[1]",
        "documents[1].title",
        "documents[2].title",
    ]


def test_a_document_that_is_named_twice_is_told_and_asked_for_again(told):
    answers = {"documents[1].title": ["data sheet", "data sheet", ""], "documents[1].revision": ["c", "D"]}
    result = told(SHORT | answers | {"documents[2].title": [""]})
    said = "documents: data sheet, revision c stands twice. Give the newer one its own revision, or leave one."
    assert result.exit_code == 0
    assert result.stdout.splitlines().count(said) == 1


def test_a_number_that_the_catalog_has_is_refused_at_once(told):
    result = told(SHORT | {"part": ["tb3a-103f38", "XN4-103F"]})
    assert result.exit_code == 0
    said = "part: tb3a-103f38 has a record already, parts/tarnbrook/TB3A-103F38.yaml. Change that one."
    assert result.stdout.splitlines()[0] == said


@pytest.mark.parametrize("taken", ["hs-1", "tb3a-103f38"])
def test_an_own_number_that_buys_another_part_is_refused_at_once(told, taken):
    Path("parts/tarnbrook/TB3A-103F38.yaml").write_text(f"{PART}own_number: HS-1\n", "utf-8")
    result = told(SHORT | {"own_number": [taken, "HS-2"]})
    said = (
        f"own_number: {taken} is a number of Tarnbrook Ceramics TB3A-103F38 already. Give another, or leave it out; "
        "add by hand what buys either."
    )
    assert result.exit_code == 0
    assert result.stdout.splitlines()[0] == said


def test_a_file_that_is_there_is_told_as_soon_as_its_name_is_known(told):
    there = Path("parts/exemplar-ceramics/XN4-103F.yaml")
    there.parent.mkdir()
    there.write_text("broken: [", "utf-8")
    result = told(SHORT)
    said = f"maker: {there.as_posix()} is there already. Stop here and change that file, or name another with --out."
    assert said in result.stdout.splitlines()
    assert there.read_text("utf-8") == "broken: ["


def test_figures_that_check_finds_wrong_are_asked_for_again(told):
    answers = {
        "b_values[0].between_c": ["25 50", "25 85"],
        "b_values[0].b_k": ["3380", "3435"],
        "b_values[0].tolerance_pct": ["1", "1"],
        "b_values[1].between_c": ["25 85", ""],
        "b_values[1].b_k": ["4335"],
        "limits.operating_c": ["-20 85"],
    }
    result = told(SHORT | answers)
    said = (
        "b_values: B25/50 = 3380 K and B25/85 = 4335 K give no resistance that falls with temperature everywhere from "
        "−20 to 85 °C. Compare them with the data sheet."
    )
    assert result.exit_code == 0
    assert said in result.stdout.splitlines()
    assert "b_values:\n  - {between_c: [25, 85], b_k: 3435, tolerance_pct: 1}\nlimits:" in result.stdout


def test_an_approval_without_a_document_is_asked_for_again(told):
    answers = {
        "standing[0].state": ["approved", "proposed"],
        "standing[0].on": ["2026-05-01", "2026-05-01"],
        "standing[0].by": ["sensors", "sensors"],
        "standing[0].because": ["ten of a reel measured", "ten of a reel measured"],
    }
    result = told(SHORT | answers)
    assert result.exit_code == 0
    assert "state: proposed" in result.stdout and "state: approved" not in result.stdout


def test_a_part_that_nothing_gives_a_curve_is_asked_for_one(told):
    result = told(SHORT | {"b_values[0].between_c": ["", "25 85"]})
    said = "nothing says how the resistance falls with temperature. Add b_values, steinhart_hart or r_t_table."
    assert result.exit_code == 0
    assert result.stdout.splitlines().count(said) == 1


def test_two_b_values_for_one_pair_are_told_and_asked_for_again(told):
    result = told(SHORT | {"b_values[1].between_c": ["25 85", ""], "b_values[1].b_k": ["3950"]})
    said = "b_values: 3435 K and 3950 K are both stated for 25/85 °C. Compare them with the data sheet, and leave one."
    assert result.exit_code == 0
    assert said in result.stdout.splitlines()


def test_a_table_with_an_error_is_not_written(told):
    Path("table.csv").write_text("t_c,r_ohm\n24,10400\n25,10000\n25.01,100\n", "utf-8")
    before = files()
    result = told(SHORT | {"limits.operating_c": ["-20 85"]}, "--from", "table.csv")
    assert (result.exit_code, result.stderr) == (
        1,
        "The table has errors, shown above. Correct its file. Nothing was written.\n",
    )
    assert files() == before


@pytest.mark.parametrize(
    ("arguments", "error"),
    [
        (["--position", "--from", "table.csv"], "a position has no R–T table. Leave out --from or --position."),
        (["--csv"], "there is no table to read. Name its file with --from."),
        (["--unit", "kohm"], "there is no table to read. Name its file with --from."),
        (["--out", "parts/x.yml"], "parts/x.yml is no record. Name a file that ends in .yaml below parts."),
        (["--out", "x.yaml"], "x.yaml is no record. Name a file that ends in .yaml below parts."),
        (
            ["--out", "parts/tarnbrook/TB3A-103F38.yaml"],
            "parts/tarnbrook/TB3A-103F38.yaml is there already. Name another file.",
        ),
    ],
)
def test_misuse_is_refused_before_the_first_question(told, arguments, error):
    result = told(SHORT, *arguments)
    usage = "Usage: main new [OPTIONS]\nTry 'main new --help' for help.\n\n"
    assert (result.exit_code, result.stdout, result.stderr) == (2, "", f"{usage}Error: {error}\n")


def test_out_names_the_file(told):
    assert told(SHORT, "--out", "parts/deep/here.yaml").exit_code == 0
    assert "parts/deep/here.yaml" in files()


def test_a_table_that_cannot_be_read_is_refused_before_the_first_question(told):
    Path("table.csv").write_text("nothing\n", "utf-8")
    result = told(SHORT, "--from", "table.csv")
    assert (result.exit_code, result.stdout) == (1, "")
    assert result.stderr.startswith("table.csv:1: ")


def test_a_file_that_appears_meanwhile_is_kept_and_nothing_of_ours_stays():
    first, second = Path("parts/new/a.csv"), Path("parts/tarnbrook/TB3A-103F38.yaml")
    before = files()
    with pytest.raises(NotWritten) as refused:
        write_new({first: "t_c,r_ohm\n", second: "part: other\n"})
    said = f"{second} is there already. Change that file, or give another with --out. Nothing was written."
    assert str(refused.value) == said
    assert files() == before
    assert second.read_text("utf-8") == PART


def test_a_folder_that_cannot_be_written_to_is_an_error_and_not_a_crash():
    with pytest.raises(NotWritten) as refused:
        write_new({Path("table.csv/x.yaml"): ""})
    assert str(refused.value).startswith("table.csv/x.yaml ")


def test_a_new_file_is_readable_as_any_other():
    write_new({Path("parts/x.yaml"): "a\n"})
    Path("parts/y.yaml").write_text("a\n", "utf-8")
    assert Path("parts/x.yaml").stat().st_mode == Path("parts/y.yaml").stat().st_mode
