"""The home page counts, says what needs attention, and what was decided last."""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any

import pytest
from small_site import SHEET, read, rows, section, text

from builder.pages.home_page import home_page

DOCUMENTED = {
    "documents": [{"title": "sheet"}],
    "rated": {"resistance_ohm": 1e4, "tolerance_pct": 1},
    "b_values": [{"between_c": [25, 85], "b_k": 3435, "tolerance_pct": 1}],
}


def entry(state: str, on: str, because: str = "out of stock") -> dict[str, Any]:
    return {"state": state, "on": on, "by": "us", "because": because, "document": SHEET}


def test_parts_are_counted_by_the_standing_that_holds(tmp_path: Path) -> None:
    moved = [entry("approved", "2026-01-01"), entry("withdrawn", "2026-02-01")]
    ledgers = {"PX-2": moved, "PX-3": moved[:1], "PX-4": moved[:1]}
    parts = ({}, *({"part": name, "standing": own, "documents": [SHEET]} for name, own in ledgers.items()))
    body = home_page(read(tmp_path, *parts, positions=({},))).body()
    tiles = re.findall(r'<li><a href="([^"]+)"><b>(\d+)</b> (\w+)</a></li>', body)
    assert [(int(n), name) for _, n, name in tiles] == [
        (4, "parts"), (2, "approved"), (0, "restricted"), (0, "proposed"), (1, "withdrawn"), (1, "positions"),
    ]  # fmt: skip
    assert tiles[1][0] == "parts/index.html#standing=approved"


def test_every_warning_stands_there_with_its_record_and_its_rule(tmp_path: Path) -> None:
    body = home_page(read(tmp_path, DOCUMENTED | {"documents": []})).body()
    (row,) = rows(body, "Found: 1 warning")
    assert row[:2] == ["PX-1", "documents"] and row[3] == "document-missing"
    assert 'href="parts/pellworm/px-1.html"' in body and 'href="checks/document-missing.html"' in body


def test_a_catalog_without_doubts_says_so(tmp_path: Path) -> None:
    said = text(section(home_page(read(tmp_path, DOCUMENTED)).body(), "attention"))
    assert said == "Needs attention Nothing: every record passes every check without a warning, and no review is due."


def test_beyond_fifty_warnings_the_rest_is_counted(tmp_path: Path) -> None:
    parts = [DOCUMENTED | {"part": f"PX-{i}", "documents": []} for i in range(53)]
    attention = section(home_page(read(tmp_path, *parts)).body(), "attention")
    assert len(rows(attention, "Found")) == 50
    assert "And 3 more warnings; beadroll check shows all." in attention


def test_the_ten_newest_standings_of_parts_and_alternates_are_shown_the_newest_first(tmp_path: Path) -> None:
    own = [entry("proposed", f"2026-01-{day:02}") for day in range(1, 12)]
    at = {"alternates": [{"part": "PX-2", "standing": [entry("approved", "2026-01-08", "fits here")]}]}
    parts = ({"standing": own, "documents": [SHEET]}, {"part": "PX-2", "documents": [SHEET]})
    found = rows(home_page(read(tmp_path, *parts, positions=(at,))).body(), "The latest decisions")
    days = [row[0] for row in found]
    assert len(days) == 10 and days == sorted(days, reverse=True) and days[0] == "2026-01-11"
    assert ["2026-01-08", "PX-2", "board/RT1", "approved", "us", "fits here"] in found


def test_makers_are_counted_and_linked(tmp_path: Path) -> None:
    parts = ({}, {"part": "PX-2"}, {"part": "Q-1", "maker": "Amrum"})
    body = home_page(read(tmp_path, *parts)).body()
    assert rows(body, "Parts by maker") == [["Amrum", "1"], ["Pellworm", "2"]]
    assert 'href="parts/amrum/index.html"' in body


@pytest.mark.parametrize("about", ["", "A demonstration: nothing <real>."])
def test_what_the_catalog_is_stands_on_top_where_it_is_told(tmp_path: Path, about: str) -> None:
    head = home_page(read(tmp_path, about=about)).body().partition("<ul")[0]
    assert ("bd-note" in head) == bool(about)
    assert about in text(head)
