"""The Parts page's data and the makers' pages."""

from __future__ import annotations

import datetime
import json
import math
import re
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from builder.crosschecks import CheckedCatalog
from builder.pages.context import Context
from builder.pages.maker_page import maker_pages
from builder.pages.page import Page
from builder.pages.parts_page import curve_b, parts_data, parts_page
from builder.pages.paths import Paths
from builder.part_curve import PartCurve, part_curve
from builder.records import Catalog, read_catalog
from builder.units import resistance_text

DEMO = Path(__file__).parents[3] / "parts"
RECORD = {
    "part": "PX-1",
    "maker": "Pellworm",
    "body": {"form": "leaded"},
    "rated": {"resistance_ohm": 1e4},
    "b_values": [{"between_c": [25, 85], "b_k": 3435}],
}
HOSTILE = '</script><img src=x onerror="alert(1)">'

Write = Callable[..., Catalog]


@pytest.fixture
def written(tmp_path: Path) -> Write:
    """Read a catalog of records that differ from `RECORD` in the fields given."""

    def write(*changes: dict[str, Any]) -> Catalog:
        for i, change in enumerate(changes):
            # JSON is YAML: nothing needs a quoting of its own.
            (tmp_path / f"{i}.yaml").write_text(json.dumps(RECORD | change), "utf-8")
        catalog = read_catalog(tmp_path)
        assert len(catalog.parts) == len(changes), catalog.problems
        return catalog

    return write


def curves(catalog: Catalog) -> dict[str, PartCurve]:
    return {record.source.file: part_curve(record) for record in catalog.parts}


def context(catalog: Catalog) -> Context:
    return Context(CheckedCatalog(catalog, curves(catalog), datetime.date(2026, 1, 1)))


def script(catalog: Catalog) -> str:
    return parts_data(context(catalog)).content()


def data(catalog: Catalog) -> dict[str, Any]:
    made: dict[str, Any] = json.loads(script(catalog).split("beadroll.parts = ")[1].rstrip(";\n"))
    return made


def makers_pages(catalog: Catalog) -> list[Page]:
    return list(maker_pages(context(catalog)))


def only_b(catalog: Catalog) -> tuple[float | None, str]:
    return curve_b(part_curve(catalog.parts[0]))


def test_each_row_says_what_its_record_says() -> None:
    catalog = read_catalog(DEMO)
    sent = data(catalog)
    assert len(sent["rows"]) == len(catalog.parts)
    for row, record in zip(sent["rows"], catalog.parts, strict=True):
        part = record.part
        assert row[:2] == [part.part, part.own_number or ""]
        assert sent["makers"][row[2]][0] == part.maker
        assert sent["rated"][row[3]][:3] == [
            part.rated.resistance_ohm,
            part.rated.at_c,
            resistance_text(part.rated.resistance_ohm),
        ]
        assert sent["tolerances"][row[4]][0] == part.rated.tolerance_pct
        assert sent["bodies"][row[7]] == [part.body.form, part.body.size_code or ""]
        assert sent["ranges"][row[8]][:2] == list(part.limits.operating_c or (None, None))
        assert sent["standings"][row[9]] == (part.state() or "no standing")
        assert sent["lifecycles"][row[10]] == part.lifecycle


def test_a_rated_temperature_is_said_where_it_is_not_25_c(written: Write) -> None:
    b_at_100 = [{"between_c": [100, 25], "b_k": 3435}]
    hot = {"rated": {"resistance_ohm": 3300, "at_c": 100}, "b_values": b_at_100}
    assert data(written({}, {"part": "PX-2"} | hot))["rated"] == [
        [3300, 100, "3.3 kΩ", "at 100 °C"],
        [10000, 25, "10 kΩ", ""],
    ]


def test_b_25_85_is_the_curve_s_by_the_definition_of_the_b_value(written: Write) -> None:
    # IEC 60539-1: B = ln(R1/R2) / (1/T1 − 1/T2).
    rows = [[25, 10000], [50, 3600], [85, 1070], [100, 680]]
    by_definition_k = math.log(10000 / 1070) / (1 / 298.15 - 1 / 358.15)
    assert only_b(written({"r_t_table": {"rows": rows}})) == (round(by_definition_k), "")


def test_a_stated_b_25_85_comes_back_without_a_mark(written: Write) -> None:
    assert only_b(written({})) == (3435, "")


def test_b_25_85_from_another_pair_is_marked_as_estimated(written: Write) -> None:
    b_k, mark = only_b(written({"b_values": [{"between_c": [25, 50], "b_k": 3380}]}))
    assert mark == "estimated" and b_k is not None and 3380 < b_k < 3480


def test_b_25_85_beyond_the_curve_is_marked_as_extrapolated(written: Write) -> None:
    assert only_b(written({"r_t_table": {"rows": [[0, 30000], [25, 10000], [70, 1750]]}}))[1] == "extrapolated"


def test_b_25_85_is_left_out_where_the_curve_must_not_be_extrapolated(written: Write) -> None:
    bent = {"a": 1.129e-3, "b": 2.341e-4, "c": -1e-9, "span_c": [0, 70]}
    assert only_b(written({"steinhart_hart": bent})) == (None, "")


def test_b_25_85_is_left_out_where_a_steep_end_leads_to_no_resistance(written: Write) -> None:
    assert only_b(written({"r_t_table": {"rows": [[24, 10400], [25, 10000], [25.01, 100]]}})) == (None, "")


def test_what_a_record_says_cannot_end_the_script_or_become_html(written: Write) -> None:
    catalog = written({"part": HOSTILE, "maker": HOSTILE, "own_number": HOSTILE, "description": HOSTILE})
    assert "<" not in script(catalog)
    assert data(catalog)["rows"][0][0] == HOSTILE
    bodies = [page.body() for page in (parts_page(context(catalog)), *makers_pages(catalog))]
    assert not any("<img" in body for body in bodies)


def test_a_file_s_name_is_sent_only_where_the_number_does_not_give_it(written: Write) -> None:
    catalog = written({"part": "A/B c"}, {"part": "Ω-3"}, {"part": "index"}, {"part": "A-B-D"}, {"part": "A B D"})
    sent = {row[0]: row[12:] for row in data(catalog)["rows"]}
    assert sent["A/B c"] == []
    assert sent["Ω-3"] == ["3.html"]
    assert sent["index"] == ["index-part.html"]
    assert all(re.fullmatch(r"a-b-d-[0-9a-f]{6}\.html", sent[number][0]) for number in ("A-B-D", "A B D"))


def test_words_of_the_description_are_sent_only_where_no_column_says_them(written: Write) -> None:
    catalog = written({"description": "10 kΩ leaded thermistor, coated, by Pellworm"})
    assert data(catalog)["words"] == ["thermistor coated by"]


def test_values_are_sorted_with_missing_ones_last(written: Write) -> None:
    states = ("withdrawn", "proposed", "restricted", "approved")
    ledger = [{"standing": [{"state": s, "on": "2026-01-01", "by": "x", "because": "y"}]} for s in states]
    rated = [{"rated": {"resistance_ohm": 1e4, "tolerance_pct": pct}} for pct in (10, 1, 2)]
    limits = {"limits": {"operating_c": [-40, 125]}}
    changes = [*ledger, *rated, limits]
    sent = data(written(*({"part": f"PX-{i}"} | change for i, change in enumerate(changes))))
    assert sent["standings"] == ["approved", "restricted", "proposed", "withdrawn", "no standing"]
    assert [pct for pct, _ in sent["tolerances"]] == [1, 2, 10, None]
    assert [low for low, *_ in sent["ranges"]] == [-40, None]


def test_the_page_links_every_maker_with_the_count_of_its_parts() -> None:
    catalog = read_catalog(DEMO)
    body = parts_page(context(catalog)).body()
    makers = [record.part.maker for record in catalog.parts]
    listed = re.findall(r'<li><a href="([^"]+)">([^<]+)</a> (\d+) parts?</li>', body)
    assert {maker: int(count) for _, maker, count in listed} == {maker: makers.count(maker) for maker in makers}
    assert {f"parts/{address}" for address, *_ in listed} == {page.path for page in makers_pages(catalog)}


def test_every_part_stands_on_its_maker_s_page_and_is_linked_there() -> None:
    catalog = read_catalog(DEMO)
    linked = []
    for page in makers_pages(catalog):
        folder = page.path.rsplit("/", 1)[0]
        linked += [f"{folder}/{name}" for name in re.findall(r'<th scope="row"><a href="([^"]+)">', page.body())]
        assert not page.in_nav
    assert sorted(linked) == sorted(Paths(catalog).part(record) for record in catalog.parts)


def test_an_empty_catalog_has_a_page() -> None:
    catalog = Catalog()
    assert "<h1>Parts</h1>" in parts_page(context(catalog)).body()
    assert data(catalog)["rows"] == []
