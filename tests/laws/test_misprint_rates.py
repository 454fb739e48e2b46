"""The rates that the misprint finder holds, on seeded tables. MISPRINT_TABLES=50 measures more of each kind."""

from __future__ import annotations

import os
import re

import numpy as np
import pytest
from misprint_rates import (
    DIGITS,
    PAGE,
    PAGE_COUNT,
    STEPS,
    WHOLE,
    Rate,
    measured,
    page,
    ratings,
    summed,
    table,
)
from misprint_tables import clean_table

from builder.misprints import findings

COUNT = int(os.environ.get("MISPRINT_TABLES", str(PAGE_COUNT)))


@pytest.fixture(scope="module")
def rates() -> list[Rate]:
    return measured(COUNT)


def share(rates: list[Rate], *kinds: str, fewest_digits: int = 3) -> float:
    chosen = [rate for rate in rates if rate.kind in kinds and rate.digits >= fewest_digits]
    return sum(rate.found for rate in chosen) / sum(rate.tables for rate in chosen)


@pytest.mark.parametrize("step", STEPS)
@pytest.mark.parametrize("digits", DIGITS)
def test_clean_tables_are_left_alone(step: str, digits: int) -> None:
    rng = np.random.default_rng([int(digits), STEPS.index(step)])
    for _ in range(max(20, COUNT)):
        clean = clean_table(rng, step=step, digits=digits)
        assert findings(table(clean), ratings(clean)) == ()


def test_slips_above_three_tenths_of_a_kelvin_are_reported_on_their_row_alone(rates: list[Rate]) -> None:
    assert share(rates, "digit, above 0.3 K", "swap, above 0.3 K", "decimal, above 0.3 K") >= 0.99


def test_slips_above_a_tenth_of_a_kelvin_are_mostly_reported(rates: list[Rate]) -> None:
    assert share(rates, "digit, 0.1 to 0.3 K", "swap, 0.1 to 0.3 K", fewest_digits=4) >= 0.80


@pytest.mark.parametrize("kind", ["left out", "missing", "temperature"])
def test_rows_left_out_and_temperatures_mistyped_are_one_finding_named_as_such(rates: list[Rate], kind: str) -> None:
    assert share(rates, kind) >= 0.99


@pytest.mark.parametrize("kind", ["left out, uneven", "end temperature"])
def test_what_is_harder_to_tell_is_mostly_told(rates: list[Rate], kind: str) -> None:
    assert share(rates, kind) >= 0.85


def test_a_named_slip_restores_the_value(rates: list[Rate]) -> None:
    named = summed([rate for rate in rates if rate.named], lambda _: "all")["all"]
    assert named.restored / named.named >= 0.95


@pytest.mark.parametrize("kind", ["several", *WHOLE])
def test_several_wrong_rows_and_wrong_units_are_named_for_what_they_are(rates: list[Rate], kind: str) -> None:
    assert share(rates, kind) >= 0.95


@pytest.mark.skipif(COUNT != PAGE_COUNT, reason="the page speaks of another number of tables")
def test_the_page_has_the_rates_of_this_build(rates: list[Rate]) -> None:
    """Within two points: another processor rounds otherwise, and a table at the edge may fall on its other side."""
    written, made = PAGE.read_text("utf-8").splitlines(), page(rates).splitlines()
    cure = "python tests/laws/misprint_rates.py page rewrites it"
    assert [without_shares(line) for line in written] == [without_shares(line) for line in made], cure
    assert shares_of(written) == pytest.approx(shares_of(made), abs=2.0), cure


def without_shares(line: str) -> str:
    return re.sub(r"[\d.]+%", "%", line)


def shares_of(lines: list[str]) -> list[float]:
    return [float(share) for line in lines for share in re.findall(r"([\d.]+)%", line)]
