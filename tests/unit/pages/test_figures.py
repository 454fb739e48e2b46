"""The part pages' static figures. Places are checked against matplotlib's own transforms."""

from __future__ import annotations

import os
import re
import subprocess
import sys
from itertools import pairwise
from pathlib import Path
from xml.etree import ElementTree

import matplotlib
import numpy as np
import pytest

from builder.pages import figures
from builder.pages.figures import Band, Dots, Limit, Line, frames, scales
from builder.pages.figures.marks import Plot

ASSETS = Path(figures.__file__).parents[2] / "assets"
T_C = np.arange(-40.0, 126.0)
R_OHM = 10e3 * np.exp(3435 * (1 / (T_C + 273.15) - 1 / 298.15))
BOUND_K = 0.25 + np.abs(T_C - 25) * 0.012
NONE = np.full(T_C.shape, np.nan)
FAR = (T_C < -20) | (T_C > 110)
PLOT = Plot(scales.temperature_scale(T_C), scales.kelvin_scale(np.array([2.0]), "Reads (K)"))


def resistance() -> str:
    return figures.resistance_figure(
        "Resistance",
        "From −40 to 125 °C",
        T_C,
        R_OHM,
        r_min_ohm=R_OHM * 0.9,
        r_max_ohm=R_OHM * 1.1,
        dashed=FAR,
        data=Dots("table rows", T_C[::5], R_OHM[::5]),
        rated=(25.0, 10e3),
    )


def tolerance() -> str:
    return figures.tolerance_figure("Tolerance", "In kelvin", T_C, -BOUND_K, BOUND_K, dashed=FAR)


def residual() -> str:
    fits = {"B-value": np.sin(T_C / 20), "Steinhart–Hart": T_C / 500, "four terms": T_C / 490}
    return figures.residual_figure("Residual", "Of three fits", T_C, fits)


def reads() -> str:
    marks = [
        Band("with tolerance", T_C, -BOUND_K, BOUND_K, series=2),
        Line("alternate", T_C, BOUND_K / 3, FAR, series=2),
        Limit("limit ±1 K", 1.0),
    ]
    return figures.reads_figure("Swap", "Against the limit", marks)


ALL = pytest.mark.parametrize("figure", [resistance, tolerance, residual, reads])


def elements(svg: str, style: str) -> list[ElementTree.Element]:
    found = ElementTree.fromstring(f"<g>{svg}</g>").iter()
    return [element for element in found if style in element.get("class", "").split()]


def runs(d: str) -> list[np.ndarray]:
    """The points of each subpath, in tenths of a pixel: an independent reading of the path's text."""
    found = []
    for subpath in d.split("M")[1:]:
        numbers = [int(number) for number in re.findall(r"-?\d+", subpath.replace("h0", ""))]
        found.append(np.cumsum(np.array(numbers).reshape(-1, 2), axis=0))
    return found


def places_px(t_c: np.ndarray, values: np.ndarray, plot: Plot) -> np.ndarray:
    """Where matplotlib puts values, in pixels from the picture's upper left."""
    across = frames.scaled_axes(plot.x).transData.transform(np.column_stack([t_c, t_c]))[:, 0]
    up = frames.scaled_axes(plot.y).transData.transform(np.column_stack([values, values]))[:, 1]
    return np.column_stack([across, scales.HEIGHT - up])


def key(figure: str) -> list[str]:
    return re.findall(r"([^>]*)</span>", figure)


def run_python(code: str, **environment: str) -> str:
    command = [sys.executable, "-c", code]
    done = subprocess.run(command, env={**os.environ, **environment}, capture_output=True, text=True, check=True)
    return done.stdout


def test_importing_the_figures_does_not_import_matplotlib() -> None:
    assert run_python("import sys, builder.pages.figures; print('matplotlib' in sys.modules)") == "False\n"


def test_another_process_writes_the_same_bytes_after_other_figures() -> None:
    draw = (
        "import numpy as np; from builder.pages.figures import tolerance_figure as f\n"
        "t = np.arange(-40.0, 126.0)\n"
        "{}\n"
        "print(f('a', 'b', t, -t / 50, t / 50))"
    )
    alone = run_python(draw.format(""), PYTHONHASHSEED="1")
    later = run_python(draw.format("f('c', 'd', t * 9, t * 7, t * 11)"), PYTHONHASHSEED="2")
    assert alone == later


def test_a_users_matplotlib_settings_change_nothing() -> None:
    draw = (
        "import matplotlib, numpy as np\n"
        "matplotlib.rcParams.update({})\n"
        "from builder.pages.figures import tolerance_figure as f\n"
        "t = np.arange(-40.0, 126.0)\n"
        "print(f('a', 'b', t, -t / 50, t / 50))"
    )
    settings = "{'axes.grid': True, 'xtick.alignment': 'right', 'ytick.labelright': True, 'xtick.top': True}"
    assert run_python(draw.format("{}")) == run_python(draw.format(settings))


@ALL
def test_a_figure_is_well_formed_and_has_no_ids_styles_or_prolog(figure) -> None:
    svg = figure()
    ElementTree.fromstring(svg)
    assert not re.search(r"\bid=|style=|<\?|<!|metadata|url\(|<use|NaN|nan|inf\b", svg)


@ALL
def test_a_figure_of_166_rows_stays_under_12_kb(figure) -> None:
    assert len(figure().encode()) < 12_000


@ALL
def test_every_class_in_a_figure_is_in_the_style_sheet(figure) -> None:
    css = (ASSETS / "figures.css").read_text()
    used = {name for names in re.findall(r'class="([^"]*)"', figure()) for name in names.split()}
    assert [name for name in sorted(used) if f".{name}" not in css] == []


def test_the_style_sheet_gives_the_plot_area_its_own_size() -> None:
    size = f"width: {scales.PLOT_WIDTH}px;\n  height: {scales.PLOT_HEIGHT}px;"
    assert size in (ASSETS / "figures.css").read_text()


def test_title_description_and_names_are_escaped() -> None:
    text = """<b>"5" & 'more'</b>"""
    svg = figures.residual_figure(text, text, T_C, {text: BOUND_K, "other": -BOUND_K})
    root = ElementTree.fromstring(svg)
    assert (root.findtext("svg/title"), root.findtext("svg/desc")) == (text, text)
    entry = root.find("figcaption/span")
    assert entry is not None
    assert "".join(entry.itertext()) == "1 " + text
    assert "<b>" not in svg


@pytest.mark.parametrize(
    ("scale", "values"),
    [
        (scales.kelvin_scale(BOUND_K, "Reads (K)"), BOUND_K),
        (scales.resistance_scale(R_OHM), R_OHM),
        (scales.resistance_scale(np.array([0.5, 100e6])), np.geomspace(100e6, 0.5, T_C.size)),
    ],
)
def test_a_line_runs_where_matplotlib_puts_its_points(scale, values) -> None:
    plot = Plot(scales.temperature_scale(T_C), scale)
    (path,) = elements(Line("nominal", T_C, values).svg(plot), "bdf-line")
    (points,) = runs(path.get("d"))
    drawn_px = points / 10 + (scales.LEFT, scales.TOP)
    # Rounded to the nearest tenth of a pixel: at most half a tenth off.
    np.testing.assert_allclose(drawn_px, places_px(T_C, values, plot), rtol=0, atol=0.0501)


def test_the_frame_is_as_matplotlib_labels_it() -> None:
    svg = frames.axis_svg(PLOT.x)
    texts = re.findall(r"<text [^>]*>([^<]*)<", svg)
    assert texts == ["−50", "−25", "0", "25", "50", "75", "100", "125", "Temperature (°C)"]
    lines = re.findall(r"M([\d.]+) ", elements(svg, "bdf-grid")[0].get("d"))
    ticks_c = np.arange(-50.0, 126.0, 25.0)
    expected_px = places_px(ticks_c, ticks_c, PLOT)[:, 0]
    np.testing.assert_allclose([float(x) for x in lines], expected_px, rtol=0, atol=0.006)


def test_kelvin_labels_carry_signs_and_zero_has_its_own_line() -> None:
    svg = frames.axis_svg(scales.kelvin_scale(np.array([0.7]), "Reads (K)"))
    texts = re.findall(r"<text [^>]*>([^<]*)<", svg)
    labels = ["−1", "−0.8", "−0.6", "−0.4", "−0.2", "0", "+0.2", "+0.4", "+0.6", "+0.8", "+1"]
    assert sorted(texts) == sorted([*labels, "Reads (K)"])
    (zero,) = elements(svg, "bdf-zero")
    middle = scales.TOP + scales.PLOT_HEIGHT / 2
    assert zero.get("d") == f"M{scales.LEFT} {middle:g}L{scales.LEFT + scales.PLOT_WIDTH} {middle:g}"


def test_resistance_is_labelled_by_decades_with_lines_at_two_and_five() -> None:
    scale = scales.resistance_scale(np.array([120.0, 390e3]))
    svg = frames.axis_svg(scale)
    texts = re.findall(r"<text [^>]*>([^<]*)<", svg)
    assert sorted(texts) == sorted(["100 Ω", "1 kΩ", "10 kΩ", "100 kΩ", "1 MΩ", "Resistance"])
    ys = [float(y) for y in re.findall(r"M\S+ ([\d.]+)", elements(svg, "bdf-minor")[0].get("d"))]
    minor_ohm = np.outer([100.0, 1e3, 1e4, 1e5], [2, 5]).ravel()
    expected_px = places_px(minor_ohm, minor_ohm, Plot(PLOT.x, scale))[:, 1]
    np.testing.assert_allclose(ys, expected_px, rtol=0, atol=0.006)


@pytest.mark.parametrize(
    ("t_c", "limits"),
    [
        ([-40, 125], (-50, 125, 25)),
        ([0, 70], (0, 70, 10)),
        ([-196, 600], (-200, 600, 100)),
        ([25], (20, 30, 2.5)),
        ([np.nan], (-50, 150, 25)),
    ],
)
def test_temperature_limits_are_whole_ticks(t_c, limits) -> None:
    scale = scales.temperature_scale(np.array(t_c, dtype=float))
    assert (scale.low, scale.high, scale.step) == limits


@pytest.mark.parametrize(
    ("r_ohm", "limits"),
    [
        ([540, 230e3], (100, 1e6, 1)),
        ([0.5, 100e6], (0.1, 1e8, 1)),
        ([4.7e3, 4.7e3], (1e3, 1e4, 1)),
        ([10e3], (1e3, 1e5, 1)),
        ([1e-3, 1e12], (1e-3, 1e12, 2)),
        ([0, -5, 2e3, np.nan], (1e3, 1e4, 1)),
        ([np.nan], (100, 1e6, 1)),
    ],
)
def test_resistance_limits_are_whole_decades(r_ohm, limits) -> None:
    scale = scales.resistance_scale(np.array(r_ohm, dtype=float))
    np.testing.assert_allclose((scale.low, scale.high, scale.step), limits, rtol=1e-12)


@pytest.mark.parametrize(
    ("values_k", "limit_k"),
    [([0.3, -0.41], 0.5), ([1.0], 1), ([-1.01], 2), ([4.2], 5), ([0.0], 0.01), ([np.nan], 1)],
)
def test_kelvin_limits_are_symmetric_and_end_at_one_two_or_five(values_k, limit_k) -> None:
    scale = scales.kelvin_scale(np.array(values_k), "Reads (K)")
    assert (scale.low, scale.high) == (-limit_k, limit_k)


def test_a_missing_value_leaves_a_gap() -> None:
    values_k = BOUND_K.copy()
    values_k[60:70] = np.nan
    (line,) = elements(Line("nominal", T_C, values_k).svg(PLOT), "bdf-line")
    assert [len(run) for run in runs(line.get("d"))] == [60, 96]
    (band,) = elements(Band("tolerance", T_C, -BOUND_K, values_k).svg(PLOT), "bdf-band")
    assert [len(run) for run in runs(band.get("d"))] == [120, 192]


def test_a_value_alone_is_drawn_as_a_point() -> None:
    values_k = NONE.copy()
    values_k[90] = 0.0
    (line,) = elements(Line("nominal", T_C, values_k).svg(PLOT), "bdf-line")
    assert re.fullmatch(r"M\d+ \d+h0", line.get("d"))


def test_nothing_but_the_frame_is_drawn_where_every_value_is_missing() -> None:
    svg = figures.resistance_figure("R", "none", NONE, NONE, r_min_ohm=NONE, r_max_ohm=NONE, dashed=FAR)
    assert elements(svg, "bdf-grid")
    assert not elements(svg, "bdf-line") + elements(svg, "bdf-band")
    assert key(svg) == []


@pytest.mark.parametrize(
    ("dashed", "solid_end", "dashed_end"), [(T_C > 110, -1, 0), (T_C < -20, 0, -1)], ids=["hot", "cold"]
)
def test_the_step_between_solid_and_dashed_is_dashed(dashed, solid_end, dashed_end) -> None:
    far, near = elements(Line("nominal", T_C, BOUND_K, dashed).svg(PLOT), "bdf-line")
    assert "bdf-far" in far.get("class")
    assert "bdf-far" not in near.get("class")
    (solid_points,), (dashed_points,) = runs(near.get("d")), runs(far.get("d"))
    assert len(solid_points) == np.count_nonzero(~dashed)
    np.testing.assert_array_equal(solid_points[solid_end], dashed_points[dashed_end])


def test_the_key_says_what_dashed_means_only_where_something_is_dashed() -> None:
    estimated = figures.tolerance_figure("t", "d", T_C, -BOUND_K, BOUND_K, dashed=FAR, dashed_name="estimated")
    assert key(estimated) == ["within tolerance", "estimated"]
    assert key(figures.tolerance_figure("t", "d", T_C, -BOUND_K, BOUND_K)) == ["within tolerance"]


def test_a_band_thinner_than_a_pixel_is_left_out_of_picture_and_key() -> None:
    svg = figures.resistance_figure("R", "d", T_C, R_OHM, r_min_ohm=R_OHM * 0.999, r_max_ohm=R_OHM * 1.001)
    assert not elements(svg, "bdf-band")
    assert key(svg) == ["nominal"]


def test_a_line_leaves_the_plot_at_its_true_slope() -> None:
    (path,) = elements(Line("steep", T_C, (T_C - 25) * 0.3).svg(PLOT), "bdf-line")
    (points,) = runs(path.get("d"))
    np.testing.assert_allclose(np.diff(points[:, 1]), np.diff(points[:, 1])[0], atol=1)


def test_lines_are_cut_off_at_the_plot_and_infinity_is_drawn_finite() -> None:
    svg = figures.reads_figure("t", "d", [Line("wild", T_C, np.where(T_C > 100, np.inf, 0.1))])
    (plot,) = ElementTree.fromstring(svg).findall("svg/svg")
    inner = f"0 0 {scales.PLOT_WIDTH * 10} {scales.PLOT_HEIGHT * 10}"
    assert plot.get("viewBox") == inner
    assert [path.get("class") for path in plot] == ["bdf-line bdf-s1"]
    assert "overflow" not in svg


def test_a_long_line_keeps_its_ends_and_extremes_in_200_points() -> None:
    t_c = np.linspace(-40, 125, 5000)
    values_k = np.where(np.arange(5000) == 1234, 1.9, 0.1)
    (path,) = elements(Line("nominal", t_c, values_k).svg(PLOT), "bdf-line")
    (points,) = runs(path.get("d"))
    whole = PLOT.points(t_c, values_k)
    assert len(points) <= 200
    np.testing.assert_allclose(points[[0, -1]], whole[[0, -1]], atol=0.5)
    assert points[:, 1].min() == round(whole[1234, 1])


def test_many_table_rows_are_not_dotted() -> None:
    def drawn(count: int) -> int:
        data = Dots("table rows", T_C[:count], R_OHM[:count])
        return len(elements(figures.resistance_figure("R", "d", T_C, R_OHM, data=data), "bdf-dots"))

    # One in the picture and one in the key.
    assert (drawn(39), drawn(40)) == (2, 0)


def test_dots_stand_at_their_values_and_those_outside_are_left_out() -> None:
    t_c, values_k = np.array([25.0, 25.0, 300.0, np.nan]), np.array([1.5, 9.0, 0.0, 0.0])
    (path,) = elements(Dots("rows", t_c, values_k).svg(PLOT), "bdf-dots")
    (points,) = runs(path.get("d"))
    expected_px = places_px(t_c[:1], values_k[:1], PLOT)
    np.testing.assert_allclose(points / 10 + (scales.LEFT, scales.TOP), expected_px, atol=0.0501)


def test_the_ring_stands_at_the_rated_point() -> None:
    ring = elements(resistance(), "bdf-ring")[0]
    plot = Plot(PLOT.x, scales.resistance_scale(R_OHM))
    expected_px = places_px(np.array([25.0]), np.array([10e3]), plot)[0]
    drawn_px = np.array([float(ring.get("cx")), float(ring.get("cy"))]) / 10 + (scales.LEFT, scales.TOP)
    np.testing.assert_allclose(drawn_px, expected_px, atol=0.0501)


def test_limit_lines_stand_at_plus_and_minus_the_limit() -> None:
    (path,) = elements(Limit("limit ±1 K", 1.0).svg(PLOT), "bdf-limit")
    limits_k = np.array([1.0, -1.0])
    expected_px = places_px(np.zeros(2), limits_k, PLOT)[:, 1]
    drawn_px = [int(y) / 10 + scales.TOP for y in re.findall(r"M0 (\d+)", path.get("d"))]
    np.testing.assert_allclose(drawn_px, expected_px, atol=0.0501)


def test_a_limit_is_inside_the_axis_even_when_the_reading_is_far_below_it() -> None:
    svg = figures.reads_figure("t", "d", [Line("a", T_C, BOUND_K / 100), Limit("limit ±3 K", 3.0)])
    assert ">+5<" in svg


def end_numbers(svg: str) -> dict[str, float]:
    """The numbers beside the lines' right ends, each with its height."""
    found = ElementTree.fromstring(svg).findall("svg/text")
    return {text.text: float(text.get("y")) for text in found}


@pytest.mark.parametrize("end_k", [-1.0, 0.0, 1.0])
def test_numbers_beside_lines_that_end_together_are_kept_apart_inside_the_plot(end_k) -> None:
    fits = {name: np.full(T_C.shape, end_k) for name in ("a", "b", "c", "d")}
    heights = sorted(end_numbers(figures.residual_figure("t", "d", T_C, fits)).values())
    assert len(heights) == 4
    assert all(below - above >= 18 for above, below in pairwise(heights))
    assert heights[0] >= scales.TOP
    assert heights[-1] <= scales.TOP + scales.PLOT_HEIGHT


def test_lines_are_numbered_from_top_to_bottom_and_in_the_key() -> None:
    svg = figures.residual_figure("t", "d", T_C, {"low": -BOUND_K, "high": BOUND_K})
    heights = end_numbers(svg)
    assert heights["2"] < heights["1"]
    assert key(svg) == ["1 low", "2 high"]


def test_a_line_alone_has_no_number() -> None:
    svg = figures.residual_figure("t", "d", T_C, {"fit": BOUND_K})
    assert (end_numbers(svg), key(svg)) == ({}, ["fit"])


def test_series_differ_in_dash_pattern_and_not_only_in_colour() -> None:
    css = (ASSETS / "figures.css").read_text()
    rules = [re.search(rf"\.bdf-s{number} {{([^}}]*)}}", css) for number in (1, 2, 3, 4)]
    dashes = [re.findall(r"stroke-dasharray: ([^;]*)", rule.group(1)) for rule in rules if rule]
    assert len({tuple(dash) for dash in dashes}) == 4


def test_a_scale_is_drawn_once_for_many_parts() -> None:
    resistance()
    drawn = frames.axis_svg.cache_info().misses
    figures.resistance_figure("R", "another", T_C[5:], R_OHM[5:] * 1.01)
    assert frames.axis_svg.cache_info().misses == drawn


def test_matplotlib_settings_are_left_as_they_were() -> None:
    with matplotlib.rc_context({"lines.linewidth": 7.0}):
        frames.axis_svg.__wrapped__(PLOT.x)
        assert matplotlib.rcParams["lines.linewidth"] == 7.0
