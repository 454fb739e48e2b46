"""Tables of ratios, tables in faulty records, and tables that a mistyped end would turn round."""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path

from clean_part import CLEAN, RECORD, ROWS_OHM, Check, with_row

from builder.problems import Problem


def of_ratios(check: Check, rows: Iterable[tuple[int, str]]) -> tuple[Problem, ...]:
    Path("parts").mkdir(exist_ok=True)
    lines = ["t_c,ratio", *(f"{t_c},{ratio}" for t_c, ratio in rows)]
    Path("parts", "r.csv").write_text("\n".join(lines) + "\n", "utf-8")
    return check(RECORD + "r_t_table: {file: r.csv}\n")


def ratios(digits: int) -> list[tuple[int, str]]:
    return [(t_c, f"{r_ohm / 10e3:.{digits}g}") for t_c, r_ohm in ROWS_OHM.items()]


def test_a_clean_table_of_ratios_with_three_digits_is_left_alone(check: Check) -> None:
    assert of_ratios(check, ratios(3)) == ()


def test_a_wrong_ratio_is_told_as_the_ratio_that_stands_in_the_row(check: Check) -> None:
    rows = [(t_c, "0.683" if t_c == 35 else ratio) for t_c, ratio in ratios(4)]
    (problem,) = of_ratios(check, rows)
    assert (problem.field, problem.row, problem.expected) == ("ratio", 35.0, 0.653)
    assert problem.message == (
        "0.683 reads 1.1 K below what its neighbours expect, 0.65302. One digit differs: 0.653. Compare with the data sheet."
    )


def test_a_wrong_row_is_told_in_the_same_run_as_a_misspelt_field(check: Check) -> None:
    told = check(RECORD.replace("tolerance_pct", "tolerence_pct", 1), with_row(35, 35, 6830))
    assert {(p.rule, p.row) for p in told} == {("row-out-of-line", 35.0), ("unknown-field", None)}


def test_a_mistyped_last_temperature_does_not_turn_the_table_round(check: Check) -> None:
    told = check(RECORD.replace("[-20, 85]", "[-20, 80]"), with_row(85, -85, 1070))
    assert [(p.row, p.rule) for p in told] == [(-85.0, "row-out-of-line")]


def test_a_table_in_another_unit_cannot_be_accepted(check: Check) -> None:
    rows = [(t_c, r_ohm / 1000) for t_c, r_ohm in CLEAN]
    told = check(RECORD + "accepted: [{rule: units-look-wrong, because: so it is}]\n", rows)
    assert ("units-look-wrong", "error") in {(p.rule, p.severity) for p in told}
