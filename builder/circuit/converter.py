"""The converter: from a voltage to a code, with its errors."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.circuit.divider import Figure
from builder.curves.curve import Mask
from builder.units import Array


@dataclass(frozen=True, eq=False)
class Converter:
    """A converter of `bits`; `full_scale` counts stand for its reference.

    `error_lsb` is what offset, non-linearity and quantisation add. A code is a real number here: rounding it to a
    whole one is an error of half an LSB like any other.
    """

    bits: int
    full_scale: int
    gain: Figure = 0.0
    error_lsb: Figure = 0.0

    @property
    def top_code(self) -> int:
        """The highest code there is."""
        return int(2**self.bits - 1)

    def code(self, share: Array) -> Array:
        """Code, held between 0 and the highest.

        Parameters
        ----------
        share : array
            Voltage over that of the reference; no unit.

        Returns
        -------
        array, broadcast with the converter's errors
            Code, a real number. [LSB]
        """
        return np.clip(share * self.full_scale * (1 + self.gain) + self.error_lsb, 0, self.top_code)

    def at_an_end(self, code: Array) -> Mask:
        """Where a code says only that the voltage lies beyond what the converter sees.

        Parameters
        ----------
        code : array
            Code. [LSB]

        Returns
        -------
        array of bool, the shape of `code`
            True at 0 and at the highest code; no unit.
        """
        ends: Mask = (code <= 0) | (code >= self.top_code)
        return ends
