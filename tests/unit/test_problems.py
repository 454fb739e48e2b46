"""Problems as data, and how values are shown in their sentences."""

import json

import pytest

from builder.problems import (
    Problem,
    clipped,
    count_text,
    errors,
    in_order,
    near_name,
    nearest,
    one_line,
    quoted,
    warnings,
)

ERROR = Problem("parts/a.yaml", 6, "b_values[0].b_k", "out-of-bounds", "34350 K is outside 1000 to 10000 K. Check it.")
WARNING = Problem("parts/a.yaml", 2, "", "file-name", "is not read. Rename it.", "warning")


def test_a_problem_says_file_line_field_and_message():
    assert str(ERROR) == "parts/a.yaml:6: b_values[0].b_k: 34350 K is outside 1000 to 10000 K. Check it."


def test_a_problem_of_a_whole_file_names_no_field():
    assert str(WARNING) == "parts/a.yaml:2: is not read. Rename it."


def test_json_holds_the_row_and_what_was_expected_only_where_they_mean_something():
    assert ERROR.as_json() == {
        "file": "parts/a.yaml",
        "line": 6,
        "field": "b_values[0].b_k",
        "severity": "error",
        "rule": "out-of-bounds",
        "message": "34350 K is outside 1000 to 10000 K. Check it.",
    }
    row = Problem("a.csv", 22, "r_ohm", "row-out-of-line", "reads low.", row=0.0, expected=0.0)
    assert {name: row.as_json()[name] for name in ("row", "expected")} == {"row": 0.0, "expected": 0.0}
    json.dumps(row.as_json())


def test_problems_come_in_the_order_of_files_lines_and_fields_each_once():
    several = [Problem(file, line, field, "r", "m") for file in "ba" for line in (10, 9) for field in "zy"]
    ordered = in_order([*several, *several])
    assert [(p.file, p.line, p.field) for p in ordered] == [(f, n, d) for f in "ab" for n in (9, 10) for d in "yz"]


def test_errors_and_warnings_are_told_apart():
    assert (errors([ERROR, WARNING]), warnings([ERROR, WARNING])) == ((ERROR,), (WARNING,))


@pytest.mark.parametrize(("count", "text"), [(0, "0 rows"), (1, "1 row"), (2, "2 rows")])
def test_a_count_agrees_with_its_noun(count, text):
    assert count_text(count, "row") == text


@pytest.mark.parametrize(
    ("text", "shown"),
    [("10 kΩ", "10 kΩ"), ("a\nb", "a\\nb"), ("\x1b[31m", "\\x1b[31m"), ("\u202ex", "\\u202ex"), ("\udcff", "\\udcff"), ("", "")],
)  # fmt: skip
def test_what_cannot_be_seen_is_spelled_out(text, shown):
    assert one_line(text) == shown


def test_long_text_is_cut_with_an_ellipsis():
    assert [len(clipped("x" * n)) for n in (59, 60, 61, 10_000)] == [59, 60, 60, 60]
    assert clipped("x" * 61) == "x" * 59 + "…"


@pytest.mark.parametrize(
    ("value", "shown"),
    [("no", '"no"'), ("", '""'), (None, "nothing"), (True, "true"), (6.5, "6.5"), ([1, "a", None], '[1, "a", null]'), ({"a": {1}}, '{"a": "{1}"}')],
)  # fmt: skip
def test_a_value_is_shown_as_it_is_typed(value, shown):
    assert quoted(value) == shown


@pytest.mark.parametrize(
    ("name", "near"),
    [("tolerence_pct", "tolerance_pct"), ("AT_C", "at_c"), ("xyzzy", ""), ("", ""), ("x" * 100_000, "")],
)
def test_the_nearest_name_is_found_whatever_its_case(name, near):
    assert near_name(name, ["tolerance_pct", "at_c"]) == near
    assert nearest(name, ["tolerance_pct", "at_c"]) == (f" Did you mean {near}?" if near else "")
