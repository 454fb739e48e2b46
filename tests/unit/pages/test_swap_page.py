"""The review of a swap shows what decides, and its figures are the budgets'."""

from __future__ import annotations

import csv
import io
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from small_site import LEAST_POSITION, read, rows, section, text

from builder.circuit import budget, thermistor
from builder.pages.cautions import CAUTION
from builder.pages.context import Context
from builder.pages.swap_page import swap_csv, swap_page
from builder.part_curve import part_curve
from builder.records import PartRecord, PositionRecord

WHOLE = {
    "rated": {"resistance_ohm": 1e4, "tolerance_pct": 0.5},
    "b_values": [{"between_c": [25, 85], "b_k": 3435, "tolerance_pct": 0.5}],
    "shape": "plain",
    "limits": {"operating_c": [-40, 125], "dissipation_mw_per_k": 2},
}
OTHER_B = {**WHOLE, "part": "PX-2", "b_values": [{"between_c": [25, 85], "b_k": 3600, "tolerance_pct": 0.5}]}
CIRCUIT = {
    "thermistor": "low side",
    "fixed": {"resistance_ohm": 1e4, "tolerance_pct": 0.1, "tempco_ppm_per_k": 25},
    "supply_v": 3.3,
    "supply_tolerance_pct": 1,
}
ADC = {"bits": 12, "offset_lsb": 2, "gain_pct": 0.1, "nonlinearity_lsb": 1, "leakage_na": 10}
TRIPS = [{"name": "alarm", "at_c": 50, "when": "rising", "within_k": 1.5}]


def reviewed(folder: Path, *parts: dict[str, Any], **fields: Any) -> tuple[Context, PositionRecord, PartRecord]:
    place = {"circuit": CIRCUIT, "adc": ADC, "alternates": [{"part": "PX-2"}], "trips": TRIPS} | fields
    context = read(folder, *(parts or (WHOLE, OTHER_B)), positions=(place,))
    return context, context.catalog.positions[0], context.catalog.part("PX-2")


def test_the_verdict_stands_on_top_with_its_meaning(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path)
    body = text(swap_page(place, part, context).body())
    swap = context.swap(place, part)
    assert swap.verdict == "fits with new firmware"
    start = "PX-2 in place of PX-1 fits with new firmware With the firmware in the field it does not meet the limit"
    assert body.startswith(start)


def test_every_reason_stands_in_the_group_that_it_belongs_to(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path)
    shown = section(swap_page(place, part, context).body(), "reasons")
    groups = dict(zip(("Against", "To know"), shown.split("<h3>")[1:], strict=True))
    for reason in context.swap(place, part).reasons:
        assert f"{reason.about}: {reason.message}" in text(groups["Against" if reason.against else "To know"])


def test_the_rows_are_the_budgets_of_both_parts_with_the_old_firmware(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path)
    rows_of = list(csv.DictReader(io.StringIO(swap_csv(place, part, context).content())))
    field = part_curve(context.catalog.part("PX-1"))
    for name, fitted in (("before", "PX-1"), ("after", "PX-2")):
        found = budget(place.position, thermistor(context.catalog.part(fitted)), field).rows
        expected = {f"{name}_k": found.bias_k, f"{name}_min_k": found.worst_min_k, f"{name}_max_k": found.worst_max_k}
        for column, values_k in expected.items():
            np.testing.assert_allclose([float(row[column]) for row in rows_of], values_k, rtol=1e-8)
    assert [float(row["t_c"]) for row in rows_of] == list(range(0, 61, 5))


def test_a_long_range_is_thinned_on_the_page_and_keeps_both_ends(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path, range_c=[-37.5, 85])
    shown = rows(swap_page(place, part, context).body(), "Reading minus true temperature")
    assert len(shown) <= 15
    assert (shown[0][0], shown[-1][0]) == ("−37.5", "85")


def test_trips_are_shown_before_and_after(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path)
    before, after = (found.trips[0] for found in (context.swap(place, part).before, context.swap(place, part).after))
    (row,) = rows(swap_page(place, part, context).body(), "True temperatures between which")
    assert row[:2] == ["alarm", "50 °C"]
    assert row[2].startswith(f"{before.acts_from_c:.2f} to ") and row[3].startswith(f"{after.acts_from_c:.2f} to ")
    assert row[4] == "too far off"
    assert "before acts between" in section(swap_page(place, part, context).body(), "trips")


def test_facts_that_differ_are_said_to(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path)
    facts = {row[0]: row[1:] for row in rows(swap_page(place, part, context).body(), "What the records state")}
    assert facts["B25/85 of the curve, K"] == ["3435", "3600", "differs"]
    assert facts["Rated resistance"] == ["10 kΩ at 25 °C", "10 kΩ at 25 °C", ""]


def test_documents_with_their_revisions_and_both_ledgers_are_listed(tmp_path: Path) -> None:
    documents = [{"title": "data sheet", "revision": "B", "dated": "2025-01-02"}]
    entry = {"state": "proposed", "on": "2026-01-01", "by": "us", "because": "short of parts"}
    context, place, part = reviewed(
        tmp_path,
        WHOLE,
        {**OTHER_B, "documents": documents, "standing": [entry | {"because": "new here"}]},
        alternates=[{"part": "PX-2", "standing": [entry]}],
    )
    body = swap_page(place, part, context).body()
    assert rows(body, "Documents that the figures") == [["PX-2", "data sheet", "B", "2025-01-02"]]
    assert rows(body, "Standings of PX-2 at board/RT1")[0][:4] == ["2026-01-01", "proposed", "us", "short of parts"]
    assert rows(body, "Standings of PX-2 itself")[0][:4] == ["2026-01-01", "proposed", "us", "new here"]


def test_an_undecided_alternate_says_that_nobody_has_decided(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path)
    shown = text(section(swap_page(place, part, context).body(), "documents"))
    assert "Nobody has decided about PX-2 at board/RT1 yet." in shown


@pytest.mark.parametrize("trips", [[], TRIPS])
def test_every_review_warns_and_has_lines_to_sign(tmp_path: Path, trips: list[dict[str, Any]]) -> None:
    context, place, part = reviewed(tmp_path, trips=trips)
    body = swap_page(place, part, context).body()
    assert CAUTION in text(section(body, "cautions"))
    signed_by = ("Prepared", "Checked", "Approved")
    assert rows(body, "PX-2 at board/RT1") == [[role, "", "", ""] for role in signed_by]


def test_a_review_is_made_from_the_records_it_shows(tmp_path: Path) -> None:
    firmware = {"method": "curve", "part": "PX-3"}
    context, place, part = reviewed(tmp_path, WHOLE, OTHER_B, {"part": "PX-3"}, {"part": "PX-4"}, firmware=firmware)
    shown = [place, part, context.catalog.part("PX-1"), context.catalog.part("PX-3")]
    assert swap_page(place, part, context).made_from == tuple(map(context.digest, shown))


def test_a_review_stands_below_its_position(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path)
    page = swap_page(place, part, context)
    assert (page.path, page.record) == ("positions/board-rt1/pellworm/px-2.html", place.source.below)
    assert LEAST_POSITION["position"] in page.title


def test_a_trip_that_some_boards_miss_is_said_in_words(tmp_path: Path) -> None:
    context, place, part = reviewed(tmp_path, trips=[TRIPS[0] | {"at_c": -30}], reference={"volts": 2.0})
    (row,) = rows(swap_page(place, part, context).body(), "True temperatures between")
    assert row[2:] == ["not on every board", "not on every board", "too far off"]
