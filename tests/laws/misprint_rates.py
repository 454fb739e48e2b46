"""How often misprints are found and clean tables left alone, measured on the generated tables.

`python tests/laws/misprint_rates.py 20` measures twenty tables of every kind; `measured()` answers the same rows to
a page that prints the figures of the current build.
"""

from __future__ import annotations

import sys
from collections import Counter
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path
from time import process_time

import numpy as np
from misprint_tables import (
    CELL_SLIPS,
    Material,
    Printed,
    Slipped,
    cell_slip,
    clean_table,
    end_temperature_mistyped,
    row_left_out,
    row_missing,
    several_slips,
    temperature_mistyped,
)  # fmt: skip

from builder.misprints import Finding, Rated, Table, findings

STEPS = ("1", "2", "5", "10", "uneven")
DIGITS = (3, 4, 5, 6)
PLAIN_K, FINE_K = (0.3, np.inf), (0.1, 0.3)
_PAIR_C = (25.0, 85.0)
FEWEST_CLEAN = 20  # clean tables of every step and number of digits, for false alarms must be rare indeed


@dataclass(frozen=True)
class Rate:
    """Tables of one kind: how many, how many answered right, named with their slip, and named right."""

    kind: str
    step: str
    digits: int
    tables: int
    found: int
    named: int = 0
    restored: int = 0


def table(printed: Printed) -> Table:
    return Table(printed.t_c, printed.r_ohm)


def ratings(printed: Printed) -> Rated:
    return Rated(printed.rated_ohm, 25.0, ((*_PAIR_C, printed.b_25_85_k),))


def measured(count: int, seed: int = 2026) -> list[Rate]:
    """Every rate, over `count` tables of every kind, step and number of digits."""
    rng = np.random.default_rng(seed)
    return [rate for step in STEPS for digits in DIGITS for rate in _rates(rng, count, step, digits)]


def _rates(rng: np.random.Generator, count: int, step: str, digits: int) -> Iterator[Rate]:
    def tables(count: int = count) -> Iterator[tuple[int, Printed]]:
        return ((i, clean_table(rng, step=step, digits=digits)) for i in range(count))

    clean = max(count, FEWEST_CLEAN)
    silent = sum(not _answer(printed) for _, printed in tables(clean))
    yield Rate("clean", step, digits, clean, silent)
    for band, label in ((PLAIN_K, "above 0.3 K"), (FINE_K, "0.1 to 0.3 K")):
        for kind in CELL_SLIPS:
            yield _slips(f"{kind}, {label}", step, digits, [
                (i, cell_slip(rng, printed, kind, band)) for i, printed in tables()
            ])  # fmt: skip
    yield _slips("several", step, digits, [(i, several_slips(rng, p, int(rng.integers(2, 5)))) for i, p in tables()])
    for kind, make in ({"left out, uneven": row_left_out} if step == "uneven" else STRUCTURE).items():
        yield _structure(kind, step, digits, [(i, make(rng, printed)) for i, printed in tables()])
    for kind, spoil in WHOLE.items():
        answers = [spoil(rng, printed) for _, printed in tables() if _covers(printed)]
        yield Rate(kind, step, digits, len(answers), sum(answers))


def _answer(printed: Printed) -> tuple[Finding, ...]:
    """As `check` asks: the numbers alone, with the record's ratings."""
    return findings(table(printed), ratings(printed))


def _slips(kind: str, step: str, digits: int, slips: list[tuple[int, Slipped | None]]) -> Rate:
    count: Counter[str] = Counter()
    for _, slipped in slips:
        if slipped is None:
            continue
        found = _answer(slipped.table)
        right = tuple(one.row for one in found if one.rule == "row-out-of-line") == slipped.rows
        count["tables"] += 1
        if right and len(found) == len(slipped.rows):
            count["found"] += 1
            named = [(one, was) for one, was in zip(found, slipped.was, strict=True) if one.slip is not None]
            count["named"] += bool(named)
            count["restored"] += bool(named) and all(
                one.restored is not None and np.isclose(one.restored, float(was) * slipped.table.scale_ohm, rtol=1e-9)
                for one, was in named
            )
    return Rate(kind, step, digits, count["tables"], count["found"], count["named"], count["restored"])


def _structure(kind: str, step: str, digits: int, slips: list[tuple[int, Slipped]]) -> Rate:
    expected = "temperature-mistyped" if "temperature" in kind else "row-left-out"
    answers = [(_answer(slipped.table), slipped) for _, slipped in slips]
    found = sum([(one.row, one.slip) for one in answer] == [(s.rows[0], expected)] for answer, s in answers)
    return Rate(kind, step, digits, len(slips), found)


def _covers(printed: Printed) -> bool:
    return bool(printed.t_c[0] <= _PAIR_C[0] and printed.t_c[-1] >= _PAIR_C[1])


def _is_named(found: tuple[Finding, ...], rule: str, slip: str) -> bool:
    return {(one.rule, one.slip) for one in found} == {(rule, slip)}


def _kilo(_: np.random.Generator, printed: Printed) -> bool:
    found = findings(Table(printed.t_c, printed.r_ohm / 1000), ratings(printed))
    return _is_named(found, "units-look-wrong", "kilo-missed") and found[0].row is None


def _fahrenheit(_: np.random.Generator, printed: Printed) -> bool:
    found = findings(Table(printed.t_c * 1.8 + 32, printed.r_ohm), ratings(printed))
    return _is_named(found, "units-look-wrong", "fahrenheit-for-celsius")


def _kelvin(_: np.random.Generator, printed: Printed) -> bool:
    found = findings(Table(printed.t_c + 273.15, printed.r_ohm), ratings(printed))
    return _is_named(found, "units-look-wrong", "kelvin-for-celsius")


def _part_in_kilo(rng: np.random.Generator, printed: Printed) -> bool:
    row = int(rng.integers(3, printed.t_c.size - 3))
    r_ohm = np.where(np.arange(printed.t_c.size) < row, printed.r_ohm, printed.r_ohm / 1000)
    found = findings(Table(printed.t_c, r_ohm), ratings(printed))
    return _is_named(found, "units-look-wrong", "kilo-missed") and found[0].row == row


def _other_b(rng: np.random.Generator, printed: Printed) -> bool:
    other_k = printed.b_25_85_k * float(rng.choice([0.9, 0.97, 1.03, 1.1]))
    found = findings(table(printed), Rated(printed.rated_ohm, 25.0, ((*_PAIR_C, other_k),)))
    return _is_named(found, "b-differs", "another-part")


def _other_resistance(rng: np.random.Generator, printed: Printed) -> bool:
    rated_ohm = printed.rated_ohm * float(rng.choice([0.1, 0.47, 1.5, 2.2, 10]))
    found = findings(table(printed), Rated(rated_ohm, 25.0))
    return _is_named(found, "rated-differs", "another-part")


STRUCTURE: dict[str, Callable[[np.random.Generator, Printed], Slipped]] = {
    "left out": row_left_out,
    "missing": row_missing,
    "temperature": temperature_mistyped,
    "end temperature": end_temperature_mistyped,
}
WHOLE: dict[str, Callable[[np.random.Generator, Printed], bool]] = {
    "kilo missed": _kilo,
    "Fahrenheit axis": _fahrenheit,
    "kelvin axis": _kelvin,
    "kilo from a row on": _part_in_kilo,
    "B of another part": _other_b,
    "resistance of another part": _other_resistance,
}


def seconds_per_thousand(tables: int = 200) -> float:
    """Processor time to examine a thousand clean tables of 166 rows. [s]"""
    rng = np.random.default_rng(166)
    t_c = np.arange(-40.0, 126.0)
    made = []
    for _ in range(tables):
        material = Material(rng)
        made.append((Table(t_c, np.round(np.exp(material.ln_r(t_c)), 2)), Rated(material.rated_ohm)))
    start = process_time()
    for one, rated in made:
        findings(one, rated)
    return (process_time() - start) / tables * 1000


def summed(rates: list[Rate], by: Callable[[Rate], object]) -> dict[object, Rate]:
    """Rates added up by step, by digits, by kind or by any two of them."""
    groups: dict[object, list[Rate]] = {}
    for rate in rates:
        groups.setdefault(by(rate), []).append(rate)
    return {
        key: Rate(
            str(key), "", 0, sum(r.tables for r in group), sum(r.found for r in group),
            sum(r.named for r in group), sum(r.restored for r in group),
        )
        for key, group in groups.items()
    }  # fmt: skip


PAGE = Path(__file__).parents[2] / "docs" / "misprint-rates.md"
PAGE_COUNT = 6  # tables of every kind, step and number of digits that the page speaks of
_PAGE_NAMES = {
    "clean": "clean table: silent",
    "digit, above 0.3 K": "one wrong digit, more than 0.3 K",
    "swap, above 0.3 K": "two digits swapped, more than 0.3 K",
    "decimal, above 0.3 K": "decimal point moved",
    "digit, 0.1 to 0.3 K": "one wrong digit, 0.1 to 0.3 K",
    "swap, 0.1 to 0.3 K": "two digits swapped, 0.1 to 0.3 K",
    "several": "two to four rows with wrong digits",
    "left out": "a resistance left out of an even table, all later rows one off",
    "left out, uneven": "a resistance left out of an uneven table",
    "missing": "a row left out of an even table",
    "temperature": "a temperature mistyped, in an inner row",
    "end temperature": "the first or last temperature mistyped",
    "kilo missed": "kΩ heading missed",
    "kilo from a row on": "kΩ from some row on",
    "Fahrenheit axis": "temperatures in °F",
    "kelvin axis": "temperatures in kelvin",
    "B of another part": "table with another B-value",
    "resistance of another part": "table with another rated resistance",
}


def page_table(rates: list[Rate]) -> str:
    """The rates as the page's Markdown table."""
    by_kind = summed(rates, lambda rate: rate.kind)
    lines = [
        "| what was done to the table | tables | found | slip named | value restored right |",
        "|---|--:|--:|--:|--:|",
    ]
    for kind, name in _PAGE_NAMES.items():
        if (rate := by_kind.get(kind)) is None or not rate.tables:
            continue
        named = f"{rate.named / rate.found:.1%} | {rate.restored / rate.named:.1%}" if rate.named else " | "
        lines.append(f"| {name} | {rate.tables} | {rate.found / rate.tables:.1%} | {named} |")
    return "\n".join(lines) + "\n"


def page(rates: list[Rate]) -> str:
    """The page with its table replaced."""
    before, _, rest = PAGE.read_text("utf-8").partition("| what was done")
    return before + page_table(rates) + rest[rest.index("\n\n") + 1 :]


def _write(rates: list[Rate], by: Callable[[Rate], object]) -> None:
    for key, rate in sorted(summed(rates, by).items(), key=lambda item: str(item[0])):
        named = (
            f"  named {rate.named / rate.found:6.1%}  restored {rate.restored / rate.named:6.1%}" if rate.named else ""
        )
        print(f"{key!s:44} {rate.tables:6} tables  right {rate.found / max(rate.tables, 1):7.2%}{named}")


def _print(count: int) -> None:
    print(f"{seconds_per_thousand():.2f} s for a thousand tables of 166 rows")
    all_rates = measured(count)
    _write(all_rates, lambda rate: rate.kind)
    _write([r for r in all_rates if "K" in r.kind], lambda rate: (rate.kind.partition(", ")[2], f"step {rate.step}"))
    _write(
        [r for r in all_rates if "K" in r.kind], lambda rate: (rate.kind.partition(", ")[2], f"{rate.digits} digits")
    )
    _write([r for r in all_rates if r.kind in ("several", "clean")], lambda rate: (rate.kind, f"step {rate.step}"))


if __name__ == "__main__":
    if sys.argv[1:] == ["page"]:
        PAGE.write_text(page(measured(PAGE_COUNT)), "utf-8")
    else:
        _print(int(sys.argv[1]) if len(sys.argv) > 1 else 10)
