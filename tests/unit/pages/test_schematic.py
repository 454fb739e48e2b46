"""The circuit diagram of a position: every element with its value, joined as the record says."""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any
from xml.etree import ElementTree

import pytest
from circuit_records import position

from builder.pages.figures.schematic import WIDTH, schematic_figure
from builder.records import Part, Position

ASSETS = Path(__file__).parents[3] / "builder" / "assets"
PART = Part.model_validate(
    {
        "part": "PX-1",
        "maker": "Pellworm",
        "body": {"form": "bead"},
        "rated": {"resistance_ohm": "10k", "tolerance_pct": 1},
        "b_values": [{"between_c": [25, 85], "b_k": 3435}],
    }
)
WHOLE: dict[str, Any] = {
    "circuit": {"parallel": {"resistance_ohm": "47k", "tolerance_pct": 2}, "wire_ohm": 0.2, "supply_tolerance_pct": 5},
    "fixed": {"resistance_ohm": "4k7", "tolerance_pct": 0.5, "tempco_ppm_per_k": 25},
    "reference": {"volts": 2.5, "tolerance_pct": 0.4},
}


def circuit(side: str = "low side", whole: bool = False, **circuit: Any) -> Position:
    fields = WHOLE if whole else {}
    return position(**fields | {"circuit": fields.get("circuit", {}) | {"thermistor": side} | circuit})


def drawn(place: Position, part: Part = PART) -> ElementTree.Element:
    found = ElementTree.fromstring(schematic_figure(place, part)).find("svg")
    assert found is not None
    return found


def labels(svg: ElementTree.Element) -> list[str]:
    return [element.text or "" for element in svg.iter("text")]


def styled(svg: ElementTree.Element, style: str) -> list[ElementTree.Element]:
    return [element for element in svg.iter() if element.get("class") == style]


def lines(d: str) -> list[tuple[int, int, int, int]]:
    """Straight pieces of a path of M, H, V, h and v: an independent reading of its text."""
    found, x, y = [], 0, 0
    for command, numbers in re.findall(r"([MHVhv])([-\d ]+)", d):
        values = [int(number) for number in numbers.split()]
        if command == "M":
            x, y = values
            continue
        to_x, to_y = {"H": (values[0], y), "V": (x, values[0]), "h": (x + values[0], y), "v": (x, y + values[0])}[
            command
        ]
        found.append((x, y, to_x, to_y))
        x, y = to_x, to_y
    return found


def upright(svg: ElementTree.Element, x: int) -> list[tuple[int, int]]:
    """From where to where the column at x is drawn, wires and resistors."""
    (wires,) = styled(svg, "bds-wire")
    spans = [(min(y, end), max(y, end)) for start, y, to_x, end in lines(wires.get("d", "")) if start == to_x == x]
    for symbol in styled(svg, "bds-symbol"):
        pieces = lines(symbol.get("d", ""))
        left, right = pieces[0][0], pieces[0][2]
        if (left + right) / 2 == x:
            spans.append((pieces[1][1], pieces[1][3]))
    return sorted(spans)


@pytest.mark.parametrize("side", ["low side", "high side"])
@pytest.mark.parametrize("whole", [False, True])
def test_the_divider_runs_without_a_gap_from_the_supply_to_ground(side: str, whole: bool) -> None:
    spans = upright(drawn(circuit(side, whole)), 158)
    assert len(spans) >= 6
    reached = spans[0][0]
    for start, end in spans:
        assert start <= reached
        reached = max(reached, end)


def test_every_element_is_labelled_with_its_value_and_tolerance() -> None:
    assert sorted(labels(drawn(circuit("high side", whole=True)))) == sorted(
        [
            *(
                "supply 3.3 V ±5 %",
                "4.7 kΩ",
                "±0.5 %",
                "±25 ppm/K",
                "47 kΩ",
                "±2 %",
                "wire 0.2 Ω",
                "PX-1",
                "10 kΩ ±1 %",
            ),
            *("−θ", "ADC", "12 bits", "reference", "2.5 V ±0.4 %"),
        ]
    )


def test_what_a_circuit_does_not_have_is_not_drawn() -> None:
    assert len(styled(drawn(circuit()), "bds-symbol")) == 3
    assert len(styled(drawn(circuit(whole=True)), "bds-symbol")) == 5
    assert "ratiometric" in labels(drawn(circuit()))
    assert "ratiometric" not in labels(drawn(circuit(whole=True)))


@pytest.mark.parametrize(("side", "below"), [("low side", True), ("high side", False)])
@pytest.mark.parametrize("whole", [False, True])
def test_the_thermistor_stands_on_its_side_of_the_junction(side: str, below: bool, whole: bool) -> None:
    svg = drawn(circuit(side, whole))
    (slant,) = styled(svg, "bds-slant")
    slant_y = int(re.findall(r"\d+", slant.get("d", ""))[1])
    (adc,) = (box for box in styled(svg, "bds-symbol") if box.get("d", "").startswith("M304 "))
    junction_y = lines(adc.get("d", ""))[1][1] + 34
    assert (slant_y > junction_y) == below
    wires = lines(styled(svg, "bds-wire")[0].get("d", ""))
    assert (158, junction_y, 304, junction_y) in wires


def test_the_parallel_resistor_spans_thermistor_and_wire() -> None:
    svg = drawn(circuit("low side", whole=True))
    (wires,) = styled(svg, "bds-wire")
    ends = sorted(y for x, y, to_x, _ in lines(wires.get("d", "")) if (x, to_x) == (158, 92))
    (slant,) = styled(svg, "bds-slant")
    slant_y = int(re.findall(r"\d+", slant.get("d", ""))[1])
    wire_y = next(float(t.get("y", "")) for t in svg.iter("text") if t.text == "wire 0.2 Ω")
    assert ends[0] < wire_y < slant_y < ends[1]


def test_a_screen_reader_is_told_the_whole_circuit() -> None:
    assert drawn(circuit("high side", whole=True)).findtext("desc") == (
        "Supply 3.3 V ±5 %. Thermistor PX-1, 10 kΩ ±1 %, between the supply and the junction through a wire of 0.2 Ω, "
        "47 kΩ ±2 % across it. Fixed resistor 4.7 kΩ ±0.5 % ±25 ppm/K between ground and the junction. A converter of 12 bits "
        "reads the junction, reference 2.5 V ±0.4 %."
    )


def test_a_tolerance_that_is_not_stated_is_no_zero() -> None:
    svg = drawn(circuit(supply_tolerance_pct=None))
    assert "supply 3.3 V ± ?" in labels(svg)
    assert "Supply 3.3 V tolerance not stated." in (svg.findtext("desc") or "")


def test_texts_are_escaped_and_long_names_stay_inside_the_picture() -> None:
    name = "<b>&" + "W" * 40
    svg = drawn(circuit(), PART.model_copy(update={"part": name}))
    shown = next(label for label in labels(svg) if label.startswith("<b>&"))
    assert len(shown) == 24 and shown.endswith("…")
    assert name in (svg.findtext("desc") or "")


@pytest.mark.parametrize("side", ["low side", "high side"])
def test_the_picture_has_no_ids_and_every_class_is_in_the_style_sheet(side: str) -> None:
    figure = schematic_figure(circuit(side, whole=True), PART)
    assert not re.search(r"\bid=|style=|url\(", figure)
    css = (ASSETS / "positions.css").read_text()
    used = set(re.findall(r'class="([^"]*)"', figure)) - {"bds-wire"}
    assert [name for name in sorted(used) if f".{name}" not in css] == []
    height = float(re.findall(r'viewBox="0 0 \d+ (\d+)"', figure)[0])
    svg = drawn(circuit(side, whole=True))
    for text in svg.iter("text"):
        assert 0 <= float(text.get("x", "")) <= WIDTH and 0 <= float(text.get("y", "")) <= height
