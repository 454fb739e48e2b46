"""How the firmware turns a code into degrees; it knows the nominal values of the circuit."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Protocol

import numpy as np

from builder.circuit.converter import Converter
from builder.circuit.divider import Divider
from builder.curves import Curve, SteinhartHartLaw
from builder.part_curve import steps_from_c
from builder.records import Position
from builder.records.position import BValueFirmware, CurveFirmware, SteinhartHartFirmware, TableFirmware
from builder.units import Array, celsius, kelvin


class Conversion(Protocol):
    """From a code to a reading."""

    def reading_c(self, code: Array) -> Array:
        """What the instrument shows at a code, [°C]; not a number where it has no answer."""


@dataclass(frozen=True, eq=False)
class Computed:
    """The resistance from the code, then the temperature from the resistance.

    `per_supply` is what a share of the reference is multiplied by to be one of the supply.
    """

    divider: Divider
    converter: Converter
    per_supply: float
    temperature_c: Callable[[Array], Array]

    def reading_c(self, code: Array) -> Array:
        """What the instrument shows at a code. [°C]"""
        return self.temperature_c(self.divider.thermistor_ohm(code / self.converter.full_scale * self.per_supply))


@dataclass(frozen=True, eq=False)
class Tabulated:
    """Rows of whole codes, rising along the last axis, and temperatures: linear in the code from row to row.

    Beyond its ends the table goes on with the slope of its last two rows. Where rows share a code, the firmware goes
    on from the last of them.
    """

    code: Array
    t_c: Array

    def reading_c(self, code: Array) -> Array:
        """What the instrument shows at a code. [°C]"""
        # All tables behind one another in one that rises: each begins above the highest code of the one before.
        tables, rows, highest = self.code.ravel(), len(self.t_c), self.code.max()
        table = np.arange(tables.size // rows).reshape(*self.code.shape[:-1], 1)
        rising = (self.code + table * (highest + 1)).ravel()
        found = np.searchsorted(rising, np.clip(code, -0.5, highest) + table * (highest + 1), side="right") - 1
        row = np.clip(found - table * rows, 0, rows - 2)
        below, above = tables[table * rows + row], tables[table * rows + row + 1]
        with np.errstate(divide="ignore", invalid="ignore"):
            share = np.where(above > below, (code - below) / (above - below), np.nan)
        reading_c: Array = self.t_c[row] + share * (self.t_c[row + 1] - self.t_c[row])
        return reading_c


def firmware_part(position: Position) -> str:
    """The number of the part whose curve the firmware has: the one it names, or the fitted one."""
    firmware = position.firmware
    named = firmware.part if isinstance(firmware, TableFirmware | CurveFirmware) else None
    return named or position.fitted


def conversion(
    position: Position, divider: Divider, converter: Converter, per_supply: float, curve: Curve
) -> Conversion:
    """The firmware's conversion at a position.

    Parameters
    ----------
    position : Position
        Says by which method; no unit.
    divider, converter : Divider, Converter
        With their nominal values; no unit.
    per_supply : float
        Nominal voltage of the reference over that of the supply; no unit.
    curve : Curve
        What a table or an inverse is made from; no unit.

    Returns
    -------
    Conversion
        A table has rows at whole steps from the lower end of the range on and at its upper end, each code rounded to
        a whole one, halves upwards. Where the curve does not reach, its rows follow the slope of its end.
    """
    firmware = position.firmware
    if isinstance(firmware, TableFirmware):
        row_c = steps_from_c(position.range_c, firmware.step_k)
        share = divider.junction_v(curve.extended_resistance_ohm(row_c)) / (divider.supply_v * per_supply)
        codes = np.floor(converter.code(share) + 0.5)
        return Tabulated(codes, row_c) if divider.high_side else Tabulated(codes[..., ::-1], row_c[::-1])
    if isinstance(firmware, BValueFirmware):
        return Computed(divider, converter, per_supply, _from_b_value(firmware))
    if isinstance(firmware, SteinhartHartFirmware):
        law = SteinhartHartLaw(firmware.a, firmware.b, firmware.c)
        return Computed(divider, converter, per_supply, lambda r_ohm: _celsius(law.inverse_temperature(np.log(r_ohm))))
    return Computed(divider, converter, per_supply, curve.temperature_c)


def _from_b_value(firmware: BValueFirmware) -> Callable[[Array], Array]:
    x1_per_k = 1 / kelvin(firmware.at_c)
    return lambda r_ohm: _celsius(x1_per_k + np.log(r_ohm / firmware.resistance_ohm) / firmware.b_k)


def _celsius(x_per_k: Array) -> Array:
    return celsius(1 / np.where(x_per_k > 0, x_per_k, np.nan))
