"""The chart module in Chromium: what it draws, reads off and hands out."""

from __future__ import annotations

import itertools
import re
import xml.etree.ElementTree as ET
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest
from playwright.sync_api import Browser, Page

ASSETS = Path(__file__).parents[2] / "builder" / "assets"
HOSTILE = "<img src=x onerror=document.title='taken'>"
FRAME = """<!doctype html><html lang="en"><head><meta charset="utf-8"><title>Chart</title>
<meta http-equiv="Content-Security-Policy" content="default-src 'self' file:; img-src data:">
<meta name="viewport" content="width=device-width">
<link rel="stylesheet" href="beadroll.css"><link rel="stylesheet" href="chart.css"><link rel="stylesheet" href="frame.css">
</head><body class="md-typeset" data-md-color-scheme="default"><main><h1>Chart</h1><div id="room"></div></main>
<script src="chart.js"></script></body></html>"""
FRAME_STYLE = """
body { background: #fff; color: #222; }
body[data-md-color-scheme="slate"] { --md-default-bg-color: #1e2129; background: #1e2129; color: #d5d7e2; }
"""

# Two series over −10 to 10 °C: the first with a band and extrapolated from 5 °C on, the second with a gap at 0 °C.
SHOW = """(changes) => {
    const along = Array.from({ length: 21 }, (_, i) => i - 10);
    const text = (value) => String(Number(value.toPrecision(6)));
    const first = along.map((t) => t / 10);
    const data = {
        title: "Deviation", summary: "Both rise.", along, at: (t) => `at ${t} °C`,
        x: { label: "Temperature", text }, y: { label: "Deviation", text, log: Boolean(changes.log) },
        series: [
            { key: "a", name: changes.name ?? "First", number: 1, values: first,
              low: first.map((v) => v - 0.2), high: first.map((v) => v + 0.2),
              far: along.map((t) => t > 5), text: (i) => `${first[i].toFixed(1)} K` },
            { key: "b", name: "Second", number: 2, values: along.map((t) => (t === 0 ? NaN : 10 ** (t / 5))),
              far: along.map(() => false), hidden: Boolean(changes.hidden), text: (i) => `${(10 ** (along[i] / 5)).toFixed(2)} K` },
        ],
    };
    window.toggles = [];
    window.chart ??= new beadroll.Chart(document.getElementById("room"), { toggled: (...all) => window.toggles.push(all) });
    window.chart.show(data);
}"""

Shown = Callable[..., Page]


@pytest.fixture
def shown(chromium: Browser, tmp_path: Path) -> Iterator[Shown]:
    """Show the two series; nothing may be complained about in the console."""
    for name in ("beadroll.css", "chart.css", "chart.js"):
        (tmp_path / name).write_bytes((ASSETS / name).read_bytes())
    (tmp_path / "frame.css").write_text(FRAME_STYLE)
    (tmp_path / "index.html").write_text(FRAME, "utf-8")
    contexts, complaints = [], []

    def show(scheme: str = "default", width: int = 900, **changes: Any) -> Page:
        context = chromium.new_context(viewport={"width": width, "height": 800}, offline=True)
        contexts.append(context)
        page = context.new_page()
        page.on("console", lambda message: complaints.append(message.text))
        page.on("pageerror", lambda error: complaints.append(str(error)))
        page.goto((tmp_path / "index.html").as_uri())
        page.evaluate("scheme => { document.body.dataset.mdColorScheme = scheme; }", scheme)
        page.evaluate(SHOW, changes)
        return page

    yield show
    for context in contexts:
        context.close()
    assert complaints == []


def points(page: Page, selector: str) -> list[list[tuple[float, float]]]:
    """The stretches of a path."""
    d = page.locator(f".bd-chart-plot {selector}").get_attribute("d") or ""
    return [
        [(float(x), float(y)) for x, y in re.findall(r"(-?[\d.]+) (-?[\d.]+)", stretch)] for stretch in d.split("M")[1:]
    ]


def texts(page: Page) -> list[str]:
    return page.locator(".bd-chart-plot text").all_text_contents()


def values(page: Page) -> list[str]:
    return page.locator(".bd-chart-value").all_text_contents()


def test_a_line_stands_where_its_values_are(shown: Shown) -> None:
    page = shown(hidden=True)
    (near,) = points(page, ".bdc-line.bdc-s1:not(.bdc-far)")
    at = page.evaluate("[-10, 5].map((t) => [chart.drawing.x.at(t), chart.drawing.y.at(t / 10)])")
    assert len(near) == 16
    assert near[0] == pytest.approx(at[0], abs=0.06) and near[-1] == pytest.approx(at[1], abs=0.06)
    assert near[0][1] > near[-1][1]  # up is more


def test_what_is_extrapolated_is_drawn_apart_and_the_key_names_it(shown: Shown) -> None:
    page = shown()
    (far,) = points(page, ".bdc-line.bdc-s1.bdc-far")
    assert len(far) == 6  # with the step from the last value that is known
    assert (
        page.locator(".bd-chart-plot .bdc-line.bdc-far").first.evaluate("e => getComputedStyle(e).strokeDasharray")
        == "2px, 4px"
    )
    assert page.locator(".bd-chart-note").inner_text() == "extrapolated"


def test_what_is_not_a_number_leaves_a_gap(shown: Shown) -> None:
    assert [len(run) for run in points(shown(), ".bdc-line.bdc-s2:not(.bdc-far)")] == [10, 10]


def test_a_band_is_an_area_between_its_edges(shown: Shown) -> None:
    page = shown(hidden=True)
    (area,) = points(page, ".bdc-band.bdc-near")
    assert len(area) == 32
    low, high = page.evaluate("[-1.2, -0.8].map((v) => chart.drawing.y.at(v))")
    assert (area[0][1], area[-1][1]) == pytest.approx((low, high), abs=0.06)


def test_lines_are_told_apart_without_colour(shown: Shown) -> None:
    page = shown()
    assert sorted(page.locator(".bd-chart-plot .bdc-number").all_text_contents()) == ["1", "2"]
    dashes = [
        page.locator(f".bd-chart-plot .bdc-line.bdc-s{n}:not(.bdc-far)").evaluate(
            "e => getComputedStyle(e).strokeDasharray"
        )
        for n in (1, 2)
    ]
    assert dashes == ["none", "9px, 5px"]


@pytest.mark.parametrize("value", [-1, 0.3, 1])
def test_numbers_at_line_ends_stay_apart_and_beside_the_plot(shown: Shown, value: float) -> None:
    page = shown()
    page.evaluate(
        """(value) => {
            const { data } = chart, [first] = data.series, values = data.along.map(() => value);
            const series = [1, 2, 3, 4, 5, 6].map((number) => ({ key: String(number), number, values, far: [] }));
            const bare = { ...first, low: null, high: null }, y = { ...data.y, values: [-1, 1] };
            chart.show({ ...data, y, series: series.map((one) => ({ ...bare, ...one })) });
        }""",
        value,
    )
    heights = page.locator("text.bdc-number").evaluate_all("all => all.map((e) => Number(e.getAttribute('y')))")
    top, bottom = page.evaluate("[chart.drawing.y.at(1), chart.drawing.y.at(-1)]")
    assert len(heights) == 6
    assert min(b - a for a, b in itertools.pairwise(sorted(heights))) >= 12.9
    assert top < min(heights) and max(heights) < bottom + 5


def test_ticks_of_a_linear_axis_are_round_numbers(shown: Shown) -> None:
    assert texts(shown(hidden=True))[:6] == ["-1.5", "-1", "-0.5", "0", "0.5", "1"]


def test_a_logarithmic_axis_has_its_decades(shown: Shown) -> None:
    page = shown(log=True)
    assert texts(page)[:5] == ["0.01", "0.1", "1", "10", "100"]
    assert page.locator(".bdc-minor").count() == 32
    # What is not above zero has no place on it.
    assert len(points(page, ".bdc-line.bdc-s1:not(.bdc-far)")[0]) == 5


def test_keys_move_the_reading_and_escape_ends_it(shown: Shown) -> None:
    page = shown()
    page.keyboard.press("Tab")
    slider = page.get_by_role("slider", name="Deviation")
    assert slider.evaluate("e => e === document.activeElement")
    assert slider.get_attribute("aria-valuetext") == "not reading"
    for key, place in (("ArrowRight", 0), ("ArrowRight", 1), ("ArrowLeft", 0), ("PageUp", 10), ("ArrowUp", 10)):
        page.keyboard.press(key)
        assert slider.get_attribute("aria-valuenow") == str(place), key
    for key, place in (("Home", -10), ("PageDown", -10), ("End", 10)):
        page.keyboard.press(key)
        assert slider.get_attribute("aria-valuenow") == str(place), key
    assert slider.get_attribute("aria-valuetext") == "at 10 °C, First 1.0 K, Second 100.00 K"
    assert values(page) == ["1.0 K", "100.00 K"]
    assert page.locator(".bd-chart-at").inner_text() == "at 10 °C"
    assert page.locator(".bdc-cursor").count() == 1
    page.keyboard.press("Escape")
    assert values(page) == ["", ""]
    assert page.locator(".bdc-cursor").count() == 0


def test_pointing_reads_off_the_nearest_place(shown: Shown) -> None:
    page = shown()
    box = page.locator(".bd-chart-plot").bounding_box()
    assert box is not None
    x = page.evaluate("chart.drawing.x.at(3.3)")
    page.mouse.move(box["x"] + x, box["y"] + 100)
    assert values(page) == ["0.3 K", "3.98 K"]
    page.mouse.move(box["x"] + x, box["y"] + box["height"] + 200)
    assert values(page) == ["", ""]


def test_a_reading_stays_where_it_is_when_other_data_come(shown: Shown) -> None:
    page = shown()
    page.keyboard.press("Tab")
    page.keyboard.press("End")
    page.evaluate(SHOW, {"name": "Third"})
    assert page.get_by_role("slider").get_attribute("aria-valuetext") == "at 10 °C, Third 1.0 K, Second 100.00 K"


def test_a_series_is_hidden_and_the_axis_follows(shown: Shown) -> None:
    page = shown()
    highest = page.evaluate("chart.drawing.y.high")
    button = page.get_by_role("button", name="Second")
    button.click()
    assert button.get_attribute("aria-pressed") == "false"
    assert page.locator(".bd-chart-plot .bdc-s2").count() == 0
    assert page.evaluate("chart.drawing.y.high") < highest / 10
    assert page.evaluate("toggles") == [["b", True]]
    button.press("Enter")
    assert page.locator(".bd-chart-plot .bdc-line.bdc-s2").count() == 2
    assert page.evaluate("toggles") == [["b", True], ["b", False]]


def test_it_says_in_words_what_it_shows(shown: Shown) -> None:
    page = shown()
    described = page.get_by_role("slider").get_attribute("aria-describedby")
    assert page.locator(f"#{described}").text_content() == "Both rise."


def test_it_is_drawn_anew_when_its_room_changes(shown: Shown) -> None:
    page = shown()
    before = page.locator(".bd-chart-plot > svg").get_attribute("viewBox")
    page.set_viewport_size({"width": 400, "height": 800})
    page.wait_for_function(
        "before => document.querySelector('.bd-chart-plot > svg').getAttribute('viewBox') !== before", arg=before
    )
    width = page.evaluate("[chart.drawing.width, document.querySelector('.bd-chart-plot').clientWidth]")
    assert width[0] == width[1]
    assert page.evaluate("document.documentElement.scrollWidth") <= 400


def test_text_of_a_record_stays_text(shown: Shown) -> None:
    page = shown(name=HOSTILE)
    assert page.locator(".bd-chart-name").first.text_content() == HOSTILE
    assert page.locator("img").count() == 0 and page.title() == "Chart"
    assert "&lt;img" in page.evaluate("chart.svg()")


@pytest.mark.parametrize("scheme", ["default", "slate"])
def test_the_svg_file_stands_alone_in_light_colours(shown: Shown, scheme: str) -> None:
    page = shown(scheme)
    file = ET.fromstring(page.evaluate("chart.svg()"))
    everything = list(file.iter())
    assert all(
        "class" not in element.attrib
        for element in everything
        if element.tag.endswith(("line", "path", "text", "rect"))
    )
    written = "".join(value for element in everything for value in element.attrib.values())
    assert "var(" not in written and "currentcolor" not in written.lower()
    strokes = {element.get("stroke") for element in everything}
    assert {"rgb(31, 78, 95)", "rgb(180, 83, 31)"} <= strokes  # nominal and other of the light scheme
    said = ["".join(element.itertext()) for element in everything if element.tag.endswith("text")]
    assert {"Deviation", "First", "Second", "1", "2", "extrapolated"} <= set(said)
    assert page.locator(".bd-chart-host").count() == 0


def test_the_png_file_shows_the_lines_on_white(shown: Shown) -> None:
    page = shown("slate")
    seen = page.evaluate(
        """async () => {
            const bitmap = await createImageBitmap(await chart.png());
            const canvas = new OffscreenCanvas(bitmap.width, bitmap.height), context = canvas.getContext("2d");
            context.drawImage(bitmap, 0, 0);
            const { data } = context.getImageData(0, 0, bitmap.width, bitmap.height);
            let clay = 0;
            for (let i = 0; i < data.length; i += 4) clay += data[i] === 180 && data[i + 1] === 83 && data[i + 2] === 31;
            return { width: bitmap.width, corner: [...data.slice(0, 4)], clay };
        }"""
    )
    assert seen["width"] == 1720 and seen["corner"] == [255, 255, 255, 255]
    assert seen["clay"] > 500


def test_paper_gets_a_picture_of_its_own_size(shown: Shown) -> None:
    page = shown()
    page.evaluate("dispatchEvent(new Event('beforeprint'))")
    assert page.locator(".bd-chart-plot > svg").get_attribute("viewBox") == "0 0 640 370"
    page.evaluate("dispatchEvent(new Event('afterprint'))")
    assert page.locator(".bd-chart-plot > svg").get_attribute("viewBox") != "0 0 640 370"


@pytest.mark.parametrize("scheme", ["default", "slate"])
@pytest.mark.parametrize("width", [360, 1280])
def test_axe_finds_no_violation(shown: Shown, scheme: str, width: int) -> None:
    axe = pytest.importorskip("axe_playwright_python.sync_playwright").Axe()
    page = shown(scheme, width)
    found = axe.run(page, options={"preload": False}).response["violations"]
    assert [(v["id"], [n["html"] for n in v["nodes"]]) for v in found] == []
