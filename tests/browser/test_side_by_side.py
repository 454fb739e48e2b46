"""The Side by side page in Chromium, from the disk and without network: choosing, figures, sentences, address, files."""

from __future__ import annotations

import csv
import datetime
import itertools
import random
import re
import shutil
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from playwright.sync_api import Browser, Locator, Page

from builder.comparisons import Comparison, common_range_c, compared, sentence
from builder.crosschecks import CheckedCatalog
from builder.pages.context import Context
from builder.pages.parts_page import parts_data
from builder.pages.side_by_side_page import PAGE, curve_file, side_by_side_page
from builder.part_curve import part_curve, whole_steps_c
from builder.records import Catalog, Part, PartRecord, read_catalog
from builder.records.catalog import Source
from builder.units import Array, number_text, signed_text

ROOT = Path(__file__).parents[2]
HOSTILE = "<img src=x onerror=document.title='taken'>"
FRAME = """<!doctype html><html lang="en"><head><meta charset="utf-8"><title>Side by side</title>
<meta http-equiv="Content-Security-Policy" content="default-src 'self' file:; img-src data:">
<meta name="viewport" content="width=device-width">{styles}</head>
<body class="md-typeset" data-md-color-scheme="default"><main>{body}</main>{scripts}</body></html>"""
FRAME_STYLE = """
body { background: #fff; color: #222; }
body[data-md-color-scheme="slate"] { --md-default-bg-color: #1e2129; background: #1e2129; color: #d5d7e2; }
a { color: var(--bd-nominal); }
"""
REFERENCE, OTHER, THIRD = "TB3A-103F38", "NV10-3435", "OSP4-103V"


def context_of(catalog: Catalog) -> Context:
    curves = {record.source.file: part_curve(record) for record in catalog.parts}
    return Context(CheckedCatalog(catalog, curves, datetime.date(2026, 3, 1)))


def written(context: Context, folder: Path) -> Path:
    """The page of a catalog in the plainest frame that loads the site's own files, in the site's order."""
    assets = shutil.copytree(ROOT / "builder" / "assets", folder / "assets")
    (assets / "frame.css").write_text(FRAME_STYLE, "utf-8")
    styles = "".join(f'<link rel="stylesheet" href="assets/{f.name}">' for f in sorted(assets.glob("*.css")))
    scripts = "".join(
        f'<script src="assets/{f.name}"></script>' for f in sorted(assets.glob("*.js")) if f.name != "search.js"
    )
    files = [curve_file(record, context) for record in context.catalog.parts]
    for file in (*files, parts_data(context)):
        (folder / file.path).parent.mkdir(parents=True, exist_ok=True)
        (folder / file.path).write_text(file.content(), "utf-8")
    page = folder / PAGE
    page.write_text(FRAME.format(styles=styles, scripts=scripts, body=side_by_side_page().body()), "utf-8")
    return page


def odd_catalog() -> Catalog:
    """A part whose every text is hostile, and one whose operating range meets no other's."""
    fields: dict[str, Any] = {
        "maker": "Pellworm",
        "body": {"form": "leaded"},
        "rated": {"resistance_ohm": 1e4, "tolerance_pct": 1},
        "b_values": [{"between_c": [25, 85], "b_k": 3435, "tolerance_pct": 1}],
    }
    bent = {"a": 1.1e-3, "b": 2.4e-4, "c": -3e-8, "span_c": [0, 70]}
    changes: list[dict[str, Any]] = [
        {"part": HOSTILE, "maker": HOSTILE, "own_number": "=1+1"},
        {"part": "=PX-1", "limits": {"operating_c": [-40, 125]}},
        {"part": "PX-HOT", "limits": {"operating_c": [150, 250]}},
        {"part": "PX-BENT", "steinhart_hart": bent, "limits": {"operating_c": [0, 70]}},
    ]
    parts = [Part.model_validate(fields | change) for change in changes]
    return Catalog(tuple(PartRecord(part, Source(f"{i}.yaml", f"{i}.yaml", {})) for i, part in enumerate(parts)))


DEMO = context_of(read_catalog(ROOT / "parts"))


def key(number: str) -> str:
    path = DEMO.paths.part(DEMO.catalog.part(number))
    return path.removeprefix("parts/").removesuffix(".html")


def fragment(*numbers: str, reference: str = "", **more: object) -> str:
    settings = "".join(f"&{name}={value}" for name, value in more.items())
    return f"#reference={key(reference or numbers[0])}&parts={','.join(map(key, numbers))}{settings}"


def comparison(reference: str, other: str, t_c: Array) -> Comparison:
    return compared(*(DEMO.curve(DEMO.catalog.part(number)) for number in (reference, other)), t_c)


def common_degrees(*numbers: str) -> Array:
    low, high = common_range_c(*(DEMO.curve(DEMO.catalog.part(number)) for number in numbers))
    return np.arange(np.ceil(low), np.floor(high) + 1)


def full_name(number: str) -> str:
    part = DEMO.catalog.part(number).part
    return f"{part.maker} {part.part}"


@pytest.fixture(scope="module")
def addresses(tmp_path_factory: pytest.TempPathFactory) -> dict[str, str]:
    root = tmp_path_factory.mktemp("sites")
    pages = {"demo": written(DEMO, root / "demo"), "odd": written(context_of(odd_catalog()), root / "odd")}
    pages |= {name: written(DEMO, root / name) for name in ("one missing", "list missing")}
    (pages["one missing"].parent / "parts" / f"{key(THIRD)}.js").unlink()
    (pages["list missing"].parent / "parts" / "parts-data.js").unlink()
    return {name: page.as_uri() for name, page in pages.items()}


@dataclass
class Side:
    """What a person sees and does on the page."""

    page: Page

    @property
    def field(self) -> Locator:
        return self.page.get_by_role("combobox", name="Add a part")

    def settle(self) -> None:
        """Curves arrive one after another; the page says nothing of it, so two frames without work are waited for."""
        self.page.wait_for_function(
            "() => Promise.all([...document.querySelectorAll('.bd-side-parts li')].map("
            "(li) => beadroll.loadCurve(li.querySelector('input').value).catch(() => {})))"
            ".then(() => new Promise((done) => requestAnimationFrame(() => requestAnimationFrame(() => done(true)))))"
        )

    def choose(self, text: str) -> None:
        self.field.fill(text)
        self.field.press("Enter")
        self.settle()

    def chosen(self) -> list[str]:
        return self.page.locator(".bd-side-parts li a").all_text_contents()

    def said(self) -> str:
        return self.page.locator("[role=status]").inner_text()

    def heads(self) -> list[str]:
        return self.page.locator(".bd-side-rows thead tr:first-child th").all_text_contents()[1:]

    def column(self, number: int) -> list[str]:
        """A column of the figures, 1 for °C."""
        return self.page.locator(f".bd-side-rows tbody tr > :nth-child({number})").all_text_contents()

    def sentences(self) -> list[str]:
        return self.page.locator(".bd-side-sentences li").all_text_contents()

    def differences(self, row: str) -> list[str]:
        line = self.page.locator(
            ".bd-side-differences tr", has=self.page.get_by_role("rowheader", name=row, exact=True)
        )
        return line.locator("td").all_text_contents()

    def saved(self, button: str) -> Path:
        with self.page.expect_download() as download:
            self.page.get_by_role("button", name=button).click()
        return Path(download.value.path())


Opened = Callable[..., Side]


@pytest.fixture
def opened(chromium: Browser, addresses: dict[str, str]) -> Iterator[Opened]:
    """Open a page by name, without network; afterwards nothing may have been complained about in the console."""
    contexts, complaints = [], []

    def open_page(fragment: str = "", name: str = "demo", **options: Any) -> Side:
        context = chromium.new_context(offline=True, **options)
        contexts.append(context)
        page = context.new_page()
        page.on("console", lambda message: complaints.append(message.text))
        page.on("pageerror", lambda error: complaints.append(str(error)))
        page.goto(addresses[name] + fragment)
        side = Side(page)
        if options.get("java_script_enabled", True):
            side.settle()
        return side

    yield open_page
    for context in contexts:
        context.close()
    missing = [text for text in complaints if "ERR_FILE_NOT_FOUND" in text]
    assert complaints == missing
    assert len(missing) <= 2


def test_two_parts_are_chosen_with_the_keyboard_alone(opened: Opened) -> None:
    side = opened()
    side.page.keyboard.press("Tab")
    while side.page.evaluate("document.activeElement.id") != "bd-side-find":
        side.page.keyboard.press("Tab")
    side.page.keyboard.type("3a-103f")
    side.page.keyboard.press("Enter")
    side.page.wait_for_function(
        "() => document.querySelector('[role=status]').textContent.endsWith('Choose a second part.')"
    )
    side.page.keyboard.type("10k 0603")
    side.page.keyboard.press("ArrowDown")
    second = side.page.locator("[role=option][aria-selected=true] b").inner_text()
    side.page.keyboard.press("Enter")
    side.settle()
    assert side.chosen() == [REFERENCE, second]
    assert side.heads() == [f"1 {REFERENCE} (reference)", f"2 {second}"]
    assert side.page.evaluate("document.activeElement.id") == "bd-side-find"


def test_any_piece_of_a_number_lists_its_parts_those_that_begin_so_first(opened: Opened) -> None:
    side = opened()
    numbers = [record.part.part for record in DEMO.catalog.parts]
    side.field.fill("a-103")
    options = side.page.locator("[role=option] b").all_text_contents()
    assert options == [n for n in numbers if "A-103" in n] and len(options) > 2
    assert side.said() == f"{len(options)} parts found"
    side.field.fill("1")
    assert re.fullmatch(r"\d\d parts found, the first 12 listed", side.said())
    side.field.fill("nv10")
    options = side.page.locator("[role=option] b").all_text_contents()
    assert options == [n for n in numbers if n.startswith("NV10")]
    side.field.fill("4")
    assert side.page.locator("[role=option] b").all_text_contents()[0] == next(n for n in numbers if n[0] == "4")
    side.field.fill("hs10473")
    assert side.page.locator("[role=option] b").all_text_contents() == [REFERENCE]


def test_the_field_tells_assistive_technology_what_it_lists(opened: Opened) -> None:
    side = opened()
    assert side.field.get_attribute("aria-expanded") == "false"
    side.field.fill("nv10")
    assert side.field.get_attribute("aria-expanded") == "true"
    active = side.field.get_attribute("aria-activedescendant")
    assert side.page.locator(f"#{active}").get_attribute("aria-selected") == "true"
    side.field.press("ArrowUp")
    assert side.field.get_attribute("aria-activedescendant") != active
    side.field.press("Escape")
    assert side.field.get_attribute("aria-expanded") == "false"
    assert side.field.get_attribute("aria-activedescendant") is None
    assert side.field.input_value() == "nv10"
    side.field.press("Escape")
    assert side.field.input_value() == ""


def test_no_part_found_is_said(opened: Opened) -> None:
    side = opened()
    side.choose("no such part")
    assert side.said() == "0 parts found" and side.chosen() == []


def test_a_part_that_is_chosen_already_is_said_to_be(opened: Opened) -> None:
    side = opened()
    side.choose(REFERENCE)
    side.field.fill(REFERENCE)
    assert side.said() == f"{REFERENCE}: chosen already."
    side.field.fill("a-103")
    assert re.fullmatch(r"\d+ parts found", side.said())


def test_an_option_is_chosen_by_pointing(opened: Opened) -> None:
    side = opened()
    side.field.fill("osp4-103v")
    side.page.locator("[role=option]").click()
    assert side.chosen() == [THIRD]


def test_seven_parts_are_one_too_many(opened: Opened) -> None:
    numbers = [record.part.part for record in DEMO.catalog.parts[:7]]
    side = opened(fragment(*numbers))
    assert side.chosen() == numbers[:6]
    assert side.said().startswith("Only the first 6 parts are shown.")
    side.field.fill("nv10")
    assert side.said() == "6 parts are the most; remove one first."
    side.page.get_by_role("button", name=f"Remove {numbers[0]}").click()
    side.settle()
    assert side.chosen() == numbers[1:6]
    assert side.page.evaluate("document.activeElement.id") == "bd-side-find"


def test_figures_are_pythons_in_each_view(opened: Opened) -> None:
    t_c = whole_steps_c((-30.0, 104.0), 5.0)
    ours = comparison(REFERENCE, OTHER, t_c)
    side = opened(fragment(REFERENCE, OTHER, **{"from": -30, "to": 104}))
    assert side.column(1) == [number_text(t) for t in t_c]
    assert side.column(4) == [signed_text(v) for v in ours.reads_k]
    assert side.column(5) == [
        f"{signed_text(low)} to {signed_text(high)}"
        for low, high in zip(ours.reads_min_k, ours.reads_max_k, strict=True)
    ]
    assert set(side.column(2)) == {"0.00"}
    own = zip(ours.reference_min_k, ours.reference_max_k, strict=True)
    assert side.column(3) == [f"{signed_text(low)} to {signed_text(high)}" for low, high in own]
    side.page.get_by_label("ratio, %").check()
    side.settle()
    assert side.column(4) == [signed_text(v) for v in ours.ratio_pct]
    side.page.get_by_label("resistance, Ω").check()
    side.settle()
    assert [float(text) for text in side.column(4)] == pytest.approx(ours.r_ohm, rel=6e-5)


@pytest.mark.parametrize(("step", "rows"), [(1, 166), (5, 34), (10, 18)])
def test_the_table_has_every_step_and_both_ends(opened: Opened, step: int, rows: int) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    side.page.get_by_label("Table every").select_option(str(step))
    side.settle()
    assert side.column(1) == [number_text(t) for t in whole_steps_c((-40.0, 125.0), step)]
    assert len(side.column(1)) == rows


def test_sentences_are_those_of_the_command(opened: Opened) -> None:
    draw = random.Random(77)
    numbers = [record.part.part for record in DEMO.catalog.parts]
    side = opened()
    for _ in range(12):
        reference, *others = draw.sample(numbers, 3)
        t_c = common_degrees(reference, *others)
        side.page.goto(side.page.url.split("#")[0] + fragment(reference, *others))
        side.settle()
        expected = [
            sentence(full_name(reference), full_name(other), comparison(reference, other, t_c)) for other in others
        ]
        assert [re.sub(r" The tolerance of .*", "", said) for said in side.sentences()] == expected


def test_it_is_said_whether_the_tolerances_lie_within_each_other(opened: Opened) -> None:
    numbers = [record.part.part for record in DEMO.catalog.parts if record.part.rated.resistance_ohm == 1e4]
    pairs = list(itertools.permutations(numbers, 2))
    random.Random(5).shuffle(pairs)
    side, left = opened(), {True: 4, False: 4}
    for reference, other in pairs:
        within = comparison(reference, other, common_degrees(reference, other)).within_reference_band
        if not left[within]:
            continue
        left[within] -= 1
        side.page.goto(side.page.url.split("#")[0] + fragment(reference, other))
        side.settle()
        verb = "lies within" if within else "reaches outside"
        assert side.sentences()[0].endswith(
            f"The tolerance of {full_name(other)} {verb} that of {full_name(reference)}."
        )
    assert left == {True: 0, False: 0}


def test_another_reference_turns_the_reading_round(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    side.page.locator("[name=reference]").nth(1).check()
    side.settle()
    assert side.heads() == [f"1 {REFERENCE}", f"2 {OTHER} (reference)"]
    assert side.sentences()[0].startswith(f"{full_name(REFERENCE)} in place of {full_name(OTHER)}")
    assert f"#reference={key(OTHER)}&parts={key(REFERENCE)},{key(OTHER)}" in side.page.url
    assert side.page.evaluate("document.activeElement.value") == key(OTHER)


def test_the_address_brings_back_the_whole_view(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER, THIRD))
    side.page.locator("[name=reference]").nth(2).check()
    side.page.get_by_label("ratio, %").check()
    side.page.get_by_label("Table every").select_option("10")
    side.page.get_by_label("from").fill("0")
    side.page.get_by_label("to", exact=True).fill("70")
    side.settle()
    side.page.get_by_role("button", name=f"2 {OTHER}", exact=True).click()
    again = opened("#" + side.page.url.split("#")[1])
    assert again.heads() == side.heads() and again.sentences() == side.sentences()
    assert [again.column(n) for n in range(1, 8)] == [side.column(n) for n in range(1, 8)]
    assert again.page.get_by_label("from").input_value() == "0"
    pressed = again.page.locator(".bd-chart-key button").evaluate_all("all => all.map((b) => b.ariaPressed)")
    assert pressed == ["true", "false", "true"]


def test_an_address_may_name_the_reference_apart_from_the_others(opened: Opened) -> None:
    side = opened(f"#reference={key(REFERENCE)}&parts={key(OTHER)}")
    assert side.heads() == [f"1 {REFERENCE} (reference)", f"2 {OTHER}"]


def test_back_undoes_one_step(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    side.choose(THIRD)
    side.page.get_by_label("resistance, Ω").check()
    side.settle()
    side.page.go_back()
    side.settle()
    assert side.page.get_by_label("reads, K").is_checked() and len(side.chosen()) == 3
    side.page.go_back()
    side.settle()
    assert side.chosen() == [REFERENCE, OTHER]
    side.page.go_forward()
    side.settle()
    assert side.chosen() == [REFERENCE, OTHER, THIRD]


def test_unknown_words_of_an_address_are_said_or_ignored(opened: Opened) -> None:
    side = opened(f"#parts={key(REFERENCE)},no/part,{key(OTHER)}&from=x&step=7&view=colour&hidden=<b>")
    assert side.said() == "“no/part” is not a part of this catalog."
    assert side.chosen() == [REFERENCE, OTHER] and len(side.column(1)) == 34


def test_a_curve_that_cannot_be_loaded_is_said_and_the_others_are_compared(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER, THIRD), "one missing")
    assert side.said() == f"The curve of {THIRD} could not be loaded."
    assert side.heads() == [f"1 {REFERENCE} (reference)", f"2 {OTHER}"]


def test_a_curve_that_arrives_late_does_not_undo_what_was_chosen_since(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    side.page.evaluate(
        """(late) => {
            const load = beadroll.loadCurve;
            const gate = new Promise((open) => { window.release = open; });
            beadroll.loadCurve = (key) => (key === late ? gate.then(() => load(key)) : load(key));
        }""",
        key(THIRD),
    )
    side.field.fill(THIRD)
    side.field.press("Enter")
    side.field.fill("NV22-3740")
    side.field.press("Enter")
    side.page.get_by_role("button", name=f"Remove {THIRD}").click()
    side.choose("YC2-223K")
    expected = [f"1 {REFERENCE} (reference)", f"2 {OTHER}", "3 NV22-3740", "4 YC2-223K"]
    assert side.heads() == expected
    side.page.evaluate("key => { release(); return beadroll.loadCurve(key); }", key(THIRD))
    side.settle()
    assert side.heads() == expected


def test_the_range_is_the_common_one_until_it_is_set_and_again_when_asked_for(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    low, high = side.page.get_by_label("from"), side.page.get_by_label("to", exact=True)
    assert (low.input_value(), high.input_value()) == ("-40", "125")
    side.choose(THIRD)
    assert (low.input_value(), high.input_value()) == ("-40", "105")
    low.fill("10")
    side.settle()
    assert side.column(1)[0] == "10"
    side.page.get_by_role("button", name="Common range").click()
    side.settle()
    assert low.input_value() == "-40" and side.column(1)[0] == "−40"


@pytest.mark.parametrize("wrong", ["200", "1.5", ""])
def test_a_range_that_is_none_is_said_and_changes_nothing(opened: Opened, wrong: str) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    side.page.get_by_label("from").fill(wrong)
    assert side.said() == "Write whole degrees, the lower one first."
    assert side.page.get_by_label("from").get_attribute("aria-invalid") == "true"
    assert side.column(1)[0] == "−40"


def test_what_rests_on_an_extrapolation_is_marked_by_a_sign_and_a_sentence(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER, **{"from": -60, "to": 25}))
    t_c = whole_steps_c((-60.0, 25.0), 5.0)
    ours = comparison(REFERENCE, OTHER, t_c)
    far = ours.reference_extrapolated | ours.other_extrapolated
    assert [text.startswith("* ") for text in side.column(4)] == far.tolist()
    side.page.get_by_label("ratio, %").check()
    side.settle()
    ends = (t_c < -40).tolist()  # both curves are known from −40 °C
    assert [text.startswith("* ") for text in side.column(4)] == ends != far.tolist()
    side.page.get_by_label("reads, K").check()
    side.settle()
    assert "* rests on an extrapolated curve." in side.page.locator(".bd-side-rows caption").inner_text()
    assert f"the curve of {full_name(OTHER)} is extrapolated outside −40 to 125 °C" in side.sentences()[0]
    # No tolerance is told outside the operating range, so none is shown.
    assert side.column(5)[:4] == ["–"] * 4 and side.column(5)[4] != "–"
    assert f"the tolerance of {full_name(OTHER)} is not shown outside −40 to 125 °C" in side.sentences()[0]


def test_ranges_that_do_not_meet_are_said(opened: Opened) -> None:
    side = opened("#parts=pellworm/px-1,pellworm/px-hot", "odd")
    assert side.said() == "The operating ranges do not meet; the reference’s is shown."
    assert side.column(1)[0] == "−40"


def test_where_a_curve_ends_there_is_no_figure(opened: Opened) -> None:
    side = opened("#parts=pellworm/px-1,pellworm/px-bent&from=-10&to=80", "odd")
    shown = dict(zip(side.column(1), side.column(4), strict=True))
    assert [t for t, text in shown.items() if text == "–"] == ["−10", "−5", "75", "80"]
    assert "a curve ends within the −10 to 80 °C asked for" in side.sentences()[0]


def test_differences_are_marked_by_a_word(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    assert side.differences("Maker") == ["Tarnbrook Ceramics", "Nordvell Elements differs"]
    assert side.differences("Rated resistance") == ["10 kΩ at 25 °C", "10 kΩ at 25 °C"]
    marked = side.page.locator(".bd-side-differs")
    assert marked.count() == side.page.locator(".bd-side-differences td", has_text="differs").count() > 3


def test_the_csv_holds_the_tables_rows(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER, THIRD))
    rows = list(csv.DictReader(side.saved("Download CSV").read_text("utf-8-sig").splitlines()))
    t_c = whole_steps_c((-40.0, 105.0), 5.0)
    assert [row["part"] for row in rows] == [OTHER] * 30 + [THIRD] * 30
    for number in (OTHER, THIRD):
        ours, told = comparison(REFERENCE, number, t_c), [row for row in rows if row["part"] == number]
        assert {row["reference"] for row in told} == {REFERENCE}
        columns = {
            "t_c": ours.t_c,
            "r_ref_ohm": ours.r_ref_ohm,
            "r_ohm": ours.r_ohm,
            "ratio_pct": ours.ratio_pct,
            "reads_k": ours.reads_k,
            "reads_min_k": ours.reads_min_k,
            "reads_max_k": ours.reads_max_k,
        }
        for name, values in columns.items():
            assert [float(row[name]) for row in told] == pytest.approx(values, rel=1e-4, abs=1e-3), name
        far = ours.reference_extrapolated | ours.other_extrapolated
        assert [row["extrapolated"] == "yes" for row in told] == far.tolist()


def test_the_csv_holds_no_formula(opened: Opened) -> None:
    side = opened("#parts=pellworm/px-bent,pellworm/px-1", "odd")
    rows = list(csv.DictReader(side.saved("Download CSV").read_text("utf-8-sig").splitlines()))
    assert {row["part"] for row in rows} == {"'=PX-1"}
    assert any(float(row["reads_k"]) < 0 for row in rows)  # a number keeps its sign


def test_chart_files_are_saved(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    assert side.saved("Chart as SVG").read_text("utf-8").startswith("<svg")
    assert side.saved("Chart as PNG").read_bytes().startswith(b"\x89PNG")


def test_link_and_sentences_are_copied(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER), permissions=["clipboard-read", "clipboard-write"])
    for button, said, text in (
        ("Copy link", "Link copied.", side.page.url),
        ("Copy sentences", "Sentences copied.", side.sentences()[0] + "\n"),
    ):
        side.page.get_by_role("button", name=button).click()
        side.page.wait_for_function("said => document.querySelector('[role=status]').textContent === said", arg=said)
        assert side.page.evaluate("navigator.clipboard.readText()") == text


def test_hostile_text_of_a_record_stays_text(opened: Opened) -> None:
    hostile = context_of(odd_catalog()).paths.part(odd_catalog().parts[0])
    hostile_key = hostile.removeprefix("parts/").removesuffix(".html")
    side = opened(f"#parts={hostile_key},pellworm/px-1", "odd")
    side.field.fill("onerror")
    assert side.page.locator("img").count() == 0 and side.page.title() == "Side by side"
    assert side.chosen()[0] == HOSTILE
    assert side.differences("Maker")[0] == HOSTILE
    assert HOSTILE in side.sentences()[0]


def test_nothing_is_loaded_that_was_not_chosen(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER))
    loaded = side.page.locator("head script").evaluate_all("all => all.map((script) => script.src)")
    assert [name.split("/parts/")[1] for name in loaded] == [f"{key(REFERENCE)}.js", f"{key(OTHER)}.js"]


def test_a_list_of_parts_that_cannot_be_loaded_is_said(opened: Opened) -> None:
    side = opened(name="list missing")
    assert side.page.get_by_text("The list of parts could not be loaded.").is_visible()
    assert not side.page.locator("#bd-side").is_visible()


def test_with_scripts_nothing_is_said_of_them(opened: Opened) -> None:
    assert opened().page.locator("#bd-side-needs").count() == 0


def test_without_scripts_it_says_what_it_needs(opened: Opened) -> None:
    side = opened(java_script_enabled=False)
    assert side.page.get_by_text("This page computes in the browser").is_visible()
    assert not side.page.locator("#bd-side").is_visible()


@pytest.mark.parametrize("count", [2, 6])
def test_it_prints_on_one_page(opened: Opened, count: int) -> None:
    numbers = [REFERENCE, OTHER, THIRD, "QG1-1034", "YC2-223K", "TB3A-473F40"][:count]
    side = opened(fragment(*numbers, **{"from": -40, "to": 125}))
    paper = side.page.pdf(prefer_css_page_size=True)
    assert len(re.findall(rb"/Type\s*/Page\b", paper)) == 1


@pytest.mark.parametrize("width", [360, 768, 1280])
def test_nothing_sticks_out_of_the_page(opened: Opened, width: int) -> None:
    side = opened(fragment(REFERENCE, OTHER, THIRD), viewport={"width": width, "height": 740})
    side.field.fill("103")
    assert side.page.evaluate("document.documentElement.scrollWidth") <= width


@pytest.mark.parametrize("scheme", ["default", "slate"])
@pytest.mark.parametrize("width", [360, 1280])
def test_axe_finds_no_violation(opened: Opened, scheme: str, width: int) -> None:
    axe = pytest.importorskip("axe_playwright_python.sync_playwright").Axe()
    side = opened(fragment(REFERENCE, OTHER, THIRD), viewport={"width": width, "height": 900})
    side.page.evaluate("scheme => { document.body.dataset.mdColorScheme = scheme; }", scheme)
    for typed in ("", "103"):
        side.field.fill(typed)
        found = axe.run(side.page, options={"preload": False}).response["violations"]
        assert [(v["id"], [n["html"] for n in v["nodes"]]) for v in found] == []


def test_the_link_and_the_address_hold_the_view_after_a_jump_within_the_page(opened: Opened) -> None:
    side = opened(fragment(REFERENCE, OTHER), permissions=["clipboard-read", "clipboard-write"])
    before = side.page.url
    side.page.evaluate("location.hash = 'page-body'")
    side.page.wait_for_function("location.hash !== '#page-body'")
    assert side.page.url == before
    side.page.get_by_role("button", name="Copy link").click()
    side.page.get_by_text("Link copied.").wait_for()
    assert side.page.evaluate("navigator.clipboard.readText()") == before


def test_paper_gets_a_table_that_fits_one_page_and_the_screen_its_own_again(opened: Opened) -> None:
    side = opened(f"{fragment(REFERENCE, OTHER)}&step=1&from=-40&to=125")
    rows = side.page.locator(".bd-side-rows tbody tr")
    assert rows.count() == 166
    side.page.evaluate("dispatchEvent(new Event('beforeprint'))")
    assert rows.count() == 34
    side.page.evaluate("dispatchEvent(new Event('afterprint'))")
    assert rows.count() == 166
