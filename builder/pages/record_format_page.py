"""Record format: a whole record of each kind, then every field, generated from the models."""

from __future__ import annotations

import json
import re
from functools import partial
from importlib.resources import files
from typing import Any

from builder.pages.html import Html, html, joined, link, slug, table, tag
from builder.pages.page import DataFile, Heading, Page
from builder.records import Part, Position
from builder.records.quantities import RecordModel, models_in
from builder.units import number_text

_KINDS: tuple[tuple[str, type[RecordModel]], ...] = (("part", Part), ("position", Position))


def record_format_page() -> Page:
    """The page that someone writes a record by."""
    return Page(
        path="record-format.html",
        title="Record format",
        description="How a part and a position are written: a whole record of each, and every field.",
        body=lambda: str(_body()),
        headings=tuple(Heading(f"{kind}-record", f"A {kind}") for kind, _ in _KINDS) + _READING_HEADINGS,
        search_text="record format fields YAML schema units table CSV columns how to add a part",
        in_nav=True,
        wide=False,
        made_from=(),
    )


def schema_files() -> list[DataFile]:
    """A JSON Schema of each kind of record, for editors."""
    return [DataFile(f"schema/{kind}.json", partial(schema_text, model), made_from=()) for kind, model in _KINDS]


def schema_text(model: type[RecordModel]) -> str:
    """The JSON Schema of a model."""
    schema = {"$schema": "https://json-schema.org/draft/2020-12/schema"} | model.model_json_schema()
    return json.dumps(schema, ensure_ascii=False, indent=1) + "\n"


def example_text(kind: str) -> str:
    """A whole record of a kind, to be copied."""
    return files("builder.pages").joinpath(f"example-{kind}.yaml").read_text(encoding="utf-8")


_READING_HEADINGS = (
    Heading("tables", "R–T tables"),
    Heading("reading", "How values are read"),
    Heading("editors", "Help from an editor"),
)


def _body() -> Html:
    lead = (
        "A record is one YAML file below the records folder. Copy one of the two below, change it, and let beadroll check "
        "say what is missing: every message names the line, the field, and what to do."
    )
    sections = [_kind_section(kind, model) for kind, model in _KINDS]
    return joined([tag("h1", "Record format"), tag("p", lead, class_="bd-lead"), *sections, _reading()])


def _kind_section(kind: str, model: type[RecordModel]) -> Html:
    example = tag("div", tag("pre", tag("code", example_text(kind))), class_="highlight")
    models = list(dict.fromkeys(_models_below(model)))
    return joined([tag("h2", f"A {kind}", id=f"{kind}-record"), example, *(_fields_table(kind, m) for m in models)])


def _models_below(model: type[RecordModel]) -> list[type[RecordModel]]:
    below = [found for field in model.model_fields.values() for found in models_in(field.annotation)]
    return [model, *(deep for found in below for deep in _models_below(found))]


def _fields_table(kind: str, model: type[RecordModel]) -> Html:
    properties = model.model_json_schema()["properties"]
    rows = [
        (
            tag("code", name),
            field.description,
            _kind_of(kind, properties[name]),
            "required" if field.is_required() else _default(field.default),
            tag("code", json.dumps(field.examples[0], ensure_ascii=False)) if field.examples else None,
        )
        for name, field in model.model_fields.items()
    ]
    heading = tag("h3", _words(model.__name__), id=_anchor(kind, model.__name__))
    headings = ("field", "what it says", "value", "without it", "example")
    return joined(
        [heading, tag("p", model.__doc__), table(headings, rows, caption=f"Fields: {_words(model.__name__)}")]
    )


def _kind_of(kind: str, schema: dict[str, Any]) -> Html:
    """A property's schema in words, with links to the tables of other models."""
    if "$ref" in schema:
        name = schema["$ref"].rsplit("/", 1)[-1]
        return link(_words(name), f"#{_anchor(kind, name)}")
    for union in ("anyOf", "oneOf"):
        if union in schema:
            members = [m for m in schema[union] if m.get("type") != "null"]
            return joined([_kind_of(kind, member) for member in members], " or ")
    if "enum" in schema or "const" in schema:
        return joined([tag("code", choice) for choice in schema.get("enum", [schema.get("const")])], ", ")
    if schema.get("type") == "array":
        return _list_kind(kind, schema)
    return html(_scalar_kind(schema))


def _list_kind(kind: str, schema: dict[str, Any]) -> Html:
    if "prefixItems" in schema:
        return joined(["two of: ", _kind_of(kind, schema["prefixItems"][0])])
    return joined(["list of: ", _kind_of(kind, schema["items"])])


def _scalar_kind(schema: dict[str, Any]) -> str:
    if "pattern" in schema:
        return "R-K-M code" if "K" in schema["pattern"] else "64 hex digits"
    if schema.get("format") == "date":
        return "date"
    names = {"number": "number", "integer": "whole number", "string": "text"}
    bounds = f", {number_text(schema['minimum'])} to {number_text(schema['maximum'])}" if "minimum" in schema else ""
    return names[schema["type"]] + bounds


def _default(value: Any) -> str:
    if value in (None, ()) or isinstance(value, RecordModel):
        return "left out"
    return ", ".join(value) if isinstance(value, tuple) else str(value)


def _words(model_name: str) -> str:
    """A model's name as words.

    >>> _words("SteinhartHart"), _words("RTTable"), _words("BValue")
    ('Steinhart–Hart', 'R–T table', 'B-value')
    """
    known = {"SteinhartHart": "Steinhart–Hart", "RTTable": "R–T table", "BValue": "B-value", "Adc": "ADC"}
    known |= {"BValueFirmware": "B-value firmware", "SteinhartHartFirmware": "Steinhart–Hart firmware"}
    return known.get(model_name, re.sub(r"(?<=.)([A-Z])", r" \1", model_name).capitalize())


def _anchor(kind: str, model_name: str) -> str:
    return f"{kind}-{slug(_words(model_name))}"


def _reading() -> Html:
    texts = (
        (
            "A table stands in the record (rows) or in a CSV beside it (file). The CSV's header row names the columns: "
            "t_c and r_ohm, with r_min_ohm and r_max_ohm where the maker states them, or t_c and ratio, which is the resistance "
            "over the rated resistance. Columns are separated by commas, decimals by a point; a line that begins with # "
            "is a remark. Temperatures rise or fall from row to row; resistances fall with temperature.",
        ),
        (
            "Values have their YAML 1.2 meanings: 1e4, 2.0e6 and 20e-6 are numbers; no, on, off and 10:30 are text. A part "
            'number or size code that reads as a number must be quoted: "0603". A resistance is a number in Ω or an R-K-M '
            "code (IEC 60062): 10k, 4k7, 100R. A field that is not known, or stands twice, is an error. Anchors, aliases, tags "
            "and second documents are not used.",
            "What is not stated stays unstated: a tolerance that is left out is never taken for zero.",
        ),
        (
            "Every build writes a JSON Schema for each kind of record. An editor that knows JSON Schema completes and checks "
            "a record while it is typed, once the record's first line names it: the address of this site, or the path of a "
            "site built beside the records.",
        ),
    )
    sections = [
        joined([tag("h2", heading.text, id=heading.anchor), *(tag("p", text) for text in paragraphs)])
        for heading, paragraphs in zip(_READING_HEADINGS, texts, strict=True)
    ]
    first_lines = "# yaml-language-server: $schema=../../site/schema/part.json"
    schemas = joined(
        [link("Schema of a part", "schema/part.json"), " · ", link("schema of a position", "schema/position.json")]
    )
    return joined([*sections, tag("div", tag("pre", tag("code", first_lines)), class_="highlight"), tag("p", schemas)])
