"""The Shortlist page in Chromium, from the disk and without network: held to Python's shortlist, and as people use it."""

from __future__ import annotations

import csv
import datetime
import json
import random
import re
import shutil
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from playwright.sync_api import Browser, Page

from builder.circuit import Chain, thermistor
from builder.circuit.budget import CLOSE_K
from builder.crosschecks import CheckedCatalog
from builder.decisions import Shortlist, series_ohm, shortlist
from builder.exports.packed_curves import packed_curve
from builder.exports.shortlist_rows import CSV_NAMES, csv_rows
from builder.pages.context import Context
from builder.pages.parts_page import parts_data
from builder.pages.shortlist_form import start_values
from builder.pages.shortlist_page import DATA, PAGE, shortlist_data, shortlist_page
from builder.part_curve import part_curve, whole_steps_c
from builder.records import Catalog, Part, PartRecord, Position, PositionRecord, Source, read_catalog
from builder.records.position import CurveFirmware, Requirements, TableFirmware, VoltageReference

ROOT = Path(__file__).parents[2]
WITHIN_K = 5e-3
HOSTILE = "<img src=x onerror=document.title='taken'>"
FRAME = """<!doctype html><html lang="en"><head><meta charset="utf-8"><title>Shortlist</title>
<meta http-equiv="Content-Security-Policy" content="default-src 'self' file:">
<meta name="viewport" content="width=device-width">{styles}</head>
<body class="md-typeset" data-md-color-scheme="default"><main>{body}</main>{scripts}</body></html>"""
FRAME_STYLE = """
body { background: #fff; color: #222; }
body[data-md-color-scheme="slate"] { --md-default-bg-color: #1e2129; background: #1e2129; color: #d5d7e2; }
a { color: var(--bd-nominal); }
"""


def context_of(catalog: Catalog) -> Context:
    curves = {record.source.file: part_curve(record) for record in catalog.parts}
    return Context(CheckedCatalog(catalog, curves, datetime.date(2026, 3, 1)))


def written(context: Context, folder: Path) -> Path:
    """The page of a catalog in the plainest frame that loads the site's own files, in the site's order."""
    assets = shutil.copytree(ROOT / "builder" / "assets", folder / "assets")
    (assets / "frame.css").write_text(FRAME_STYLE, "utf-8")
    styles = "".join(f'<link rel="stylesheet" href="assets/{f.name}">' for f in sorted(assets.glob("*.css")))
    names = sorted(f.name for f in assets.glob("*.js") if f.name != "search.js")
    scripts = "".join(f'<script src="assets/{name}"></script>' for name in names)
    files = (shortlist_data(context), parts_data(context))
    for file in files:
        (folder / file.path).parent.mkdir(parents=True, exist_ok=True)
        (folder / file.path).write_text(file.content(), "utf-8")
    page = folder / PAGE
    page.write_text(FRAME.format(styles=styles, scripts=scripts, body=shortlist_page(context).body()), "utf-8")
    return page


def odd_catalog() -> Catalog:
    """Hostile texts, figures that are missing, a curve that ends, entries of the ledger that speak against a part."""
    fields: dict[str, Any] = {
        "maker": "Pellworm",
        "body": {"form": "leaded"},
        "rated": {"resistance_ohm": 1e4, "tolerance_pct": 1},
        "b_values": [{"between_c": [25, 85], "b_k": 3435, "tolerance_pct": 1}],
        "limits": {"operating_c": [-40, 125], "dissipation_mw_per_k": 2, "time_constant_s": 5},
    }
    entry = {"on": "2026-01-12", "by": HOSTILE, "because": "It <b>broke</b>."}
    bent = {"a": 1.1e-3, "b": 2.4e-4, "c": -3e-8, "span_c": [0, 50]}
    no_b_tolerance = [{"between_c": [25, 85], "b_k": 3435}]
    changes: list[dict[str, Any]] = [
        {"part": HOSTILE, "maker": HOSTILE, "own_number": "=1+1"},
        {"part": "=PX-1"},
        {"part": "PX-NO-LIMITS", "limits": {}},
        {"part": "PX-NO-TOLERANCE", "rated": {"resistance_ohm": 1e4}, "b_values": no_b_tolerance},
        {"part": "PX-ACCURATE", "b_values": no_b_tolerance, "accuracy": [{"between_c": [-20, 70], "within_k": 0.2}]},
        {"part": "PX-BENT", "steinhart_hart": bent},
        {"part": "PX-WITHDRAWN", "standing": [entry | {"state": "withdrawn"}]},
        {
            "part": "PX-ELSEWHERE",
            "standing": [entry | {"state": "restricted", "only_for": ["other/RT1", "Other board"]}],
        },
        {"part": "PX-HERE", "standing": [entry | {"state": "restricted", "only_for": ["NEW board"]}]},
        {"part": "PX-OLD", "lifecycle": "obsolete"},
        {"part": "PX-SLOW", "limits": {"operating_c": [-10, 60], "time_constant_s": 30}},
        {"part": "PX-WEAK", "limits": fields["limits"] | {"max_power_mw": 0.1}},
        {"part": "PX-STRONG", "limits": fields["limits"] | {"max_power_mw": 100}},
        {"part": "PX-LOW", "rated": {"resistance_ohm": 0.05, "tolerance_pct": 1}},
    ]
    parts = [Part.model_validate(fields | change) for change in changes]
    return Catalog(tuple(PartRecord(part, Source(f"{i}.yaml", f"{i}.yaml", {})) for i, part in enumerate(parts)))


DEMO = context_of(read_catalog(ROOT / "parts"))


def rankable(position: Position) -> Position:
    """A position whose firmware the page knows, for any part."""
    firmware = position.firmware
    if isinstance(firmware, TableFirmware | CurveFirmware):
        return position.model_copy(update={"firmware": firmware.model_copy(update={"part": None})})
    return position.model_copy(update={"firmware": CurveFirmware(method="curve")})


def fragment(position: Position, series: str = "E96", **more: object) -> str:
    """The address of a position's form."""
    values = start_values(position)
    del values["other_method"]
    values |= {"series": series} | more
    return (
        "#"
        + "&".join(f"{name}={value}" for name, value in values.items() if not isinstance(value, list))
        + "".join(f"&qualification={text.replace(' ', '+')}" for text in values["qualification"])
    )


@pytest.fixture(scope="module")
def addresses(tmp_path_factory: pytest.TempPathFactory) -> dict[str, str]:
    root = tmp_path_factory.mktemp("sites")
    pages = {"demo": written(DEMO, root / "demo"), "odd": written(context_of(odd_catalog()), root / "odd")}
    pages["data missing"] = written(DEMO, root / "data missing")
    (root / "data missing" / DATA).unlink()
    return {name: page.as_uri() for name, page in pages.items()}


@dataclass
class Short:
    """What a person sees and does on the page."""

    page: Page

    def settle(self) -> None:
        """Wait until all parts are ranked and all rows drawn."""
        self.page.wait_for_function(
            "() => document.getElementById('bd-short').ariaBusy === 'false' && "
            "[...document.querySelectorAll('.bd-short-table')].every("
            "(table) => table.querySelectorAll('tbody[role] tr').length === table.ariaRowCount - 1)"
        )

    def fill(self, name: str, text: str) -> None:
        self.page.locator(f"[name={name}]").fill(text)
        self.settle()

    def choose(self, name: str, value: str) -> None:
        self.page.locator(f"select[name={name}]").select_option(value)
        self.settle()

    def said(self) -> str:
        return self.page.locator("[role=status]").inner_text()

    def ranked(self) -> list[str]:
        return self.page.locator(".bd-short-ranked tbody[role] th").all_text_contents()

    def cells(self, number: str) -> dict[str, str]:
        """A ranked part's row, by the names of its cells."""
        row = self.page.locator(".bd-short-ranked tbody[role] tr", has=self.page.get_by_text(number, exact=True))
        return {
            name: row.locator(f".bd-s-{name}").inner_text() for name in ("place", "fixed", "worst", "margin", "verdict")
        }

    def out(self) -> dict[str, str]:
        """Parts that are out, with their reasons."""
        rows = self.page.locator(".bd-short-out tbody[role] tr").all()
        return {row.locator("th").inner_text(): row.locator(".bd-s-because").inner_text() for row in rows}

    def table(self) -> list[dict[str, str]]:
        """The CSV, a dictionary a line."""
        with self.page.expect_download() as download:
            self.page.get_by_role("button", name="Download CSV").click()
        return list(csv.DictReader(Path(download.value.path()).read_text("utf-8-sig").splitlines()))

    def copied(self, button: str) -> str:
        before = self.said()
        self.page.get_by_role("button", name=button).click()
        self.page.wait_for_function("said => document.querySelector('[role=status]').textContent !== said", arg=before)
        return str(self.page.evaluate("navigator.clipboard.readText()"))


Opened = Callable[..., Short]


@pytest.fixture
def opened(chromium: Browser, addresses: dict[str, str]) -> Iterator[Opened]:
    """Open a page by name, without network; afterwards nothing may have been complained about in the console."""
    contexts, complaints = [], []

    def open_page(fragment: str = "", name: str = "demo", **options: Any) -> Short:
        context = chromium.new_context(offline=True, **({"viewport": {"width": 1280, "height": 900}} | options))
        contexts.append(context)
        page = context.new_page()
        page.on("console", lambda message: complaints.append(message.text))
        page.on("pageerror", lambda error: complaints.append(str(error)))
        page.goto(addresses[name] + fragment)
        short = Short(page)
        if options.get("java_script_enabled", True) and name != "data missing":
            short.settle()
        return short

    yield open_page
    for context in contexts:
        context.close()
    assert [text for text in complaints if "ERR_FILE_NOT_FOUND" not in text] == []


def check_against(told: list[dict[str, str]], ours: Shortlist) -> None:
    """The page's rows against Python's: the same parts, worst cases, verdicts and reasons."""
    expected = {str(row["part"]): row for row in csv_rows(ours)}
    assert {row["part"] for row in told} == set(expected)
    incomplete = {one.part.part.part for one in ours.ranked if one.is_incomplete}
    places = [(row["part"] in incomplete, float(row["worst_k"])) for row in told if not row["because"]]
    assert places == sorted(places)
    for row in told:
        wanted = expected[row["part"]]
        assert row["because"] == wanted.get("because", ""), row["part"]
        if row["because"]:
            continue
        assert float(row["worst_k"]) == pytest.approx(float(wanted["worst_k"]), abs=WITHIN_K), row["part"]
        assert float(row["margin_k"]) == pytest.approx(float(wanted["margin_k"]), abs=WITHIN_K), row["part"]
        assert row["missing"] == wanted["missing"], row["part"]
        is_close = abs(float(wanted["margin_k"])) < WITHIN_K
        assert is_close or row["meets_limit"] == {True: "yes", False: "no", None: "undecided"}[wanted["meets_limit"]]


def worst_k(position: Position, part: PartRecord, fixed_ohm: float) -> float:
    """Worst case of a part with one resistor, over all corners."""
    fitted, t_c = thermistor(part), whole_steps_c(position.range_c, CLOSE_K)
    low, high = Chain(position, fitted, fitted.made.curve, fixed_ohm).extremes(t_c)
    return float(np.maximum(t_c - low.reading_c, high.reading_c - t_c).max())


@pytest.mark.parametrize("place", DEMO.catalog.positions, ids=lambda place: place.position.position)
def test_every_position_of_the_demo_ranks_as_in_python(opened: Opened, place: PositionRecord) -> None:
    position = rankable(place.position)
    short = opened(fragment(position))
    told = short.table()
    check_against(told, shortlist(PositionRecord(position, place.source), DEMO.catalog))
    for row in [row for row in told if row["fixed_ohm"]][::7]:
        with_theirs_k = worst_k(position, DEMO.catalog.part(row["part"]), float(row["fixed_ohm"]))
        assert with_theirs_k == pytest.approx(float(row["worst_k"]), abs=WITHIN_K), row["part"]


def drawn_position(draw: random.Random) -> Position:
    """A circuit that may be any: either side, own reference or not, much or little of every error, warmed or not."""
    low_c = draw.choice([-40, -20, -12.3, 0])
    bits = draw.choice([8, 10, 12, 16])
    maybe = lambda value: draw.choice([value, value, value, None])  # noqa: E731
    circuit: dict[str, Any] = {
        "thermistor": draw.choice(["low side", "high side"]),
        "fixed": {
            "resistance_ohm": 1e4,
            "tolerance_pct": maybe(draw.choice([0.05, 1, 5])),
            "tempco_ppm_per_k": maybe(100),
        },
        "supply_v": draw.choice([1.25, 3.3, 5, 12]),
        "supply_tolerance_pct": maybe(draw.choice([1, 5, 10])),
        "wire_ohm": maybe(draw.choice([0.5, 20])),
    }
    if draw.random() < 0.4:
        circuit["parallel"] = {"resistance_ohm": draw.choice([4.7e3, 47e3, 1e6]), "tolerance_pct": maybe(1)}
    own = {"volts": circuit["supply_v"] * draw.uniform(0.7, 1.2), "tolerance_pct": maybe(0.5)}
    return Position.model_validate(
        {
            "position": "new-board/RT1",
            "board": "New board",
            "purpose": "air",
            "range_c": [low_c, low_c + draw.choice([15, 70.5, 110])],
            "limit_k": draw.choice([0.5, 2, 5]),
            "ambient_c": draw.choice([None, [-40, 85]]),
            "circuit": circuit,
            "reference": draw.choice(["ratiometric", own]),
            "adc": {
                "bits": bits,
                "full_scale": 2**bits - draw.choice([0, 1]),
                "offset_lsb": maybe(draw.choice([0, 1, 4])),
                "gain_pct": maybe(draw.choice([0.05, 0.5])),
                "nonlinearity_lsb": maybe(1.5),
                "leakage_na": maybe(draw.choice([0, 5, 1000])),
            },
            "firmware": draw.choice(
                [{"method": "curve"}, *({"method": "table", "step_k": step_k} for step_k in (0.5, 2, 5, 7.3, 20))]
            ),
            "fitted": "X1",
        }
    )


RANK_ONE = """(given) => {
    const { text, extended, dissipation, place } = JSON.parse(given);
    const part = { curve: beadroll.unpackedCurve(text, extended), dissipationMwPerK: dissipation };
    return beadroll.chain(place).best(part, NaN);
}"""


def chain_place(position: Position, series: str) -> dict[str, Any]:
    """A position as the browser's chain takes it."""
    circuit, adc, firmware = position.circuit, position.adc, position.firmware
    own = position.reference if isinstance(position.reference, VoltageReference) else None
    return {
        "thermistor": circuit.thermistor,
        "rangeC": position.range_c,
        "ambientC": position.ambient_c,
        "supplyV": circuit.supply_v,
        "supplyTolerancePct": circuit.supply_tolerance_pct,
        "fixedTolerancePct": circuit.fixed.tolerance_pct,
        "fixedTempcoPpmPerK": circuit.fixed.tempco_ppm_per_k,
        "parallelOhm": circuit.parallel.resistance_ohm if circuit.parallel else None,
        "parallelTolerancePct": circuit.parallel.tolerance_pct if circuit.parallel else None,
        "wireOhm": circuit.wire_ohm,
        "referenceV": own.volts if own else None,
        "referenceTolerancePct": own.tolerance_pct if own else None,
        "bits": adc.bits,
        "fullScale": adc.full_scale,
        "offsetLsb": adc.offset_lsb,
        "gainPct": adc.gain_pct,
        "nonlinearityLsb": adc.nonlinearity_lsb,
        "leakageNa": adc.leakage_na,
        "stepK": firmware.step_k if isinstance(firmware, TableFirmware) else None,
        "series": series,
    }


def every_worst_k(position: Position, part: PartRecord, series: str) -> dict[float, float]:
    """Worst case with every value of the series that may be tried; infinite where some board has no reading."""
    fitted, t_c = thermistor(part), whole_steps_c(position.range_c, CLOSE_K)
    curve = fitted.made.curve
    cold_ohm, hot_ohm = curve.resistance_ohm(np.array(position.range_c))
    found: dict[float, float] = {}
    for ohms in np.array_split(series_ohm(series, hot_ohm / 10, cold_ohm * 10), 8):  # type: ignore[arg-type]
        low, high = Chain(position, fitted, curve, ohms[:, None, None]).extremes(t_c)
        worst = np.maximum(t_c - low.reading_c, high.reading_c - t_c).max(axis=-1)
        found |= dict(zip(ohms.tolist(), np.where(np.isnan(worst), np.inf, worst).tolist(), strict=True))
    return found


def check_one(page: Page, position: Position, part: PartRecord, series: str) -> None:
    """The browser's choice against every corner of every value of the series."""
    made = part_curve(part)
    given = {
        "text": packed_curve(made),
        "extended": made.curve.extends,
        "dissipation": part.part.limits.dissipation_mw_per_k,
        "place": chain_place(position, series),
    }
    told = page.evaluate(RANK_ONE, json.dumps(given))
    every = every_worst_k(position, part, series)
    least_k, said = min(every.values()), (part.part.part, position)
    if np.isinf(least_k):
        assert told["worstK"] is None or np.isnan(told["worstK"]), said
        return
    chosen = min(every, key=lambda ohm: abs(ohm - told["fixedOhm"]))
    assert chosen == pytest.approx(told["fixedOhm"], rel=1e-9), said
    assert told["worstK"] == pytest.approx(least_k, abs=WITHIN_K), said
    assert every[chosen] == pytest.approx(least_k, abs=WITHIN_K), said


@pytest.mark.parametrize("seed", range(8))
def test_drawn_circuits_choose_as_all_corners_of_all_values_would(opened: Opened, seed: int) -> None:
    """Sixty-four circuits; two corners and a search stand for all of Python's corners and every value of the series."""
    draw, page = random.Random(seed), opened().page
    for _ in range(8):
        check_one(page, drawn_position(draw), draw.choice(DEMO.catalog.parts), draw.choice(["E24", "E96"]))


def copied_record(short: Short, folder: Path) -> PositionRecord:
    """The record that the page copies, read as `beadroll check` reads it beside the demo's parts."""
    shutil.copytree(ROOT / "parts", folder, ignore=shutil.ignore_patterns("boards"))
    (folder / "copied.yaml").write_text(short.copied("Copy position record"), "utf-8")
    catalog = read_catalog(folder)
    assert [str(p) for p in catalog.problems if p.file.endswith("copied.yaml")] == []
    (place,) = catalog.positions
    return place


CLIPBOARD = {"permissions": ["clipboard-read", "clipboard-write"]}


def test_the_copied_record_is_valid_and_its_shortlist_is_the_pages(opened: Opened, tmp_path: Path) -> None:
    short = opened(**CLIPBOARD)
    place = copied_record(short, tmp_path / "parts")
    position = place.position
    assert (position.position, position.board, position.purpose) == ("new-board/RT1", "New board", "to be said")
    told = short.table()
    check_against(told, shortlist(place, DEMO.catalog))
    assert position.fitted == told[0]["part"] and position.circuit.fixed.resistance_ohm == float(told[0]["fixed_ohm"])


@pytest.mark.parametrize("place", DEMO.catalog.positions, ids=lambda place: place.position.position)
def test_a_position_is_started_from_and_its_record_comes_back(
    opened: Opened, tmp_path: Path, place: PositionRecord
) -> None:
    short, position = opened(**CLIPBOARD), rankable(place.position)
    short.choose("start", position.position)
    if short.page.locator("[data-does=record]").is_disabled():
        pytest.fail("no part is left at " + position.position)
    back = copied_record(short, tmp_path / "parts").position
    same = ("position", "board", "purpose", "range_c", "limit_k", "ambient_c", "reference", "firmware", "requires")
    assert {name: getattr(back, name) for name in same} == {name: getattr(position, name) for name in same}
    assert back.circuit.model_copy(update={"fixed": None}) == position.circuit.model_copy(update={"fixed": None})
    assert back.circuit.fixed.tolerance_pct == position.circuit.fixed.tolerance_pct
    assert back.adc == position.adc.model_copy(update={"full_scale": position.adc.full_scale or 2**position.adc.bits})


def test_a_link_that_names_only_the_start_fills_the_form(opened: Opened) -> None:
    chosen, linked = opened(), opened("#start=dock-pack/RT1")
    chosen.choose("start", "dock-pack/RT1")
    assert linked.page.locator("[name=supply_v]").input_value() == "2.5"
    assert linked.ranked() == chosen.ranked() and linked.said() == chosen.said()


def test_firmware_that_the_page_does_not_know_is_said_with_the_command(opened: Opened) -> None:
    short = opened()
    short.choose("start", "charger-power/RT1")
    assert short.said().endswith(
        "The firmware at charger-power/RT1 is by b-value: “beadroll shortlist charger-power/RT1” ranks with that."
    )


def test_another_part_is_taken_for_the_record_and_the_address_holds_it(opened: Opened, tmp_path: Path) -> None:
    short = opened(**CLIPBOARD)
    second = short.ranked()[1]
    short.page.get_by_label(f"Take {second} for the record").check()
    assert short.page.url.endswith(f"take={second}")
    assert copied_record(short, tmp_path / "parts").position.fitted == second
    again = opened(short.page.url[short.page.url.index("#") :])
    assert again.page.get_by_label(f"Take {second} for the record").is_checked()


def test_everything_odd_ranks_as_in_python_or_says_why_not(opened: Opened, tmp_path: Path) -> None:
    place = copied_record(opened(**CLIPBOARD), tmp_path / "parts")
    slow = opened("#time_constant_max_s=10", "odd")
    position = place.position.model_copy(
        update={"requires": place.position.requires.model_copy(update={"time_constant_max_s": 10})}
    )
    told = slow.table()
    for row in told:
        row["part"] = row["part"].removeprefix("'")  # what would be a formula is not
        row["because"] = row["because"].removeprefix("'")
    check_against(told, shortlist(PositionRecord(position, place.source), odd_catalog()))
    assert slow.page.locator("img").count() == 0 and slow.page.title() == "Shortlist"
    assert slow.out()["PX-WITHDRAWN"] == f"the part is withdrawn since 2026-01-12 ({HOSTILE}: It <b>broke</b>)"
    assert slow.cells("PX-NO-LIMITS")["verdict"] == (
        "undecided not stated: limits.dissipation_mw_per_k, limits.operating_c, limits.time_constant_s"
    )


def test_what_only_the_page_asks_for_is_a_reason_too(opened: Opened) -> None:
    short = opened()
    before = set(short.ranked())
    short.choose("form", "chip")
    short.choose("standing", "approved")
    short.choose("lifecycle", "active")
    left = [DEMO.catalog.part(number).part for number in short.ranked()]
    assert left and {part.part for part in left} < before
    assert {part.body.form for part in left} == {"chip"} and {part.lifecycle for part in left} == {"active"}
    assert {part.state() for part in left} <= {"approved", "restricted"}
    for number, because in short.out().items():
        part = DEMO.catalog.part(number).part
        assert (f"its body is {part.body.form}, chip is asked for" in because) == (part.body.form != "chip")
        assert ("the part is proposed" in because) == (part.state() == "proposed")
        assert (f"the part is {part.lifecycle}" in because) == (part.lifecycle != "active")


def test_a_figure_that_is_left_out_leaves_the_limit_undecided(opened: Opened) -> None:
    short = opened()
    first = short.ranked()[0]
    assert short.cells(first)["verdict"] == "met"
    short.fill("leakage_na", "")
    assert short.cells(short.ranked()[0])["verdict"] == "undecided not stated: adc.leakage_na"
    assert re.fullmatch(r"0 of 56 parts within ±1 K, \d+ undecided; \d+ ranked, \d+ out\.", short.said())


def test_an_unstated_supply_decides_where_the_part_is_warmed_by_much(opened: Opened) -> None:
    place = next(one for one in DEMO.catalog.positions if one.position.position == "coolbox-main/RT1")
    circuit = place.position.circuit.model_copy(update={"supply_v": 12.0, "supply_tolerance_pct": None})
    position = rankable(place.position).model_copy(update={"circuit": circuit, "limit_k": 4.0})
    told = opened(fragment(position)).table()
    check_against(told, shortlist(PositionRecord(position, place.source), DEMO.catalog))
    assert {row["meets_limit"] for row in told} >= {"yes", "undecided"}


@pytest.mark.parametrize("side", ["low side", "high side"])
def test_a_part_that_takes_too_much_power_is_out_as_in_python(opened: Opened, side: str) -> None:
    place = next(one for one in DEMO.catalog.positions if one.position.position == "coolbox-main/RT1")
    circuit = place.position.circuit.model_copy(update={"thermistor": side, "supply_v": 8.0, "wire_ohm": 20.0})
    changes = {"circuit": circuit, "limit_k": 9.0, "requires": Requirements()}
    position = rankable(place.position).model_copy(update=changes)
    ours = shortlist(PositionRecord(position, place.source), odd_catalog())
    because = {one.part.part.part: "; ".join(one.because) for one in ours.excluded}["PX-WEAK"]
    assert "mW is allowed" in because
    short = opened(fragment(position), "odd")
    assert short.out()["PX-WEAK"] == because and "PX-STRONG" in short.ranked()


@pytest.mark.parametrize(
    ("name", "text", "said"),
    [
        ("supply_v", "", "supply, V: is needed."),
        ("supply_v", "3.3V", "supply, V: “3.3V” is not a number."),
        ("supply_v", "0", "supply, V: 0 is outside 0.1 to 1000."),
        ("supply_v", "1e999", "supply, V: “1e999” is outside 0.1 to 1000."),
        ("bits", "40", "bits: 40 is outside 4 to 32."),
        ("bits", "0", "bits: 0 is outside 4 to 32."),
        ("bits", "10.5", "bits: a whole number is needed."),
        ("range_to_c", "-20", "The range does not rise."),
        ("ambient_to_c", "40", "The electronics’ range must rise, or be left empty."),
        ("parallel_ohm", "0", "across the thermistor, Ω: 0 is outside 0.01 to 1000000000."),
        ("step_k", "0.01", "rows of the table every, K: 0.01 is outside 0.1 to 100."),
    ],
)
def test_what_cannot_be_read_is_said_and_the_lists_stay(opened: Opened, name: str, text: str, said: str) -> None:
    short = opened()
    before = short.ranked()
    short.fill(name, text)
    assert short.said() == f"{said} The lists are those of before."
    assert short.page.locator(f"[name={name}]").get_attribute("aria-invalid") == "true"
    assert short.ranked() == before and short.page.locator("[data-does=csv]").is_disabled()


@pytest.mark.parametrize(
    ("text", "value"), [("4k7", 4700), ("47 k", 47000), ("1M", 1e6), ("680R", 680), ("4700,5", 4700.5)]
)
def test_a_resistance_is_read_as_people_type_it(opened: Opened, tmp_path: Path, text: str, value: float) -> None:
    short = opened(**CLIPBOARD)
    short.fill("parallel_ohm", text)
    parallel = copied_record(short, tmp_path / "parts").position.circuit.parallel
    assert parallel is not None and parallel.resistance_ohm == value


def test_a_limit_that_no_part_meets_and_a_range_that_none_stands_are_said(opened: Opened) -> None:
    short = opened()
    short.fill("limit_k", "0.01")
    assert short.said().startswith("0 of 56 parts within ±0.01 K; ")
    short.fill("range_to_c", "900")
    assert short.ranked() == [] and short.page.get_by_text("No part is left to be ranked.").is_visible()
    assert len(short.out()) == 56
    assert "operates to 125 °C, the range reaches 900 °C" in short.out()["TB3A-103F38"]


def test_a_divider_without_reading_puts_a_part_out(opened: Opened) -> None:
    short = opened("#leakage_na=1000000&supply_v=0.1")
    assert short.out()["TB3A-103F38"] == "with no resistor of E96 every board has a reading over −20 to 70 °C"


def test_the_address_holds_the_form_and_a_step_back_takes_one_field_back(opened: Opened) -> None:
    short = opened()
    short.page.locator("[name=limit_k]").press("End")
    short.page.locator("[name=limit_k]").press_sequentially("5")
    short.settle()
    short.choose("thermistor", "high side")
    short.page.locator("[name=qualification]").first.check()
    short.settle()
    again = opened(short.page.url[short.page.url.index("#") :])
    assert again.said() == short.said() and again.ranked() == short.ranked()
    assert again.page.locator("[name=limit_k]").input_value() == "15"
    assert again.page.locator("[name=thermistor]").input_value() == "high side"
    short.page.go_back()
    short.settle()
    assert not short.page.locator("[name=qualification]").first.is_checked()
    short.page.go_back()
    short.settle()
    assert short.page.locator("[name=thermistor]").input_value() == "low side"
    assert short.page.locator("[name=limit_k]").input_value() == "15"
    short.page.go_back()
    short.settle()
    assert short.page.locator("[name=limit_k]").input_value() == "1"


def test_start_anew_is_the_page_as_it_was(opened: Opened) -> None:
    short = opened("#limit_k=3&method=curve&find=nv")
    short.page.get_by_role("button", name="Start anew").click()
    short.settle()
    assert short.page.url.endswith("shortlist.html")
    assert short.page.locator("[name=limit_k]").input_value() == "1"
    assert len(short.ranked()) == len(opened().ranked())


def test_both_lists_are_searched_and_places_stay(opened: Opened) -> None:
    short = opened()
    ranked, out = short.ranked(), short.out()
    short.page.get_by_label("Find").fill("nv10")
    short.settle()
    found = [number for number in ranked if number.startswith("NV10")]
    assert short.ranked() == found and found
    assert short.cells(found[0])["place"] == str(ranked.index(found[0]) + 1)
    assert set(short.out()) == {number for number in out if number.startswith("NV10")}


def test_fields_that_play_no_part_are_out_of_use(opened: Opened) -> None:
    short = opened()
    disabled = lambda: {f.get_attribute("name") for f in short.page.locator("form :disabled").all()}  # noqa: E731
    assert disabled() == {"reference_v", "reference_tolerance_pct", "parallel_tolerance_pct"}
    short.choose("reference", "own")
    short.choose("method", "curve")
    short.fill("parallel_ohm", "47k")
    assert disabled() == {"step_k"}


def test_a_row_shows_what_it_rests_on_and_leads_to_the_part(opened: Opened) -> None:
    short = opened()
    first = short.ranked()[0]
    record, table = DEMO.catalog.part(first), short.table()[0]
    cells = short.cells(first)
    assert cells["worst"].startswith(f"{float(table['worst_k']):.3f} at ")
    assert cells["margin"] == f"+{float(table['margin_k']):.3f}"
    link = short.page.get_by_role("link", name=first, exact=True)
    assert link.get_attribute("href") == DEMO.paths.part(record)


def test_the_csv_has_the_commands_names_and_no_formula(opened: Opened) -> None:
    assert tuple(opened().table()[0]) == CSV_NAMES
    assert "'=PX-1" in [row["part"] for row in opened(name="odd").table()]


def test_a_catalog_without_its_curves_is_said(opened: Opened) -> None:
    short = opened(name="data missing")
    assert short.page.get_by_text("The list of parts could not be loaded.").is_visible()
    assert not short.page.locator("#bd-short").is_visible()


def test_without_scripts_it_says_what_it_needs(opened: Opened) -> None:
    short = opened(java_script_enabled=False)
    assert short.page.get_by_text("This page computes in the browser").is_visible()
    assert not short.page.locator("#bd-short").is_visible()


def test_it_cautions_where_a_reading_protects(opened: Opened) -> None:
    assert "must not be the only protection" in opened().page.locator(".bd-caution").inner_text()


def test_every_field_has_a_label(opened: Opened) -> None:
    short = opened()
    unnamed = short.page.locator("#bd-short :is(input, select)").evaluate_all(
        "all => all.filter((f) => !f.getAttribute('aria-label') && !f.labels?.[0]?.textContent.trim()).map((f) => f.name)"
    )
    assert unnamed == []


def test_paper_has_all_rows_and_the_circuit_in_words(opened: Opened) -> None:
    short = opened()
    short.page.evaluate("dispatchEvent(new Event('beforeprint'))")
    assert len(short.ranked()) + len(short.out()) == 56
    short.page.emulate_media(media="print")
    assert short.page.locator(".bd-short-circuit").inner_text().startswith("Thermistor on the low side of 3.3 V ±2 %; ")
    assert not short.page.locator("form").is_visible()
    assert short.page.pdf().startswith(b"%PDF")


@pytest.mark.parametrize("width", [360, 768, 1280])
def test_nothing_sticks_out_of_the_page(opened: Opened, width: int) -> None:
    short = opened("#leakage_na=", viewport={"width": width, "height": 740})
    short.page.locator("details").evaluate("e => { e.open = true; }")
    assert short.page.evaluate("document.documentElement.scrollWidth") <= width


@pytest.mark.parametrize("scheme", ["default", "slate"])
@pytest.mark.parametrize("width", [360, 1280])
def test_axe_finds_no_violation(opened: Opened, scheme: str, width: int) -> None:
    axe = pytest.importorskip("axe_playwright_python.sync_playwright").Axe()
    short = opened("#leakage_na=", viewport={"width": width, "height": 900})
    short.page.evaluate("scheme => { document.body.dataset.mdColorScheme = scheme; }", scheme)
    short.page.locator("details").evaluate("e => { e.open = true; }")
    found = axe.run(short.page, options={"preload": False}).response["violations"]
    assert [(v["id"], [n["html"] for n in v["nodes"]]) for v in found] == []
