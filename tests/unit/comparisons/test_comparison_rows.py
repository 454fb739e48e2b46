"""A comparison as rows and as the answer in JSON."""

import json

import numpy as np
from drawn_parts import coefficients, plain

from builder.comparisons import compared
from builder.exports.comparison_rows import NAMES, comparison_answer, comparison_rows, family_rows
from builder.exports.rows import json_text


def test_answer_has_the_reference_and_each_others_rows_and_summary():
    found = compared(plain(), plain(10.2e3), [0.0, 25.0])
    answer = json.loads(json_text(comparison_answer("A1", [("B1", found), ("B2", found)])))
    assert list(answer) == ["reference", "others"]
    assert answer["reference"] == "A1"
    first, second = answer["others"]
    assert (first["part"], second["part"]) == ("B1", "B2")
    summary = ["part", "rows", "worst_k", "worst_at_c", "worst_with_tolerance_k", "within_reference_band"]
    assert list(first) == summary
    names = ["t_c", "r_ref_ohm", "r_ohm", "ratio_pct", "reads_k", "reads_min_k", "reads_max_k"]
    assert [list(row) for row in first["rows"]] == [names, names]
    hot = first["rows"][1]
    assert (hot["t_c"], hot["r_ref_ohm"], hot["r_ohm"], hot["ratio_pct"]) == (25, 10e3, 10.2e3, 2)
    np.testing.assert_allclose([hot["reads_k"], first["worst_k"]], [found.reads_k[1], found.worst_k], rtol=1e-9)
    assert (first["worst_at_c"], first["within_reference_band"]) == (found.worst_at_c, False)
    assert first["worst_with_tolerance_k"] == float(f"{found.worst_with_tolerance_k:.10g}")


def test_there_is_null_where_a_curve_ends():
    ends = coefficients(a=1.0e-3, b=2.6e-4, c=-1e-8, span_c=(0, 80))
    (other,) = json.loads(json_text(comparison_answer("A1", [("B1", compared(plain(), ends, [-20.0]))])))["others"]
    assert [other["rows"][0][name] for name in ("r_ohm", "reads_k", "reads_min_k")] == [None] * 3
    assert [other[name] for name in ("worst_k", "worst_at_c", "worst_with_tolerance_k")] == [None] * 3


def test_rows_have_the_references_band_and_whose_curve_is_extrapolated():
    found = compared(coefficients(span_c=(0, 60)), plain(operating_c=(10, 85)), [-10.0, 5.0, 30.0, 80.0])
    table = comparison_rows(found)
    assert tuple(table[0]) == NAMES
    assert [row["extrapolated"] for row in table] == ["both extrapolated", "extrapolated", "", "reference extrapolated"]
    assert [row["reference_min_k"] for row in table] == [float(f"{v:.10g}") for v in found.reference_min_k]


def test_families_of_one_have_no_rows():
    rows = family_rows([("a", "b"), ("c",), ("d", "e")])
    assert [(row["family"], row["part"]) for row in rows] == [(1, "a"), (1, "b"), (2, "d"), (2, "e")]
