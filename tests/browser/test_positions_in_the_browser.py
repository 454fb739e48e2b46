"""A position's page as a reader has it: without barriers, whole on a phone and on paper."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from axe_playwright_python.sync_playwright import Axe
from playwright.sync_api import Browser, Page

# A high side with its own reference and two trips; a parallel resistor with a wire.
PLACES = ["charger-power-rt2", "vial-carrier-rt2"]
BOXES = """() => [...document.querySelectorAll('main figure > svg')].map(svg => {
    const frame = svg.getBoundingClientRect();
    return [...svg.querySelectorAll('text')].filter(text => {
        const box = text.getBoundingClientRect();
        return box.left < frame.left - 1 || box.right > frame.right + 1 || box.bottom > frame.bottom + 1;
    }).map(text => text.textContent);
})"""
TOUCHING = """() => {
    const texts = [...document.querySelectorAll('.bd-schematic text, .bd-trips text')];
    const boxes = texts.map(text => [text.textContent, text.getBoundingClientRect()]);
    return boxes.flatMap(([name, a], i) => boxes.slice(i + 1).filter(([, b]) =>
        a.left < b.right - 1 && b.left < a.right - 1 && a.top < b.bottom - 4 && b.top < a.bottom - 4
    ).map(([other]) => name + ' | ' + other));
}"""


def opened(browser: Browser, site: Path, place: str, *, width: int = 1280, dark: bool = False) -> Page:
    scheme = "dark" if dark else "light"
    page = browser.new_page(viewport={"width": width, "height": 900}, color_scheme=scheme, reduced_motion="reduce")
    page.goto((site / f"positions/{place}.html").as_uri())
    return page


@pytest.mark.parametrize("place", PLACES)
@pytest.mark.parametrize("dark", [False, True])
def test_axe_finds_no_barrier(chromium: Browser, demo_site: Path, place: str, dark: bool) -> None:
    page = opened(chromium, demo_site, place, dark=dark)
    found = Axe().run(page, options={"resultTypes": ["violations"], "preload": False}).response["violations"]
    page.close()
    assert [(rule["id"], node["target"]) for rule in found for node in rule["nodes"]] == []


@pytest.mark.parametrize("width", [360, 1280])
def test_no_text_of_a_figure_is_cut_or_touches_another(chromium: Browser, demo_site: Path, width: int) -> None:
    for file in sorted((demo_site / "positions").glob("*-rt?.html")):
        page = opened(chromium, demo_site, file.stem, width=width)
        cut, touching = page.evaluate(BOXES), page.evaluate(TOUCHING)
        sideways = page.evaluate("document.documentElement.scrollWidth > window.innerWidth")
        page.close()
        assert (file.stem, [text for texts in cut for text in texts], touching) == (file.stem, [], [])
        assert not sideways, file.stem


@pytest.mark.parametrize("place", PLACES)
def test_on_paper_tables_and_figures_are_whole(chromium: Browser, demo_site: Path, place: str) -> None:
    """A4 less its margins of 2 cm is 643 CSS pixels wide."""
    page = opened(chromium, demo_site, place, width=643)
    page.emulate_media(media="print")
    wide = page.evaluate(
        """() => [...document.querySelectorAll('main table, main figure')]
            .filter(box => box.getBoundingClientRect().right > window.innerWidth).map(box => box.textContent.slice(0, 40))"""
    )
    sheets = len(re.findall(rb"/Type\s*/Page\b", page.pdf(format="A4")))
    page.close()
    assert wide == []
    assert sheets <= 6
