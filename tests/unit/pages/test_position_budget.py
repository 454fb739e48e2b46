"""A position's page tells what its circuit does: verdict, budget, trips, codes, best resistor."""

from __future__ import annotations

import csv
import io
import math
import re
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest
from small_site import LEAST, fact, read, rows, section, text

from builder.circuit import budget, thermistor
from builder.decisions import best_resistor
from builder.pages.budget_section import budget_csv, margin_sentences, verdict_line
from builder.pages.context import Context
from builder.pages.figures.budgets import budget_figure
from builder.pages.position_page import position_page
from builder.units import resistance_text

PART = {
    "rated": {"resistance_ohm": 1e4, "tolerance_pct": 1},
    "b_values": [{"between_c": [25, 85], "b_k": 3435, "tolerance_pct": 1}],
    "limits": {"operating_c": [-40, 125], "dissipation_mw_per_k": 1},
}
STATED: dict[str, Any] = {
    "limit_k": 3,
    "range_c": [-12, 60],
    "circuit": {
        "thermistor": "low side",
        "fixed": {"resistance_ohm": "10k", "tolerance_pct": 0.5, "tempco_ppm_per_k": 50},
        "supply_v": 3.3,
        "supply_tolerance_pct": 2,
    },
    "adc": {"bits": 12, "offset_lsb": 2, "gain_pct": 0.1, "nonlinearity_lsb": 1.5, "leakage_na": 50},
    "firmware": {"method": "table", "step_k": 5},
}
ALARM = {"name": "alarm", "at_c": 40, "when": "rising", "within_k": 1.5}


def placed(folder: Path, part: dict[str, Any] | None = None, **fields: Any) -> Context:
    """A catalog of one part at one position, every figure stated unless it is changed."""
    return read(folder, part or PART, positions=(STATED | fields,))


def body(context: Context) -> str:
    return position_page(context.catalog.positions[0], context).body()


def test_the_verdict_says_how_far_off_the_worst_board_is_and_where(tmp_path: Path) -> None:
    context = placed(tmp_path)
    part, place = context.catalog.parts[0], context.catalog.positions[0]
    made = thermistor(part)
    found = budget(place.position, made, made.made)
    expected = f"Limit met Worst case {found.worst_k:.3g} K at −12 °C, limit ±3 K, {3 - found.worst_k:.2g} K left."
    shown = body(context)
    assert expected in text(shown)
    assert shown.index("bd-outcome-good") < shown.index("<h2")


def test_a_limit_that_is_exceeded_is_said_so(tmp_path: Path) -> None:
    shown = body(placed(tmp_path, limit_k=0.5))
    assert "Limit exceeded Worst case" in text(shown) and "K left" not in shown
    assert "bd-outcome-bad" in shown


def test_a_verdict_that_hangs_on_a_missing_figure_names_its_field(tmp_path: Path) -> None:
    adc = {"bits": 12, "offset_lsb": 2, "gain_pct": 0.1, "nonlinearity_lsb": 1.5}
    shown = body(placed(tmp_path, adc=adc))
    assert "Undecided Worst case" in text(shown)
    assert "Not stated: <code>adc.leakage_na</code>, so the error may be larger." in shown
    assert "bd-outcome-open" in shown


def test_a_trip_that_acts_too_far_off_is_in_the_verdict(tmp_path: Path) -> None:
    shown = body(placed(tmp_path, trips=[ALARM | {"name": "a < b", "within_k": 0.1}]))
    assert "<strong>Limit met, but too far off: a &lt; b</strong>" in shown
    assert "bd-outcome-bad" in shown


def test_where_no_board_reads_the_verdict_gives_no_number(tmp_path: Path) -> None:
    context = placed(tmp_path)
    found = replace(context.budget(context.catalog.positions[0]), worst_k=float("nan"), meets_limit=False)
    assert text(verdict_line(found)) == "Limit exceeded At −12 °C some boards have no reading; limit ±3 K."


def test_the_tables_have_a_row_every_5_k_and_both_ends_and_every_source(tmp_path: Path) -> None:
    shown = section(body(placed(tmp_path)), "budget")
    sums, sources = rows(shown, "The reading"), rows(shown, "What each source adds")
    at = ["−12", "−10", "−5", *(str(t_c) for t_c in range(0, 61, 5))]
    assert [row[0] for row in sums] == [row[0] for row in sources] == at
    heads = re.findall(r'<th scope="col">(.*?)</th>', shown)
    names = ("thermistor", "fixed", "its tempco", "supply", "leakage", "offset", "gain", "INL", "½ LSB")
    assert heads[heads.index("°C", 1) + 1 :] == [f"{name} K" for name in names]


def test_rows_beyond_a_curve_are_marked_as_extrapolated(tmp_path: Path) -> None:
    table = [{"t_c": t_c, "r_ohm": r_ohm} for t_c, r_ohm in ((0, 28500), (25, 10000), (50, 4100))]
    part = PART | {"r_t_table": {"columns": ["t_c", "r_ohm"], "rows": [list(row.values()) for row in table]}}
    part |= {"b_values": [], "rated": {"resistance_ohm": 1e4, "tolerance_pct": 1}}
    shown = rows(section(body(placed(tmp_path, part)), "budget"), "The reading")
    marked = [row[0] for row in shown if row[-1] == "extrapolated"]
    assert marked == ["−12", "−10", "−5", "55", "60"]


def test_the_csv_has_every_kelvin_and_every_source_s_two_ends(tmp_path: Path) -> None:
    context = placed(tmp_path)
    place = context.catalog.positions[0]
    file = budget_csv(place, context)
    assert file.path == "positions/board-rt1.csv"
    assert 'href="board-rt1.csv"' in body(context)
    found = list(csv.DictReader(io.StringIO(file.content())))
    assert [row["t_c"] for row in found] == [str(t_c) for t_c in range(-12, 61)]
    made = thermistor(context.catalog.parts[0])
    worst_max_k = budget(place.position, made, made.made, 1.0).rows.worst_max_k
    assert [float(row["worst_max_k"]) for row in found] == pytest.approx(worst_max_k.tolist(), rel=1e-9)
    assert float(found[0]["fixed_resistor_min_k"]) < 0 < float(found[0]["fixed_resistor_max_k"])


def test_trips_have_the_interval_in_which_they_act_and_whether_it_is_near_enough(tmp_path: Path) -> None:
    context = placed(tmp_path, trips=[ALARM])
    (trip,) = context.budget(context.catalog.positions[0]).trips
    off_k = max(abs(trip.acts_from_c - 40), abs(trip.acts_to_c - 40))
    between = f"{trip.acts_from_c:.2f} to {trip.acts_to_c:.2f} °C"
    assert rows(body(context), "Thresholds") == [
        ["alarm", "40 °C", "rising", "±1.5 K", between, f"{off_k:.3g} K", "ok"]
    ]


def test_codes_are_told_at_both_ends_and_where_one_is_worth_most(tmp_path: Path) -> None:
    cold = PART | {"shape": "plain", "limits": {"operating_c": [-40, 125], "dissipation_mw_per_k": 1e4}}
    shown = rows(body(placed(tmp_path, cold, range_c=[-30, 60])), "What a code is worth")
    assert [row[:2] for row in shown] == [["lower end", "−30 °C"], ["upper end", "60 °C"], ["coarsest", "−30 °C"]]
    code, codes_per_k, mk_per_code = map(float, shown[1][2:])
    assert code == pytest.approx(_code(60.0), rel=2e-5)
    assert codes_per_k == pytest.approx((_code(59.99) - _code(60.01)) / 0.02, rel=1e-3)
    assert mk_per_code == pytest.approx(1000 / codes_per_k, rel=5e-3)


def _code(t_c: float) -> float:
    """By hand: the definition of the B-value, a divider with 10 kΩ, 4096 counts."""
    r_ohm = 1e4 * math.exp(3435 * (1 / (t_c + 273.15) - 1 / 298.15))
    return 4096 * r_ohm / (r_ohm + 1e4)


@pytest.mark.parametrize(
    ("side", "open_side", "short_side"), [("low side", "above", "below"), ("high side", "below", "above")]
)
def test_margins_say_on_which_side_a_faulty_sensor_stands(
    tmp_path: Path, side: str, open_side: str, short_side: str
) -> None:
    context = placed(tmp_path, circuit=STATED["circuit"] | {"thermistor": side})
    found = context.budget(context.catalog.positions[0])
    codes = int(found.open_margin_codes)
    assert codes > 100
    said = text(section(body(context), "codes"))
    assert f"An open sensor stands {codes} codes {open_side} any real temperature" in said
    assert f"A shorted sensor stands {int(found.short_margin_codes)} codes {short_side} any real temperature" in said


@pytest.mark.parametrize("left", [0.0, -3.0, float("nan")])
def test_a_faulty_sensor_without_codes_of_its_own_cannot_be_told(tmp_path: Path, left: float) -> None:
    context = placed(tmp_path)
    found = replace(context.budget(context.catalog.positions[0]), open_margin_codes=left, short_margin_codes=1.0)
    assert margin_sentences(found) == (
        "An open sensor cannot be told from a real temperature by its code.",
        "A shorted sensor stands 1 code below any real temperature, on any board.",
    )


def test_the_best_resistors_stand_beside_the_present_one_and_the_common_rule(tmp_path: Path) -> None:
    context = placed(tmp_path, circuit=STATED["circuit"] | {"fixed": {"resistance_ohm": "82k", "tolerance_pct": 0.5}})
    place, made = context.catalog.positions[0].position, thermistor(context.catalog.parts[0])
    e24, e96 = (best_resistor(place, made, made.made, series) for series in ("E24", "E96"))
    shown = rows(body(context), "The worst case by the fixed resistor")
    assert [row[:2] for row in shown] == [
        ["present", "82 kΩ"],
        ["best of E24", resistance_text(e24.fixed_ohm)],
        ["best of E96", resistance_text(e96.fixed_ohm)],
        ["common rule, E24", resistance_text(e24.common_ohm)],
        ["common rule, E96", resistance_text(e96.common_ohm)],
    ]
    assert shown[2][2:] == [f"{e96.worst_k:.3g} K", f"{e96.worst_at_c:g} °C".replace("-", "−")]
    assert "better than any of these" not in body(context)


def test_firmware_that_does_better_than_any_made_anew_is_said_so(tmp_path: Path) -> None:
    context = placed(tmp_path)
    place = context.catalog.positions[0]
    context._budgeted[:] = [place, replace(context.budget(place), worst_k=0.01)]
    assert "The present resistor with its firmware is better than any of these." in body(context)


def test_figures_can_be_left_out(tmp_path: Path) -> None:
    context = placed(tmp_path, trips=[ALARM])
    assert body(context).count("<figure") == 4
    plain = body(replace(context, figures=False))
    assert "<figure" not in plain and "Thresholds" in plain and fact(plain, "Supply") == "3.3 V, ±2 %"


def test_every_part_that_a_position_names_is_linked(tmp_path: Path) -> None:
    parts = tuple(PART | {"part": name} for name in ("PX-1", "PX-2", "PX-3"))
    place = STATED | {"firmware": {"method": "curve", "part": "PX-2"}, "alternates": [{"part": "PX-3"}]}
    shown = body(read(tmp_path, *parts, positions=(place,)))
    for name in ("px-1", "px-2", "px-3"):
        assert f'href="../parts/pellworm/{name}.html"' in shown


def test_a_page_is_made_from_its_record_and_every_part_that_it_names(tmp_path: Path) -> None:
    def made_from(tolerance_pct: float) -> tuple[str, ...]:
        other = PART | {"part": "PX-2", "rated": {"resistance_ohm": 1e4, "tolerance_pct": tolerance_pct}}
        context = read(tmp_path, PART, other, positions=(STATED | {"alternates": [{"part": "PX-2"}]},))
        return position_page(context.catalog.positions[0], context).made_from or ()

    first, second = made_from(1), made_from(2)
    assert len(first) == 3 and [a == b for a, b in zip(first, second, strict=True)] == [True, True, False]


def test_what_a_record_says_is_escaped_in_figures_too(tmp_path: Path) -> None:
    shown = body(
        placed(tmp_path, PART | {"part": LEAST["part"]}, position="b<i>&/RT1", trips=[ALARM | {"name": "<s>"}])
    )
    assert "<i>" not in shown and "<s>" not in shown


def test_the_shortlist_of_the_whole_catalog_starts_from_the_position(tmp_path: Path) -> None:
    assert 'href="../shortlist.html#start=a%26b/RT%201"' in body(placed(tmp_path, position="a&b/RT 1"))


def test_a_worst_case_just_beyond_the_limit_is_not_shown_as_the_limit(tmp_path: Path) -> None:
    context = placed(tmp_path)
    made = thermistor(context.catalog.parts[0])
    found = replace(budget(context.catalog.positions[0].position, made, made.made), worst_k=3.0004, meets_limit=False)
    assert "Worst case 3.0004 K" in verdict_line(found)
    assert "Worst case 3.0004 K" in budget_figure(found)


def test_a_trip_left_open_beside_a_limit_that_is_met_is_said_first(tmp_path: Path) -> None:
    part = {**PART, "rated": {"resistance_ohm": 1e4}, "accuracy": [{"between_c": [-12, 60], "within_k": 0.5}]}
    shown = body(placed(tmp_path, part, trips=[ALARM | {"name": "hot", "at_c": 65, "within_k": 10}]))
    assert "Limit met, but undecided: hot Worst case" in text(shown)
    assert "bd-outcome-open" in shown


def test_a_trip_that_some_boards_miss_is_said_in_words(tmp_path: Path) -> None:
    shown = body(
        placed(tmp_path, limit_k=0.5, trips=[ALARM | {"at_c": -12}], reference={"volts": 2.0, "tolerance_pct": 0})
    )
    assert "Limit exceeded, and too far off: alarm" in text(shown)
    (row,) = rows(shown, "Thresholds")
    assert row[4:] == ["not on every board", "–", "too far off"]
