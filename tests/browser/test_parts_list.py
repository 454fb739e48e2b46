"""The Parts page in Chromium: filters, order, address, keyboard, long lists."""

from __future__ import annotations

import csv
import datetime
import functools
import http.server
import io
import re
import shutil
import threading
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import pytest
from playwright.sync_api import Browser, Page

from builder.crosschecks import CheckedCatalog
from builder.pages.context import Context
from builder.pages.parts_page import parts_data, parts_page
from builder.pages.paths import Paths
from builder.part_curve import part_curve
from builder.records import Catalog, Part, PartRecord, read_catalog
from builder.records.catalog import Source
from builder.units import resistance_from_code

ROOT = Path(__file__).parents[2]
HOSTILE = "<img src=x onerror=document.title='taken'>"
FRAME = """<!doctype html><html lang="en"><head><meta charset="utf-8"><title>Parts</title>
<meta http-equiv="Content-Security-Policy" content="default-src 'self' file:; script-src 'self' file:">
<meta name="viewport" content="width=device-width">{styles}</head>
<body class="md-typeset"><main>{body}</main>
<script src="../assets/visible-rows.js"></script><script src="../assets/parts-list.js"></script></body></html>"""

# What the site's theme would set.
FRAME_STYLE = """
body { background: #fff; color: #222; }
body[data-md-color-scheme="slate"] { --md-default-bg-color: #1e2129; background: #1e2129; color: #d5d7e2; }
a { color: var(--bd-nominal); }
"""


def written(catalog: Catalog, folder: Path) -> Path:
    """The Parts page of a catalog in the plainest frame that loads the site's own files."""
    curves = {record.source.file: part_curve(record) for record in catalog.parts}
    context = Context(CheckedCatalog(catalog, curves, datetime.date(2026, 1, 1)))
    assets = shutil.copytree(ROOT / "builder" / "assets", folder / "assets")
    (assets / "frame.css").write_text(FRAME_STYLE, "utf-8")
    styles = "".join(f'<link rel="stylesheet" href="../assets/{f.name}">' for f in sorted(assets.glob("*.css")))
    data = parts_data(context)
    (folder / "parts").mkdir()
    (folder / data.path).write_text(data.content(), "utf-8")
    page = folder / "parts" / "index.html"
    page.write_text(FRAME.format(styles=styles, body=parts_page(context).body()), "utf-8")
    return page


def catalog_of(*parts: Part) -> Catalog:
    records = [PartRecord(part, Source(f"{i}.yaml", f"{i}.yaml", {})) for i, part in enumerate(parts)]
    return Catalog(tuple(sorted(records, key=lambda record: record.name.casefold())))


def plain_part(number: str, **changes: Any) -> Part:
    fields: dict[str, Any] = {
        "part": number,
        "maker": "Pellworm",
        "body": {"form": "leaded"},
        "rated": {"resistance_ohm": 1e4},
        "b_values": [{"between_c": [25, 85], "b_k": 3435}],
    }
    return Part.model_validate(fields | changes)


DEMO = read_catalog(ROOT / "parts")
PARTS = [record.part for record in DEMO.parts]


class QuietHandler(http.server.SimpleHTTPRequestHandler):
    def log_message(self, *args: object) -> None:
        """Say nothing."""


@pytest.fixture(scope="module")
def addresses(tmp_path_factory: pytest.TempPathFactory) -> Iterator[dict[str, str]]:
    """Pages by name, over HTTP; `file` is the demo from the disk."""
    root = tmp_path_factory.mktemp("sites")
    odd = (plain_part(HOSTILE, maker=HOSTILE, own_number="=1+1"), plain_part("PX-1"))
    pages = {
        "demo": written(DEMO, root / "demo"),
        "odd": written(catalog_of(*odd), root / "odd"),
        "long": written(catalog_of(*(plain_part(f"PX-{i:04}") for i in range(2000))), root / "long"),
    }
    handler = functools.partial(QuietHandler, directory=str(root))
    server = http.server.ThreadingHTTPServer(("127.0.0.1", 0), handler)
    threading.Thread(target=server.serve_forever, daemon=True).start()
    base = f"http://127.0.0.1:{server.server_port}"
    yield {name: f"{base}/{page.relative_to(root)}" for name, page in pages.items()} | {"file": pages["demo"].as_uri()}
    server.shutdown()


@dataclass
class List:
    """What a person sees and does on the page."""

    page: Page

    def find(self, text: str) -> list[str]:
        self.page.fill("[name=find]", text)
        return self.numbers()

    def numbers(self) -> list[str]:
        # Hits below the window are drawn once typing pauses.
        self.page.wait_for_function(
            """() => {
                const table = document.querySelector("#bd-parts table");
                const rows = table.querySelectorAll("tbody[role] tr").length;
                return table.matches(".bd-parts-long") || rows === table.ariaRowCount - 1;
            }"""
        )
        return self.page.locator("tbody[role] th").all_text_contents()

    def said(self) -> str:
        return self.page.locator("[role=status]").inner_text()

    def column(self, name: str) -> list[str]:
        return self.page.locator(f"tbody[role] .bd-c-{name}").all_text_contents()

    def heading(self, text: str) -> Any:
        return self.page.get_by_role("columnheader", name=text)

    def order(self, text: str) -> None:
        self.heading(text).get_by_role("button").click()


Opened = Callable[..., List]


@pytest.fixture
def opened(chromium: Browser, addresses: dict[str, str]) -> Iterator[Opened]:
    """Open a page by name; afterwards nothing may have been complained about in the console."""
    contexts, complaints = [], []

    def open_page(name: str = "demo", fragment: str = "", **options: Any) -> List:
        context = chromium.new_context(**options)
        contexts.append(context)
        page = context.new_page()
        page.on("console", lambda message: complaints.append(message.text))
        page.on("pageerror", lambda error: complaints.append(str(error)))
        # No browser asks for this icon's sake alone.
        page.route("**/favicon.ico", lambda route: route.fulfill(status=204))
        page.goto(addresses[name] + fragment)
        return List(page)

    yield open_page
    for context in contexts:
        context.close()
    assert complaints == []


def numbers(test: Callable[[Part], bool]) -> list[str]:
    return [part.part for part in PARTS if test(part)]


@pytest.mark.parametrize("name", ["demo", "file"])
def test_every_part_is_listed_and_leads_to_its_page(opened: Opened, name: str) -> None:
    shown = opened(name)
    assert shown.page.is_visible("tbody[role] a")
    assert shown.numbers() == [part.part for part in PARTS]
    links = [link.get_attribute("href") for link in shown.page.locator("tbody[role] a").all()]
    assert [f"parts/{link}" for link in links] == [Paths(DEMO).part(record) for record in DEMO.parts]


def test_any_piece_of_a_number_or_word_finds_it_and_several_must_all_be_there(opened: Opened) -> None:
    def said(part: Part) -> str:
        words = [part.part, part.part.replace("-", ""), part.own_number, part.maker, part.description]
        return " ".join(filter(None, [*words, part.body.size_code])).casefold()

    shown = opened()
    for text in ("3A-103", "3a103f", "10473", "TARNBROOK 0603 473", "mm  bead", "interchangeable probe"):
        expected = numbers(lambda part, text=text: all(word in said(part) for word in text.casefold().split()))
        assert expected and shown.find(text) == expected, text


def test_a_value_finds_the_parts_of_that_rated_resistance(opened: Opened) -> None:
    expected = numbers(lambda part: part.rated.resistance_ohm == 10e3)
    assert len(expected) > 10
    shown = opened()
    for text in ("10k", "10K", "10 k", "10kΩ", "10 kΩ", "10 kOhm", "10000", "1e4", "10 k\u2126"):
        assert shown.find(text) == expected, text


def test_a_value_does_not_find_those_that_only_begin_or_end_like_it(opened: Opened) -> None:
    assert opened().find("2k") == []
    assert opened().find("20k") == []


def test_a_tolerance_finds_the_parts_that_have_exactly_it(opened: Opened) -> None:
    assert opened().find("±2 %") == numbers(lambda part: part.rated.tolerance_pct == 2)


def test_each_part_is_found_by_its_whole_description(opened: Opened) -> None:
    shown = opened()
    for part in PARTS:
        if part.description:
            assert part.part in shown.find(part.description), part.description


def test_a_resistance_is_read_as_the_builder_reads_it(opened: Opened) -> None:
    shown = opened()
    for code in ("2k2", "2.2k", "4K7", "M47", "0.1M", "820R", "R82", "100r", "10k0", "2M2", "47k", "470k"):
        limit_ohm = resistance_from_code(re.sub(r"(\d+)\.(\d+)([kM])", r"\1\3\2", code))
        shown.page.fill("[name=rated_from]", code)
        assert shown.numbers() == numbers(lambda part, ohm=limit_ohm: part.rated.resistance_ohm >= ohm), code


FILTERS: dict[str, tuple[dict[str, str | list[str]], Callable[[Part], bool]]] = {
    "one value": ({"rated": "47000"}, lambda p: p.rated.resistance_ohm == 47e3),
    "from and to": (
        {"rated_from": "4k7", "rated_to": "22 kΩ"},
        lambda p: 4700 <= p.rated.resistance_ohm <= 22000,
    ),
    "tolerance": ({"tolerance": "1"}, lambda p: p.rated.tolerance_pct is not None and p.rated.tolerance_pct <= 1),
    "bodies": ({"form": ["bead", "lug"]}, lambda p: p.body.form in ("bead", "lug")),
    "size": ({"size": "0603"}, lambda p: p.body.size_code == "0603"),
    "range": (
        {"cold": "−40", "hot": "150 °C"},
        lambda p: (
            p.limits.operating_c is not None and p.limits.operating_c[0] <= -40 and p.limits.operating_c[1] >= 150
        ),
    ),
    "standings": ({"standing": ["approved", "restricted"]}, lambda p: p.state() in ("approved", "restricted")),
    "lifecycle": ({"lifecycle": ["obsolete"]}, lambda p: p.lifecycle == "obsolete"),
    "maker": ({"maker": "Ostrel Probes"}, lambda p: p.maker == "Ostrel Probes"),
    "several": (
        {"find": "10k", "form": ["chip"], "standing": ["approved"], "tolerance": "1"},
        lambda p: (
            p.rated.resistance_ohm == 10e3
            and p.body.form == "chip"
            and p.state() == "approved"
            and p.rated.tolerance_pct == 1
        ),
    ),
}


def fill(shown: List, fields: dict[str, str | list[str]]) -> None:
    for name, value in fields.items():
        if isinstance(value, list):
            for one in value:
                shown.page.check(f"[name={name}][value='{one}']")
        elif name in ("rated", "tolerance", "size", "maker"):
            shown.page.select_option(f"[name={name}]", value)
        else:
            shown.page.fill(f"[name={name}]", value)


@pytest.mark.parametrize("name", FILTERS)
def test_each_filter_leaves_the_parts_that_meet_it(opened: Opened, name: str) -> None:
    fields, test = FILTERS[name]
    shown = opened()
    fill(shown, fields)
    expected = numbers(test)
    assert 0 < len(expected) < len(PARTS)
    assert shown.numbers() == expected
    assert shown.said() == f"{len(expected)} of {len(PARTS)} parts"


@pytest.mark.parametrize("name", ["from and to", "range", "several"])
def test_the_copied_link_brings_back_the_same_list_from_a_file_too(opened: Opened, name: str) -> None:
    shown = opened("file", permissions=["clipboard-read", "clipboard-write"])
    fill(shown, FILTERS[name][0])
    shown.order("Rated resistance")
    shown.order("Rated resistance")
    shown.page.get_by_role("button", name="Copy link").click()
    shown.page.wait_for_function("() => document.querySelector('[role=status]').textContent === 'Link copied'")
    copied = shown.page.evaluate("navigator.clipboard.readText()")
    assert copied == shown.page.url
    again = opened("file", "#" + copied.split("#")[1])
    assert again.numbers() == shown.numbers()
    assert again.heading("Rated resistance").get_attribute("aria-sort") == "descending"


def test_back_undoes_one_field_and_not_one_letter(opened: Opened) -> None:
    shown = opened("file")
    shown.page.locator("[name=find]").press_sequentially("chip")
    shown.page.check("[name=standing][value=approved]")
    shown.page.go_back()
    assert shown.numbers() == numbers(lambda part: part.body.form == "chip")
    assert not shown.page.is_checked("[name=standing][value=approved]")
    shown.page.go_back()
    assert shown.page.input_value("[name=find]") == ""
    shown.page.go_forward()
    assert shown.page.input_value("[name=find]") == "chip"


def test_an_anchor_of_the_page_does_not_undo_the_filters(opened: Opened) -> None:
    shown = opened()
    found = shown.find("bead")
    shown.page.click("text=Makers’ pages")
    assert shown.page.url.endswith("#makers")
    assert shown.numbers() == found


def test_clear_filters_shows_all_parts_again(opened: Opened) -> None:
    shown = opened("demo", "#find=bead&standing=approved&cold=-40")
    assert len(shown.numbers()) < len(PARTS)
    shown.page.click("text=Clear filters")
    assert len(shown.numbers()) == len(PARTS)
    assert shown.page.url.endswith("#")


def test_an_address_with_unknown_words_shows_the_whole_list(opened: Opened) -> None:
    shown = opened("demo", "#order=price&colour=red&maker=Nobody&=&%")
    assert len(shown.numbers()) == len(PARTS)
    assert shown.heading("Maker").get_attribute("aria-sort") == "ascending"


def test_what_cannot_be_read_is_said_and_does_not_filter(opened: Opened) -> None:
    shown = opened()
    shown.page.fill("[name=rated_from]", "10x")
    assert shown.said() == f"{len(PARTS)} of {len(PARTS)} parts. “10x” is not a resistance: write 4k7 or 4700."
    assert shown.page.get_attribute("[name=rated_from]", "aria-invalid") == "true"


def test_no_hit_is_said(opened: Opened) -> None:
    shown = opened()
    assert shown.find("no such part") == []
    assert shown.page.is_visible("text=No part is like this. Take a filter away.")
    assert shown.page.get_attribute("[role=status]", "aria-live") in (None, "polite")


RANK = {"approved": 0, "restricted": 1, "proposed": 2, "withdrawn": 3, "no standing": 4}
ORDERS: dict[str, tuple[str, Callable[[Part], Any]]] = {
    "Rated resistance": ("rated", lambda p: (p.rated.resistance_ohm, p.rated.at_c)),
    "Tolerance": ("tolerance", lambda p: p.rated.tolerance_pct),
    "Body": ("body", lambda p: (p.body.form, p.body.size_code or "")),
    "Operating range": ("range", lambda p: p.limits.operating_c),
    "Standing": ("standing", lambda p: RANK[p.state() or "no standing"]),
    "Own number": ("own", lambda p: p.own_number),
}


@pytest.mark.parametrize("heading", ORDERS)
def test_a_heading_orders_the_list_both_ways_with_missing_values_last(opened: Opened, heading: str) -> None:
    _, value = ORDERS[heading]
    known = sorted((p for p in PARTS if value(p) is not None), key=value)
    missing = numbers(lambda part: value(part) is None)
    shown = opened()
    shown.order(heading)
    assert shown.heading(heading).get_attribute("aria-sort") == "ascending"
    assert shown.heading("Maker").get_attribute("aria-sort") == "none"
    assert shown.numbers() == [part.part for part in known] + missing
    shown.order(heading)
    assert shown.heading(heading).get_attribute("aria-sort") == "descending"
    assert shown.numbers() == [part.part for part in reversed(known)] + missing


def test_numbers_are_ordered_by_their_digits_value(opened: Opened) -> None:
    shown = opened()
    shown.find("nv")
    shown.order("Part number")
    first = [number for number in shown.numbers() if number.endswith("-3950")]
    assert first == ["NV10-3950", "NV100-3950"]
    assert shown.numbers().index("NV22-3740") < shown.numbers().index("NV100-3950")


def test_a_heading_works_by_keyboard(opened: Opened) -> None:
    shown = opened()
    shown.heading("B25/85").get_by_role("button").focus()
    shown.page.keyboard.press("Enter")
    shown.numbers()
    values = [int(text.split()[0]) for text in shown.column("b") if text != "–"]
    assert len(values) > 50 and values == sorted(values)
    assert shown.page.evaluate("document.activeElement.dataset.by") == "b"


def test_hostile_text_of_a_record_stays_text(opened: Opened) -> None:
    shown = opened("odd")
    assert HOSTILE in shown.numbers()
    assert shown.find("onerror") == [HOSTILE]
    assert shown.page.locator("main img").count() == 0
    assert shown.page.title() == "Parts"


def test_the_csv_holds_the_hits_and_no_formula(opened: Opened) -> None:
    shown = opened("odd")
    shown.find("onerror")
    with shown.page.expect_download() as download:
        shown.page.click("text=Download CSV")
    text = Path(download.value.path()).read_text("utf-8-sig")
    (row,) = csv.DictReader(io.StringIO(text))
    assert row["part"] == HOSTILE and row["own_number"] == "'=1+1"
    assert (row["rated_resistance_ohm"], row["rated_c"], row["b_25_85_k"]) == ("10000", "25", "3435")
    assert (row["tolerance_pct"], row["operating_min_c"], row["standing"]) == ("", "", "no standing")


def test_the_csv_is_copied_too(opened: Opened) -> None:
    shown = opened(permissions=["clipboard-read", "clipboard-write"])
    found = shown.find("probe")
    shown.page.click("text=Copy as CSV")
    shown.page.wait_for_function("() => document.querySelector('[role=status]').textContent.endsWith('copied as CSV')")
    rows = csv.DictReader(io.StringIO(shown.page.evaluate("navigator.clipboard.readText()")))
    assert [row["part"] for row in rows] == found


def test_a_long_list_draws_only_what_is_in_view(opened: Opened) -> None:
    shown = opened("long")
    assert len(shown.numbers()) < 100
    assert shown.page.get_attribute("table", "aria-rowcount") == "2001"
    shown.page.locator("#makers").scroll_into_view_if_needed()
    shown.page.wait_for_function("() => document.querySelector('tbody[role] tr:last-child').ariaRowIndex === '2001'")
    assert shown.numbers()[-1] == "PX-1999"
    assert len(shown.numbers()) < 100


def test_tab_goes_on_through_a_long_list_beyond_what_was_drawn_at_first(opened: Opened) -> None:
    shown = opened("long")
    shown.page.locator("tbody[role] a").first.focus()
    for _ in range(120):
        shown.page.keyboard.press("Tab")
    shown.page.wait_for_function("() => document.activeElement.textContent === 'PX-0120'")


def test_hits_below_the_window_are_drawn_once_typing_pauses(opened: Opened) -> None:
    shown = opened("long")
    shown.page.fill("[name=find]", "px-11")
    drawn = "document.querySelectorAll('tbody[role] tr').length"
    assert shown.page.evaluate(drawn) < 100
    shown.page.wait_for_function(f"() => {drawn} === 100")


def test_all_hits_are_printed(opened: Opened) -> None:
    shown = opened("long")
    shown.find("px-0")
    shown.page.evaluate("dispatchEvent(new Event('beforeprint'))")
    assert len(shown.numbers()) == 1000
    shown.page.evaluate("dispatchEvent(new Event('afterprint'))")
    assert len(shown.numbers()) < 100


def test_without_scripts_the_makers_are_there_and_the_list_is_not(opened: Opened) -> None:
    shown = opened(java_script_enabled=False)
    assert shown.page.get_by_role("link", name="Ostrel Probes").is_visible()
    assert not shown.page.locator("#bd-parts").is_visible()


@pytest.mark.parametrize("width", [360, 768, 1280])
def test_nothing_sticks_out_of_the_page(opened: Opened, width: int) -> None:
    shown = opened(viewport={"width": width, "height": 740})
    assert shown.page.evaluate("document.documentElement.scrollWidth") <= width


@pytest.mark.parametrize("scheme", ["default", "slate"])
@pytest.mark.parametrize("width", [360, 1280])
def test_axe_finds_no_violation(opened: Opened, scheme: str, width: int) -> None:
    axe = pytest.importorskip("axe_playwright_python.sync_playwright").Axe()
    shown = opened(viewport={"width": width, "height": 900})
    shown.page.evaluate("scheme => { document.body.dataset.mdColorScheme = scheme; }", scheme)
    assert len(shown.numbers()) == len(PARTS)
    found = axe.run(shown.page).response["violations"]
    assert [(v["id"], [n["html"] for n in v["nodes"]]) for v in found] == []
