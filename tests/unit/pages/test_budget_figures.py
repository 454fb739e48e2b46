"""The figures of a budget: what is drawn is read back and compared with the budget's rows."""

from __future__ import annotations

import re
from pathlib import Path
from xml.etree import ElementTree

import numpy as np
import pytest
from circuit_records import plain_thermistor, position, real_position
from test_figures import elements, key, runs

from builder.circuit import Budget, budget
from builder.pages.figures.budgets import budget_figure, layers_k, sources_figure
from builder.pages.figures.marks import HATCH_TENTHS, Layer, Plot
from builder.pages.figures.scales import PLOT_HEIGHT, PLOT_WIDTH, kelvin_scale, temperature_scale, width_scale

ASSETS = Path(__file__).parents[3] / "builder" / "assets"
# Half of the tenth of a pixel that places are rounded to.
HALF_TENTH = 0.501


@pytest.fixture(scope="module")
def made() -> Budget:
    thermistor = plain_thermistor(tolerance_pct=1, b_tolerance_pct=1, dissipation_mw_per_k=1)
    place = real_position(range_c=[-30, 80], limit_k=2, reference={"volts": 3.3, "tolerance_pct": 0.5})
    return budget(place, thermistor, thermistor.made, 1.0)


def tenths(t_c: np.ndarray, values_k: np.ndarray, low: float, high: float) -> np.ndarray:
    """Places in the plot, by the axes' limits."""
    across = (t_c - T_LOW) / (T_HIGH - T_LOW) * 10 * PLOT_WIDTH
    return np.column_stack([across, (high - values_k) / (high - low) * 10 * PLOT_HEIGHT])


T_LOW, T_HIGH = -50.0, 100.0


def test_bias_bands_and_limit_stand_where_the_rows_say(made: Budget) -> None:
    assert (temperature_scale(made.rows.t_c).low, temperature_scale(made.rows.t_c).high) == (T_LOW, T_HIGH)
    rows, figure = made.rows, budget_figure(made)
    top_k = kelvin_scale(np.concatenate([rows.worst_min_k, rows.worst_max_k, [made.position.limit_k]]), "").high
    lines = {
        "bdf-line bdf-s1": [rows.bias_k],
        "bdf-edge bdf-s2": [rows.worst_min_k, rows.worst_max_k],
        "bdf-edge bdf-s1": [rows.bias_k + rows.shift_k - rows.expanded_k, rows.bias_k + rows.shift_k + rows.expanded_k],
    }
    root = ElementTree.fromstring(figure)
    (plot,) = (svg for svg in root.iter("svg") if svg.get("x"))
    for style, columns in lines.items():
        (path,) = (path for path in plot if path.get("class") == style)
        for points, values_k in zip(runs(path.get("d", "")), columns, strict=True):
            expected = tenths(rows.t_c, values_k, -top_k, top_k)
            np.testing.assert_allclose(points, expected, rtol=0, atol=HALF_TENTH)
    (limit,) = (path for path in plot if path.get("class") == "bdf-limit")
    ys = [int(y) for y in re.findall(r"M0 (\d+)", limit.get("d", ""))]
    expected_y = tenths(np.zeros(2), np.array([2.0, -2.0]), -top_k, top_k)[:, 1]
    np.testing.assert_allclose(ys, expected_y, rtol=0, atol=HALF_TENTH)


def test_the_layers_are_the_sources_half_widths_stacked(made: Budget) -> None:
    rows, figure = made.rows, sources_figure(made)
    total_k = sum((high - low) / 2 for low, high in rows.sources_k.values())
    np.testing.assert_allclose(sum(layers_k(made).values()), total_k)
    top_k = width_scale(total_k, "").high
    root = ElementTree.fromstring(figure)
    (plot,) = (svg for svg in root.iter("svg") if svg.get("x"))
    layers = [path for path in plot if "bdf-layer" in path.get("class", "")]
    below_k = np.zeros(len(rows.t_c))
    for path, name in zip(layers, layers_k(made), strict=True):
        width_k = sum((rows.sources_k[source][1] - rows.sources_k[source][0]) / 2 for source in name.split(" + "))
        (points,) = runs(path.get("d", "").removesuffix("z"))
        low, high = points[: len(points) // 2], points[: len(points) // 2 - 1 : -1]
        np.testing.assert_allclose(low, tenths(rows.t_c, below_k, 0, top_k), rtol=0, atol=HALF_TENTH)
        below_k = below_k + width_k
        np.testing.assert_allclose(high, tenths(rows.t_c, below_k, 0, top_k), rtol=0, atol=HALF_TENTH)


def test_the_five_largest_sources_stand_alone_and_the_rest_together(made: Budget) -> None:
    names = list(layers_k(made))
    assert len(names) == 6
    assert sorted(" + ".join(names).split(" + ")) == sorted(made.rows.sources_k)
    peaks_k = [float(k.max()) for k in list(layers_k(made).values())[:5]]
    assert peaks_k == sorted(peaks_k, reverse=True)
    assert key(sources_figure(made))[:2] == [f"1 {names[0]}", f"2 {names[1]}"]


def test_few_sources_stand_all_alone() -> None:
    place = position(adc={"offset_lsb": None, "gain_pct": None, "nonlinearity_lsb": None, "leakage_na": None})
    thermistor = plain_thermistor(tolerance_pct=1)
    found = budget(place, thermistor, thermistor.made, 5.0)
    assert set(layers_k(found)) == set(found.rows.sources_k) and len(found.rows.sources_k) == 5


def test_layers_are_told_apart_without_colour(made: Budget) -> None:
    svg = sources_figure(made)
    assert re.findall(r'<text x="540"[^>]*>(\d)<', svg) == ["6", "5", "4", "3", "2", "1"]
    hatched = {int(number) for number in re.findall(r"bdf-h(\d)", svg)}
    assert hatched == set(HATCH_TENTHS)
    css = (ASSETS / "figures.css").read_text()
    used = {name for names in re.findall(r'class="([^"]*)"', svg) for name in names.split()}
    assert [name for name in sorted(used) if name.startswith("bdf") and f".{name}" not in css] == []


def test_hatching_stays_between_the_edges_of_its_layer() -> None:
    t_c = np.linspace(22.0, 88.0, 12)
    low, high = 0.2 + t_c / 200, 0.3 + t_c / 100
    plot = Plot(temperature_scale(np.array([0.0, 100.0])), width_scale(high, ""))
    (path,) = elements(Layer("x", t_c, low, high, 2).svg(plot), "bdf-hatch")
    strokes = np.array(re.findall(r"M(\d+) (\d+)V(\d+)", path.get("d", "")), dtype=float)
    at_c = strokes[:, 0] / (10 * PLOT_WIDTH) * 100
    assert len(strokes) > 50 and at_c.min() >= 22 and at_c.max() <= 88
    for place, edge in ((1, 0.2 + at_c / 200), (2, 0.3 + at_c / 100)):
        down = (plot.y.high - edge) / plot.y.high * 10 * PLOT_HEIGHT
        np.testing.assert_allclose(strokes[:, place], down, rtol=0, atol=HALF_TENTH)


def test_a_layer_has_a_gap_where_it_has_no_width() -> None:
    t_c = np.arange(0.0, 100.0, 10.0)
    high = np.where(t_c == 50, np.nan, 1.0)
    svg = Layer("x", t_c, 0 * t_c, high, 1).svg(Plot(temperature_scale(t_c), width_scale(high, "")))
    (path,) = elements(svg, "bdf-layer")
    across = [run[:, 0] for run in runs(path.get("d", "").replace("z", ""))]
    ends_c = [(x.min() / (10 * PLOT_WIDTH) * 90, x.max() / (10 * PLOT_WIDTH) * 90) for x in across]
    np.testing.assert_allclose(ends_c, [(0, 40), (60, 90)], rtol=0, atol=0.05)


def test_where_no_board_reads_the_figures_have_a_gap_and_no_number_that_is_none() -> None:
    thermistor = plain_thermistor(tolerance_pct=1, b_tolerance_pct=1)
    place = real_position(range_c=[-40, 125], adc={"bits": 4, "full_scale": 16})
    found = budget(place, thermistor, thermistor.made, 1.0)
    assert np.isnan(found.rows.worst_max_k).any()
    for svg in (budget_figure(found), sources_figure(found)):
        ElementTree.fromstring(svg)
        assert not re.search(r"nan|NaN|inf\b", svg)


def test_the_description_says_how_far_off_and_where(made: Budget) -> None:
    assert made.worst_k == pytest.approx(13.03, abs=0.01)
    assert "<desc>Worst case 13 K at −30 °C, limit ±2 K.</desc>" in budget_figure(made)
