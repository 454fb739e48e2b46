"""Quantised axes: few distinct scales serve a whole catalog, so each is drawn once."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

FloatArray = NDArray[np.float64]
Quantity = Literal["temperature", "resistance", "kelvin", "width"]

# The picture in its own pixels; the margins hold tick labels of 19 px, the size used on a phone.
WIDTH, HEIGHT = 560, 370
LEFT, RIGHT, TOP, BOTTOM = 82, 26, 30, 60
PLOT_WIDTH, PLOT_HEIGHT = WIDTH - LEFT - RIGHT, HEIGHT - TOP - BOTTOM


@dataclass(frozen=True)
class Scale:
    """One axis: what it measures, its limits, the distance of its ticks (in decades for resistance), its label."""

    quantity: Quantity
    low: float
    high: float
    step: float
    label: str

    def fraction(self, values: FloatArray) -> FloatArray:
        """Place of values along the axis, 0 at the low limit and 1 at the high one; NaN where there is none."""
        if self.quantity != "resistance":
            return (values - self.low) / (self.high - self.low)
        with np.errstate(divide="ignore", invalid="ignore"):
            return np.log10(values / self.low) / math.log10(self.high / self.low)


def temperature_scale(t_c: FloatArray) -> Scale:
    """Scale in °C whose limits are whole ticks, 25 °C apart over the usual ranges."""
    low, high = _extremes(t_c, empty=(-50.0, 150.0))
    middle, half = (low + high) / 2, max(high - low, 10.0) / 2
    step = _round_up(2 * half / 9, (1, 2.5, 5))
    return Scale(
        "temperature",
        math.floor((middle - half) / step) * step,
        math.ceil((middle + half) / step) * step,
        step,
        "Temperature (°C)",
    )


def resistance_scale(r_ohm: FloatArray) -> Scale:
    """Logarithmic scale in Ω over whole decades; values that are not above zero have no place on it."""
    positive = np.where(r_ohm > 0, r_ohm, np.nan)
    low, high = _extremes(np.log10(positive), empty=(2.0, 6.0))
    low_decade, high_decade = math.floor(low + 1e-9), math.ceil(high - 1e-9)
    if low_decade >= high_decade:
        low_decade, high_decade = high_decade - 1, low_decade + 1
    step = math.ceil((high_decade - low_decade) / 9)
    return Scale("resistance", 10.0**low_decade, 10.0**high_decade, step, "Resistance")


def kelvin_scale(values_k: FloatArray, label: str) -> Scale:
    """Symmetric scale in K that ends at 1, 2 or 5 times a power of ten."""
    low, high = _extremes(values_k, empty=(-1.0, 1.0))
    limit_k = _round_up(max(-low, high, 0.01), (1, 2, 5))
    return Scale("kelvin", -limit_k, limit_k, _round_up(limit_k / 5.5, (1, 2, 5)), label)


def width_scale(widths_k: FloatArray, label: str) -> Scale:
    """Scale in K from zero to a round number."""
    _, high = _extremes(widths_k, empty=(0.0, 1.0))
    top_k = _round_up(max(high, 0.01), (1, 1.5, 2, 3, 4, 5, 6, 8))
    return Scale("width", 0.0, top_k, _round_up(top_k / 5.5, (1, 2, 5)), label)


def _extremes(values: FloatArray, empty: tuple[float, float]) -> tuple[float, float]:
    finite = values[np.isfinite(values)]
    return (float(finite.min()), float(finite.max())) if finite.size else empty


def _round_up(value: float, digits: tuple[float, ...]) -> float:
    power = 10.0 ** math.floor(math.log10(value))
    return next(digit * power for digit in (*digits, 10) if digit * power >= value * (1 - 1e-9))
