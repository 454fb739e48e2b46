"""The Shortlist page as it is before its script fills it, and what its script is told."""

from __future__ import annotations

import datetime
import json
import re
from pathlib import Path
from typing import Any

from builder.crosschecks import CheckedCatalog
from builder.exports.packed_curves import ALPHABET, packed_curve
from builder.pages.context import Context
from builder.pages.shortlist_form import start_values
from builder.pages.shortlist_page import shortlist_data, shortlist_page
from builder.part_curve import part_curve
from builder.records import Catalog, Part, PartRecord, Source, read_catalog

DEMO = Path(__file__).parents[3] / "parts"
HOSTILE = '</script><img src=x onerror="alert(1)">'
RECORD = {
    "part": "PX-1",
    "maker": "Pellworm",
    "body": {"form": "leaded"},
    "rated": {"resistance_ohm": 1e4, "tolerance_pct": 1},
    "b_values": [{"between_c": [25, 85], "b_k": 3435, "tolerance_pct": 1}],
}


def record(**changes: Any) -> PartRecord:
    part = Part.model_validate(RECORD | changes)
    return PartRecord(part, Source(f"{part.part}.yaml", f"{part.part}.yaml", {}))


def context(catalog: Catalog) -> Context:
    curves = {one.source.file: part_curve(one) for one in catalog.parts}
    return Context(CheckedCatalog(catalog, curves, datetime.date(2026, 3, 1)))


def told(*records: PartRecord) -> tuple[dict[str, Any], list[list[Any]]]:
    """What the script is told: the lists, and the parts' rows."""
    script = shortlist_data(context(Catalog(records))).content()
    lists, rows = re.findall(r"beadroll\.shortlist(?:\.rows)? = (.*?);\n(?=beadroll|$)", script, flags=re.DOTALL)
    return json.loads(lists), json.loads(rows)


def test_page_stands_in_the_nav_is_wide_and_loads_its_data() -> None:
    page = shortlist_page(context(read_catalog(DEMO)))
    assert (page.path, page.title, page.in_nav, page.wide) == ("shortlist.html", "Shortlist", True, True)
    body = page.body()
    assert '<script src="parts/parts-data.js" defer></script><script src="shortlist-data.js" defer></script>' in body
    assert '<section id="bd-short" class="bd-short" hidden>' in body
    assert "must not be the only protection" in body


def test_fields_have_the_bounds_of_a_record() -> None:
    body = shortlist_page(context(Catalog(()))).body()
    fields = {name: text for text, name in re.findall(r'(<input name="([a-z_]+)".*?>)', body)}
    for name, low, high in (
        ("supply_v", "0.1", "1000"),
        ("limit_k", "0.001", "100"),
        ("fixed_tolerance_pct", "0", "50"),
        ("wire_ohm", "0", "10000"),
        ("range_from_c", "-273.14", "1000"),
        ("bits", "4", "32"),
        ("step_k", "0.1", "100"),
    ):
        assert f'data-low="{low}" data-high="{high}"' in fields[name], name
    assert "data-needed" in fields["supply_v"] and "data-needed" not in fields["leakage_na"]


def test_what_the_catalog_has_can_be_asked_for_and_started_from() -> None:
    body = shortlist_page(context(read_catalog(DEMO))).body()
    assert '<option value="coolbox-main/RT1">coolbox-main/RT1</option>' in body
    assert '<option value="0603">0603</option>' in body and '<option value="lug">lug</option>' in body
    assert '<input type="checkbox" name="qualification" value="UL 1434">' in body


def test_a_position_fills_the_form_with_what_its_record_states() -> None:
    places = {place.position.position: place.position for place in read_catalog(DEMO).positions}
    values = start_values(places["vial-carrier/RT2"])
    assert values["range_from_c"] == "-30" and values["parallel_ohm"] == "220000" and values["wire_ohm"] == "1.5"
    assert values["ambient_from_c"] == "" and values["reference"] == "ratiometric" and values["step_k"] == "2"
    assert values["qualification"] == ["AEC-Q200 grade 1"] and values["other_method"] == ""
    values = start_values(places["charger-power/RT2"])
    assert (values["reference"], values["reference_v"], values["reference_tolerance_pct"]) == ("own", "3", "0.5")
    assert start_values(places["charger-power/RT1"])["other_method"] == "b-value"


def test_a_row_holds_the_curve_and_what_is_asked_of_a_part() -> None:
    entry = {"state": "withdrawn", "on": "2026-01-12", "by": "us", "because": "It broke."}
    limits = {"dissipation_mw_per_k": 2, "max_power_mw": 90, "time_constant_s": 5}
    made = record(limits=limits, qualification=["UL 1434"], standing=[entry | {"only_for": ["a/RT1"]}])
    lists, (row,) = told(made)
    assert row == [packed_curve(part_curve(made)), 1, 2, 90, 5, 0, 0, "2026-01-12 (us: It broke)"]
    assert lists == {"qualifications": [["UL 1434"]], "only_for": [["a/RT1"]], "starts": []}


def test_what_a_band_lacks_is_told_with_where_it_does_without() -> None:
    bare = {"rated": {"resistance_ohm": 1e4}, "b_values": [{"between_c": [25, 85], "b_k": 3435}]}
    accuracy = [{"between_c": [0, 70], "within_k": 0.2}]
    _, rows = told(record(), record(part="PX-2", **bare), record(part="PX-3", **bare, accuracy=accuracy))
    fields = ["rated.tolerance_pct", "b_values.tolerance_pct"]
    assert [row[8:] for row in rows] == [[], [fields, []], [fields, [[0, 70]]]]


def test_hostile_text_cannot_leave_the_script_or_the_page() -> None:
    entry = {"state": "withdrawn", "on": "2026-01-12", "by": HOSTILE, "because": HOSTILE}
    made = context(Catalog((record(qualification=[HOSTILE], standing=[entry]),)))
    assert "<" not in shortlist_data(made).content()
    assert "<img" not in shortlist_page(made).body()


def test_a_curve_with_no_resistance_in_its_own_span_is_told_as_none() -> None:
    bent = {"a": 1.1e-3, "b": -2.4e-4, "c": 1e-8, "span_c": [-40, 125]}
    assert packed_curve(part_curve(record(steinhart_hart=bent))) == ""


def test_a_packed_curve_is_of_its_alphabet_and_the_same_every_time() -> None:
    curve = part_curve(record())
    assert set(packed_curve(curve)) <= set(ALPHABET)
    assert packed_curve(curve) == packed_curve(part_curve(record()))
