"""A position's page shows what its record says; the list shows every position."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from small_site import LEAST_POSITION, SHEET, fact, only_position, read, rows, section

from builder.pages.cautions import CAUTION
from builder.pages.position_page import position_page

TRIPS = [
    {"name": "alarm", "at_c": -15, "when": "rising", "within_k": 1.5},
    {"name": "stop", "at_c": 60, "when": "rising"},
]


def test_the_least_possible_record_has_a_whole_page(tmp_path: Path) -> None:
    body = only_position(tmp_path)
    assert body.startswith("<h1>board/RT1</h1>")
    assert fact(body, "Limit") == "±1 K on the whole reading"
    assert fact(body, "Electronics") == "0 to 60 °C"
    assert fact(body, "Fixed resistor") == "10 kΩ, tolerance not stated"
    assert fact(body, "Supply") == "3.3 V, tolerance not stated"
    assert fact(body, "Across the thermistor") == "nothing"
    assert fact(body, "Full scale") == "4096 counts"
    assert fact(body, "Offset") == "not stated"
    assert "The firmware acts on no threshold here." in section(body, "trips")
    assert "None beyond range and limit." in section(body, "requirements")
    assert fact(body, "Wire") == "nothing"


def test_a_record_with_every_field_shows_each(tmp_path: Path) -> None:
    circuit = {
        "thermistor": "high side",
        "fixed": {"resistance_ohm": "4k7", "tolerance_pct": 0.1, "tempco_ppm_per_k": 25},
        "parallel": {"resistance_ohm": "47k", "tolerance_pct": 1},
        "wire_ohm": 0.2,
        "supply_v": 5,
        "supply_tolerance_pct": 2,
    }
    adc = {"bits": 10, "full_scale": 1023, "offset_lsb": 2, "gain_pct": 0.1, "nonlinearity_lsb": 1.5, "leakage_na": 50}
    body = only_position(
        tmp_path,
        circuit=circuit,
        adc=adc,
        reference={"volts": 2.5, "tolerance_pct": 0.5},
        ambient_c=[-10, 70],
        trips=TRIPS,
        requires={"qualification": ["Q1"], "size_code": "0603", "time_constant_max_s": 10},
        notes="keep clear of the coil",
    )
    shown = {
        "Thermistor": "high side",
        "Fixed resistor": "4.7 kΩ, ±0.1 %, ±25 ppm/K",
        "Across the thermistor": "47 kΩ, ±1 %",
        "Wire": "0.2 Ω",
        "Supply": "5 V, ±2 %",
        "Reference": "2.5 V, ±0.5 %",
        "Electronics": "−10 to 70 °C",
        "Full scale": "1023 counts",
        "Offset": "±2 LSB",
        "Gain": "±0.1 %",
        "Non-linearity": "±1.5 LSB",
        "Leakage": "±50 nA",
        "Qualification": "Q1",
        "Size code": "0603",
        "Time constant at most": "10 s",
    }
    assert {name: fact(body, name) for name in shown} == shown
    assert [row[:4] for row in rows(body, "Thresholds")] == [
        ["alarm", "−15 °C", "rising", "±1.5 K"],
        ["stop", "60 °C", "rising", "not stated: limit, ±1 K"],
    ]
    assert "keep clear of the coil" in body


@pytest.mark.parametrize(
    ("firmware", "said"),
    [
        ({"method": "curve"}, "the inverse of the curve of PX-1"),
        ({"method": "table", "step_k": 5}, "a table every 5 K made from PX-1 , straight lines between its rows"),
        ({"method": "b-value", "resistance_ohm": 1e4, "b_k": 3435}, "one B-value: 10 kΩ at 25 °C, B = 3435 K"),
        (
            {"method": "steinhart-hart", "a": 1.1292415e-3, "b": 2.341077e-4, "c": 8.775468e-8},
            "Steinhart–Hart: a = 0.0011292415, b = 0.0002341077, c = 8.775468e-08",
        ),
    ],
)
def test_how_codes_become_degrees_is_said_with_every_digit(tmp_path: Path, firmware: dict[str, Any], said: str) -> None:
    assert fact(only_position(tmp_path, firmware=firmware), "Codes become degrees by") == said


def test_a_position_with_trips_carries_the_caution(tmp_path: Path) -> None:
    assert CAUTION in only_position(tmp_path, trips=TRIPS)
    assert CAUTION not in only_position(tmp_path)


def test_the_fitted_part_shows_its_own_standing_and_an_alternate_the_one_it_has_here(tmp_path: Path) -> None:
    def entry(state: str) -> list[dict[str, Any]]:
        return [{"state": state, "on": "2026-01-01", "by": "us", "because": "good here", "document": SHEET}]

    approved = {"standing": entry("approved"), "documents": [SHEET]}
    parts = (approved, approved | {"part": "PX-2"}, {"part": "PX-3"})
    alternates = [{"part": "PX-2", "standing": [*entry("proposed"), *entry("withdrawn")]}, {"part": "PX-3"}]
    context = read(tmp_path, *parts, positions=({"alternates": alternates},))
    body = position_page(context.catalog.positions[0], context).body()
    assert rows(body, "Parts of this position") == [
        ["PX-1", "Pellworm", "10 kΩ", "fitted", "approved", "", "sheet, revision C"],
        ["PX-2", "Pellworm", "10 kΩ", "alternate", "withdrawn", "does not fit", "sheet, revision C"],
        ["PX-3", "Pellworm", "10 kΩ", "alternate", "no standing", "undecided", ""],
    ]
    assert rows(body, "Standings of PX-2 at this position") == [
        ["2026-01-01", "withdrawn", "us", "good here", "sheet, revision C"],
        ["2026-01-01", "proposed", "us", "good here", "sheet, revision C"],
    ]


def test_the_search_knows_a_position_by_its_board_and_its_parts(tmp_path: Path) -> None:
    context = read(tmp_path, positions=(LEAST_POSITION,))
    found = position_page(context.catalog.positions[0], context)
    assert (found.title, found.search_text) == ("board/RT1", "Board air PX-1")
