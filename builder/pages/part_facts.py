"""What is set beside each other of two parts, the curve apart: one short text for each fact."""

from __future__ import annotations

from collections.abc import Callable

from builder.pages.parts_page import B_HEADING, curve_b
from builder.part_curve import PartCurve
from builder.records import Part
from builder.units import number_text, range_text, resistance_text, temperature_text

NOT_STATED = "not stated"
_SOURCES = {
    "table": "R–T table",
    "steinhart-hart": "Steinhart–Hart coefficients",
    "b-values": "B-values (estimate)",
    "b-value": "one B-value (estimate)",
}
_Fact = Callable[[Part, PartCurve], str | None]


def part_facts(part: Part, curve: PartCurve) -> list[str]:
    """The facts of one part, in the order of `FACT_NAMES`."""
    return [fact(part, curve) or NOT_STATED for _, fact in _FACTS]


def _quantity(value: float | None, unit: str, sign: str = "") -> str | None:
    return None if value is None else f"{sign}{number_text(value)} {unit}"


def _b_text(part: Part, curve: PartCurve) -> str | None:  # noqa: ARG001
    b_k, mark = curve_b(curve)
    return None if b_k is None else f"{b_k} {mark}".strip()


def _rated(part: Part, curve: PartCurve) -> str:  # noqa: ARG001
    return f"{resistance_text(part.rated.resistance_ohm)} at {temperature_text(part.rated.at_c)}"


_FACTS: tuple[tuple[str, _Fact], ...] = (
    ("Maker", lambda part, _: part.maker),
    ("Own number", lambda part, _: part.own_number),
    ("Standing", lambda part, _: part.state() or "no standing"),
    ("Lifecycle", lambda part, _: part.lifecycle),
    ("Rated resistance", _rated),
    ("Tolerance", lambda part, _: _quantity(part.rated.tolerance_pct, "%", "±")),
    (B_HEADING, _b_text),
    ("Curve made from", lambda _, curve: _SOURCES[curve.curve.basis]),
    ("Curve known", lambda _, curve: range_text(curve.curve.span_c)),
    ("Body", lambda part, _: part.body.form),
    ("Size code", lambda part, _: part.body.size_code or "none"),
    ("Operating range", lambda part, _: range_text(part.limits.operating_c) if part.limits.operating_c else None),
    ("Largest power", lambda part, _: _quantity(part.limits.max_power_mw, "mW")),
    ("Dissipation factor", lambda part, _: _quantity(part.limits.dissipation_mw_per_k, "mW/K")),
    ("Time constant", lambda part, _: _quantity(part.limits.time_constant_s, "s")),
    ("Medium of these two", lambda part, _: part.limits.medium),
    ("Qualification", lambda part, _: ", ".join(part.qualification)),
)
FACT_NAMES = tuple(name for name, _ in _FACTS)
