"""Random tables in random dialects come back exactly or are refused; random bytes are only ever refused."""

from __future__ import annotations

import math
from decimal import Decimal
from itertools import pairwise

import pytest
import yaml
from hypothesis import assume, event, given, settings
from hypothesis import strategies as st

from builder import intake

DELIMITERS = {
    "bars": " | ",
    "tabs": "\t",
    "semicolons": ";",
    "semicolons with spaces": " ; ",
    "commas": ",",
    "commas with spaces": ", ",
    "wide spaces": "    ",
    "spaces": " ",
}
GROUPINGS = {
    "none": "",
    "comma or point": None,
    "space": " ",
    "narrow space": "\u202f",
    "fixed space": "\u00a0",
    "apostrophe": "'",
}
UNITS = {"ohm": 0, "Ω": 0, "kΩ": 3, "k ohms": 3, "kOhm": 3, "MΩ": 6}
NAMES = {
    "r_ohm": ["R", "R nom", "Resistance", "typ."],
    "r_min_ohm": ["Rmin", "R low", "Minimum"],
    "r_max_ohm": ["Rmax", "high"],
}


def grouped(digits: str, separator: str) -> str:
    """A whole number's digits in threes."""
    head = len(digits) % 3 or 3
    return separator.join([digits[:head], *(digits[i : i + 3] for i in range(head, len(digits), 3))])


def typed(value: Decimal, decimal: str, separator: str) -> str:
    """A number as the dialect prints it."""
    whole, _, places = f"{abs(value):f}".partition(".")
    text = grouped(whole, separator) if separator else whole
    return ("-" if value < 0 else "") + text + (decimal + places if places else "")


@st.composite
def tables(draw: st.DrawFn) -> tuple[list[str], list[list[Decimal]]]:
    """Columns and rows as Beadroll has them, in °C and Ω: curves of real thermistors, rounded as tables are."""
    start, step = draw(st.integers(-55, 25)), draw(st.sampled_from([1, 2, 5, 10]))
    t_c = [start + step * i for i in range(draw(st.integers(2, 20)))]
    rated_ohm = draw(st.sampled_from([100, 470, 1000, 2252, 4700, 10_000, 47_000, 100_000, 1_000_000]))
    b_k, digits = draw(st.integers(2500, 4800)), draw(st.integers(4, 7))
    nominal = [rated_ohm * math.exp(b_k * (1 / (t + 273.15) - 1 / 298.15)) for t in t_c]
    names = draw(st.sampled_from([["r_ohm"], ["r_ohm", "r_min_ohm", "r_max_ohm"]]))
    factors = {"r_ohm": 1.0, "r_min_ohm": 0.97, "r_max_ohm": 1.03}
    rows = [
        [Decimal(t), *(Decimal(f"{r * factors[name]:.{digits}g}") for name in names)]
        for t, r in zip(t_c, nominal, strict=True)
    ]
    assume(all(above[i] > below[i] for above, below in pairwise(rows) for i in range(1, len(names) + 1)))
    return names, rows


@st.composite
def printed_tables(draw: st.DrawFn) -> tuple[str, dict[str, str], list[str], list[list[Decimal]]]:
    """A table as somebody prints it, the options it is read with, and what must come back."""
    names, rows = draw(tables())
    delimiter = DELIMITERS[draw(st.sampled_from(sorted(DELIMITERS)))]
    decimal = draw(st.sampled_from([".", ","]))
    separator = GROUPINGS[draw(st.sampled_from(sorted(GROUPINGS)))]
    separator = ("," if decimal == "." else ".") if separator is None else separator
    unit = draw(st.sampled_from(sorted(UNITS)))
    order = ["t_c", *draw(st.permutations(names))]
    beside = draw(st.integers(1, 3))
    headed = draw(st.booleans()) or names != ["r_ohm"]
    options = {} if headed and draw(st.booleans()) else {"unit": {0: "ohm", 3: "kohm", 6: "Mohm"}[UNITS[unit]]}
    falling = draw(st.booleans())
    columns = dict(zip(["t_c", *names], zip(*rows, strict=True), strict=True))
    places = [draw(st.integers(0, 1)), draw(st.integers(0, 4))]
    cells = []
    for i in range(len(rows)):
        values = [columns[name][i] for name in order]
        texts = [
            typed(
                value.quantize(Decimal(1).scaleb(-places[0])) if name == "t_c" else value.scaleb(-UNITS[unit]),
                decimal,
                separator,
            )
            for name, value in zip(order, values, strict=True)
        ]
        cells.append(texts)
    if falling:
        cells.reverse()
    height = -(-len(cells) // beside)
    lines = [
        [cell for j in range(beside) for cell in (cells[i + j * height] if i + j * height < len(cells) else ())]
        for i in range(height)
    ]
    quoted = delimiter.strip() == "," and draw(st.booleans())
    body = [delimiter.join(f'"{cell}"' if quoted else cell for cell in line) for line in lines]
    if headed:
        stated = f" ({unit})" if not options else ""
        heads = ["T (°C)" if name == "t_c" else draw(st.sampled_from(NAMES[name])) + stated for name in order]
        body.insert(0, delimiter.join(heads * beside))
    if draw(st.booleans()):
        body = ["Resistance of a thermistor, for information.", "", *body, "", "Values at zero power.", "Page 3 of 7"]
    return "\n".join(body) + "\n", options, names, rows


@settings(max_examples=300, deadline=None)
@given(printed_tables())
def test_a_table_in_any_dialect_comes_back_exactly_or_is_refused(
    printed: tuple[str, dict[str, str], list[str], list[list[Decimal]]],
) -> None:
    text, options, names, rows = printed
    try:
        record = intake.record_text(text.encode(), name="table.txt", **options)
    except intake.Unreadable as refusal:
        event("refused: " + "".join(c for c in refusal.message if not c.isdigit())[-60:])
        return
    event("read")
    table = yaml.load(record, yaml.BaseLoader)["r_t_table"]
    assert table["columns"] == ["t_c", *names]
    assert [[Decimal(cell) for cell in row] for row in table["rows"]] == rows


@settings(max_examples=300, deadline=None)
@given(st.binary(max_size=200), st.sampled_from([b"", b"\xff\xfe", b"\xef\xbb\xbf", b"T;R\n1;2\n"]))
def test_random_bytes_are_read_or_refused_and_never_crash(data: bytes, start: bytes) -> None:
    try:
        yaml.safe_load(intake.record_text(start + data, name="noise"))
    except intake.Unreadable as refusal:
        assert refusal.message


@settings(max_examples=300, deadline=None)
@given(
    st.text(alphabet="0123456789.,;|\t '\"-+±°CFKkMΩR%/()\n\f\u202fTeEΩ²٣", max_size=120),
    st.sampled_from(
        [
            "",
            "T (°C);R (kΩ)\n0;30\n25;10\n",
            "T R\n0 30\n25 10\n",
            "0,30\n25,10\n",
            "| T | R |\n| 0 | 30k |\n| 25 | 10k |\n",
        ]
    ),
    st.sampled_from([None, "ohm", "kohm"]),
    st.sampled_from([None, "1", "2", "R", ""]),
)
def test_scrambled_tables_are_read_or_refused_and_never_crash(
    noise: str, start: str, unit: str | None, column: str | None
) -> None:
    try:
        record = intake.record_text(
            (start + noise).encode(), name=noise, unit=unit, column=column, part=noise, maker=noise
        )
    except intake.Unreadable as refusal:
        assert refusal.message
    else:
        loaded = yaml.safe_load(record)
        assert loaded["part"] == loaded["maker"] == noise


@pytest.mark.parametrize("noise", ["\x00", "\ud7ff\U0001f600", "a: b # c", 'say "no"\\', "\x85\u2028", "#"])
def test_a_part_number_comes_back_whatever_it_holds(noise: str) -> None:
    record = intake.record_text("T (°C);R (Ω)\n0;30\n25;10\n".encode(), name=noise, part=noise, maker=noise)
    assert yaml.safe_load(record)["part"] == noise
