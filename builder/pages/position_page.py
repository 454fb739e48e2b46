"""The page of a position, with what its record says."""

from __future__ import annotations

from typing import Any

from builder.ledger import standing_of
from builder.pages.budget_section import budget_section, codes_section, position_sources, verdict_line
from builder.pages.cautions import CAUTION
from builder.pages.context import Context
from builder.pages.documents_section import rests_on
from builder.pages.doubts import problem_notice
from builder.pages.figures.schematic import schematic_figure
from builder.pages.html import Html, facts, joined, link, notice, table, tag
from builder.pages.ledger import ledger_table, standing_badge
from builder.pages.page import Heading, Page
from builder.pages.part_texts import rated_text
from builder.pages.paths import relative
from builder.pages.resistor_section import resistor_section
from builder.pages.trips_section import trips_section
from builder.pages.verdicts import verdict_badge
from builder.records import PartRecord, Position, PositionRecord
from builder.records.part import Standing
from builder.records.position import (
    Alternate,
    BValueFirmware,
    CurveFirmware,
    Firmware,
    SteinhartHartFirmware,
    TableFirmware,
    VoltageReference,
)
from builder.units import number_text, range_text, resistance_text, temperature_text

_HEADINGS = (
    ("circuit", "Circuit"),
    ("converter", "Converter and firmware"),
    ("budget", "Error budget"),
    ("trips", "Trips"),
    ("codes", "Codes and resolution"),
    ("resistor", "Best fixed resistor"),
    ("parts", "Fitted part and alternates"),
    ("requirements", "Requirements"),
)


def position_page(record: PositionRecord, context: Context) -> Page:
    """The page of one position."""
    position = record.position
    return Page(
        path=context.paths.position(record),
        title=position.position,
        description=f"{position.purpose}, {position.board}",
        body=lambda: str(_body(record, context)),
        headings=tuple(Heading(anchor, text) for anchor, text in _HEADINGS),
        search_text=f"{position.board} {position.purpose} {' '.join(position.named_parts().values())}",
        record=record.source.below,
        made_from=position_sources(record, context),
    )


def _body(record: PositionRecord, context: Context) -> Html:
    position = record.position
    bodies = (
        _circuit_section(position, context),
        joined([_converter(position), _firmware(position, record, context)]),
        budget_section(record, context),
        trips_section(context.budget(record), figures=context.figures),
        codes_section(context.budget(record)),
        resistor_section(record, context),
        _parts(record, context),
        _requirements(position),
    )
    sections = [tag("h2", text, id=anchor) + body for (anchor, text), body in zip(_HEADINGS, bodies, strict=True)]
    return joined([_head(record, context), *map(Html, sections)])


def _head(record: PositionRecord, context: Context) -> Html:
    position = record.position
    known = facts(
        [
            ("Board", position.board),
            ("Range", range_text(position.range_c)),
            ("Limit", f"±{number_text(position.limit_k)} K on the whole reading"),
            ("Electronics", range_text(position.ambient_c or position.range_c)),
            ("Fitted", _part_link(position.fitted, context.paths.position(record), context)),
        ]
    )
    doubts = [problem_notice(problem, context.paths.position(record)) for problem in context.problems(record)]
    notes = notice("note", position.notes) if position.notes else ""
    caution = notice("caution", CAUTION) if position.trips else ""
    return joined(
        [
            tag("h1", position.position),
            tag("p", position.purpose, class_="bd-lead"),
            verdict_line(context.budget(record)),
            caution,
            known,
            *doubts,
            notes,
        ]
    )


def _part_link(name: str, here: str, context: Context) -> Html:
    return link(name, relative(context.paths.part(context.catalog.part(name)), here))


def _circuit_section(position: Position, context: Context) -> Html:
    if not context.figures:
        return _circuit(position)
    drawn = Html(schematic_figure(position, context.catalog.part(position.fitted).part))
    return tag("div", drawn, _circuit(position), class_="bd-beside")


def _circuit(position: Position) -> Html:
    circuit = position.circuit
    fixed, parallel = circuit.fixed, circuit.parallel
    return facts(
        [
            ("Thermistor", circuit.thermistor),
            ("Fixed resistor", _resistor(fixed.resistance_ohm, fixed.tolerance_pct, fixed.tempco_ppm_per_k)),
            (
                "Across the thermistor",
                _resistor(parallel.resistance_ohm, parallel.tolerance_pct) if parallel else "nothing",
            ),
            ("Wire", f"{number_text(circuit.wire_ohm)} Ω" if circuit.wire_ohm else "nothing"),
            ("Supply", f"{number_text(circuit.supply_v)} V, {_plus_minus(circuit.supply_tolerance_pct, '%')}"),
            ("Reference", _reference(position)),
        ]
    )


def _resistor(resistance_ohm: float, tolerance_pct: float | None, tempco_ppm_per_k: float | None = None) -> str:
    tempco = "" if tempco_ppm_per_k is None else f", {_plus_minus(tempco_ppm_per_k, 'ppm/K')}"
    return f"{resistance_text(resistance_ohm)}, {_plus_minus(tolerance_pct, '%')}{tempco}"


def _plus_minus(value: float | None, unit: str) -> str:
    return "tolerance not stated" if value is None else f"±{number_text(value)} {unit}"


def _stated(value: float | None, unit: str, sign: str = "") -> str:
    return "not stated" if value is None else f"{sign}{number_text(value)} {unit}"


def _reference(position: Position) -> str:
    if isinstance(position.reference, VoltageReference):
        return f"{number_text(position.reference.volts)} V, {_plus_minus(position.reference.tolerance_pct, '%')}"
    return "ratiometric: the divider's supply"


def _converter(position: Position) -> Html:
    adc = position.adc
    return facts(
        [
            ("Resolution", f"{adc.bits} bits"),
            ("Full scale", f"{adc.full_scale or 2**adc.bits} counts"),
            ("Offset", _stated(adc.offset_lsb, "LSB", "±")),
            ("Gain", _stated(adc.gain_pct, "%", "±")),
            ("Non-linearity", _stated(adc.nonlinearity_lsb, "LSB", "±")),
            ("Leakage", _stated(adc.leakage_na, "nA", "±")),
        ]
    )


def _firmware(position: Position, record: PositionRecord, context: Context) -> Html:
    return facts([("Codes become degrees by", joined(_method(position.firmware, position, record, context)))])


def _method(firmware: Firmware, position: Position, record: PositionRecord, context: Context) -> list[Any]:
    if isinstance(firmware, BValueFirmware):
        rated = f"{resistance_text(firmware.resistance_ohm)} at {temperature_text(firmware.at_c)}"
        return [f"one B-value: {rated}, B = {number_text(firmware.b_k)} K"]
    if isinstance(firmware, SteinhartHartFirmware):
        return [f"Steinhart–Hart: a = {firmware.a}, b = {firmware.b}, c = {firmware.c}"]
    assert isinstance(firmware, TableFirmware | CurveFirmware)
    part = _part_link(firmware.part or position.fitted, context.paths.position(record), context)
    if isinstance(firmware, TableFirmware):
        return [f"a table every {number_text(firmware.step_k)} K made from ", part, ", straight lines between its rows"]
    return ["the inverse of the curve of ", part]


def _parts(record: PositionRecord, context: Context) -> Html:
    fitted = context.catalog.part(record.position.fitted)
    rows = [
        _part_row(fitted, "fitted", standing_of(fitted), None, record, context),
        *(_alternate_row(alternate, record, context) for alternate in record.position.alternates),
    ]
    headings = ("part", "maker", "rated", "as", "standing here", "in its place", "rests on")
    ledgers = [
        ledger_table(alternate.standing, f"Standings of {alternate.part} at this position, the newest first")
        for alternate in record.position.alternates
        if alternate.standing
    ]
    return joined([table(headings, rows, caption="Parts of this position"), *ledgers])


def _alternate_row(alternate: Alternate, record: PositionRecord, context: Context) -> tuple[Any, ...]:
    part = context.catalog.part(alternate.part)
    review = relative(context.paths.swap(record, part), context.paths.position(record))
    verdict = link(verdict_badge(context.swap(record, part).verdict), review)
    standing = alternate.standing[-1] if alternate.standing else None
    return _part_row(part, "alternate", standing, verdict, record, context)


def _part_row(
    part: PartRecord,
    role: str,
    standing: Standing | None,
    verdict: Html | None,
    record: PositionRecord,
    context: Context,
) -> tuple[Any, ...]:
    name = link(part.part.part, relative(context.paths.part(part), context.paths.position(record)))
    state = standing_badge(standing.state if standing else None)
    return name, part.part.maker, rated_text(part.part), role, state, verdict, rests_on(part.part, standing)


def _requirements(position: Position) -> Html:
    requires = position.requires
    pairs = [
        ("Qualification", ", ".join(requires.qualification)),
        ("Size code", requires.size_code),
        (
            "Time constant at most",
            None if requires.time_constant_max_s is None else f"{number_text(requires.time_constant_max_s)} s",
        ),
    ]
    return facts(pairs) if any(value for _, value in pairs) else tag("p", "None beyond range and limit.")
