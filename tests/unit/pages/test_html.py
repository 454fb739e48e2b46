"""HTML is made in one place, which escapes all that is not HTML already."""

from __future__ import annotations

import pytest

from builder.exports.rows import Column
from builder.pages.html import Html, facts, html, joined, link, notice, rows_table, slug, table, tag

HOSTILE = '"><img src=x onerror=alert(1)>'
ESCAPED = "&quot;&gt;&lt;img src=x onerror=alert(1)&gt;"


@pytest.mark.parametrize(
    "made",
    [
        html(HOSTILE),
        tag("p", HOSTILE),
        tag("p", "x", title=HOSTILE),
        joined(["x", HOSTILE]),
        joined(["x", "y"], by=HOSTILE),
        link(HOSTILE, "x.html"),
        link("x", HOSTILE),
        notice("warning", HOSTILE),
        facts([(HOSTILE, "x")]),
        facts([("x", HOSTILE)]),
        table(["x", HOSTILE], [["y", "z"]], caption="x"),
        table(["x", "y"], [[HOSTILE, "z"]], caption="x"),
        table(["x", "y"], [["z", HOSTILE]], caption="x"),
        table(["x", "y"], [["z", "z"]], caption=HOSTILE),
        rows_table([Column("a", HOSTILE), Column("b", "b")], [{"a": "x", "b": "y"}], caption="x"),
        rows_table([Column("a", "a"), Column("b", "b")], [{"a": HOSTILE, "b": "y"}], caption="x"),
        rows_table([Column("a", "a"), Column("b", "b")], [{"a": "x", "b": HOSTILE}], caption="x"),
    ],
)
def test_text_is_escaped_wherever_it_stands(made: Html) -> None:
    assert "<img" not in made and ESCAPED in made


def test_html_is_not_escaped_twice() -> None:
    assert tag("p", tag("b", "&")) == "<p><b>&amp;</b></p>"


def test_an_attribute_without_a_value_is_left_out() -> None:
    assert tag("a", "x", href=None, hidden=False, download=True) == "<a download>x</a>"


def test_a_fact_without_a_value_is_left_out() -> None:
    assert facts([("none", None), ("empty", ""), ("zero", 0)]) == (
        '<dl class="bd-facts"><div><dt>zero</dt><dd>0</dd></div></dl>'
    )


def test_long_text_is_told_apart_so_that_it_gets_room() -> None:
    assert '<td class="bd-long">' in table(["x", "y"], [["a", "b" * 33]], caption="x")
    assert '<div class="bd-long">' in facts([("x", "b" * 33)])
    assert "bd-long" not in table(["x", "y"], [["a", "b" * 32]], caption="x") + facts([("x", "b" * 32)])


def test_a_table_s_cells_name_their_row_and_column() -> None:
    made = table(["part", "maker"], [["PX-1", "Pellworm"]], caption="Parts")
    assert '<th scope="col">part</th><th scope="col">maker</th>' in made
    assert '<tr><th scope="row">PX-1</th><td>Pellworm</td></tr>' in made


def test_a_table_that_scrolls_can_be_reached_by_keyboard_and_has_a_name() -> None:
    made = table(["x", "y"], [["a", "b"]], caption="Every part")
    assert made.startswith('<div class="bd-scroll" tabindex="0" role="group" aria-label="Every part">')


def test_a_column_with_nothing_in_it_is_left_out() -> None:
    assert "empty" not in table(["x", "empty"], [["a", None], ["b", ""]], caption="x")
    columns = [Column("a", "a"), Column("b", "empty")]
    assert "empty" not in rows_table(columns, [{"a": "1", "b": ""}], caption="x")


def test_an_extrapolated_row_is_marked() -> None:
    rows = [{"a": 1, "b": 2, "extrapolated": False}, {"a": 3, "b": 4, "extrapolated": True}]
    made = rows_table([Column("a", "a"), Column("b", "b")], rows, caption="x")
    assert '<tr><th scope="row">1</th>' in made
    assert '<tr class="bd-far"><th scope="row">3</th>' in made


def test_figures_say_how_many_decimals_they_are_short_so_that_points_stand_below_each_other() -> None:
    rows = [{"t": 0, "r": "189250.0"}, {"t": 1, "r": "531.1600"}, {"t": 2, "r": "7"}]
    made = rows_table([Column("t", "°C"), Column("r", "Ω")], rows, caption="x")
    assert '<td class="bd-short-3">189250.0</td>' in made
    assert "<td>531.1600</td>" in made
    assert '<td class="bd-short-4">7</td>' in made


@pytest.mark.parametrize(
    ("text", "name"),
    [("TB3A-103F38", "tb3a-103f38"), ("A/B", "a-b"), ("50 %", "50"), ("..", "x"), ("Größe", "gr-sse"), ("", "x")],
)
def test_a_name_in_an_address_has_only_plain_characters(text: str, name: str) -> None:
    assert slug(text) == name
