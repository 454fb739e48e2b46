"""Equations fitted to a part, over its operating range and over the ranges of its positions."""

from __future__ import annotations

from collections.abc import Iterator

from builder.fits import EQUATIONS, Fit
from builder.pages.context import Context
from builder.pages.figures import residual_figure
from builder.pages.html import Html, joined, table, tag
from builder.part_fit import fit_points, fitted
from builder.records import PartRecord
from builder.units import range_text, temperature_text

# Rounding to so many digits costs under 1 mK for any equation here; the fit command looks for the fewest, at a price.
_DIGITS = 8
_LEAD = (
    "Least squares in kelvin, for firmware and for this page. R in Ω, T in K, t in °C. Rounded as they are, the coefficients "
    "cost less than 1 mK. The figure leaves the B-value out: its error would flatten the others."
)


def fits_section(record: PartRecord, context: Context) -> Html:
    """A table of fits and, for the operating range, what each equation leaves."""
    fits = [(span_c, list(_fits(record, context, span_c))) for span_c in _ranges_c(record, context)]
    rows = [_row(made) for _, over_range in fits for made in over_range]
    if not rows:
        return tag("p", "No equation fits: the curve is known over too short a range.")
    return joined([tag("p", _LEAD), _figure(record, context, fits[0][1]) if context.figures else "", _table(rows)])


def _ranges_c(record: PartRecord, context: Context) -> list[tuple[float, float]]:
    """The operating range and, each once, the ranges of the positions that name the part."""
    at_positions = [place.position.range_c for place, _ in context.positions_of(record)]
    return list(dict.fromkeys([context.curve(record).operating_c, *at_positions]))


def _fits(record: PartRecord, context: Context, span_c: tuple[float, float]) -> Iterator[Fit]:
    for equation in EQUATIONS:
        try:
            yield fitted(record, context.curve(record), equation, span_c)
        except ValueError:  # a curve known at too few degrees of the range: the table says which fits there are
            continue


def _row(made: Fit) -> tuple[str, ...]:
    # No-break spaces, so that a name stays beside its value.
    coefficients = ", ".join(f"{name}\u00a0=\u00a0{value:.{_DIGITS}g}" for name, value in made.coefficients.items())
    worst = f"{made.worst_k:.3f} K at {temperature_text(made.at_c)}"
    return range_text(made.span_c), _whole(made.equation), _whole(worst), coefficients


def _whole(text: str) -> Html:
    """Text that is not to be broken over lines."""
    return tag("span", text, class_="bd-whole")


def _table(rows: list[tuple[str, ...]]) -> Html:
    return table(("range", "equation", "largest error", "coefficients"), rows, caption="Fitted equations")


def _figure(record: PartRecord, context: Context, fits: list[Fit]) -> Html:
    """Residuals over the operating range; a single B-value is off by so much more that it would flatten the others."""
    finer = [made for made in fits if made.equation != "b-value"]
    if not finer:
        return Html()
    curve = context.curve(record)
    t_c, _ = fit_points(record, curve, curve.operating_c)
    described = ", ".join(f"{made.equation} {made.worst_k:.3f} K" for made in finer)
    drawn = residual_figure(
        f"What equations fitted to {record.part.part} leave over {range_text(finer[0].span_c)}",
        f"Largest errors: {described}.",
        t_c,
        {made.equation: made.residuals_k for made in finer},
    )
    return tag("div", Html(drawn), class_="bd-figures-row")
