"""Record format: every field of every model, and examples that work as they stand."""

from __future__ import annotations

import datetime
import json
import re
from pathlib import Path
from typing import Any

import jsonschema
import pytest
from small_site import rows, text

from builder.crosschecks import checked_catalog
from builder.pages.record_format_page import example_text, record_format_page, schema_files
from builder.records import Part, Position
from builder.records.quantities import RecordModel, models_in
from builder.records.yaml_text import read_yaml

KINDS = {"part": Part, "position": Position}


def models_below(model: type[RecordModel]) -> set[type[RecordModel]]:
    found = {model}
    for field in model.model_fields.values():
        found |= {deep for below in models_in(field.annotation) for deep in models_below(below)}
    return found


@pytest.mark.parametrize("kind", KINDS)
def test_every_field_of_every_model_is_listed_with_what_it_says(kind: str) -> None:
    body = record_format_page().body()
    here = body.partition(f'<h2 id="{kind}-record">')[2].partition("<h2")[0]
    listed = {
        tuple(row[:2]) for caption in set(re.findall(r"<caption>(.*?)</caption>", here)) for row in rows(here, caption)
    }
    fields = {
        (name, field.description) for model in models_below(KINDS[kind]) for name, field in model.model_fields.items()
    }
    assert all(description for _, description in fields)
    assert listed == fields


def test_every_link_within_the_page_leads_to_a_model_s_fields() -> None:
    body = record_format_page().body()
    ids = re.findall(r' id="([^"]+)"', body)
    assert len(set(ids)) == len(ids)
    assert set(re.findall(r'href="#([^"]+)"', body)) <= set(ids)


def test_required_fields_are_told() -> None:
    listed = {row[0]: row[3] for row in rows(record_format_page().body(), "Fields: Part<")}
    required = {name for name, field in Part.model_fields.items() if field.is_required()}
    assert {name for name, without in listed.items() if without == "required"} == required
    assert listed["lifecycle"] == "active" and listed["notes"] == "left out"


def test_the_examples_pass_the_checker_together(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    folder = tmp_path / "parts"
    folder.mkdir()
    # The alternate that the position names is another part: the example with another number.
    part = example_text("part")
    alternate = part.replace("part: TB3A-103F38 ", "part: NV10-3435 ").replace("HS-10473", "HS-2")
    for name, record in {"a": part, "b": alternate, "c": example_text("position")}.items():
        (folder / f"{name}.yaml").write_text(record, "utf-8")
    checked = checked_catalog(Path("parts"), today=datetime.date(2026, 6, 1))
    assert [str(problem) for problem in checked.problems] == []
    assert len(checked.catalog.parts) == 2 and len(checked.catalog.positions) == 1


@pytest.mark.parametrize("kind", KINDS)
def test_the_page_shows_the_examples_letter_for_letter(kind: str) -> None:
    assert " ".join(example_text(kind).split()) in text(record_format_page().body())


def schema(kind: str) -> dict[str, Any]:
    (file,) = [file for file in schema_files() if file.path == f"schema/{kind}.json"]
    made: dict[str, Any] = json.loads(file.content())
    return made


def example(kind: str) -> Any:
    """The example as JSON has it: days are text. YAML 1.1 would read `on` as true."""
    return json.loads(json.dumps(read_yaml(example_text(kind)).value, default=str))


@pytest.mark.parametrize("kind", KINDS)
def test_the_schema_is_valid_and_takes_the_example(kind: str) -> None:
    jsonschema.Draft202012Validator.check_schema(schema(kind))
    jsonschema.Draft202012Validator(schema(kind)).validate(example(kind))


@pytest.mark.parametrize(("kind", "field"), [("part", "maker"), ("position", "adc")])
def test_the_schema_refuses_an_unknown_and_a_missing_field(kind: str, field: str) -> None:
    check = jsonschema.Draft202012Validator(schema(kind))
    record = example(kind)
    assert not check.is_valid(record | {"colour": "red"})
    assert not check.is_valid({name: value for name, value in record.items() if name != field})


def test_a_resistance_may_be_a_number_or_a_code_in_the_schema() -> None:
    check = jsonschema.Draft202012Validator(schema("part"))
    record = example("part")
    for value, valid in {"10k": True, "4k7": True, 1e4: True, "10 kOhm": False}.items():
        assert check.is_valid(record | {"rated": {"resistance_ohm": value}}) == valid, value
