"""The demo site as a reader has it: served, and from files with the network off; no request leaves it."""

from __future__ import annotations

import functools
import http.server
import re
import threading
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path

import pytest
from axe_playwright_python.sync_playwright import Axe
from playwright.sync_api import Browser, Page, Route

ROOT = Path(__file__).parents[2]
PARTS = {
    "table": "parts/tarnbrook-ceramics/tb3a-103f38.html",
    "coefficients": "parts/ostrel-probes/osp4-103w.html",
    "b-values": "parts/ferrowick-thermal/fd5-502j.html",
    "b-value": "parts/quillhaven-devices/qg3-4745.html",
}
PART = PARTS["table"]
POSITION = "positions/coolbox-main-rt1.html"
REVIEW = "positions/coolbox-main-rt1/nordvell-elements/nv10-3435.html"
RULE = "checks/review-overdue.html"
MAKER = "parts/ostrel-probes/index.html"


def kinds(site: Path) -> list[str]:
    """A page of each kind: every page at the top and of the sections, and one of each generated kind."""
    top = [file.relative_to(site).as_posix() for file in (*site.glob("*.html"), *site.glob("*/index.html"))]
    return [*sorted(set(top) - {"404.html"}), *PARTS.values(), POSITION, REVIEW, RULE, MAKER]


class QuietHandler(http.server.SimpleHTTPRequestHandler):
    def log_message(self, *args: object) -> None:
        """Say nothing."""


@dataclass
class Visit:
    """A browser window on the site, and what went wrong in it."""

    page: Page
    base: str
    told: list[str] = field(default_factory=list)
    left: list[str] = field(default_factory=list)

    def to(self, path: str) -> Page:
        self.page.goto(self.base + path)
        return self.page


def visit(
    browser: Browser, base: str, *, offline: bool = False, width: int = 1280, dark: bool = False
) -> Iterator[Visit]:
    """A window in which every request that leaves the site is refused; nothing may go wrong in it."""
    scheme = "dark" if dark else "light"
    context = browser.new_context(
        offline=offline, viewport={"width": width, "height": 900}, color_scheme=scheme, reduced_motion="reduce"
    )
    page = context.new_page()
    page.set_default_timeout(10_000)
    seen = Visit(page, base)

    def kept_inside(route: Route) -> None:
        if route.request.url.startswith((base, "data:", "blob:", "about:")):
            route.continue_()
        else:
            seen.left.append(route.request.url)
            route.abort()

    context.route("**/*", kept_inside)
    page.on("console", lambda message: seen.told.append(f"{page.url}: {message.text}"))
    page.on("pageerror", lambda error: seen.told.append(f"{page.url}: {error}"))
    yield seen
    context.close()
    assert seen.left == []
    assert seen.told == []


@pytest.fixture(scope="session")
def served(demo_site: Path) -> Iterator[str]:
    """The site's address on a free port."""
    handler = functools.partial(QuietHandler, directory=str(demo_site))
    with http.server.ThreadingHTTPServer(("127.0.0.1", 0), handler) as server:
        threading.Thread(target=server.serve_forever, daemon=True).start()
        yield f"http://127.0.0.1:{server.server_port}/"
        server.shutdown()


@pytest.fixture
def files(chromium: Browser, demo_site: Path) -> Iterator[Visit]:
    """The site opened from its folder, the network off."""
    yield from visit(chromium, f"file://{demo_site}/", offline=True)


@pytest.fixture(params=["served", "files"])
def reader(request: pytest.FixtureRequest, chromium: Browser, demo_site: Path, served: str) -> Iterator[Visit]:
    """The site from a server, and from its folder with the network off."""
    from_files = request.param == "files"
    yield from visit(chromium, f"file://{demo_site}/" if from_files else served, offline=from_files)


def test_every_kind_of_page_loads_without_a_complaint_and_without_leaving_the_site(
    reader: Visit, demo_site: Path
) -> None:
    for path in kinds(demo_site):
        page = reader.to(path)
        assert page.locator("h1").count() == 1, path
        assert page.locator("h1").is_visible(), path


def test_from_the_home_page_one_gets_to_a_part_and_back(reader: Visit) -> None:
    page = reader.to("index.html")
    page.locator("a[href^='parts/']", has_text="FD5-502J").first.click()
    assert page.locator("h1").inner_text() == "FD5-502J"
    assert "restricted" in page.locator(".bd-standing-line").inner_text()
    page.get_by_role("link", name="Ferrowick Thermal").first.click()
    assert page.locator("h1").inner_text() == "Ferrowick Thermal"
    page.locator(".md-header .md-logo").click()
    assert page.locator("h1").inner_text() == "Thermistors on record"


@pytest.mark.parametrize(
    ("query", "found"),
    [
        ("TB3A-103F38", "TB3A-103F38 · Tarnbrook Ceramics"),
        ("103F38", "TB3A-103F38 · Tarnbrook Ceramics"),
        ("HS-10473", "TB3A-103F38 · Tarnbrook Ceramics"),
        ("Quillhaven", "Quillhaven Devices"),
        ("10k", "10 kΩ"),
        ("0603", "0603"),
        ("coolbox", "coolbox-main/RT1"),
    ],
)
def test_the_search_finds_a_part_by_what_people_know_of_it(reader: Visit, query: str, found: str) -> None:
    page = reader.to(PART)
    page.locator(".md-search__input").fill(query)
    page.locator(".md-search__input").press("End")
    page.locator(".md-search-result__item").first.wait_for()
    shown = page.locator(".md-search-result__list").inner_text()
    assert found in shown


def test_the_parts_filter_finds_any_fragment_of_a_number(reader: Visit) -> None:
    page = reader.to("parts/index.html")
    page.get_by_role("searchbox").or_(page.locator("main input[type=search]")).first.fill("3a-10")
    page.get_by_text("TB3A-103J38").first.wait_for()
    numbers = page.locator("main table tbody th").all_inner_texts()
    assert numbers and all("3A-10" in number for number in numbers)
    page.get_by_role("link", name="TB3A-103J38").first.click()
    assert page.locator("h1").inner_text() == "TB3A-103J38"


@pytest.mark.parametrize(("path", "record"), [(PART, "tarnbrook/TB3A-103F38.yaml"), (POSITION, "boards/")])
def test_the_edit_link_leads_to_the_record(files: Visit, path: str, record: str) -> None:
    address = files.to(path).locator("a.md-content__button").get_attribute("href") or ""
    prefix = "https://git.example.com/hardware/beadroll/edit/main/parts/"
    assert address.startswith(prefix + record)
    assert (ROOT / "parts" / address.removeprefix(prefix)).is_file()


def test_the_csv_beside_a_part_is_the_one_its_page_links(files: Visit, demo_site: Path) -> None:
    link = files.to(PART).get_by_role("link", name="The curve as CSV")
    assert (demo_site / PART).with_name(link.get_attribute("href") or "").read_text("utf-8").startswith("t_c,r_ohm,")


@pytest.mark.parametrize(("dark", "scheme"), [(False, "default"), (True, "slate")])
def test_the_colours_follow_the_system(chromium: Browser, demo_site: Path, dark: bool, scheme: str) -> None:
    for seen in visit(chromium, f"file://{demo_site}/", offline=True, dark=dark):
        body = seen.to(PART).locator("body")
        assert body.get_attribute("data-md-color-scheme") == scheme
        levels = re.findall(r"\d+", body.evaluate("body => getComputedStyle(body).backgroundColor"))
        assert (sum(map(int, levels[:3])) < 384) == dark


def test_no_page_scrolls_sideways_on_a_phone(chromium: Browser, demo_site: Path) -> None:
    for seen in visit(chromium, f"file://{demo_site}/", offline=True, width=360):
        widths = {path: seen.to(path).evaluate("document.documentElement.scrollWidth") for path in kinds(demo_site)}
        assert {path: width for path, width in widths.items() if width > 360} == {}


def test_a_wide_table_scrolls_by_itself_and_keeps_its_caption_in_sight(chromium: Browser, demo_site: Path) -> None:
    for seen in visit(chromium, f"file://{demo_site}/", offline=True, width=360):
        frame = seen.to(PART).locator("#r-t-table ~ .bd-scroll").first
        assert frame.evaluate("frame => frame.scrollWidth > frame.clientWidth")
        frame.focus()
        caption = frame.locator("caption").bounding_box()
        assert caption is not None and caption["x"] >= 0 and caption["x"] + caption["width"] <= 360


def test_a_column_of_figures_has_its_points_below_each_other(files: Visit) -> None:
    points = files.to(PART).evaluate(
        """() => [...document.querySelectorAll('#r-t-table ~ .bd-scroll tbody tr')].slice(0, 34).map(row => {
            const text = row.cells[1].firstChild, range = document.createRange();
            const at = text.data.indexOf('.');
            range.setStart(text, at); range.setEnd(text, at + 1);
            return range.getBoundingClientRect().left;
        })"""
    )
    assert len(points) == 34 and max(points) - min(points) < 1.5


@pytest.mark.parametrize("half", [0, 1])
def test_no_page_has_a_barrier_that_axe_knows(chromium: Browser, served: str, demo_site: Path, half: int) -> None:
    """In the dark only the colours differ, so only they are looked at again."""
    found = []
    for seen in visit(chromium, served):
        for path in [*kinds(demo_site), "404.html"][half::2]:
            page = seen.to(path)
            found += barriers(page, path, {})
            page.emulate_media(color_scheme="dark")
            page.wait_for_function("document.getAnimations().length === 0")
            found += barriers(page, path, {"runOnly": ["color-contrast", "link-in-text-block"]})
            page.emulate_media(color_scheme="light")
    assert found == []


def barriers(page: Page, path: str, options: dict[str, object]) -> list[str]:
    """What axe finds in a page, a line each."""
    answer = Axe().run(page, options={"resultTypes": ["violations"], "preload": False} | options).response
    return [
        f"{path}: {rule['id']}: {node['target']}: {node['failureSummary']}"
        for rule in answer["violations"]
        for node in rule["nodes"]
    ]


def test_the_page_for_a_missing_address_stands_in_the_same_frame(chromium: Browser, served: str) -> None:
    for seen in visit(chromium, served):
        page = seen.to("404.html")
        assert "404" in page.locator("h1").inner_text()
        page.locator(".md-header .md-logo").click()
        assert page.url in (served, f"{served}index.html")


def test_a_part_s_page_in_print_is_a_few_pages(files: Visit, tmp_path: Path) -> None:
    file = tmp_path / "part.pdf"
    files.to(PART).pdf(path=str(file), format="A4")
    count = len(re.findall(rb"/Type\s*/Page\b", file.read_bytes()))
    assert 2 <= count <= 7
