"""The whole way of a reading, from the true temperature to what the instrument shows."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from builder.circuit.converter import Converter
from builder.circuit.divider import Divider, Figure
from builder.circuit.firmware import Conversion, conversion
from builder.circuit.sources import Offsets, Source, corners, sources
from builder.circuit.thermistor import Thermistor
from builder.curves import Curve
from builder.records import Position
from builder.records.position import CurveFirmware, TableFirmware, VoltageReference
from builder.units import Array

NOMINAL: Offsets = {}


@dataclass(frozen=True, eq=False)
class Signal:
    """What happens on the way, at some temperatures and in some cases; arrays of one shape."""

    body_c: Array
    power_mw: Array
    junction_v: Array
    code: Array
    reading_c: Array


@dataclass(frozen=True, eq=False)
class Chain:
    """A position with a thermistor in it, and the curve that its firmware was made from.

    `fixed_ohm` is the position's own fixed resistor, or others in its place for which the firmware is made too: an
    array of shape (n, 1, 1) puts an axis in front of cases and temperatures.
    """

    position: Position
    thermistor: Thermistor
    firmware_curve: Curve
    fixed_ohm: Figure

    def signal(self, t_c: Array, offsets: Offsets = NOMINAL) -> Signal:
        """The chain at true temperatures.

        Parameters
        ----------
        t_c : array of shape (n,)
            True temperatures. [°C]
        offsets : mapping of str to array of shape (m, 1)
            By how much the sources are off; those not named are nominal; no unit.

        Returns
        -------
        Signal
            Arrays of shape (m, n), or (n,) without offsets. No reading where the code is at an end.
        """
        divider, edge = self.divider(offsets), offsets.get("thermistor", 0.0)
        body_c, r_ohm = self.thermistor.warmed(t_c, divider, edge)
        power_mw, junction_v = divider.thermistor_w(r_ohm) * 1e3, divider.junction_v(r_ohm)
        code = self.code(junction_v, offsets)
        readable = ~self.converter(NOMINAL).at_an_end(code)
        reading_c = self.conversion.reading_c(np.where(readable, code, np.nan))
        return Signal(body_c, power_mw, junction_v, code, reading_c)

    def extremes(self, t_c: Array) -> tuple[Signal, Signal]:
        """Lowest and highest of everything over all corners of the sources' limits.

        Parameters
        ----------
        t_c : array of shape (n,)
            True temperatures. [°C]

        Returns
        -------
        tuple of two Signals
            Arrays of shape (n,); not a number where one corner has none.
        """
        found = self.signal(t_c, corners(self.sources))
        columns = (found.body_c, found.power_mw, found.junction_v, found.code, found.reading_c)
        return Signal(*(c.min(axis=-2) for c in columns)), Signal(*(c.max(axis=-2) for c in columns))

    def divider(self, offsets: Offsets = NOMINAL) -> Divider:
        """The divider as built."""
        circuit = self.position.circuit
        drift, tolerance = (1 + offsets.get(name, 0.0) for name in ("fixed resistor tempco", "fixed resistor"))
        parallel_ohm = circuit.parallel.resistance_ohm if circuit.parallel else np.inf
        return Divider(
            high_side=circuit.thermistor == "high side",
            fixed_ohm=self.fixed_ohm * tolerance * drift,
            supply_v=circuit.supply_v * (1 + offsets.get("supply", 0.0)),
            parallel_ohm=parallel_ohm * (1 + offsets.get("parallel resistor", 0.0)),
            wire_ohm=circuit.wire_ohm or 0.0,
            leakage_a=offsets.get("leakage", 0.0),
        )

    def converter(self, offsets: Offsets) -> Converter:
        """The converter as built."""
        adc = self.position.adc
        added = (offsets.get(name, 0.0) for name in ("offset", "nonlinearity", "quantisation"))
        full_scale = adc.full_scale or 2**adc.bits
        return Converter(adc.bits, full_scale, offsets.get("gain", 0.0), sum(added))

    def code(self, junction_v: Array, offsets: Offsets) -> Array:
        """What the converter makes of the junction's voltage. [LSB]"""
        return self.converter(offsets).code(junction_v / self.reference_v(offsets))

    def reference_v(self, offsets: Offsets = NOMINAL) -> Figure:
        """The converter's reference: its own, or the supply. [V]"""
        own = self.position.reference
        if isinstance(own, VoltageReference):
            return own.volts * (1 + offsets.get("reference", 0.0))
        return self.position.circuit.supply_v * (1 + offsets.get("supply", 0.0))

    @cached_property
    def sources(self) -> tuple[Source, ...]:
        """What may be off here."""
        return sources(self.position)

    @cached_property
    def curves(self) -> dict[str, Curve]:
        """The curves that a reading hangs on: the part's, and the firmware's where it has one."""
        has_one = isinstance(self.position.firmware, TableFirmware | CurveFirmware)
        return {"part": self.thermistor.made.curve} | ({"firmware": self.firmware_curve} if has_one else {})

    @cached_property
    def conversion(self) -> Conversion:
        """The firmware, made for the nominal circuit."""
        return conversion(
            self.position,
            self.divider(),
            self.converter(NOMINAL),
            float(self.reference_v()) / self.position.circuit.supply_v,
            self.firmware_curve,
        )
