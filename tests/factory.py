"""One valid record of each kind as text, and a way to break one thing in it."""

PART = """\
part: TB3A-103F38
maker: Tarnbrook Ceramics
body: {form: chip, size_code: "0603"}
rated: {resistance_ohm: 10k, at_c: 25, tolerance_pct: 1}
b_values:
  - {between_c: [25, 85], b_k: 3435, tolerance_pct: 1}
limits: {operating_c: [-40, 125]}
qualification: [AEC-Q200 grade 1]
documents:
  - {title: data sheet, revision: C, dated: 2025-03-11, link: "https://example.com/tb3a.pdf"}
standing:
  - {state: proposed, on: 2026-01-12, by: sensors, because: first samples}
"""

POSITION = """\
position: coolbox-main/RT1
board: Coolbox logger
purpose: air temperature
range_c: [-30, 60]
limit_k: 1.0
circuit:
  thermistor: low side
  fixed: {resistance_ohm: 10k, tolerance_pct: 0.1}
  supply_v: 3.3
reference: ratiometric
adc: {bits: 12, full_scale: 4096}
firmware: {method: table, step_k: 5}
fitted: TB3A-103F38
alternates:
  - {part: TB3A-103F38, standing: []}
"""

CSV = "t_c,r_ohm\n0,32000\n25,10000\n50,4000\n"
WITH_CSV = PART + "r_t_table: {file: table.csv}\n"


def changed(text: str, old: str, new: str) -> str:
    """The text with one place in it changed; a place that is not there would test nothing."""
    assert old in text, f"{old!r} is not in the text"
    return text.replace(old, new, 1)


def part(old: str = "", new: str = "") -> str:
    """The valid part record, with one place changed."""
    return changed(PART, old, new) if old else PART


def position(old: str = "", new: str = "") -> str:
    """The valid position record, with one place changed."""
    return changed(POSITION, old, new) if old else POSITION


def inline_table(*rows: str, columns: str = "[t_c, r_ohm]") -> str:
    """A part record with a table of these rows; the first row stands on line 16."""
    listed = "".join(f"    - {row}\n" for row in rows)
    return f"{PART}r_t_table:\n  columns: {columns}\n  rows:\n{listed}"
