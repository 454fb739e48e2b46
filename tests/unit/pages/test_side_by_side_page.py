"""The Side by side page as it is before its script fills it, and the parts' data for it."""

from __future__ import annotations

import datetime
import json
import re
from pathlib import Path
from typing import Any

import pytest

from builder.crosschecks import CheckedCatalog
from builder.pages.context import Context
from builder.pages.side_by_side_page import curve_file, side_by_side_address, side_by_side_page
from builder.part_curve import part_curve
from builder.records import Catalog, PartRecord, read_catalog

DEMO = Path(__file__).parents[3] / "parts"
RECORD = {
    "part": "PX-1",
    "maker": "Pellworm",
    "body": {"form": "leaded"},
    "rated": {"resistance_ohm": 1e4},
    "b_values": [{"between_c": [25, 85], "b_k": 3435}],
}
HOSTILE = '</script><img src=x onerror="alert(1)">'


def context(catalog: Catalog) -> Context:
    curves = {record.source.file: part_curve(record) for record in catalog.parts}
    return Context(CheckedCatalog(catalog, curves, datetime.date(2026, 3, 1)))


def written(folder: Path, **changes: Any) -> tuple[PartRecord, Context]:
    (folder / "x.yaml").write_text(json.dumps(RECORD | changes), "utf-8")
    catalog = read_catalog(folder)
    return catalog.parts[0], context(catalog)


def labels() -> list[str]:
    """The rows of the page's table of differences."""
    return re.findall(r'<th scope="row">(.*?)</th>', side_by_side_page().body())


def facts(record: PartRecord, where: Context) -> dict[str, str]:
    script = curve_file(record, where).content()
    told = json.loads("[" + script.removeprefix("beadroll.curve(").removesuffix(");\n") + "]")[1]["facts"]
    return dict(zip(labels(), told, strict=True))


def test_page_stands_in_the_nav_and_is_found() -> None:
    page = side_by_side_page()
    assert (page.path, page.title, page.in_nav) == ("side-by-side.html", "Side by side", True)
    assert page.search_text
    assert page.body().startswith("<h1>Side by side</h1>")


def test_without_javascript_it_says_what_it_needs_and_where_the_tables_are() -> None:
    said = re.findall(r'<p id="bd-side-needs">(.*?)</p>', side_by_side_page().body())
    assert len(said) == 1
    assert "allow JavaScript" in said[0] and 'href="parts/index.html"' in said[0]


def test_it_cautions_that_agreement_is_not_interchangeability() -> None:
    caution = 'are not thereby interchangeable: see <a href="cautions.html">Cautions</a>.'
    assert caution in side_by_side_page().body()


def test_what_the_script_fills_is_hidden_until_it_does_and_loads_the_list_of_parts() -> None:
    body = side_by_side_page().body()
    assert '<section id="bd-side" class="bd-side" hidden>' in body
    assert '<script src="parts/parts-data.js" defer></script>' in body


def test_a_parts_data_stand_beside_its_page_under_the_pages_name(tmp_path: Path) -> None:
    record, where = written(tmp_path)
    file = curve_file(record, where)
    assert file.path == "parts/pellworm/px-1.js"
    assert file.content().startswith('beadroll.curve("pellworm/px-1",{')


def test_facts_say_all_that_the_record_states(tmp_path: Path) -> None:
    record, where = written(
        tmp_path,
        own_number="HS-1",
        body={"form": "chip", "size_code": "0603"},
        rated={"resistance_ohm": "47k", "at_c": 20, "tolerance_pct": 0.5},
        limits={
            "operating_c": [-40, 125],
            "max_power_mw": 100,
            "dissipation_mw_per_k": 1.5,
            "time_constant_s": 4,
            "medium": "still air",
        },
        qualification=["AEC-Q200 grade 1", "UL 1434"],
        lifecycle="last time buy",
        standing=[{"state": "approved", "on": "2026-01-12", "by": "us", "because": "it fits"}],
    )
    assert facts(record, where) == {
        "Maker": "Pellworm",
        "Own number": "HS-1",
        "Standing": "approved",
        "Lifecycle": "last time buy",
        "Rated resistance": "47 kΩ at 20 °C",
        "Tolerance": "±0.5 %",
        "B25/85 of the curve, K": "3435 estimated",
        "Curve made from": "one B-value (estimate)",
        "Curve known": "−40 to 125 °C",
        "Body": "chip",
        "Size code": "0603",
        "Operating range": "−40 to 125 °C",
        "Largest power": "100 mW",
        "Dissipation factor": "1.5 mW/K",
        "Time constant": "4 s",
        "Medium of these two": "still air",
        "Qualification": "AEC-Q200 grade 1, UL 1434",
    }


def test_what_a_record_leaves_out_is_said_to_be_not_stated(tmp_path: Path) -> None:
    told = facts(*written(tmp_path))
    left_out = {name for name, value in told.items() if value == "not stated"}
    assert left_out == {
        "Own number",
        "Tolerance",
        "Operating range",
        "Largest power",
        "Dissipation factor",
        "Time constant",
        "Medium of these two",
        "Qualification",
    }
    assert (told["Standing"], told["Size code"]) == ("no standing", "none")


def test_hostile_text_cannot_leave_the_script(tmp_path: Path) -> None:
    record, where = written(tmp_path, maker=HOSTILE, own_number=HOSTILE)
    assert "<" not in curve_file(record, where).content()
    assert facts(record, where)["Own number"] == HOSTILE


def test_an_address_names_the_reference_and_all_parts_in_their_order() -> None:
    where = context(read_catalog(DEMO))
    first, second = (where.catalog.part(number) for number in ("TB3A-103F38", "NV10-3435"))
    assert side_by_side_address(first, (second,), where) == (
        "side-by-side.html#reference=tarnbrook-ceramics/tb3a-103f38"
        "&parts=tarnbrook-ceramics/tb3a-103f38,nordvell-elements/nv10-3435"
    )


@pytest.mark.parametrize("basis", ["table", "steinhart-hart", "b-values", "b-value"])
def test_every_source_of_a_curve_occurs_in_the_demo_and_is_named(basis: str) -> None:
    where = context(read_catalog(DEMO))
    record = next(r for r in where.catalog.parts if where.curve(r).curve.basis == basis)
    names = {"table": "R–T table", "steinhart-hart": "Steinhart–Hart coefficients", "b-values": "B-values (estimate)"}
    assert facts(record, where)["Curve made from"] == names.get(basis, "one B-value (estimate)")
