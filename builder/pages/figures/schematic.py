"""A position's signal chain as a circuit diagram: supply, divider, junction, converter."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from html import escape

from builder.pages.part_texts import rated_text
from builder.records import Part, Position
from builder.records.position import VoltageReference
from builder.units import number_text, resistance_text

WIDTH = 400
# Three columns: the parallel resistor, the divider, the converter with its reference's pin.
_PARALLEL_X, _MAIN_X, _ADC_X, _PIN_X, _RIGHT = 92, 158, 304, 362, 392
_ADC_HALF = 34
# A resistor's symbol, and how much of a column one takes with its leads: labels clear the converter.
_HALF, _LONG = 8, 44
_SLOT, _WIRE_SLOT = 104, 76
_RAIL_Y, _GROUND = 48, 26
_LINE = 17
# As many letters as find room beside the thermistor; on the high side the reference's lead stands beside it.
_ROOM = {"low side": 24, "high side": 18}
_UNKNOWN = "± ?"


@dataclass
class _Drawing:
    """Wires, all in one path so that they join without seams, and what lies over them."""

    wires: list[str] = field(default_factory=list)
    shapes: list[str] = field(default_factory=list)

    def resistor(self, x: int, top: int, length: int) -> None:
        start = top + (length - _LONG) // 2
        self.wires.append(f"M{x} {top}V{start}M{x} {start + _LONG}V{top + length}")
        self.shapes.append(f'<path class="bds-symbol" d="M{x - _HALF} {start}h{2 * _HALF}v{_LONG}h{-2 * _HALF}z"/>')

    def dot(self, x: int, y: int) -> None:
        self.shapes.append(f'<circle class="bds-dot" cx="{x}" cy="{y}" r="3.5"/>')

    def texts(self, x: int, y: int, lines: Sequence[str], anchor: str = "start") -> None:
        """Lines of text about a height."""
        first = y - _LINE * (len(lines) - 1) / 2
        written = (
            f'<text x="{x}" y="{first + i * _LINE:g}" dy=".35em">{escape(line)}</text>' for i, line in enumerate(lines)
        )
        self.shapes.append(f'<g text-anchor="{anchor}">{"".join(written)}</g>')

    def svg(self) -> str:
        return f'<path class="bds-wire" d="{"".join(self.wires)}"/>{"".join(self.shapes)}'


def schematic_figure(position: Position, part: Part) -> str:
    """The circuit of a position with a part in it, every element with its value and tolerance.

    Symbols after IEC 60617. The thermistor stands on the side that the record says; wire and parallel resistor are
    drawn where there are any.
    """
    low_side = position.circuit.thermistor == "low side"
    branch = _SLOT + (_WIRE_SLOT if position.circuit.wire_ohm else 0)
    junction_y = _RAIL_Y + (_SLOT if low_side else branch)
    ground_y = _RAIL_Y + _SLOT + branch
    drawing = _Drawing()
    _draw_fixed(drawing, position, _RAIL_Y if low_side else junction_y)
    _draw_branch(drawing, position, part, junction_y if low_side else _RAIL_Y, branch)
    _draw_converter(drawing, position, junction_y)
    _draw_supply(drawing, position, ground_y)
    described = " ".join(_said(position, part)).replace(_UNKNOWN, "tolerance not stated")
    return (
        f'<figure class="bd-schematic"><svg viewBox="0 0 {WIDTH} {ground_y + _GROUND}" role="img">'
        f"<title>{escape(f'Circuit of {position.position}')}</title><desc>{escape(described)}</desc>"
        f"{drawing.svg()}</svg></figure>"
    )


def _draw_supply(drawing: _Drawing, position: Position, ground_y: int) -> None:
    circuit, x = position.circuit, _MAIN_X
    drawing.wires.append(f"M{x - 14} {_RAIL_Y}h28")
    text = f"supply {number_text(circuit.supply_v)} V {_tolerance(circuit.supply_tolerance_pct)}"
    drawing.texts(x, _RAIL_Y - 22, [text], "middle")
    drawing.wires.append(
        f"M{x} {ground_y}v6M{x - 14} {ground_y + 6}h28M{x - 9} {ground_y + 12}h18M{x - 4} {ground_y + 18}h8"
    )


def _draw_fixed(drawing: _Drawing, position: Position, top: int) -> None:
    drawing.resistor(_MAIN_X, top, _SLOT)
    drawing.texts(_MAIN_X + 18, top + _SLOT // 2, _fixed_texts(position))


def _draw_branch(drawing: _Drawing, position: Position, part: Part, top: int, length: int) -> None:
    """The thermistor, its wire on the side of the junction, and the parallel resistor across the two."""
    circuit = position.circuit
    low_side = circuit.thermistor == "low side"
    _draw_thermistor(drawing, part, top + length - _SLOT if low_side else top, _ROOM[circuit.thermistor])
    if circuit.wire_ohm:
        wire_y = top if low_side else top + _SLOT
        drawing.resistor(_MAIN_X, wire_y, _WIRE_SLOT)
        drawing.texts(_MAIN_X + 18, wire_y + _WIRE_SLOT // 2, [f"wire {resistance_text(circuit.wire_ohm)}"])
    if circuit.parallel:
        for y in (top, top + length):
            drawing.wires.append(f"M{_MAIN_X} {y}H{_PARALLEL_X}")
            drawing.dot(_MAIN_X, y)
        drawing.resistor(_PARALLEL_X, top, length)
        drawing.texts(_PARALLEL_X - 16, top + length // 2, _parallel_texts(position), "end")


def _draw_thermistor(drawing: _Drawing, part: Part, top: int, room: int) -> None:
    """A resistor with the slanted line of what depends on something, and −θ at its foot: it falls with temperature."""
    x, y = _MAIN_X, top + _SLOT // 2
    drawing.resistor(x, top, _SLOT)
    drawing.shapes.append(f'<path class="bds-slant" d="M{x - 28} {y + 22}h10L{x + 20} {y - 22}"/>')
    drawing.texts(x - 32, y + 20, ["−θ"], "end")
    drawing.texts(x + 32, y, [_shortened(text, room) for text in (part.part, rated_text(part))])


def _draw_converter(drawing: _Drawing, position: Position, y: int) -> None:
    top = y - _ADC_HALF
    drawing.wires.append(f"M{_MAIN_X} {y}H{_ADC_X}")
    drawing.dot(_MAIN_X, y)
    box = f"M{_ADC_X} {top}H{_RIGHT}v{2 * _ADC_HALF}H{_ADC_X}z"
    drawing.shapes.append(f'<path class="bds-symbol" d="{box}"/>')
    drawing.texts(_ADC_X + 12, y, ["ADC", f"{position.adc.bits} bits"])
    if isinstance(position.reference, VoltageReference):
        drawing.wires.append(f"M{_PIN_X} {top}v-12")
        drawing.texts(_RIGHT, top - 30, _reference_texts(position), "end")
    else:
        drawing.wires.append(f"M{_PIN_X} {top}V{_RAIL_Y}H{_MAIN_X}")
        drawing.texts(_RIGHT, _RAIL_Y - 22, _reference_texts(position), "end")


def _fixed_texts(position: Position) -> list[str]:
    fixed = position.circuit.fixed
    drift = [] if fixed.tempco_ppm_per_k is None else [f"±{number_text(fixed.tempco_ppm_per_k)} ppm/K"]
    return [resistance_text(fixed.resistance_ohm), _tolerance(fixed.tolerance_pct), *drift]


def _parallel_texts(position: Position) -> list[str]:
    parallel = position.circuit.parallel
    return [resistance_text(parallel.resistance_ohm), _tolerance(parallel.tolerance_pct)] if parallel else []


def _reference_texts(position: Position) -> list[str]:
    own = position.reference
    if isinstance(own, VoltageReference):
        return ["reference", f"{number_text(own.volts)} V {_tolerance(own.tolerance_pct)}"]
    return ["ratiometric"]


def _tolerance(tolerance_pct: float | None) -> str:
    return _UNKNOWN if tolerance_pct is None else f"±{number_text(tolerance_pct)} %"


def _shortened(text: str, room: int) -> str:
    return text if len(text) <= room else f"{text[: room - 1]}…"


def _said(position: Position, part: Part) -> Iterator[str]:
    """The diagram for those who do not see it."""
    circuit = position.circuit
    wire = f" through a wire of {resistance_text(circuit.wire_ohm)}" if circuit.wire_ohm else ""
    across = f", {' '.join(_parallel_texts(position))} across it" if circuit.parallel else ""
    near, far = ("ground", "the supply") if circuit.thermistor == "low side" else ("the supply", "ground")
    yield f"Supply {number_text(circuit.supply_v)} V {_tolerance(circuit.supply_tolerance_pct)}."
    yield f"Thermistor {part.part}, {rated_text(part)}, between {near} and the junction{wire}{across}."
    yield f"Fixed resistor {' '.join(_fixed_texts(position))} between {far} and the junction."
    yield f"A converter of {position.adc.bits} bits reads the junction, {' '.join(_reference_texts(position))}."
