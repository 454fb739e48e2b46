"""The form of the Shortlist page: a position without its parts, and what is asked of one."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any, get_args

from builder.pages.html import Html, tag
from builder.records import Catalog, Position
from builder.records.position import TableFirmware, VoltageReference
from builder.records.quantities import (
    Celsius,
    DifferenceK,
    Lsb,
    NanoAmpere,
    Ohm,
    Percent,
    PpmPerK,
    Second,
    Volt,
    WireOhm,
    Within,
)

# Finer tables cost the browser seconds and change nothing that a reading shows.
_FINEST_STEP_K = 0.1
_SIDES = (("low side", "low side: to ground"), ("high side", "high side: to the supply"))
_REFERENCES = (("ratiometric", "the supply (ratiometric)"), ("own", "its own"))
_METHODS = (("table", "a table, straight lines between rows"), ("curve", "the inverse of the curve"))
_STANDINGS = (("", "any not withdrawn"), ("approved", "approved or restricted"))
_LIFECYCLES = (("", "any not obsolete"), ("active", "active"))
_Options = Iterable[tuple[str, str]]


def form(catalog: Catalog) -> Html:
    """The form; what it holds at first is a plain circuit that every source of error is stated for."""
    names = [place.position.position for place in catalog.positions]
    parts = [record.part for record in catalog.parts]
    sizes = sorted({part.body.size_code for part in parts if part.body.size_code})
    forms = sorted({part.body.form for part in parts})
    qualifications = sorted({text for part in parts for text in part.qualification})
    groups = [
        _group("Start from", _choice("start", "a position of the catalog", _any("none: as filled in", names))),
        _group(
            "Range and limit",
            _entry("range_from_c", "from, °C", Celsius, "-20"),
            _entry("range_to_c", "to, °C", Celsius, "70"),
            _entry("limit_k", "limit, ± K", DifferenceK, "1"),
            _entry("ambient_from_c", "electronics from, °C", Celsius, hint="the range"),
            _entry("ambient_to_c", "to, °C", Celsius, hint="the range"),
        ),
        _group(
            "Divider",
            _choice("thermistor", "thermistor", _SIDES),
            _entry("supply_v", "supply, V", Volt, "3.3"),
            _entry("supply_tolerance_pct", "its tolerance, ± %", Percent, "2", hint="not stated"),
            _choice("series", "fixed resistor from", (("E96", "E96"), ("E24", "E24"))),
            _entry("fixed_tolerance_pct", "its tolerance, ± %", Percent, "0.1", hint="not stated"),
            _entry("fixed_tempco_ppm_per_k", "its tempco, ± ppm/K", PpmPerK, "25", hint="not stated"),
            _entry("parallel_ohm", "across the thermistor, Ω", Ohm, hint="nothing"),
            _entry("parallel_tolerance_pct", "its tolerance, ± %", Percent, hint="not stated"),
            _entry("wire_ohm", "wire, Ω", WireOhm, hint="0"),
        ),
        _group(
            "Converter",
            _entry("bits", "bits", None, "12", low=4, high=32),
            _choice(
                "full_scale", "the reference stands for", (("", "2^bits counts"), ("less one", "2^bits − 1 counts"))
            ),
            _choice("reference", "reference", _REFERENCES),
            _entry("reference_v", "its voltage, V", Volt, "2.5"),
            _entry("reference_tolerance_pct", "its tolerance, ± %", Percent, "0.5", hint="not stated"),
            _entry("offset_lsb", "offset, ± LSB", Lsb, "2", hint="not stated"),
            _entry("gain_pct", "gain, ± %", Percent, "0.1", hint="not stated"),
            _entry("nonlinearity_lsb", "non-linearity, ± LSB", Lsb, "1.5", hint="not stated"),
            _entry("leakage_na", "leakage, ± nA", NanoAmpere, "50", hint="not stated"),
        ),
        _group(
            "Firmware",
            _choice("method", "codes become degrees by", _METHODS),
            _entry("step_k", "rows of the table every, K", DifferenceK, "5", low=_FINEST_STEP_K),
            tag(
                "p",
                "Firmware with one B-value or Steinhart–Hart coefficients is ranked by ",
                tag("code", "beadroll shortlist"),
                ".",
            ),
        ),
        _group(
            "Requirements",
            _choice("size_code", "size code", _any("any", sizes)),
            _choice("form", "body", _any("any", forms)),
            _entry("time_constant_max_s", "slowest time constant, s", Second, hint="any"),
            _choice("standing", "standing", _STANDINGS),
            _choice("lifecycle", "lifecycle", _LIFECYCLES),
            *(_tick("qualification", text) for text in qualifications),
        ),
        _group(
            "Record",
            _text("position", "position", "new-board/RT1"),
            _text("board", "board", "New board"),
            _text("purpose", "purpose", "to be said"),
        ),
    ]
    return tag("form", *groups, autocomplete="off", aria_label="Position")


def start_values(position: Position) -> dict[str, Any]:
    """A position as the form holds it: text by field, a list for ticks; empty where the record states nothing."""
    circuit, adc, firmware, requires = position.circuit, position.adc, position.firmware, position.requires
    own = position.reference if isinstance(position.reference, VoltageReference) else None
    is_table = isinstance(firmware, TableFirmware)
    ambient_c = position.ambient_c or (None, None)
    parallel = circuit.parallel
    shown: dict[str, str | float | None] = {
        "position": position.position,
        "board": position.board,
        "purpose": position.purpose,
        "range_from_c": position.range_c[0],
        "range_to_c": position.range_c[1],
        "limit_k": position.limit_k,
        "ambient_from_c": ambient_c[0],
        "ambient_to_c": ambient_c[1],
        "thermistor": circuit.thermistor,
        "supply_v": circuit.supply_v,
        "supply_tolerance_pct": circuit.supply_tolerance_pct,
        "fixed_tolerance_pct": circuit.fixed.tolerance_pct,
        "fixed_tempco_ppm_per_k": circuit.fixed.tempco_ppm_per_k,
        "parallel_ohm": parallel.resistance_ohm if parallel else None,
        "parallel_tolerance_pct": parallel.tolerance_pct if parallel else None,
        "wire_ohm": circuit.wire_ohm,
        "bits": adc.bits,
        "full_scale": "less one" if adc.full_scale == 2**adc.bits - 1 else "",
        "reference": "own" if own else "ratiometric",
        "reference_v": own.volts if own else None,
        "reference_tolerance_pct": own.tolerance_pct if own else None,
        "offset_lsb": adc.offset_lsb,
        "gain_pct": adc.gain_pct,
        "nonlinearity_lsb": adc.nonlinearity_lsb,
        "leakage_na": adc.leakage_na,
        "method": "table" if is_table else "curve",
        "step_k": firmware.step_k if isinstance(firmware, TableFirmware) else None,
        "size_code": requires.size_code,
        "time_constant_max_s": requires.time_constant_max_s,
    }
    return {
        **{name: _shown(value) for name, value in shown.items()},
        "qualification": list(requires.qualification),
        "other_method": firmware.method if firmware.method in ("b-value", "steinhart-hart") else "",
    }


def _shown(value: str | float | None) -> str:
    return "" if value is None else value if isinstance(value, str) else f"{value:.10g}"


def _any(text: str, values: Iterable[str]) -> _Options:
    return [("", text), *((value, value) for value in values)]


def _group(legend: str, *content: Html) -> Html:
    return tag("fieldset", tag("legend", legend), *content)


def _entry(name: str, label: str, kind: Any, value: str = "", *, hint: str = "", low: float | None = None, high: float | None = None) -> Html:  # fmt: skip
    """A field for a number, with the bounds of a record; one without a hint must be filled in."""
    bounds = next((at for at in get_args(kind) if isinstance(at, Within)), None)
    field = tag(
        "input",
        name=name,
        value=value,
        size=7,
        inputmode="text",
        spellcheck="false",
        placeholder=hint or None,
        data_low=f"{bounds.low if low is None and bounds else low:.10g}",
        data_high=f"{bounds.high if high is None and bounds else high:.10g}",
        data_needed=not hint,
    )
    return tag("label", tag("span", label), Html(field.removesuffix("</input>")))


def _text(name: str, label: str, value: str) -> Html:
    field = tag("input", name=name, value=value, size=18, data_text=True, data_needed=True)
    return tag("label", tag("span", label), Html(field.removesuffix("</input>")))


def _choice(name: str, label: str, options: _Options) -> Html:
    chosen = [tag("option", text, value=value) for value, text in options]
    return tag("label", tag("span", label), tag("select", *chosen, name=name))


def _tick(name: str, value: str) -> Html:
    box = tag("input", type="checkbox", name=name, value=value)
    return tag("label", Html(box.removesuffix("</input>")), tag("span", value), class_="bd-short-tick")
