"""Curves and comparisons that Chromium computes from the builder's samples, held to Python's own."""

from __future__ import annotations

import json
import random
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from playwright.sync_api import Browser, Page

from builder.comparisons import compared
from builder.exports.curve_script import curve_script
from builder.part_curve import PartCurve, part_curve
from builder.records import Catalog, read_catalog
from builder.units import Array, kelvin

ROOT = Path(__file__).parents[2]
# What the page promises: a reading to 1 mK, a resistance to a ten-thousandth.
WITHIN_K = 1e-3
WITHIN_RATIO = 1e-4
BEYOND_K = 40
# Where one part in ten thousand of a resistance is half a kelvin: no reading, but a sign of a wrong part.
HOTTEST_READING_C = 1000.0

COMPARE = """(reference, other, tC) => {
    const { rows } = beadroll.compared(made(reference), made(other), tC);
    const names = ["rRef", "r", "reads", "readsMin", "readsMax", "low", "high", "refLow", "refHigh", "ratioPct"];
    return {
        figures: Object.fromEntries(names.map((name) => [name, rows.map((row) => row[name])])),
        readsFar: rows.map((row) => row.readsFar),
        otherFar: rows.map((row) => row.otherFar),
    };
}"""


def record(draw: random.Random, kind: str, index: int) -> dict[str, Any]:
    """An invented part of one kind."""
    low, high = draw.choice([(-40, 125), (-55, 155), (0, 70), (-20.5, 99.5)])
    rated_c = draw.choice([25, 25, 0, 100])
    rated_ohm = 10 ** draw.uniform(1.5, 6)
    b_k = draw.uniform(3000, 4700)
    made: dict[str, Any] = {
        "part": f"PX-{kind}-{index}",
        "maker": "Pellworm",
        "body": {"form": "leaded"},
        "rated": {"resistance_ohm": rated_ohm, "at_c": rated_c, "tolerance_pct": draw.choice([None, 0.5, 5])},
        "b_values": [{"between_c": [rated_c, 85], "b_k": b_k, "tolerance_pct": draw.choice([None, 1])}],
        "limits": {"operating_c": [low, high]},
    }
    if draw.random() < 0.5:
        made["accuracy"] = [{"between_c": [0, 70], "within_k": 0.2}, {"between_c": [-10.5, 90], "within_k": 0.5}]
    if kind == "plain b-value":
        made["shape"] = "plain"
    if kind in ("b-values", "b-values bent back"):
        bent_k = draw.uniform(10, 60) * (1 if kind == "b-values" else -1)
        made["b_values"].append({"between_c": [rated_c, 50], "b_k": b_k - bent_k, "tolerance_pct": 2})
    if kind in ("table", "table with columns"):
        t_c = np.arange(low, high + 1e-9, draw.choice([1, 5, 10, 2.5]))
        x = 1 / kelvin(t_c) - 1 / kelvin(rated_c)
        r_ohm = rated_ohm * np.exp(b_k * x - 2e5 * x**2)
        columns = ["t_c", "r_ohm"] + (["r_min_ohm", "r_max_ohm"] if kind == "table with columns" else [])
        figures = [t_c, r_ohm, r_ohm * np.exp(-0.02 - 40 * abs(x)), r_ohm * np.exp(0.03 + 60 * abs(x))]
        rows = [[float(f"{v:.5g}") for v in row] for row in zip(*figures[: len(columns)], strict=True)]
        made["r_t_table"] = {"columns": columns, "rows": rows}
    if kind == "table with a steep end":
        made["r_t_table"] = {"rows": [[24, 1.04 * rated_ohm], [25, rated_ohm], [25.01, rated_ohm / 100]]}
    if kind in ("steinhart-hart", "steinhart-hart with c below zero", "steinhart-hart with c zero"):
        c = {"steinhart-hart": draw.uniform(0.5e-7, 2e-7), "steinhart-hart with c zero": 0.0}.get(kind, -3e-8)
        made["steinhart_hart"] = {"a": 1.1e-3, "b": 2.4e-4, "c": c, "span_c": [-10, 90]}
    return made


KINDS = (
    "b-value",
    "plain b-value",
    "b-values",
    "b-values bent back",
    "table",
    "table with columns",
    "steinhart-hart",
    "steinhart-hart with c zero",
    "steinhart-hart with c below zero",
    "table with a steep end",
)


def invented(folder: Path) -> Catalog:
    """Eight parts of each kind."""
    draw = random.Random(20260301)
    for kind in KINDS:
        for index in range(8):
            (folder / f"{kind} {index}.yaml").write_text(json.dumps(record(draw, kind, index)), "utf-8")
    catalog = read_catalog(folder)
    assert len(catalog.parts) == 8 * len(KINDS), catalog.problems
    return catalog


@pytest.fixture(scope="module")
def curves(tmp_path_factory: pytest.TempPathFactory) -> list[PartCurve]:
    records = (*read_catalog(ROOT / "parts").parts, *invented(tmp_path_factory.mktemp("invented")).parts)
    return [part_curve(made) for made in records]


@pytest.fixture(scope="module")
def browser_page(
    chromium: Browser, curves: list[PartCurve], tmp_path_factory: pytest.TempPathFactory
) -> Iterator[Page]:
    """A page with every curve in it; `made(i)` is the i-th."""
    folder = tmp_path_factory.mktemp("page")
    scripts = "".join(curve_script(str(i), curve, []) for i, curve in enumerate(curves))
    (folder / "curves.js").write_text((ROOT / "builder/assets/curves.js").read_text("utf-8"), "utf-8")
    (folder / "data.js").write_text(
        "const all = {}, made = (i) => all[i];\n"
        "beadroll.curve = (key, data) => { all[key] = new beadroll.Curve(key, data); };\n" + scripts,
        "utf-8",
    )
    page_file = folder / "index.html"
    page_file.write_text(
        '<meta charset="utf-8"><script src="curves.js"></script><script src="data.js"></script>', "utf-8"
    )
    page = chromium.new_page()
    page.goto(page_file.as_uri())
    yield page
    page.close()


def asked(page: Page, script: str, *arguments: Any) -> Any:
    """What a function of the page answers; as JSON, which is many times faster than the driver's own way."""
    call = f"(given) => JSON.stringify(({script})(...JSON.parse(given)))"
    return json.loads(page.evaluate(call, json.dumps(arguments)))


def figures(values: Any) -> Array:
    """What Chromium answered; null is what is not a number."""
    return np.array([np.nan if value is None else value for value in values], dtype=float)


def off(ours: Array, theirs: Array) -> float:
    """The largest difference; infinite where only one of the two is a number."""
    alike = np.isnan(ours) == np.isnan(theirs)
    return float(np.nanmax(np.where(alike, np.abs(ours - theirs), np.inf), initial=0))


def around(curve: PartCurve) -> Array:
    """Temperatures in the span and well beyond it, its ends among them."""
    low, high = curve.curve.span_c
    return np.sort(np.append(np.linspace(low - BEYOND_K, high + BEYOND_K, 241), [low, high]))


def test_resistance_is_pythons_inside_the_span_and_beyond(browser_page: Page, curves: list[PartCurve]) -> None:
    for i, curve in enumerate(curves):
        t_c = around(curve)
        told = figures(asked(browser_page, "(i, tC) => tC.map((t) => made(i).resistance(t))", i, t_c.tolist()))
        assert off(np.log(told), np.log(curve.curve.resistance_ohm(t_c))) < WITHIN_RATIO, i


def test_temperature_is_pythons_inside_the_span_and_beyond(browser_page: Page, curves: list[PartCurve]) -> None:
    for i, curve in enumerate(curves):
        r_ohm = curve.curve.extended_resistance_ohm(around(curve))
        r_ohm = r_ohm[np.isfinite(r_ohm)]
        script = "(i, ohms) => ohms.map((r) => made(i).extendedTemperature(r))"
        told = figures(asked(browser_page, script, i, r_ohm.tolist()))
        assert off(told, curve.curve.extended_temperature_c(r_ohm)) < WITHIN_K, i


def test_band_is_pythons_at_every_whole_degree_of_span_and_operating_range(
    browser_page: Page, curves: list[PartCurve]
) -> None:
    for i, curve in enumerate(curves):
        low, high = asked(browser_page, "(i) => made(i).bandC", i)
        ends_c = np.array([curve.curve.span_c, curve.operating_c])
        t_c = np.arange(np.ceil(ends_c.min()), np.floor(ends_c.max()) + 1)
        t_c = t_c[np.isfinite(curve.curve.resistance_ohm(t_c))]
        assert [low, high] == [t_c[0], t_c[-1]]
        script = "(i, tC) => tC.map((t) => [...made(i).edges(t), made(i).isIncomplete(t)])"
        told = asked(browser_page, script, i, t_c.tolist())
        for edge, ours in enumerate(curve.band.edges_ohm(t_c)):
            assert off(np.log(figures(row[edge] for row in told)), np.log(ours)) < 1e-5, i
        assert [row[2] for row in told] == curve.band.incomplete(t_c).tolist()
        beyond = asked(browser_page, "(i, t) => made(i).edges(t)", i, high + 1)
        assert np.isnan(figures(beyond)).all()


def test_reads_of_any_two_parts_are_pythons(browser_page: Page, curves: list[PartCurve]) -> None:
    draw = random.Random(4242)
    for _ in range(500):
        places = draw.randrange(len(curves)), draw.randrange(len(curves))
        low, high = sorted(draw.sample(range(-60, 170), 2))
        t_c = np.arange(low, high + 1.0)
        check_pair(asked(browser_page, COMPARE, *places, t_c.tolist()), curves[places[0]], curves[places[1]], t_c)


def ln_ratio(ratio_pct: Array) -> Array:
    """ln of R over R of the reference; below a billionth nothing but rounding is left of it."""
    ln: Array = np.log1p(np.maximum(ratio_pct / 100, 1e-9 - 1))
    return ln


def check_pair(told: Any, reference: PartCurve, other: PartCurve, t_c: Array) -> None:
    ours = compared(reference, other, t_c)
    seen = {name: figures(values) for name, values in told["figures"].items()}
    meant = ~(np.nan_to_num(ours.reads_k) + t_c > HOTTEST_READING_C)
    assert off(seen["reads"][meant], ours.reads_k[meant]) < WITHIN_K
    assert off(ln_ratio(seen["ratioPct"]), ln_ratio(ours.ratio_pct)) < WITHIN_RATIO
    assert told["readsFar"] == ours.reference_extrapolated.tolist()
    assert told["otherFar"] == ours.other_extrapolated.tolist()
    given = np.isfinite(seen["low"])
    for name, edge_k in (("readsMin", ours.reads_min_k), ("readsMax", ours.reads_max_k)):
        meant = given & ~(np.nan_to_num(edge_k) + t_c > HOTTEST_READING_C)
        assert off(seen[name][meant], edge_k[meant]) < WITHIN_K
