"""Trips on a temperature line: settings, intervals and what is allowed stand where the figures say."""

from __future__ import annotations

import re
from pathlib import Path
from xml.etree import ElementTree

import numpy as np
import pytest
from circuit_records import plain_thermistor, real_position

from builder.circuit import budget
from builder.pages.figures.scales import WIDTH
from builder.pages.figures.trips import LEFT, RIGHT, TripInterval, TripRow, trip_rows, trips_line

ASSETS = Path(__file__).parents[3] / "builder" / "assets"
NAN = float("nan")
ROWS = [
    TripRow("alarm", -15.0, "rising", 1.5, (TripInterval("", -15.8, -14.3, True),)),
    TripRow("stop", 60.0, "falling", 2.0, (TripInterval("", 57.1, 61.2, False),)),
]
RANGE_C = (-30.0, 70.0)
# The line's ends for these: whole ticks about the range; the magnified scale for at most 2.9 K off.
T_LOW, T_HIGH, LENS_K = -50.0, 75.0, 3.0


def styled(figure: str, style: str) -> list[str]:
    root = ElementTree.fromstring(figure).find("svg")
    assert root is not None
    return [path.get("d", "") for path in root.iter("path") if style in path.get("class", "").split()]


def texts(figure: str) -> list[str]:
    return [element.text or "" for element in ElementTree.fromstring(figure).iter("text")]


def lens_x(off_k: float) -> float:
    return LEFT + (off_k + LENS_K) / (2 * LENS_K) * (RIGHT - LEFT)


def line_x(t_c: float) -> float:
    return LEFT + (t_c - T_LOW) / (T_HIGH - T_LOW) * (WIDTH - 30 - LEFT)


def test_a_bar_runs_over_its_interval_and_the_band_over_what_is_allowed() -> None:
    figure = trips_line(ROWS, RANGE_C)
    for d, row in zip(styled(figure, "bdt-bar")[:2], ROWS, strict=True):
        start, end = (float(x) for x in re.findall(r"^M([\d.]+) [\d.]+H([\d.]+)", d)[0])
        span = row.intervals[0]
        expected = lens_x(span.acts_from_c - row.at_c), lens_x(span.acts_to_c - row.at_c)
        np.testing.assert_allclose((start, end), expected, rtol=0, atol=0.051)
    for d, row in zip(styled(figure, "bdt-allowed")[:2], ROWS, strict=True):
        start, end = (float(x) for x in re.findall(r"^M([\d.]+) \d+H([\d.]+)", d)[0])
        np.testing.assert_allclose((start, end), (lens_x(-row.within_k), lens_x(row.within_k)), rtol=0, atol=0.051)


def test_settings_and_range_stand_on_the_temperature_line() -> None:
    figure = trips_line(ROWS, RANGE_C)
    (settings,) = styled(figure, "bdt-setting")
    xs = [float(x) for x in re.findall(r"M([\d.]+) ", settings)]
    np.testing.assert_allclose(xs, [line_x(-15.0), line_x(60.0)], rtol=0, atol=0.051)
    ends = [float(x) for x in re.findall(r"[MH]([\d.]+)", styled(figure, "bdt-range")[0])]
    np.testing.assert_allclose(ends, [line_x(-30.0), line_x(70.0)], rtol=0, atol=0.051)


def test_words_say_what_the_colours_do_not() -> None:
    undecided = TripRow("hot", 30.0, "rising", 1.0, (TripInterval("", 29.5, 30.5, None),))
    shown = texts(trips_line([*ROWS, undecided], RANGE_C))
    assert [text for text in shown if text in ("ok", "too far off", "undecided")] == ["ok", "too far off", "undecided"]
    assert "2 stop, falling at 60 °C" in shown


def test_intervals_before_and_after_stand_below_each_other_and_are_named() -> None:
    spans = (TripInterval("before", 59.0, 61.0, True), TripInterval("after", 57.0, 58.5, False))
    figure = trips_line([TripRow("stop", 60.0, "rising", 2.0, spans)], RANGE_C)
    first, second = (float(re.findall(r"^M[\d.]+ ([\d.]+)H", d)[0]) for d in styled(figure, "bdt-bar")[:2])
    assert second - first == 26
    names = [e for e in ElementTree.fromstring(figure).iter("text") if e.text in ("before", "after")]
    assert [(e.text, float(e.get("y", ""))) for e in names] == [("before", first), ("after", second)]
    assert (
        "<desc>stop, 60 °C rising, allowed ±2 K: before acts between 59 °C and 61 °C, ok; "
        "after acts between 57 °C and 58.5 °C, too far off.</desc>" in figure
    )


def test_a_trip_that_does_not_act_on_every_board_has_no_bar_and_breaks_nothing() -> None:
    row = TripRow("never", 60.0, "rising", 2.0, (TripInterval("", 59.0, NAN, False),))
    figure = trips_line([row], RANGE_C)
    assert len(styled(figure, "bdt-bar")) == 0
    assert "too far off" in texts(figure) and "nan" not in figure


@pytest.mark.parametrize("off_k", [1e-4, 35.0])
def test_however_small_or_large_an_interval_is_it_stays_inside_the_picture(off_k: float) -> None:
    row = TripRow("x", 60.0, "rising", 1e-3, (TripInterval("", 60 - off_k, 60 + off_k, False),))
    (bar, *_) = styled(trips_line([row], RANGE_C), "bdt-bar")
    assert all(LEFT <= float(x) <= RIGHT for x in re.findall(r"[MH]([\d.]+)", bar))


def test_numbers_of_trips_close_together_do_not_touch() -> None:
    row = ROWS[0]
    figure = trips_line([row, row, row], RANGE_C)
    xs = [float(x) for x in re.findall(r'<text x="([\d.]+)" y="28">', figure)]
    assert len(xs) == 3 and min(np.diff(xs)) >= 16


def test_names_are_escaped_and_every_class_is_in_the_style_sheets() -> None:
    figure = trips_line([TripRow("<i>&", 0.0, "rising", 1.0, ROWS[0].intervals)], RANGE_C)
    assert "1 <i>&, rising at 0 °C" in texts(figure)
    css = (ASSETS / "positions.css").read_text() + (ASSETS / "figures.css").read_text()
    used = {name for names in re.findall(r'class="([^"]*)"', figure) for name in names.split()} - {"bdt-bar-1"}
    assert [name for name in sorted(used) if f".{name}" not in css] == []


def test_rows_from_budgets_have_the_position_s_settings_and_each_budget_s_interval() -> None:
    trips = [
        {"name": "alarm", "at_c": 40, "when": "rising", "within_k": 1.5},
        {"name": "x", "at_c": 5, "when": "falling"},
    ]
    place = real_position(range_c=[-20, 80], limit_k=2, trips=trips)
    exact, loose = plain_thermistor(), plain_thermistor(tolerance_pct=5)
    before, after = (budget(place, made, exact.made) for made in (exact, loose))
    rows = trip_rows({"before": before, "after": after})
    assert [(row.name, row.at_c, row.when, row.within_k) for row in rows] == [
        ("alarm", 40, "rising", 1.5),
        ("x", 5, "falling", 2),
    ]
    assert [span.case for span in rows[0].intervals] == ["before", "after"]
    assert rows[1].intervals[1].acts_from_c == after.trips[1].acts_from_c < rows[1].intervals[0].acts_from_c
