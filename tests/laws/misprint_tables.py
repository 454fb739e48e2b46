"""R–T tables as makers print them, and the slips of those who copy them: the one place that makes both.

The materials have the spread of bend of fourteen public tables (c from −2.75e5 to −0.3e5 K², drifting along the
table); the roughness is what such tables show: pieces that meet with a small change of slope, and rows
interpolated between coarser ones.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from decimal import Decimal

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
ZERO_C_K = 273.15
RATED_OHM = (100, 470, 1e3, 2.2e3, 4.7e3, 10e3, 15e3, 33e3, 47e3, 68e3, 100e3, 220e3, 470e3, 1e6, 5e6)
SPANS_C = ((0, 100), (-20, 85), (-40, 125), (-50, 150), (-55, 200), (-30, 110), (-60, 300), (20, 120))
ROUGHNESS = ("smooth", "smooth", "knots", "interpolated")


@dataclass(frozen=True)
class Printed:
    """A table as printed: the cells, and what the generator knows about them."""

    t_c: Array
    cells: tuple[str, ...]
    scale_ohm: float
    rated_ohm: float
    b_25_85_k: float
    slope_per_k: Array
    step: str
    digits: int
    rounding: str
    roughness: str

    @property
    def r_ohm(self) -> Array:
        return np.array([float(cell) for cell in self.cells]) * self.scale_ohm

    @property
    def half_k(self) -> Array:
        """Half a unit of each cell's last digit, as a reading. [K]"""
        units = np.array([float(Decimal(1).scaleb(int(Decimal(c).as_tuple().exponent))) for c in self.cells])
        return 0.5 * units / np.array([float(c) for c in self.cells]) / np.abs(self.slope_per_k)

    def with_cell(self, row: int, cell: str) -> Printed:
        return replace(self, cells=(*self.cells[:row], cell, *self.cells[row + 1 :]))


def grid_c(rng: np.random.Generator, step: str, span_c: tuple[float, float]) -> Array:
    low, high = span_c
    if step == "uneven":
        kind = rng.integers(3)
        if kind == 0:
            return np.unique(np.r_[np.arange(low, high + 1, 5), np.arange(max(low, 10), min(high, 50))]).astype(float)
        if kind == 1:
            middle = rng.choice(np.arange(low + 1, high), size=int(rng.integers(10, 40)), replace=False)
            return np.unique(np.r_[low, middle, high]).astype(float)
        return np.unique(np.round(np.linspace(low, high, int(rng.integers(10, 60))) + rng.uniform(-1, 1), 1))
    return np.arange(low, high + 0.01, float(step))


class Material:
    """ln R over 1/T of one invented ceramic."""

    def __init__(self, rng: np.random.Generator) -> None:
        self.rated_ohm = float(rng.choice(RATED_OHM))
        self.b_k = rng.uniform(2800, 4700)
        self.c_k2 = rng.uniform(-2.75e5, -0.8e5)
        self.drift_k3 = rng.uniform(-6e7, 6e7)
        self.d2_per_k = 1 / rng.choice([323.15, 358.15, 373.15]) - 1 / 298.15
        self.knots: list[tuple[float, float]] = []

    def ln_r(self, t_c: Array) -> Array:
        d = 1 / (t_c + ZERO_C_K) - 1 / 298.15
        bend = (self.c_k2 + self.drift_k3 * d) * d * (d - self.d2_per_k)
        kinks = sum(jump_k / 2 * (np.abs(d - at) - abs(at)) for at, jump_k in self.knots)
        ln_r: Array = np.log(self.rated_ohm) + self.b_k * d + bend + kinks
        return ln_r

    def b_25_85(self) -> float:
        cold, hot = self.ln_r(np.array([25.0, 85.0]))
        return float((cold - hot) / (1 / 298.15 - 1 / 358.15))


def roughened(rng: np.random.Generator, material: Material, t_c: Array, roughness: str) -> Array:
    if roughness == "interpolated":
        knots_c = np.arange(-70.0, 321.0, rng.choice([5.0, 10.0]))
        x, knots_x = 1 / (t_c + ZERO_C_K), 1 / (knots_c + ZERO_C_K)
        return np.interp(x, knots_x[::-1], material.ln_r(knots_c)[::-1])
    if roughness == "knots":
        for at_c in rng.choice(t_c[1:-1], size=int(rng.integers(1, 4)), replace=False):
            jump_k = rng.uniform(-0.012, 0.012) * material.b_k
            material.knots.append((1 / (at_c + ZERO_C_K) - 1 / 298.15, jump_k))
        uneven = rng.uniform(-0.004, 0.004, t_c.size) * material.b_k / (t_c + ZERO_C_K) ** 2
        return material.ln_r(t_c) + uneven
    return material.ln_r(t_c)


def cell(value: float, digits: int) -> str:
    """A value to so many significant digits, in full, with its trailing zeros."""
    exponent = int(np.floor(np.log10(value))) - digits + 1
    rounded = round(value * 10.0**-exponent) if exponent < 0 else round(value / 10.0**exponent)
    if exponent >= 0:
        return str(int(rounded) * 10**exponent)
    return f"{Decimal(int(rounded)).scaleb(exponent):f}"


def printed_cells(rng: np.random.Generator, r_ohm: Array, digits: int, rounding: str) -> tuple[tuple[str, ...], float]:
    scale = float(rng.choice([1.0, 1e3]))
    values = r_ohm / scale
    if rounding == "fixed":
        decimals = max(0, digits - 1 - int(np.floor(np.log10(values[-1] * 10 ** (digits // 2)))))
        return tuple(f"{v:.{decimals}f}" for v in values), scale
    change = int(rng.integers(values.size // 4, values.size)) if rounding == "changing" else values.size
    return tuple(cell(v, digits if i < change else max(3, digits - 1)) for i, v in enumerate(values)), scale


def clean_table(
    rng: np.random.Generator, *, step: str, digits: int, rounding: str | None = None, roughness: str | None = None
) -> Printed:
    """One table without a misprint, 8 to 400 rows."""
    material = Material(rng)
    rounding = rounding or str(rng.choice(["significant", "significant", "fixed", "changing"]))
    roughness = roughness or str(rng.choice(ROUGHNESS))
    while True:
        span_c = SPANS_C[int(rng.integers(len(SPANS_C)))]
        t_c = grid_c(rng, step, span_c)
        if 8 <= t_c.size <= 400:
            break
    ln_r = roughened(rng, material, t_c, roughness)
    cells, scale = printed_cells(rng, np.exp(ln_r), digits, rounding)
    slope = np.gradient(material.ln_r(t_c), t_c)
    table = Printed(t_c, cells, scale, material.rated_ohm, material.b_25_85(), slope, step, digits, rounding, roughness)
    return table if _printable(table) else clean_table(rng, step=step, digits=digits)


def _printable(table: Printed) -> bool:
    """No maker prints rows that do not fall, or that are one digit long."""
    return bool(np.all(np.diff(table.r_ohm) < 0) and np.all(table.half_k < 1.0))


# ---------------------------------------------------------------- slips


@dataclass(frozen=True)
class Slipped:
    """A table with slips, the rows they are in, and the cells as they were."""

    table: Printed
    rows: tuple[int, ...]
    kind: str
    moved_k: tuple[float, ...]
    was: tuple[str, ...]


def digit_wrong(rng: np.random.Generator, text: str) -> str:
    places = [i for i, ch in enumerate(text) if ch.isdigit()]
    at = int(rng.choice(places))
    other = rng.choice([d for d in "0123456789" if d != text[at]])
    return text[:at] + str(other) + text[at + 1 :]


def digits_swapped(rng: np.random.Generator, text: str) -> str:
    places = [i for i, ch in enumerate(text) if ch.isdigit()]
    at = int(rng.integers(len(places) - 1))
    i, j = places[at], places[at + 1]
    return text[:i] + text[j] + text[i + 1 : j] + text[i] + text[j + 1 :]


def decimal_moved(rng: np.random.Generator, text: str) -> str:
    return f"{Decimal(text).scaleb(int(rng.choice([-3, -1, 1, 3]))):f}"


CELL_SLIPS = {"digit": digit_wrong, "swap": digits_swapped, "decimal": decimal_moved}


def moved_k(table: Printed, row: int, text: str) -> float:
    """How far the cell moves the reading. [K]"""
    value, was = float(text), float(table.cells[row])
    if value <= 0:
        return np.inf
    step = np.log(value / was)
    x = 1 / (table.t_c[row] + ZERO_C_K)
    moved_x = x + step / (-table.slope_per_k[row] / x**2)
    return float(1 / max(moved_x, 1e-4) - 1 / x)


def cell_slip(
    rng: np.random.Generator, table: Printed, kind: str, band_k: tuple[float, float], row: int | None = None
) -> Slipped | None:
    """One slip whose reading moves by something inside the band and by more than five half-units, or None."""
    for _ in range(200):
        at = int(rng.integers(table.t_c.size)) if row is None else row
        text = CELL_SLIPS[kind](rng, table.cells[at])
        if float(text) <= 0:
            continue
        moved = moved_k(table, at, text)
        if band_k[0] < abs(moved) <= band_k[1] and abs(moved) > 5 * table.half_k[at]:
            return Slipped(table.with_cell(at, text), (at,), kind, (moved,), (table.cells[at],))
    return None


def several_slips(rng: np.random.Generator, table: Printed, count: int) -> Slipped | None:
    rows = sorted(rng.choice(table.t_c.size, size=count, replace=False).tolist())
    moved: list[float] = []
    slipped = table
    for row in rows:
        one = cell_slip(rng, table, "digit", (0.3, np.inf), row)
        if one is None:
            return None
        slipped = slipped.with_cell(row, one.table.cells[row])
        moved.append(one.moved_k[0])
    return Slipped(slipped, tuple(rows), "several", tuple(moved), tuple(table.cells[r] for r in rows))


def row_left_out(rng: np.random.Generator, table: Printed) -> Slipped:
    """The resistances skip one row: from there on each stands one temperature too early, in two rows at least."""
    at = int(rng.integers(1, table.t_c.size - 2))
    cells = table.cells[:at] + table.cells[at + 1 :]
    return Slipped(_of_rows(table, table.t_c[:-1], cells), (at,), "left out", (), (table.cells[at],))


def row_missing(rng: np.random.Generator, table: Printed) -> Slipped:
    """A whole row is missing, temperature and all."""
    at = int(rng.integers(1, table.t_c.size - 1))
    cells = table.cells[:at] + table.cells[at + 1 :]
    return Slipped(_of_rows(table, np.delete(table.t_c, at), cells), (at,), "missing", (), (table.cells[at],))


def temperature_mistyped(rng: np.random.Generator, table: Printed) -> Slipped:
    return _with_temperature(rng, table, int(rng.integers(1, table.t_c.size - 1)))


def end_temperature_mistyped(rng: np.random.Generator, table: Printed) -> Slipped:
    return _with_temperature(rng, table, int(rng.choice([0, table.t_c.size - 1])))


def _with_temperature(rng: np.random.Generator, table: Printed, at: int) -> Slipped:
    was = int(table.t_c[at])
    edits = {was - 1, was + 1, -was, int(str(abs(was))[::-1]), was + 10, was - 10, was + 2}
    edits = {edit for edit in edits if abs(edit - was) > 5 * table.half_k[at]}
    t_c = table.t_c.copy()
    t_c[at] = float(rng.choice(sorted(edits)))
    return Slipped(replace(table, t_c=t_c), (at,), "temperature", (t_c[at] - was,), (str(was),))


def _of_rows(table: Printed, t_c: Array, cells: tuple[str, ...]) -> Printed:
    return replace(table, t_c=t_c, cells=cells, slope_per_k=table.slope_per_k[: t_c.size])
