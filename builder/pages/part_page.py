"""A part's page: who it is and whether it may be used, its curve, what was stated beside what the curve gives."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any

import numpy as np

from builder.curves.curve import Mask
from builder.exports.curve_rows import COLUMNS, curve_csv, curve_rows
from builder.pages.context import SAMPLE_STEP_K, Context
from builder.pages.documents_section import documents_section, outdated_sources
from builder.pages.doubts import problem_notice
from builder.pages.figures import Dots, resistance_figure, tolerance_figure
from builder.pages.fits_section import fits_section
from builder.pages.html import Html, facts, joined, link, notice, rows_table, table, tag
from builder.pages.ledger import ledger_table, standing_line
from builder.pages.nearest_section import nearest_section, shown_neighbours
from builder.pages.page import DataFile, Heading, Page
from builder.pages.part_texts import body_text, rated_text, summary
from builder.pages.paths import relative
from builder.part_curve import PartCurve, Sample, fixed_points, whole_steps_c
from builder.records import Part, PartRecord
from builder.units import Array, number_text, range_text, resistance_text, signed_text, temperature_text

TABLE_STEP_K = 5.0
_BASIS = {
    "table": "the maker's R–T table",
    "steinhart-hart": "the maker's Steinhart–Hart coefficients",
    "b-values": "the stated B-values",
    "b-value": "a single B-value",
}
_HEADINGS = (
    ("curve", "Curve"),
    ("stated", "Stated beside computed"),
    ("r-t-table", "R–T table"),
    ("fits", "Fitted equations"),
    ("nearest", "Nearest parts"),
    ("limits", "Limits"),
    ("use", "Where it is used"),
    ("documents", "Documents"),
    ("ledger", "Ledger"),
)


def part_page(record: PartRecord, context: Context) -> Page:
    """The page of one part."""
    description, search_text = context.of_record(
        "part-texts", record, lambda: [summary(record.part), _search_text(record.part)]
    )
    return Page(
        path=context.paths.part(record),
        title=f"{record.number} · {record.maker}",
        description=description,
        body=lambda: str(_body(record, context)),
        headings=tuple(Heading(anchor, text) for anchor, text in _HEADINGS),
        search_text=search_text,
        record=record.source.below,
        made_from=(
            context.digest(record),
            context.paths.maker(record.maker),
            repr(shown_neighbours(record, context)),
            repr(_uses(record, context)),
            outdated_sources(record, context),
        ),
    )


def part_csv(record: PartRecord, context: Context) -> DataFile:
    """The part's curve in steps of 1 K."""
    return DataFile(context.paths.part_csv(record), lambda: curve_csv(context.sample(record)), (record.digest,))


def _search_text(part: Part) -> str:
    rated = _resistance_words(part.rated.resistance_ohm)
    words = [part.maker, part.own_number, *rated, body_text(part), part.description]
    return " ".join(word for word in words if word)


def _resistance_words(r_ohm: float) -> Iterable[str]:
    """A resistance in every way that people type it: 2.2 kΩ, 2.2kΩ, 2.2k, 2k2 and 2200."""
    text = resistance_text(r_ohm)
    number, unit = text.split()
    prefix = unit.removesuffix("Ω")
    letter = prefix or "R"
    code = number.replace(".", letter) if "." in number else number + letter
    return dict.fromkeys((text, number + unit, number + prefix, code, number_text(r_ohm, 9)))


def _body(record: PartRecord, context: Context) -> Html:
    part, curve = record.part, context.curve(record)
    sections = zip(
        _HEADINGS,
        (
            _curve_section(record, context),
            _stated_section(part, curve),
            _table_section(record, context),
            fits_section(record, context),
            nearest_section(record, context),
            _limits_section(part),
            _use_section(record, context),
            joined([documents_section(record, context), _accepted_table(part)]),
            ledger_table(part.standing, "Standings of this part, the newest first")
            if part.standing
            else tag("p", "No entry yet."),
        ),
        strict=True,
    )
    return joined(
        [_head(record, context), *(joined([tag("h2", text, id=anchor), body]) for (anchor, text), body in sections)]
    )


def _head(record: PartRecord, context: Context) -> Html:
    part = record.part
    maker = link(part.maker, relative(context.paths.maker(part.maker), context.paths.part(record)))
    identity = facts(
        [
            ("Maker", maker),
            ("Own number", part.own_number),
            ("Rated", rated_text(part)),
            ("Body", body_text(part)),
            ("Operating", range_text(part.limits.operating_c) if part.limits.operating_c else "not stated"),
            ("Lifecycle", part.lifecycle),
            ("Qualification", ", ".join(part.qualification)),
        ]
    )
    doubts = [problem_notice(problem, context.paths.part(record)) for problem in context.problems(record)]
    return joined(
        [
            tag("h1", part.part),
            tag("p", standing_line(part.standing), class_="bd-standing-line"),
            tag("p", part.description, class_="bd-lead") if part.description else "",
            identity,
            *doubts,
            notice("note", part.notes) if part.notes else "",
        ]
    )


def _curve_section(record: PartRecord, context: Context) -> Html:
    curve = context.curve(record)
    figures = _figures(record, curve, context.sample(record)) if context.figures else ()
    drawn = tag("div", *figures, class_="bd-figures-row") if figures else ""
    return joined([tag("p", _basis_sentence(curve)), drawn])


def _figures(record: PartRecord, curve: PartCurve, sample: Sample) -> tuple[Html, Html]:
    part = record.part
    t_c = sample.t_c
    estimated = _estimated(curve, t_c) & ~sample.extrapolated
    far = estimated | sample.extrapolated
    kinds = (("estimated", estimated), ("extrapolated", sample.extrapolated))
    far_name = " or ".join(kind for kind, where in kinds if where.any())
    resistance = resistance_figure(
        f"Resistance of {part.part} over temperature",
        f"Falls from {resistance_text(float(sample.r_ohm[0]))} at {temperature_text(float(t_c[0]))} to "
        f"{resistance_text(float(sample.r_ohm[-1]))} at {temperature_text(float(t_c[-1]))}.",
        t_c,
        sample.r_ohm,
        r_min_ohm=sample.r_min_ohm,
        r_max_ohm=sample.r_max_ohm,
        dashed=far,
        dashed_name=far_name,
        data=_dots(record, curve),
        rated=(part.rated.at_c, part.rated.resistance_ohm),
    )
    tolerance = tolerance_figure(
        f"Tolerance of {part.part} in kelvin over temperature",
        f"From {signed_text(float(np.nanmin(sample.reads_min_k)))} to {signed_text(float(np.nanmax(sample.reads_max_k)))} K "
        f"between {range_text((float(t_c[0]), float(t_c[-1])))}.",
        t_c,
        sample.reads_min_k,
        sample.reads_max_k,
        dashed=far,
        dashed_name=far_name,
    )
    return Html(resistance), Html(tolerance)


def _estimated(curve: PartCurve, t_c: Array) -> Mask:
    """Where a curve from B-values is an estimate: beyond the temperatures whose resistance the record fixes."""
    fixed_c = curve.curve.fixed_c
    if not fixed_c:
        return np.zeros(t_c.shape, dtype=bool)
    beyond: Mask = (t_c < fixed_c[0]) | (t_c > fixed_c[-1])
    return beyond


def _basis_sentence(curve: PartCurve) -> str:
    made = curve.curve
    said = f"The curve is made from {_BASIS[made.basis]}"
    if made.basis in ("table", "steinhart-hart"):
        beyond = "Beyond, it is extrapolated." if made.extends else "Beyond, there is no number."
        return f"{said}, known from {range_text(made.span_c)}. {beyond}"
    fixed = ", ".join(temperature_text(t_c) for t_c in made.fixed_c)
    said = f"{said}: the record fixes the resistance at {fixed}; everywhere else it is an estimate. "
    if made.basis == "b-values":
        return said + "The band does not hold the estimate's own error, which grows with the distance."
    return said + "The band is widened by how differently real ceramics bend." if _has_allowance(curve) else said


def _has_allowance(curve: PartCurve) -> bool:
    return getattr(curve.curve.law, "bend_k2", 0.0) != 0.0


def _dots(record: PartRecord, curve: PartCurve) -> Dots | None:
    if curve.curve.basis == "table" and record.table is not None:
        return Dots("rows of the table", record.table.t_c, record.table.r_ohm)
    if curve.curve.basis == "b-values":
        return Dots("fixed by B-values", *fixed_points(record.part))
    return None


def _stated_section(part: Part, curve: PartCurve) -> Html:
    rated = part.rated
    computed_ohm = float(curve.curve.resistance_ohm(rated.at_c))
    rows = [
        (
            f"Resistance at {temperature_text(rated.at_c)}",
            resistance_text(rated.resistance_ohm),
            _tolerance(rated.tolerance_pct),
            _or_dash(resistance_text(computed_ohm, 6), computed_ohm),
            _percent(computed_ohm / rated.resistance_ohm - 1),
        )
    ]
    for stated in part.b_values:
        computed_k = curve.curve.b_value_k(*stated.between_c)
        name = f"B{number_text(stated.between_c[0])}/{number_text(stated.between_c[1])}"
        shown = _or_dash(f"{computed_k:.1f} K", computed_k)
        rows.append(
            (
                name,
                f"{number_text(stated.b_k)} K",
                _tolerance(stated.tolerance_pct),
                shown,
                _percent(computed_k / stated.b_k - 1),
            )
        )
    caption = "What the record states, and what the curve gives"
    return joined(
        [
            table(
                ("quantity", "stated", "tolerance", "the curve gives", "differs by"),
                rows,
                caption=caption,
                figures=True,
            ),
            _more_stated(part),
        ]
    )


def _accepted_table(part: Part) -> Html:
    if not part.accepted:
        return Html()
    rows = [(a.rule, "" if a.row is None else temperature_text(a.row), a.because) for a in part.accepted]
    return table(("rule", "row", "because"), rows, caption="Findings of the checks that stand as they are")


def _more_stated(part: Part) -> Html:
    pairs: list[tuple[str, str]] = []
    if part.steinhart_hart:
        sh = part.steinhart_hart
        pairs.append(("Steinhart–Hart", f"a = {sh.a}, b = {sh.b}, c = {sh.c}, {range_text(sh.span_c)}"))
    pairs += [("Accuracy", f"±{number_text(a.within_k)} K from {range_text(a.between_c)}") for a in part.accuracy]
    return facts(pairs) if pairs else Html()


def _tolerance(tolerance_pct: float | None) -> str:
    return "not stated" if tolerance_pct is None else f"±{number_text(tolerance_pct)} %"


def _percent(fraction: float) -> str:
    return "–" if np.isnan(fraction) else f"{signed_text(100 * fraction, 3)} %"


def _or_dash(text: str, value: float) -> str:
    return "–" if np.isnan(value) else text


def _table_section(record: PartRecord, context: Context) -> Html:
    t_c = whole_steps_c(context.shown_c(record), TABLE_STEP_K)
    sample = context.sample(record)
    caption = (
        f"Every {number_text(TABLE_STEP_K)} K. α is the temperature coefficient; reads low and reads high are the "
        "tolerance band in kelvin, at the maximum and the minimum resistance."
    )
    incomplete = context.curve(record).band.incomplete(t_c).any()
    address = relative(context.paths.part_csv(record), context.paths.part(record))
    file = link(f"The curve as CSV, every {number_text(SAMPLE_STEP_K)} K", address, download=True)
    return joined(
        [
            notice("warning", "The band is incomplete: a tolerance that it needs is not stated.") if incomplete else "",
            tag("p", file),
            rows_table(COLUMNS, curve_rows(sample.at(np.isin(sample.t_c, t_c))), caption=caption),
        ]
    )


def _limits_section(part: Part) -> Html:
    limits = part.limits
    pairs = [
        ("Operating range", range_text(limits.operating_c) if limits.operating_c else None),
        ("Largest power", _with_unit(limits.max_power_mw, "mW")),
        ("Dissipation factor", _with_unit(limits.dissipation_mw_per_k, "mW/K")),
        ("Time constant", _with_unit(limits.time_constant_s, "s")),
        ("Medium", limits.medium),
    ]
    return facts(pairs) if any(value for _, value in pairs) else tag("p", "The record states none.")


def _with_unit(value: float | None, unit: str) -> str | None:
    return None if value is None else f"{number_text(value)} {unit}"


def _uses(record: PartRecord, context: Context) -> list[Any]:
    """What the page takes of the positions that name the part."""
    return [
        (
            context.paths.position(place),
            place.position.position,
            place.position.board,
            place.position.purpose,
            place.position.range_c,
            role,
        )
        for place, role in context.positions_of(record)
    ]


def _use_section(record: PartRecord, context: Context) -> Html:
    here = context.paths.part(record)
    rows = [
        (link(name, relative(path, here)), board, purpose, role)
        for path, name, board, purpose, _, role in _uses(record, context)
    ]
    if not rows:
        return tag("p", "No position of the catalog names it.")
    return table(("position", "board", "purpose", "as"), rows, caption="Positions that name this part")
