"""The Ledger page in Chromium: filters, the address that holds them, links to one entry, a long ledger, paper."""

from __future__ import annotations

import json
import re
from collections.abc import Iterator
from pathlib import Path

import pytest
from axe_playwright_python.sync_playwright import Axe
from playwright.sync_api import Browser, Page

from builder.pages.ledger_page import ledger_page
from tests.unit.pages.small_site import read

ROOT = Path(__file__).parents[2]


@pytest.fixture
def page(chromium: Browser) -> Iterator[Page]:
    opened = chromium.new_page(viewport={"width": 1280, "height": 900})
    yield opened
    opened.close()


def count(page: Page) -> tuple[int, int]:
    shown, whole = re.findall(r"\d+", page.locator("#bd-ledger [role=status]").inner_text())
    return int(shown), int(whole)


def values(page: Page, name: str) -> set[str]:
    return set(page.eval_on_selector_all("#bd-ledger tbody tr", f"rows => rows.map(row => row.dataset.{name})"))


def test_each_filter_leaves_the_rows_that_it_names(demo_site: Path, page: Page) -> None:
    address = (demo_site / "ledger.html").as_uri()
    for filters, name, wanted in (
        ("state=withdrawn", "state", {"withdrawn"}),
        ("by=purchasing", "by", {"purchasing"}),
        ("about=alternate", "about", {"alternate"}),
        ("holds=yes", "holds", {""}),
    ):
        page.goto("about:blank")
        page.goto(f"{address}#{filters}")
        shown, whole = count(page)
        assert 0 < shown < whole and values(page, name) == wanted, filters
    page.goto("about:blank")
    page.goto(f"{address}#from=2026-02-01&to=2026-02-28")
    assert {day[:7] for day in values(page, "day")} == {"2026-02"}


def test_what_is_typed_stands_in_the_address_and_comes_back_with_it(demo_site: Path, page: Page) -> None:
    page.goto((demo_site / "ledger.html").as_uri())
    page.get_by_label("Part, maker or position").fill("nordvell coolbox-main/rt1")
    page.get_by_label("Standing").select_option("withdrawn")
    shown, _ = count(page)
    assert shown > 0 and page.url.endswith("#find=nordvell+coolbox-main%2Frt1&state=withdrawn")
    address = page.url
    page.goto("about:blank")
    page.goto(address)
    assert count(page)[0] == shown
    page.locator("#bd-ledger").get_by_role("button", name="Clear").click()
    assert len(set(count(page))) == 1


def test_an_entry_s_address_leads_to_its_row(demo_site: Path, page: Page) -> None:
    page.goto((demo_site / "ledger.html").as_uri())
    anchor = page.locator("#bd-ledger tbody tr").last.get_attribute("id")
    page.goto("about:blank")
    page.goto(f"{(demo_site / 'ledger.html').as_uri()}#{anchor}")
    page.wait_for_timeout(200)
    row = page.locator("#bd-ledger tbody tr:target")
    assert row.get_attribute("id") == anchor
    box = row.bounding_box()
    assert box is not None and 0 < box["y"] < 900


def test_the_links_of_the_home_page_find_as_many_as_they_say(demo_site: Path, page: Page) -> None:
    page.goto((demo_site / "index.html").as_uri())
    links = page.eval_on_selector_all(
        "tr:has(a[href^='ledger.html#'])", "rows => rows.map(r => [r.cells[0].firstChild.href, r.cells[1].textContent])"
    )
    told = [(address, int(number)) for address, number in links if address and "=" in address]
    assert told
    for address, number in told:
        page.goto("about:blank")
        page.goto(address)
        assert count(page)[0] == number, address


def test_without_scripts_the_whole_table_stands_there_without_filters(demo_site: Path, chromium: Browser) -> None:
    context = chromium.new_context(java_script_enabled=False)
    page = context.new_page()
    page.goto((demo_site / "ledger.html").as_uri())
    assert page.locator("#bd-ledger tbody tr").count() > 100
    assert not page.locator("#bd-ledger form").is_visible()
    context.close()


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize("width", [360, 1280])
def test_nothing_bars_the_way_and_nothing_sticks_out(
    demo_site: Path, chromium: Browser, width: int, scheme: str
) -> None:
    context = chromium.new_context(viewport={"width": width, "height": 800}, color_scheme=scheme)  # type: ignore[arg-type]
    page = context.new_page()
    page.goto((demo_site / "ledger.html").as_uri())
    assert page.evaluate("document.documentElement.scrollWidth") <= width
    violations = Axe().run(page, "#bd-ledger").response["violations"]
    assert violations == [], json.dumps(violations)[:2000]
    context.close()


def test_of_a_long_ledger_only_what_was_scrolled_to_is_drawn(tmp_path: Path, page: Page) -> None:
    standing = [
        {"state": "proposed", "on": f"20{y:02}-{m:02}-{d:02}", "by": "sensors", "because": "again"}
        for y in range(20, 26)
        for m in range(1, 13)
        for d in range(1, 29)
    ]
    (tmp_path / "records").mkdir()
    body = ledger_page(read(tmp_path / "records", {"standing": standing})).body()
    script = (ROOT / "builder" / "assets" / "ledger.js").read_text("utf-8")
    (tmp_path / "ledger.html").write_text(
        f"<!doctype html><meta charset=utf-8>{body}<script>{script}</script>", "utf-8"
    )
    page.goto((tmp_path / "ledger.html").as_uri())
    rows = page.locator("#bd-ledger tbody tr")
    drawn = rows.count()
    assert drawn < 500 < len(standing)
    page.evaluate("scrollTo(0, document.body.scrollHeight)")
    page.wait_for_function(f"document.querySelectorAll('#bd-ledger tbody tr').length > {drawn}")
    assert rows.count() < len(standing)
    page.evaluate("dispatchEvent(new Event('beforeprint'))")
    assert rows.count() == len(standing) == count(page)[1]


def test_a_position_finds_what_is_only_for_it(demo_site: Path, page: Page) -> None:
    page.goto((demo_site / "ledger.html").as_uri())
    restricted = page.locator("#bd-ledger tbody tr", has=page.locator("td:nth-child(8):not(:empty)"))
    whole = restricted.count()
    assert whole > 0
    place = restricted.first.locator("td:nth-child(8)").inner_text().split(", ")[0]
    assert restricted.first.locator("td:nth-child(3)").inner_text() == "see only for"
    page.get_by_label("Part, maker or position").fill(place)
    assert 0 < restricted.count() <= whole


def test_a_filtered_ledger_says_on_paper_how_much_it_leaves_out(demo_site: Path, page: Page) -> None:
    page.goto((demo_site / "ledger.html").as_uri() + "#state=withdrawn")
    page.emulate_media(media="print")
    assert page.locator("#bd-ledger [role=status]").is_visible()
    for control in page.locator("#bd-ledger form :is(input, select, button)").all():
        assert not control.is_visible()
