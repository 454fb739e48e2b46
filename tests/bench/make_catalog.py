"""A catalog of as many invented parts and positions as asked, for measuring: the same seed gives the same bytes.

Every part is drawn from the seed and its own number, so a small catalog is the beginning of a large one. Makers,
numbers and documents are invented.
"""

from __future__ import annotations

import argparse
import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from pathlib import Path
from random import Random

import numpy as np

from builder.curves import BentExponential, SteinhartHartLaw, b_value_k, through_points
from builder.curves.law import Law
from builder.units import Array, kelvin, resistance_from_code, resistance_text

CURVES = ("csv", "inline", "short", "steinhart-hart", "b-values", "b-value")
RANGE_C = (-40, 125)
RATED_C = 25.0
BOARD_POSITIONS = 5
# Never overdue: a catalog that warns from some day on would measure something else from then on.
REVIEW_DUE = "2999-12-31"

MAKERS = (
    ("Kestrow Thermal", "KSW"),
    ("Mellwick Sensing", "MLK"),
    ("Pindrake Ceramics", "PDK"),
    ("Sorrelby Elements", "SRB"),
    ("Thornavel Parts", "THV"),
    ("Uskerton Probes", "UKT"),
)
RATED_CODES = ("1k", "2k2", "4k7", "10k", "10k", "10k", "15k", "22k", "33k", "47k", "100k", "100k", "220k", "470k")
# B25/85 [K] and bend c [K²], which lie where real ceramics do: the steeper ones bend more.
MATERIALS = (
    (3250.0, -1.9e5),
    (3435.0, -1.9e5),
    (3520.0, -1.8e5),
    (3700.0, -1.6e5),
    (3975.0, -1.45e5),
    (4100.0, -1.6e5),
    (4310.0, -1.95e5),
    (4540.0, -2.3e5),
)
BODIES = (
    ('{form: chip, size_code: "0402"}', "0402 chip", 1.0, 2.0),
    ('{form: chip, size_code: "0603"}', "0603 chip", 1.6, 4.0),
    ('{form: chip, size_code: "0805"}', "0805 chip", 2.1, 6.0),
    ("{form: leaded}", "leaded bead", 2.5, 11.0),
    ("{form: probe}", "sheathed probe", 4.0, 9.0),
)
QUALIFICATIONS = ("[]", "[AEC-Q200 grade 1]", "[UL 1434]", "[AEC-Q200 grade 1, UL 1434]")
LIFECYCLES = ("active", "active", "active", "active", "not for new designs", "last time buy")
LEDGERS = (("proposed",), ("proposed", "approved"), ("proposed", "restricted"), ("proposed", "approved", "withdrawn"))
REASONS = {
    "proposed": "Second source wanted before the next board revision.",
    "approved": "Three lots measured at 0, 25 and 60 °C, all inside the table's band.",
    "restricted": "Until the lots of the second half-year are measured.",
    "withdrawn": "The maker has announced a change of the material.",
}


@dataclass(frozen=True)
class DrawnPart:
    """A part as drawn: what its record states follows from it."""

    number: str
    maker: str
    curve: str
    rated_code: str
    tolerance_pct: float
    material: int
    law: Law
    revision: str
    ledger: tuple[str, ...]
    random: Random

    @property
    def rated_ohm(self) -> float:
        return resistance_from_code(self.rated_code)


def drawn_part(seed: int, index: int, curve: str) -> DrawnPart:
    """The part of that index; two parts of one material differ as two makers' do."""
    random = Random(f"{seed}/part/{index}")
    maker, prefix = random.choice(MAKERS)
    code = random.choice(RATED_CODES)
    material = random.randrange(len(MATERIALS))
    b_k, bend_k2 = MATERIALS[material]
    b_k, bend_k2 = b_k + random.uniform(-8, 8), bend_k2 * random.uniform(0.95, 1.05)
    law: Law = BentExponential(math.log(resistance_from_code(code)), RATED_C, (RATED_C, 85.0), b_k, bend_k2)
    if curve == "steinhart-hart":
        law = steinhart_hart(law)
    number = f"{prefix}{index:05d}-{code.upper()}"
    return DrawnPart(
        number,
        maker,
        curve,
        code,
        random.choice((0.5, 1, 1, 2, 3, 5)),
        material,
        law,
        random.choice("ABCDEF"),
        random.choice(LEDGERS),
        random,
    )


def steinhart_hart(law: Law) -> SteinhartHartLaw:
    """The law through three temperatures of another, with coefficients as a data sheet prints them."""
    t_c = np.array([RANGE_C[0], RATED_C, RANGE_C[1]])
    exact = through_points(t_c, resistance_ohm(law, t_c))
    return SteinhartHartLaw(*(float(f"{value:.8e}") for value in (exact.a, exact.b, exact.c)))


def resistance_ohm(law: Law, t_c: Array) -> Array:
    """Zero-power resistance [Ω] at temperatures [°C]."""
    r_ohm: Array = np.exp(law.ln_resistance(1 / kelvin(t_c)))
    return r_ohm


def printed(value: float) -> str:
    """Five significant digits, plain."""
    decimals = 4 - math.floor(math.log10(value))
    return f"{round(value, decimals):.{max(decimals, 0)}f}"


def table_rows(part: DrawnPart, step_k: int) -> list[list[str]]:
    """Rows of t_c, r_ohm, r_min_ohm, r_max_ohm over the operating range; B is known to ±1 %."""
    t_c = np.arange(RANGE_C[0], RANGE_C[1] + 1, step_k, dtype=float)
    r_ohm = resistance_ohm(part.law, t_c)
    from_rated = np.abs(np.log(r_ohm / part.rated_ohm))
    widened = (1 + part.tolerance_pct / 100) * np.exp(0.01 * from_rated)
    columns = np.stack([r_ohm, r_ohm / widened, r_ohm * widened], axis=1).tolist()
    return [[f"{t:.0f}", *map(printed, row)] for t, row in zip(t_c, columns, strict=True)]


def b_value_lines(part: DrawnPart) -> list[str]:
    """The B-values that the record states, rounded as data sheets round them."""
    others_c = {"b-value": (85.0,), "b-values": (50.0, 85.0, 100.0)}.get(part.curve, (50.0, 85.0))
    lines = ["b_values:"]
    for other_c in others_c:
        ends_c = np.array([RATED_C, other_c])
        rated_ohm, other_ohm = resistance_ohm(part.law, ends_c)
        b_k = b_value_k(rated_ohm, ends_c[0], other_ohm, ends_c[1])
        lines.append(f"  - {{between_c: [25, {other_c:.0f}], b_k: {b_k:.0f}, tolerance_pct: 1}}")
    return lines


def curve_lines(part: DrawnPart) -> list[str]:
    """The record's lines about what its curve is made from, beside B-values."""
    law = part.law
    if isinstance(law, SteinhartHartLaw):
        span = f"[{RANGE_C[0]}, {RANGE_C[1]}]"
        return [f"steinhart_hart: {{a: {law.a:.8e}, b: {law.b:.8e}, c: {law.c:.8e}, span_c: {span}}}"]
    if part.curve == "csv":
        return ["r_t_table:", f"  file: {part.number}.csv", "  columns: [t_c, r_ohm, r_min_ohm, r_max_ohm]"]
    if part.curve == "inline":
        return inline_table("[t_c, r_ohm, r_min_ohm, r_max_ohm]", table_rows(part, 1))
    if part.curve == "short":
        return inline_table("[t_c, r_ohm]", [row[:2] for row in table_rows(part, 5)])
    return []


def inline_table(columns: str, rows: Iterable[Sequence[str]]) -> list[str]:
    """A table that stands in the record."""
    return ["r_t_table:", f"  columns: {columns}", "  rows:", *(f"    - [{', '.join(row)}]" for row in rows)]


def standing_lines(part: DrawnPart, ledger: Sequence[str], random: Random, indent: str) -> list[str]:
    """A ledger of one to three entries about a part, on days that rise."""
    lines = [f"{indent}standing:"]
    for year, state in enumerate(ledger, start=2023):
        on = f"{year}-{random.randint(1, 12):02d}-{random.randint(1, 28):02d}"
        lines.append(f"{indent}  - state: {state}")
        lines += [f"{indent}    on: {on}", f"{indent}    by: component engineering"]
        lines.append(f"{indent}    because: {REASONS[state]}")
        if state in ("approved", "restricted"):
            lines.append(f"{indent}    document: {{title: data sheet, revision: {part.revision}}}")
        if state == "approved":
            lines.append(f"{indent}    review_due: {REVIEW_DUE}")
    return lines


def part_text(part: DrawnPart, index: int) -> str:
    """The part's record."""
    random = part.random
    body, what, dissipation_mw_per_k, time_constant_s = random.choice(BODIES)
    lines = [
        f"part: {part.number}",
        f"maker: {part.maker}",
        f"own_number: BN-{index:05d}",
        f"description: {resistance_text(part.rated_ohm)} ±{part.tolerance_pct:g} % {what}",
        f"body: {body}",
        f"rated: {{resistance_ohm: {part.rated_code}, at_c: 25, tolerance_pct: {part.tolerance_pct:g}}}",
        *b_value_lines(part),
        *curve_lines(part),
        "limits:",
        f"  operating_c: [{RANGE_C[0]}, {RANGE_C[1]}]",
        f"  max_power_mw: {random.choice((50, 100, 125, 200))}",
        f"  dissipation_mw_per_k: {dissipation_mw_per_k}",
        f"  time_constant_s: {time_constant_s}",
        "  medium: still air",
        f"qualification: {random.choice(QUALIFICATIONS)}",
        f"lifecycle: {random.choice(LIFECYCLES)}",
        "documents:",
        f"  - title: data sheet\n    revision: {part.revision}\n    dated: 2022-{random.randint(1, 12):02d}-01",
        f'    link: "https://example.com/{part.number.lower()}-{part.revision.lower()}.pdf"',
        *standing_lines(part, part.ledger, random, ""),
        "notes: Compare lots by their table and not by their B-value.",
    ]
    return "\n".join(lines) + "\n"


def firmware(part: DrawnPart, index: int) -> str:
    """The four ways of conversion in turn."""
    if index % 4 == 0:
        return "{method: table, step_k: 5}"
    if index % 4 == 1:
        return "{method: curve}"
    if index % 4 == 2:
        b_k = MATERIALS[part.material][0]
        return f"{{method: b-value, resistance_ohm: {part.rated_code}, at_c: 25, b_k: {b_k:.0f}}}"
    law = steinhart_hart(part.law)
    return f"{{method: steinhart-hart, a: {law.a:.8e}, b: {law.b:.8e}, c: {law.c:.8e}}}"


def position_text(seed: int, index: int, parts: Sequence[DrawnPart]) -> str:
    """A position with up to three alternates of the fitted part's rated resistance, its own material first."""
    random = Random(f"{seed}/position/{index}")
    usable = [part for part in parts if part.ledger[-1] != "withdrawn"] or parts
    fitted = random.choice(usable)
    alike = [part for part in usable if part.rated_code == fitted.rated_code and part is not fitted]
    alike.sort(key=lambda part: part.material != fitted.material)
    board, place = divmod(index, BOARD_POSITIONS)
    lines = [
        f"position: bench-{board:03d}/RT{place + 1}",
        f"board: Bench board {board}",
        "purpose: air at the inlet",
        "range_c: [-20, 70]",
        "limit_k: 2",
        "ambient_c: [-20, 85]",
        "circuit:",
        f"  thermistor: {random.choice(('low side', 'high side'))}",
        f"  fixed: {{resistance_ohm: {fitted.rated_code}, tolerance_pct: 0.1, tempco_ppm_per_k: 25}}",
        "  supply_v: 3.3",
        "  supply_tolerance_pct: 2",
        "reference: ratiometric",
        "adc: {bits: 12, full_scale: 4096, offset_lsb: 2, gain_pct: 0.1, nonlinearity_lsb: 1.5, leakage_na: 50}",
        f"firmware: {firmware(fitted, index)}",
        "trips:",
        "  - {name: fan on, at_c: 45, when: rising, within_k: 2}",
        "  - {name: heater on, at_c: -5, when: falling, within_k: 2}",
        f"fitted: {fitted.number}",
    ]
    if alike:
        lines.append("alternates:")
    for part in alike[:3]:
        lines += [f"  - part: {part.number}", *standing_lines(part, random.choice(LEDGERS), random, "    ")]
    return "\n".join(lines) + "\n"


def make_catalog(folder: Path, *, parts: int, seed: int, curves: Sequence[str] = ("csv",), positions: int = 0) -> None:
    """Write that many parts below a folder, their curves stated in the given ways in turn, and that many positions."""
    drawn = [drawn_part(seed, index, curves[index % len(curves)]) for index in range(parts)]
    for index, part in enumerate(drawn):
        home = folder / part.maker.split()[0].lower()
        write(home / f"{part.number}.yaml", part_text(part, index))
        if part.curve == "csv":
            rows = [["t_c", "r_ohm", "r_min_ohm", "r_max_ohm"], *table_rows(part, 1)]
            write(home / f"{part.number}.csv", "".join(f"{','.join(row)}\n" for row in rows))
    for index in range(positions):
        board, place = divmod(index, BOARD_POSITIONS)
        path = folder / "boards" / f"bench-{board:03d}" / f"RT{place + 1}.yaml"
        write(path, position_text(seed, index, drawn))


def write(path: Path, text: str) -> None:
    """Write a file, the same bytes on every system."""
    path.parent.mkdir(parents=True, exist_ok=True)
    path.write_bytes(text.encode())


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("folder", type=Path, metavar="OUT", help="an empty folder, or one that is not there yet")
    parser.add_argument("--parts", type=int, default=1000)
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--positions", type=int, default=0)
    parser.add_argument(
        "--curves",
        choices=(*CURVES, "mixture"),
        default="csv",
        help="csv: 166 rows beside the record; inline: 166 rows in it; short: 34 rows in it; "
        "the others: no table; mixture: all of them in turn",
    )
    chosen = parser.parse_args()
    if chosen.folder.exists() and any(chosen.folder.iterdir()):
        parser.error(f"{chosen.folder} is not empty. Name another folder.")
    if chosen.positions and not chosen.parts:
        parser.error("a position needs a part to be fitted. Ask for --parts too.")
    curves = CURVES if chosen.curves == "mixture" else (chosen.curves,)
    make_catalog(chosen.folder, parts=chosen.parts, seed=chosen.seed, curves=curves, positions=chosen.positions)


if __name__ == "__main__":
    main()
