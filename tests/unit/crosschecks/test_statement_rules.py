"""Rules about what a record states: coefficients, B-values, tolerances, documents, reviews."""

from __future__ import annotations

import pytest
from clean_part import CLEAN, COEFFICIENTS, RECORD, Check

BOTH = "Compare both with the data sheet."
COMPARE = "Compare them with the data sheet."


def told(check: Check, record: str, table: bool = False) -> list[str]:
    return [f"{p} [{p.severity}: {p.rule}]" for p in check(record, CLEAN if table else ())]


def record(old: str, new: str, text: str = RECORD) -> str:
    assert old in text
    return text.replace(old, new)


@pytest.mark.parametrize("table", [False, True])
@pytest.mark.parametrize("more", ["", COEFFICIENTS])
def test_a_clean_record_is_passed_in_silence(check: Check, more: str, table: bool) -> None:
    assert told(check, RECORD + more, table) == []


@pytest.mark.parametrize(
    ("coefficients", "said"),
    [
        # The same curve over ln(R/R25): a is 1/298.15 K, b is 1/T's slope there, b + 3·c·(ln 1e4)².
        (
            "a: 3.354016e-3, b: 2.564417e-4, c: 8.775468e-8",
            "the coefficients are made for R over the rated resistance, not for ohms. Ask for coefficients in ohm.",
        ),
        # ln 10 = 2.302585 and its cube, 12.208.
        (
            "a: 1.129241e-3, b: 5.390529e-4, c: 1.071309e-6",
            "the coefficients are made for log10 R, not ln R. Divide b by 2.302585 and c by 12.208.",
        ),
        # Solved for 97, 10 and 1.07 kΩ at −20, 25 and 85 °C.
        (
            "a: 2.775246e-3, b: 2.494957e-4, c: 3.510670e-7",
            "the coefficients are made for R in kΩ, not Ω. Ask for coefficients in ohm.",
        ),
    ],
)
def test_coefficients_of_another_unit_are_an_error_that_names_it(check: Check, coefficients: str, said: str) -> None:
    text = f"{RECORD}steinhart_hart: {{{coefficients}, span_c: [-20, 85]}}\n"
    assert told(check, text) == [f"parts/p.yaml:12: steinhart_hart: {said} [error: units-look-wrong]"]


def test_log10_coefficients_put_right_as_told_are_clean(check: Check) -> None:
    b, c = 5.390529e-4 / 2.302585, 1.071309e-6 / 12.208
    assert told(check, f"{RECORD}steinhart_hart: {{a: 1.129241e-3, b: {b:.6e}, c: {c:.6e}, span_c: [-20, 85]}}\n") == []


def test_coefficients_that_miss_the_rated_resistance_are_told(check: Check) -> None:
    # 1 / (1.129241e-3 + 2.351077e-4 · ln 1e4 + 8.775468e-8 · (ln 1e4)³) = 297.33 K.
    assert told(check, RECORD + record("2.341077", "2.351077", COEFFICIENTS)) == [
        f"parts/p.yaml:12: steinhart_hart: the coefficients read 24.18 °C at the rated resistance, 10 kΩ at 25 °C. {BOTH} "
        "[warning: rated-differs]"
    ]


def test_coefficients_that_give_no_temperature_are_told_so(check: Check) -> None:
    found = told(check, RECORD + record("1.129241e-3", "-1.129241e-2", COEFFICIENTS))
    assert [said for said in found if "rated-differs" in said] == [
        "parts/p.yaml:12: steinhart_hart: the coefficients give no temperature at the rated resistance, 10 kΩ at 25 °C. "
        f"{BOTH} [warning: rated-differs]"
    ]


def test_coefficients_that_differ_from_the_table_are_told_where_they_do_most(check: Check) -> None:
    # A tilt about the rated point: b less by 1e-5, a more by 1e-5 · ln 1e4. At 85 °C, 1070 Ω:
    # 1 / (1.221344e-3 + 2.241077e-4 · ln 1070 + 8.775468e-8 · (ln 1070)³) = 355.32 K.
    tilted = record("1.129241e-3, b: 2.341077e-4", "1.221344e-3, b: 2.241077e-4", COEFFICIENTS)
    (said,) = told(check, RECORD + tilted, table=True)
    assert said == (
        "parts/p.yaml:12: steinhart_hart: the coefficients read −2.83 K off the table at 85 °C, the most from −20 to 85 °C. "
        f"{BOTH} [warning: coefficients-differ]"
    )


def test_a_b_value_that_differs_from_the_coefficients_is_told_in_kelvin(check: Check) -> None:
    # (1 − 3976.8 / 4020) · (1/298.15 − 1/358.15) · 358.15² = 0.775 K.
    found = told(check, record("3977", "4020") + COEFFICIENTS)
    assert found == [
        "parts/p.yaml:7: b_values[1].b_k: 4020 K, where the coefficients give 3976.8 K: 0.78 K apart at 85 °C. "
        f"{BOTH} [warning: b-differs]"
    ]


def test_a_b_value_that_coefficients_do_not_reach_is_not_judged(check: Check) -> None:
    short = "steinhart_hart: {a: 5.83e-4, b: 3.3e-4, c: -3.4e-7, span_c: [0, 30]}\n"
    assert not [said for said in told(check, RECORD + short) if "b-differs" in said]


@pytest.mark.parametrize(("b_k", "how"), [(3936, "equal"), (3900, "in falling order")])
def test_b_values_that_do_not_rise_are_told(check: Check, b_k: int, how: str) -> None:
    without_range = record("limits: {operating_c: [-20, 85]}\n", "", record("3977", str(b_k)))
    assert told(check, without_range) == [
        f"parts/p.yaml:7: b_values[1].b_k: B25/50 = 3936 K and B25/85 = {b_k} K are {how}; a ceramic's B-value rises with "
        "temperature. Compare both with the data sheet: were they computed, or exchanged? [warning: b-order]"
    ]


NOWHERE = "no resistance that falls with temperature everywhere from"


@pytest.mark.parametrize(
    "figures",
    [
        "a: 1.129241e-3, b: -2.341077e-4, c: 8.775468e-8",
        "a: 1.129241e-3, b: 0, c: 8.775468e-8",
        "a: 1e300, b: 1e300, c: 1e300",
        "a: 1e-3, b: 1e-320, c: 1e308",
    ],
)
@pytest.mark.parametrize("table", [False, True])
@pytest.mark.filterwarnings("error")
def test_coefficients_that_make_no_curve_are_an_error(check: Check, figures: str, table: bool) -> None:
    assert told(check, f"{RECORD}steinhart_hart: {{{figures}, span_c: [-20, 85]}}\n", table) == [
        f"parts/p.yaml:12: steinhart_hart: the coefficients give {NOWHERE} −20 to 85 °C. {COMPARE} [error: no-curve-here]"
    ]


@pytest.mark.filterwarnings("error")
def test_b_values_that_make_no_curve_are_an_error_that_names_them(check: Check) -> None:
    wrong = record("3936", "3380", record("3977", "4335"))
    assert told(check, wrong) == [
        f"parts/p.yaml:5: b_values: B25/50 = 3380 K and B25/85 = 4335 K give {NOWHERE} −20 to 85 °C. {COMPARE} "
        "[error: no-curve-here]"
    ]


def test_a_table_whose_steep_end_leads_to_no_resistance_is_an_error(check: Check) -> None:
    rows = "r_t_table: {rows: [[24, 10400], [25, 10000], [25.01, 100]]}\n"
    assert [said for said in told(check, RECORD + rows) if "no-curve" in said] == [
        f"parts/p.yaml:12: r_t_table: the first and last rows give {NOWHERE} −20 to 85 °C. {COMPARE} [error: no-curve-here]"
    ]


def test_b_values_that_bend_as_no_ceramic_are_told(check: Check) -> None:
    # (4300 − 3936) K / (1/358.15 − 1/323.15) per K = −1.2e6 K².
    assert told(check, record("3977", "4300")) == [
        "parts/p.yaml:7: b_values[1].b_k: B25/50 = 3936 K and B25/85 = 4300 K bend the curve by −1200000 K², where a ceramic "
        f"bends by −275000 to −30000 K². {BOTH} [warning: bend-unlikely]"
    ]


def test_b_values_rounded_to_whole_kelvins_bend_as_they_like_where_their_pairs_are_close(check: Check) -> None:
    # Each kelvin between B25/84 and B25/85 is a bend of −1.28e5 K²: 5 K are taken, −6e5 K² and one for rounding, 7 K not.
    close = record("[25, 50], b_k: 3936", "[25, 84], b_k: 3972")
    assert told(check, close) == []
    assert len(told(check, record("3972", "3970", close))) == 1


def test_b_values_on_both_sides_of_the_rated_temperature_bend_alike(check: Check) -> None:
    # Of the coefficients in clean_part.py: B−20/25 = ln(97000/10000) / (1/253.15 − 1/298.15) = 3811 K.
    assert told(check, record("[25, 50], b_k: 3936", "[-20, 25], b_k: 3811")) == []
    (said,) = told(check, record("[25, 50], b_k: 3936", "[-20, 25], b_k: 4111"))
    # (3977 − 4111) K / (1/358.15 − 1/253.15) per K.
    assert "B−20/25 = 4111 K and B25/85 = 3977 K bend the curve by 120000 K²" in said


def test_missing_tolerances_are_told_each(check: Check) -> None:
    assert told(check, record(", tolerance_pct: 1", "")) == [
        "parts/p.yaml:4: rated.tolerance_pct: is not stated, so the tolerance band is incomplete. Add it from the data sheet, "
        "in per cent. [warning: tolerance-missing]",
        "parts/p.yaml:5: b_values: no B-value has a tolerance, so away from the rated temperature the tolerance band is "
        "incomplete. Add tolerance_pct to a B-value, or min and max columns to the table. [warning: tolerance-missing]",
    ]


def test_an_accuracy_in_kelvin_stands_for_the_tolerances(check: Check) -> None:
    accuracy = "accuracy: [{between_c: [-20, 85], within_k: 0.2}]\n"
    assert told(check, record(", tolerance_pct: 1", "") + accuracy) == []


def test_a_missing_document_is_told(check: Check) -> None:
    assert told(check, record("documents: [{title: data sheet}]\n", "")) == [
        "parts/p.yaml:1: documents: no document is named, so nobody can compare these figures with anything. "
        "Add the data sheet and its revision. [warning: document-missing]"
    ]


def test_a_review_is_overdue_from_the_day_after_it_was_due(check: Check) -> None:
    assert told(check, record("2027-01-01", "2026-06-01")) == []
    assert told(check, record("2027-01-01", "2026-05-31")) == [
        "parts/p.yaml:11: standing[0].review_due: the review was due on 2026-05-31. Review the part and append an entry to "
        "its standing. [warning: review-overdue]"
    ]


def test_a_later_entry_settles_an_overdue_review(check: Check) -> None:
    later = record("2027-01-01}", "2026-05-31}\n  - {state: proposed, on: 2026-05-01, by: sensors, because: reviewed}")
    assert told(check, later) == []


def test_an_operating_range_beyond_the_curve_is_told(check: Check) -> None:
    assert told(check, record("[-20, 85]", "[-40, 125]"), table=True) == [
        "parts/p.yaml:8: limits.operating_c: −40 to 125 °C reaches beyond the curve, −20 to 85 °C, which is extrapolated up to "
        "−40 °C and 125 °C. Ask the maker for a longer table, or state the range that the figures cover. "
        "[warning: outside-operating]"
    ]


def test_coefficients_that_bend_back_are_told(check: Check) -> None:
    # Through 10 kΩ at 25 °C: 1/298.15 = a + b · ln 1e4 + c · (ln 1e4)³.
    bent = "steinhart_hart: {a: 5.8e-4, b: 3.3e-4, c: -3.404e-7, span_c: [-20, 85]}\n"
    assert [said for said in told(check, RECORD + bent) if "bends-back" in said] == [
        "parts/p.yaml:12: steinhart_hart.c: −3.404e−7 is not above zero, which no real ceramic has; the curve is not used "
        "outside its span. Compare the coefficients with the data sheet. [warning: bends-back]"
    ]


def test_what_intake_left_open_is_an_error(check: Check) -> None:
    assert told(check, record("because: tested", "because: FILL-IN later")) == [
        'parts/p.yaml:11: standing[0].because: "FILL-IN later" is what intake puts where it cannot know. '
        "Fill it in from the data sheet. [error: to-be-filled-in]"
    ]
