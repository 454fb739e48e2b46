"""`swap` and `shortlist` on the demo records, run in the process."""

import json
from pathlib import Path

import pytest
from click.testing import CliRunner

from builder.cli import main
from builder.decisions import shortlist, swap
from builder.exports.shortlist_rows import shortlist_answer
from builder.exports.swap_rows import swap_answer
from builder.records import read_catalog

PARTS = Path(__file__).parents[2] / "parts"


@pytest.fixture(scope="module")
def catalog():
    return read_catalog(PARTS)


@pytest.fixture
def run():
    def command(*arguments: str):
        return CliRunner().invoke(main, [*arguments, "--records", str(PARTS)])

    return command


def position(catalog, name):
    return next(record for record in catalog.positions if record.position.position == name)


def test_swap_answers_what_the_function_gives(run, catalog):
    result = run("swap", "COOLBOX-main/rt1", "nv10-3435", "--step", "10", "--format", "json")
    found = swap(position(catalog, "coolbox-main/RT1"), catalog.part("NV10-3435"), catalog, 10)
    assert json.loads(result.stdout) == json.loads(json.dumps(swap_answer(found)))
    assert result.exit_code == 0


def test_swap_shows_the_verdict_on_top_and_the_budget_below(run):
    lines = run("swap", "coolbox-main/RT1", "YC3-103H").stdout.splitlines()
    assert lines[0] == (
        "Yarrowfield Sensors YC3-103H in place of Tarnbrook Ceramics TB3A-103F38 at coolbox-main/RT1: fits."
    )
    assert lines[1].startswith("to know  error: worst case ")
    assert any(line.startswith(" °C     code  codes/K  bias K") for line in lines)
    assert lines[-1].startswith("Codes left for telling an open sensor ")


def test_swap_as_csv_has_rows_alone_on_standard_output(run):
    result = run("swap", "coolbox-main/RT1", "YC3-103H", "--format", "csv")
    header, *rows = result.stdout.splitlines()
    assert header.startswith("t_c,code,bias_k,worst_min_k,worst_max_k,expanded_k,codes_per_k,thermistor_min_k")
    assert len(rows) == 19
    assert result.stderr.splitlines()[0].endswith(": fits.")


def test_shortlist_answers_what_the_function_gives(run, catalog):
    result = run("shortlist", "vial-carrier/RT2", "--series", "E24", "--format", "json")
    found = shortlist(position(catalog, "vial-carrier/RT2"), catalog, "E24")
    assert json.loads(result.stdout) == json.loads(json.dumps(shortlist_answer(found)))
    assert (result.exit_code, result.stderr) == (0, "")


def test_shortlist_as_a_table_names_those_that_are_out(run):
    lines = run("shortlist", "charger-dc/RT1").stdout.splitlines()
    assert lines[0].split() == ["part", "fixed", "worst", "K", "margin", "K", "within", "not", "stated"]
    assert lines[1].startswith("Tarnbrook Ceramics TB6A-222F35")
    assert "Tarnbrook Ceramics TB3A-103F38: 0603 does not stand on the footprint 1206." in lines


def test_shortlist_as_csv_has_every_part_of_the_catalog(run, catalog):
    header, *rows = run("shortlist", "charger-dc/RT1", "--format", "csv").stdout.splitlines()
    assert header == "part,fixed_ohm,worst_k,margin_k,meets_limit,missing,because"
    assert len(rows) == len(catalog.parts)


REFUSED = {
    "unknown position": (
        ("swap", "coolbox-main/RT9", "YC3-103H"),
        "coolbox-main/RT9 is not a position of the catalog. Did you mean coolbox-main/RT2?",
    ),
    "unknown part": (
        ("swap", "coolbox-main/RT1", "YC3-103X"),
        "YC3-103X is not a part of the catalog. Did you mean YC3-103H?",
    ),
    "too many rows": (
        ("swap", "coolbox-main/RT1", "YC3-103H", "--step", "0.0001"),
        "that is more than 100000 rows. Choose a larger --step.",
    ),
    "unknown series": (
        ("shortlist", "coolbox-main/RT1", "--series", "E12"),
        "Invalid value for '--series': 'E12' is not one of 'E24', 'E96'.",
    ),
    "position that is none": (("shortlist", "nowhere"), "nowhere is not a position of the catalog. Check its name."),
}


@pytest.mark.parametrize(("arguments", "message"), REFUSED.values(), ids=REFUSED)
def test_wrong_use_is_told(run, arguments, message):
    result = run(*arguments)
    assert result.exit_code == 2
    assert result.stderr.splitlines()[-1] == f"Error: {message}"
