"""Curves and bands that Chromium unpacks, held to Python's own; and how much room they take."""

from __future__ import annotations

import json
from collections.abc import Iterator
from pathlib import Path

import numpy as np
import pytest
from playwright.sync_api import Browser, Page
from test_curves_in_the_browser import invented, off

from builder.exports.packed_curves import ALPHABET, LN_QUANTA, STEPS_K, packed_curve
from builder.part_curve import PartCurve, part_curve
from builder.records import read_catalog
from builder.units import Array

ROOT = Path(__file__).parents[2]
WITHIN_K = 1e-3
LN_R = """(given) => {
    const { text, extended, tC } = JSON.parse(given), curve = beadroll.unpackedCurve(text, extended);
    return JSON.stringify([0, 1, 2].map((edge) => tC.map((t) => Math.log(curve.resistance(t, edge)))));
}"""


@pytest.fixture(scope="module")
def curves(tmp_path_factory: pytest.TempPathFactory) -> list[PartCurve]:
    drawn = invented(tmp_path_factory.mktemp("invented")).parts
    # Between a row and its neighbour a hundredth of a kelvin away a curve falls by two decades: no part does.
    records = [record for record in drawn if "steep end" not in record.part.part]
    return [part_curve(record) for record in (*read_catalog(ROOT / "parts").parts, *records)]


@pytest.fixture(scope="module")
def unpacking(chromium: Browser) -> Iterator[Page]:
    page = chromium.new_page()
    page.add_script_tag(path=ROOT / "builder/assets/shortlist-chain.js")
    yield page
    page.close()


def ln_r(page: Page, curve: PartCurve, t_c: Array) -> Array:
    """ln R at its lowest, nominal and highest as the browser has it."""
    given = {"text": packed_curve(curve), "extended": curve.curve.extends, "tC": t_c.tolist()}
    told = json.loads(page.evaluate(LN_R, json.dumps(given)))
    return np.array(told, dtype=float)


def test_curve_and_edges_are_pythons_within_a_millikelvin_every_half_degree(
    unpacking: Page, curves: list[PartCurve]
) -> None:
    for curve in curves:
        low_c, high_c = (
            np.clip(curve.operating_c, *curve.curve.span_c) if not curve.curve.extends else curve.operating_c
        )
        t_c = np.arange(np.ceil(2 * low_c), np.floor(2 * high_c) + 1) / 2
        told = ln_r(unpacking, curve, t_c)
        lowest, highest = curve.band.edges_ohm(t_c)
        allowed = WITHIN_K * np.abs(curve.curve.alpha_pct_per_k(t_c)) / 100
        for ours, theirs in zip((lowest, curve.curve.resistance_ohm(t_c), highest), told, strict=True):
            assert off(np.log(ours) / allowed, theirs / allowed) < 1, curve.curve.basis


def test_beyond_the_span_a_curve_goes_on_as_in_python(unpacking: Page, curves: list[PartCurve]) -> None:
    for curve in curves:
        low_c, high_c = curve.curve.span_c
        t_c = np.array([low_c - 30.0, low_c - 5.0, high_c + 5.0, high_c + 30.0])
        assert off(np.log(curve.curve.resistance_ohm(t_c)), ln_r(unpacking, curve, t_c)[1]) < 1e-4


def test_the_browser_reads_what_python_writes() -> None:
    script = (ROOT / "builder/assets/shortlist-chain.js").read_text("utf-8")
    assert f"LN_QUANTUM = {LN_QUANTA[0]:g}".replace("e-06", "e-6") in script
    assert f"EDGE_QUANTUM = {LN_QUANTA[1]:g}".replace("e-05", "e-5") in script
    assert f"STEPS_K = [{', '.join(f'{step_k:g}' for step_k in STEPS_K)}]" in script


def test_no_character_ends_the_text_or_the_script() -> None:
    assert len(set(ALPHABET)) == 88 and not set(ALPHABET) & set('"\\<&')


def test_a_part_takes_a_few_hundred_characters(curves: list[PartCurve]) -> None:
    lengths = [len(packed_curve(curve)) for curve in curves]
    assert np.median(lengths) < 400 and max(lengths) < 1500
