"""A budget as rows, sentences and JSON."""

import json
from dataclasses import replace

import pytest
from circuit_records import plain_thermistor, position, real_position, real_thermistor

from builder.circuit import budget
from builder.exports import budget_rows
from builder.exports.rows import csv_text, json_text, table_text

TRIPS = [{"name": "warm", "at_c": 30, "when": "rising", "within_k": 5}]


@pytest.fixture(scope="module")
def made():
    fitted = real_thermistor()
    return budget(real_position(range_c=[20, 33], limit_k=3, trips=TRIPS), fitted, fitted.made)


def test_answer_has_the_sums_the_sources_and_the_trips(made):
    answer = json.loads(json_text(budget_rows.budget_answer(made, "X1")))
    assert list(answer) == ["position", "part", "rows", "worst_k", "meets_limit", "trips", "open_margin_codes", "short_margin_codes", "missing"]  # fmt: skip
    assert (answer["position"], answer["part"], answer["meets_limit"], answer["missing"]) == ("board/RT1", "X1", True, [])  # fmt: skip
    assert [row["t_c"] for row in answer["rows"]] == [20, 25, 30, 33]
    assert [type(answer[f"{fault}_margin_codes"]) for fault in ("open", "short")] == [int, int]
    row = answer["rows"][1]
    assert list(row) == ["t_c", "code", "bias_k", "worst_min_k", "worst_max_k", "expanded_k", "codes_per_k", "sources"]
    assert list(row["sources"]) == list(made.rows.sources_k)
    assert row["sources"]["offset"] == pytest.approx([end[1] for end in made.rows.sources_k["offset"]], rel=1e-9)
    assert row["expanded_k"] == pytest.approx(made.rows.expanded_k[1], rel=1e-9)
    (trip,) = answer["trips"]
    assert list(trip) == ["name", "acts_from_c", "acts_to_c", "ok"]
    assert trip["ok"] is True


def test_answer_has_null_where_there_is_no_number():
    fitted = plain_thermistor(100e3, dissipation_mw_per_k=None)
    cold = budget(position(range_c=[-40, 0], fixed={"resistance_ohm": 10}), fitted, fitted.made)
    answer = json.loads(json_text(budget_rows.budget_answer(cold, "X1")))
    assert (answer["worst_k"], answer["meets_limit"], answer["missing"]) == (None, None, ["limits.dissipation_mw_per_k"])  # fmt: skip
    assert (answer["rows"][0]["worst_min_k"], answer["rows"][0]["sources"]["offset"]) == (None, [None, None])


def test_csv_has_a_cell_for_each_end(made):
    head, first, *_ = csv_text(budget_rows.csv_names(made), budget_rows.csv_rows(made)).splitlines()
    cells = dict(zip(head.split(","), first.split(","), strict=True))
    assert float(cells["thermistor_min_k"]) < 0 < float(cells["thermistor_max_k"])
    assert (cells["t_c"], cells["extrapolated"]) == ("20", "no")
    assert "fixed_resistor_tempco_max_k" in cells


def test_table_shows_the_larger_end_of_each_source(made):
    lines = table_text(budget_rows.columns(made), budget_rows.shown_rows(made)).splitlines()
    assert len(lines) == 5
    assert lines[0].split("  ")[0].strip() == "°C"
    low_k, high_k = (end[0] for end in made.rows.sources_k["thermistor"])
    shown = budget_rows.shown_rows(made)[0]["thermistor"]
    assert shown == pytest.approx(max(low_k, high_k, key=abs), rel=1e-9)


def test_sentences_say_verdict_trips_margins_and_gaps(made):
    first, trip, margins = budget_rows.budget_sentences(made)
    worst = f"{made.worst_k:.4g}"
    assert first == f"Worst case {worst} K at {made.worst_at_c:g} °C; the limit of ±3 K is met."
    spans = [f"{at_c:.2f}".rstrip("0") for at_c in (made.trips[0].acts_from_c, made.trips[0].acts_to_c)]
    assert trip == f"warm, 30 °C: acts from {spans[0]} °C to {spans[1]} °C: near enough."
    assert margins == f"Codes left for telling an open sensor {made.open_margin_codes:.0f}, a shorted one {made.short_margin_codes:.0f}."  # fmt: skip


def test_missing_figures_are_said():
    fitted = plain_thermistor()
    found = budget(position(range_c=[0, 50], adc={"leakage_na": None}), fitted, fitted.made)
    first, _, missing = budget_rows.budget_sentences(found)
    assert first.endswith("; the limit of ±1 K is undecided: a figure is missing.")
    assert missing == "Not stated: adc.leakage_na."


def test_reading_that_some_boards_lack_is_said_in_words():
    fitted = plain_thermistor()
    trips = [{"name": "warm", "at_c": 5, "when": "rising"}]
    found = budget(position(range_c=[0, 50], reference={"volts": 2.0}, trips=trips), fitted, fitted.made)
    first, trip, *_ = budget_rows.budget_sentences(found)
    assert first == "Some boards have no reading at 0 °C; the limit of ±1 K is not met."
    assert trip == "warm, 5 °C: does not act on every board: too far off."


def test_worst_case_just_beyond_its_limit_is_not_rounded_onto_it(made):
    first, *_ = budget_rows.budget_sentences(replace(made, worst_k=3.0004, worst_at_c=50.0, meets_limit=False))
    assert first == "Worst case 3.0004 K at 50 °C; the limit of ±3 K is not met."
