"""Every demo record: it reads without an error, knows its lines, and its schema agrees with the reader."""

from pathlib import Path

import pytest
from factory import POSITION, WITH_CSV, changed, part, position
from jsonschema import Draft202012Validator

from builder.problems import errors
from builder.records import Part, Position, read_catalog
from builder.records.yaml_text import read_yaml

PARTS = Path(__file__).parents[2] / "parts"
RECORDS = sorted(path.relative_to(PARTS).as_posix() for path in PARTS.rglob("*.yaml"))
SCHEMAS = {"part": Part.model_json_schema(), "position": Position.model_json_schema()}


def schema_errors(text: str) -> list[str]:
    """What a general validator says about a record, by the JSON Schema alone."""
    value = read_yaml(text).value
    validator = Draft202012Validator(SCHEMAS["part" if "part" in value else "position"])
    return [error.message for error in validator.iter_errors(value)]


@pytest.fixture(scope="module")
def catalog():
    return read_catalog(PARTS)


def test_there_are_demo_records():
    assert len(RECORDS) > 50


@pytest.mark.parametrize("kind", SCHEMAS)
def test_the_schema_is_a_valid_one(kind):
    Draft202012Validator.check_schema(SCHEMAS[kind])


@pytest.mark.parametrize("name", RECORDS)
def test_a_demo_record_reads_without_a_problem(catalog, name):
    read = [record.source.below for record in (*catalog.parts, *catalog.positions)]
    assert name in read
    assert [str(p) for p in errors(catalog.problems) if p.file.endswith(name)] == []


@pytest.mark.parametrize("name", RECORDS)
def test_a_demo_record_satisfies_the_schema_that_editors_check_with(name):
    assert schema_errors((PARTS / name).read_text(encoding="utf-8")) == []


def test_no_demo_record_has_an_error(catalog):
    assert [str(problem) for problem in catalog.problems] == []


def test_every_demo_table_is_used_and_falls(catalog):
    tables = {record.table.file for record in catalog.parts if record.table is not None}
    assert {path.as_posix() for path in PARTS.rglob("*.csv")} <= tables


def test_every_part_goes_by_its_full_name_and_its_own_number(catalog):
    for record in catalog.parts:
        assert catalog.part(record.name) is record
        if record.part.own_number:
            assert catalog.part(record.part.own_number) is record


def test_every_line_noted_is_where_the_field_stands(catalog):
    for record in catalog.parts:
        lines = (PARTS / record.source.below).read_text(encoding="utf-8").splitlines()
        for path, line in record.source.lines.items():
            assert isinstance(path[-1], int) or str(path[-1]) in lines[line - 1]


@pytest.mark.parametrize(
    "name", ["nordvell/NV10-3435.yaml", "tarnbrook/TB3A-103F38.yaml", "boards/coolbox-probe/RT1.yaml"]
)
@pytest.mark.parametrize("line_end", ["\r\n", "\r"])
def test_line_ends_change_nothing(name, line_end):
    text = (PARTS / name).read_text(encoding="utf-8")
    assert read_yaml(text.replace("\n", line_end)) == read_yaml(text)


BROKEN = {
    "unknown field": part("at_c", "atc"),
    "missing field": part("maker: Tarnbrook Ceramics\n", ""),
    "text for a number": part("b_k: 3435", "b_k: 3435 K"),
    "number for text": part("TB3A-103F38", "12345"),
    "out of bounds": part("b_k: 3435", "b_k: 34350"),
    "no code": part("10k", "10 kΩ"),
    "letter alone": part("10k", "k"),
    "wrong choice": part("form: chip", "form: chp"),
    "list too short": part("[25, 85]", "[25]"),
    "list too long": part("[25, 85]", "[25, 85, 100]"),
    "no digits of a hash": part("revision: C", "sha256: abc"),
    "unknown column": WITH_CSV.replace("file: table.csv", "file: table.csv, columns: [t, r]"),
    "unknown method": position("method: table", "method: magic"),
    "field of another method": position("step_k: 5", "b_k: 3435"),
    "no reference": position("ratiometric", "2.5"),
    "fraction of a bit": changed(POSITION, "bits: 12", "bits: 12.5"),
}


@pytest.mark.parametrize("text", BROKEN.values(), ids=BROKEN)
def test_an_editor_sees_what_the_reader_refuses(messages, text):
    assert schema_errors(text)
    assert messages(text)


@pytest.mark.parametrize("text", [part(), WITH_CSV, POSITION, part("10k", "4k7"), part("10k", "R47"), position("ratiometric", "{volts: 2.5}")])  # fmt: skip
def test_an_editor_accepts_what_the_reader_accepts(text):
    assert schema_errors(text) == []
