"""The sentence about a swap, whole."""

import pytest
from drawn_parts import ceramic_ohm, coefficients, plain, tabled

from builder.comparisons import compared, sentence

A, B = "Tarnbrook Ceramics TB3A-103F38", "Nordvell NV10-3435"
SWAP = f"{B} in place of {A}"
ENDS = coefficients(a=1.0e-3, b=2.6e-4, c=-1e-8, span_c=(0, 80))
ROWS_C = [0, 20, 40, 60]
TABLE = tabled(ROWS_C, ceramic_ohm(ROWS_C, 10e3, 3435, 0), operating_c=(-40, 125), tolerance_pct=1)


# The figures: 1/T' = 1/298.15 + ln(R/10 kΩ)/3435 with R = r·exp(B·(1/T − 1/298.15)) at the ends of the tolerances.
@pytest.mark.parametrize(
    ("reference", "other", "t_c", "expected"),
    [
        (
            plain(),
            plain(b_k=3380),
            None,
            f"{SWAP} reads at most 2.13 K low (at 125 °C) from −40 to 125 °C, up to 3.87 K off with its tolerance.",
        ),
        (
            plain(),
            plain(b_k=3500),
            [0, 25, 50],
            f"{SWAP} reads at most 0.51 K high (at 50 °C) from 0 to 50 °C, up to 1.10 K off with its tolerance.",
        ),
        (
            plain(),
            plain(),
            None,
            f"{SWAP} reads the same within 0.01 K from −40 to 125 °C, up to 1.81 K off with its tolerance.",
        ),
        (plain(), plain(10.2e3), [25], f"{SWAP} reads 0.51 K low at 25 °C, up to 0.77 K off with its tolerance."),
        (
            plain(),
            plain(pct=None, b_pct=None),
            None,
            f"{SWAP} reads the same within 0.01 K from −40 to 125 °C; the tolerance of {B} is not stated in full.",
        ),
        (
            TABLE,
            plain(pct=0, b_pct=0),
            [-20, 25],
            f"{SWAP} reads the same within 0.01 K from −20 to 25 °C; "
            f"readings outside 0 to 60 °C extrapolate the curve of {A}.",
        ),
        (plain(), ENDS, [-20], f"{SWAP} cannot be compared at −20 °C: a curve ends before."),
        (plain(), ENDS, [-20, 95], f"{SWAP} cannot be compared from −20 to 95 °C: a curve ends before."),
    ],
    ids=["low", "high", "same", "one temperature", "no tolerance", "extrapolated", "ends at once", "ends"],
)
def test_sentence_says_what_where_and_how_many_kelvin(reference, other, t_c, expected):
    assert sentence(A, B, compared(reference, other, t_c)) == expected


def test_other_curve_that_is_extrapolated_is_named_with_its_span():
    assert f"; the curve of {B} is extrapolated outside 0 to 60 °C" in sentence(A, B, compared(plain(), TABLE))


def test_range_of_the_sentence_ends_where_a_curve_ends():
    text = sentence(A, B, compared(plain(), ENDS, [-20, 0, 40, 80, 100]))
    assert " from 0 to 80 °C, " in text
    assert text.endswith("; a curve ends within the −20 to 100 °C asked for.")
