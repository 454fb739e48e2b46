"""Rows of figures as table, CSV and JSON."""

import json

import numpy as np
import pytest

from builder.exports.rows import Column, csv_text, json_text, rounded, table_text

COLUMNS = (Column("t_c", "°C"), Column("r_ohm", "R in Ω"), Column("note", "note", left=True))


def test_figures_stand_with_their_points_below_each_other():
    cells = [("−40", "316760.0", "cold"), ("2.5", "12460.08", ""), ("125", "–", "hot, extrapolated")]
    rows = [dict(zip(("t_c", "r_ohm", "note"), row, strict=True)) for row in cells]
    assert table_text(COLUMNS, rows).split("\n") == [
        "   °C     R in Ω  note",
        "−40    316760.0   cold",
        "  2.5   12460.08",
        "125         –     hot, extrapolated",
    ]


def test_table_without_rows_is_its_headings():
    assert table_text(COLUMNS, []) == "°C  R in Ω  note"


def test_csv_has_an_empty_cell_where_there_is_no_number_and_no_formula():
    rows = [{"a": None, "b": float("nan"), "c": True, "d": "=1+1"}, {"a": -1.5, "b": 2.0, "c": False, "d": 'x, "y"'}]
    assert csv_text(("a", "b", "c", "d"), rows) == 'a,b,c,d\n,,yes,\'=1+1\n-1.5,2,no,"x, ""y"""\n'


def test_json_has_null_where_there_is_no_number_however_deep():
    text = json_text({"name": "10 kΩ", "rows": [{"x": float("nan")}, (float("inf"), 1.5)]})
    assert text == '{\n "name": "10 kΩ",\n "rows": [\n  {\n   "x": null\n  },\n  [\n   null,\n   1.5\n  ]\n ]\n}\n'
    assert json.loads(text)["rows"][0]["x"] is None


@pytest.mark.parametrize(
    ("value", "kept"),
    [
        (9999.986256957, 9999.986257),
        (1 / 3, 0.3333333333),
        (-0.0, 0.0),
        (1e-300, 1e-300),
        (np.inf, None),
        (np.nan, None),
    ],
)
def test_ten_digits_are_passed_on(value, kept):
    assert repr(rounded(value)) == repr(kept)
