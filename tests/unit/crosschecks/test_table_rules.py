"""Rules about R–T tables: each finds its slip and says it in a whole sentence."""

from __future__ import annotations

import math

import pytest
from clean_part import CLEAN, RECORD, ROWS_OHM, Check, with_row

COMPARE = "Compare with the data sheet."


def told(check: Check, rows: list[tuple[object, ...]], record: str = RECORD) -> list[str]:
    return [f"{p} [{p.severity}: {p.rule}]" for p in check(record, rows)]


@pytest.mark.parametrize("record", [RECORD, RECORD + "curve_from: b-values\n"])
def test_a_clean_table_is_passed_in_silence(check: Check, record: str) -> None:
    assert check(record, CLEAN) == ()


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        (6830, "6830 Ω reads 1.1 K below what its neighbours expect, 6530.2 Ω. One digit differs: 6530 Ω."),
        (5630, "5630 Ω reads 3.6 K above what its neighbours expect, 6530.2 Ω. Two digits are swapped: 6530 Ω."),
    ],
)
def test_a_row_out_of_line_is_a_warning_with_the_value_that_was_meant(check: Check, typed: float, said: str) -> None:
    line = f"parts/t.csv:13: r_ohm at 35 °C: {said} {COMPARE} [warning: row-out-of-line]"
    assert told(check, with_row(35, 35, typed)) == [line]
    (found,) = check(RECORD, with_row(35, 35, typed))
    assert (found.row, found.expected) == (35.0, 6530.0)


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        (8530, "8530 Ω reads 6.3 K below what its neighbours expect, 6530.2 Ω. One digit differs: 6530 Ω."),
        (4530, "4530 Ω reads 9.1 K above what its neighbours expect, 6530.2 Ω. One digit differs: 6530 Ω."),
        (653, "653 Ω reads 67 K above what its neighbours expect, 6530.2 Ω. The decimal point is misplaced: 6530 Ω."),
        (6.53, "6.53 Ω reads 364 K above what its neighbours expect, 6530.2 Ω. It was typed in kΩ: 6530 Ω."),
        (8056, "8056 Ω reads 5 K below what its neighbours expect, 6530.2 Ω. It repeats the row beside it."),
    ],
)
def test_a_slip_that_breaks_the_fall_is_one_error_in_its_own_row(check: Check, typed: float, said: str) -> None:
    line = f"parts/t.csv:13: r_ohm at 35 °C: {said} {COMPARE} [error: row-out-of-line]"
    assert told(check, with_row(35, 35, typed)) == [line]


def test_a_mistyped_temperature_is_said_of_the_temperature(check: Check) -> None:
    assert told(check, with_row(35, 39, 6530)) == [
        "parts/t.csv:13: t_c: the row's resistance belongs to 35 °C, not to 39 °C. The temperature is mistyped: 35 °C. "
        f"{COMPARE} [warning: row-out-of-line]"
    ]


def test_a_missing_sign_is_said_of_its_own_row(check: Check) -> None:
    assert told(check, with_row(-10, 10, 55300)) == [
        "parts/t.csv:4: t_c: the row's resistance belongs to −10 °C, not to 10 °C. The temperature is mistyped: −10 °C. "
        f"{COMPARE} [error: row-out-of-line]"
    ]


def test_a_resistance_left_out_is_said_once_where_it_begins(check: Check) -> None:
    one_off = zip(ROWS_OHM, [r_ohm for t_c, r_ohm in CLEAN if t_c != 35], strict=False)
    assert told(check, list(one_off), RECORD.replace("[-20, 85]", "[-20, 80]")) == [
        "parts/t.csv:13: r_ohm at 35 °C: from this row on every resistance is one row off: a resistance was left out. "
        f"Here 6530.2 Ω is expected, not 5325 Ω. {COMPARE} [warning: row-out-of-line]"
    ]


def test_a_row_left_out_is_an_uneven_step(check: Check) -> None:
    assert told(check, with_row(35)) == [
        "parts/t.csv:13: t_c: the table goes on at 40 °C, where its even steps expect 35 °C. "
        "Add the row that was left out. [warning: uneven-step]"
    ]


def test_a_row_typed_twice_is_a_repeated_temperature(check: Check) -> None:
    assert told(check, [*CLEAN[:12], CLEAN[11], *CLEAN[12:]]) == [
        "parts/t.csv:14: t_c: 35 °C stands twice. Temperatures rise, or fall, from row to row; compare with the data sheet. "
        "[error: repeated-temperature]"
    ]


def test_a_rise_that_no_slip_explains_is_not_falling(check: Check) -> None:
    assert told(check, [(0, 32650), (25, 10000), (50, 12000), (85, 1070)], RECORD.replace("-20, 85", "0, 85")) == [
        "parts/t.csv:4: r_ohm at 50 °C: 12 kΩ is not below 10 kΩ at 25 °C. An NTC's resistance falls; compare both rows "
        "with the data sheet. [error: not-falling]"
    ]


@pytest.mark.parametrize(
    ("rows", "said"),
    [
        (
            [(t_c, r_ohm / 1000) for t_c, r_ohm in CLEAN],
            "the values are a thousandth of what the record states: they were typed in kΩ. Multiply them by 1000.",
        ),
        (
            [(t_c, r_ohm * 1000) for t_c, r_ohm in CLEAN],
            "the values are a thousand times what the record states. Divide them by 1000.",
        ),
        (
            [(t_c * 1.8 + 32, r_ohm) for t_c, r_ohm in CLEAN],
            "the temperatures make a thermistor only when they are read as °F. Convert them to °C.",
        ),
        (
            [(t_c + 273.15, r_ohm) for t_c, r_ohm in CLEAN],
            "the temperatures are in kelvin. Subtract 273.15 from each.",
        ),
    ],
)
def test_a_whole_table_in_another_unit_is_an_error(check: Check, rows: list[tuple[object, ...]], said: str) -> None:
    without_range = RECORD.replace("limits: {operating_c: [-20, 85]}\n", "")
    assert told(check, rows, without_range) == [f"parts/p.yaml:11: r_t_table: {said} [error: units-look-wrong]"]


def test_a_table_in_another_unit_from_some_row_on_is_an_error_there(check: Check) -> None:
    assert told(check, [(t_c, r_ohm / (1000 if t_c >= 40 else 1)) for t_c, r_ohm in CLEAN]) == [
        "parts/t.csv:14: r_ohm at 40 °C: from this row on the values stand in another unit: 5.325 Ω should be 5325 Ω. "
        "Give the whole column in Ω. [error: units-look-wrong]"
    ]


def test_a_table_of_another_resistance_is_told(check: Check) -> None:
    assert told(check, [(t_c, r_ohm * 1.03) for t_c, r_ohm in CLEAN]) == [
        "parts/p.yaml:12: r_t_table: the table has 10299 Ω at 25 °C, where the record states 10000 Ω: 0.67 K apart. "
        "Is it the table of another part? [warning: rated-differs]"
    ]


def test_a_table_of_another_b_value_is_told(check: Check) -> None:
    assert told(check, [*CLEAN], RECORD.replace("3936", "3380").replace("3977", "3435")) == [
        f"parts/p.yaml:12: r_t_table: the table gives {pair} = {has} K, where the record states {stated} K. "
        "Is it the table of another part? [warning: b-differs]"
        for pair, has, stated in (("B25/50", 3935.9, 3380), ("B25/85", 3976.9, 3435))
    ]


def test_a_table_computed_from_one_b_value_is_told(check: Check) -> None:
    # IEC 60539-1: R = R1 · exp(B · (1/T − 1/T1)).
    computed = [(t_c, f"{1e4 * math.exp(3977 * (1 / (t_c + 273.15) - 1 / 298.15)):.4g}") for t_c in ROWS_OHM]
    found = told(check, computed, RECORD.replace("  - {between_c: [25, 50], b_k: 3936, tolerance_pct: 1}\n", ""))
    assert found == [
        "parts/p.yaml:11: r_t_table: every B-value of the table is the same, which no ceramic's is: the table was computed "
        "from one B-value, not measured. Ask the maker for a measured table, or accept the finding. [warning: b-order]"
    ]


ENDS = ",r_min_ohm,r_max_ohm"


def banded(low: float, high: float, bend: float = 0.0) -> list[tuple[object, ...]]:
    """The clean table with ends at some factors of it; `bend` lets the upper one fall with temperature."""
    return [(t, r, f"{r * low:.5g}", f"{r * (high - bend * (t + 20)):.5g}") for t, r in CLEAN]


def test_a_band_that_holds_the_nominal_is_passed_in_silence(check: Check) -> None:
    assert check(RECORD, banded(0.95, 1.05), ENDS) == ()


def test_a_maximum_below_the_nominal_is_told(check: Check) -> None:
    assert [str(p) for p in check(RECORD, banded(0.95, 1.05, 0.0006), ENDS)] == [
        "parts/t.csv:19: r_max_ohm at 65 °C: the maximum, 2079.9 Ω, lies below the nominal value, 2082 Ω, and so in 5 rows. "
        "Compare with the data sheet."
    ]


def test_exchanged_columns_are_told_for_each(check: Check) -> None:
    assert [str(p) for p in check(RECORD, banded(1.05, 0.95), ENDS)] == [
        f"parts/t.csv:2: {name} at −20 °C: in 22 rows the {end} lies {way} the nominal value. "
        "Were the names of two columns exchanged?"
        for name, end, way in (("r_max_ohm", "maximum", "below"), ("r_min_ohm", "minimum", "above"))
    ]
