"""A fitted equation as text, rows and JSON."""

from __future__ import annotations

from typing import Any

from builder.exports.rows import Column, Row, table_text
from builder.fits import EQUATIONS, Fit, printed_coefficients
from builder.units import number_text, range_text, temperature_text

NAMES = ("equation", "coefficient", "value", "printed", "worst_k", "at_c", "from_c", "to_c")


def fit_json(fit: Fit) -> dict[str, Any]:
    """A fit as JSON answers it: coefficients with all their digits."""
    return {
        "equation": fit.equation,
        "coefficients": fit.coefficients,
        "worst_k": fit.worst_k,
        "at_c": fit.at_c,
        "span_c": list(fit.span_c),
    }


def fit_rows(fit: Fit) -> list[Row]:
    """One row for each coefficient."""
    printed = printed_coefficients(fit).texts
    low_c, high_c = fit.span_c
    common = {"equation": fit.equation, "worst_k": fit.worst_k, "at_c": fit.at_c, "from_c": low_c, "to_c": high_c}
    return [
        common | {"coefficient": name, "value": repr(value), "printed": printed[name]}
        for name, value in fit.coefficients.items()
    ]


def fit_text(fit: Fit, part_name: str) -> str:
    """What the command says: the equation, its error, and coefficients with no more digits than they need."""
    printed = printed_coefficients(fit)
    columns = Column("name", "", left=True), Column("text", "", left=True)
    rows = [{"name": name, "text": text} for name, text in printed.texts.items()]
    return "\n".join(
        [
            f"{part_name}: {EQUATIONS[fit.equation].formula}",
            f"fitted from {range_text(fit.span_c)}; largest error {number_text(fit.worst_k, 3)} K at {temperature_text(fit.at_c)}",
            f"as rounded here, the coefficients cost {number_text(printed.cost_mk, 2)} mK more at most",
            *table_text(columns, rows).splitlines()[1:],
        ]
    )
