"""What is examined and what is found: a table as typed, the ratings beside it, and findings as data."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from builder.units import ABSOLUTE_ZERO_C, Array

Mask = NDArray[np.bool_]
ZERO_C_K = -ABSOLUTE_ZERO_C
LOWEST_OHM, HIGHEST_OHM = 1e-9, 1e15  # what lies beyond is no resistance, whatever its unit
_TOGETHER = 1e-12  # in 1/T, below a microkelvin


def middle(values: Array) -> float:
    """The middle value (the upper one of two); numpy's own median is ten times slower on a table's few rows."""
    half = values.size // 2
    return float(np.partition(values, half)[half])


def in_reach(r_ohm: Array) -> Mask:
    """Values that may be resistances; nan is none."""
    reach: Mask = (r_ohm > LOWEST_OHM) & (r_ohm < HIGHEST_OHM)
    return reach


def usual_slope(x: Array, y: Array) -> float:
    """The middle slope from one point to the next, points on top of each other left out."""
    steps = np.diff(x)
    apart = np.abs(steps) > _TOGETHER
    return middle(np.diff(y)[apart] / steps[apart]) if apart.any() else 0.0


@dataclass(frozen=True, eq=False)
class Table:
    """An R–T table as typed.

    Attributes
    ----------
    t_c : array of shape (n,)
        Temperatures. [°C]
    r_ohm : array of shape (n,)
        Nominal resistances. [Ω]
    r_min_ohm, r_max_ohm : array of shape (n,), optional
        Lowest and highest resistances; nan where a row has none. [Ω]
    """

    t_c: Array
    r_ohm: Array
    r_min_ohm: Array | None = None
    r_max_ohm: Array | None = None

    def column(self, name: str) -> Array | None:
        """The column of that name, or None where the table has none."""
        column: Array | None = getattr(self, name)
        return column


@dataclass(frozen=True)
class Rated:
    """What the record states beside the table.

    Attributes
    ----------
    rated_resistance_ohm : float, optional
        Rated resistance. [Ω]
    rated_c : float
        Rated temperature. [°C]
    b_values : tuple of (t1_c, t2_c, b_k)
        B-values with their pairs of temperatures. [°C, °C, K]
    """

    rated_resistance_ohm: float | None = None
    rated_c: float = 25.0
    b_values: tuple[tuple[float, float, float], ...] = ()


@dataclass(frozen=True)
class Slip:
    """One edit that explains a value.

    Attributes
    ----------
    kind : str
        What was done. [no unit]
    restored : float
        The value before it. [unit of the column]
    """

    kind: str
    restored: float


@dataclass(frozen=True)
class Finding:
    """One thing that does not belong.

    Attributes
    ----------
    rule : str
        The rule's name: `row-out-of-line`, `uneven-step`, … [no unit]
    row : int, optional
        Row of the table as typed, counted from 0; None for the whole table. [no unit]
    t_c : float, optional
        That row's temperature as typed. [°C]
    column : str
        Column of the value. [no unit]
    value, expected : float, optional
        The value as typed and the one the rest of the table expects. [unit of the column]
    reads_k : float, optional
        Temperature that the value belongs to, minus the row's: − reads low. [K]
    slip : str, optional
        The slip that explains it; None if none does, or several do equally well. [no unit]
    restored : float, optional
        The value without that slip. [unit of the column]
    candidates : tuple of Slip
        Every slip that explains it. [no unit]
    about : str
        Which rating or pair the finding is about, where the rule needs one. [no unit]
    """

    rule: str
    row: int | None = None
    t_c: float | None = None
    column: str = "r_ohm"
    value: float | None = None
    expected: float | None = None
    reads_k: float | None = None
    slip: str | None = None
    restored: float | None = None
    candidates: tuple[Slip, ...] = ()
    about: str = ""
