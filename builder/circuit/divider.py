"""The divider that the thermistor stands in: its junction's voltage, the thermistor's power, and the way back."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.curves.curve import Mask
from builder.units import Array

# Fields of a circuit as built: one number, or an array that broadcasts against the temperatures.
Figure = float | Array


@dataclass(frozen=True, eq=False)
class Divider:
    """A fixed resistor and the thermistor's branch between supply and ground; what leaks, leaks into the junction.

    The branch is the thermistor in series with its wire, and the parallel resistor across the two: it stands on the
    board, at the near end of the wire. Without one its resistance is infinite.
    """

    high_side: bool
    fixed_ohm: Figure
    supply_v: Figure
    parallel_ohm: Figure = np.inf
    wire_ohm: Figure = 0.0
    leakage_a: Figure = 0.0

    def junction_v(self, r_ohm: Array) -> Array:
        """Voltage of the junction over ground.

        Parameters
        ----------
        r_ohm : array
            Resistance of the thermistor; 0 for a short, infinite for an open one. [Ω]

        Returns
        -------
        array, broadcast with the circuit's fields
            Voltage. [V]

        Notes
        -----
        The branch takes the share s = 1/(1 + RF·G) of the supply, G its conductance. The junction's source resistance,
        RF and the branch in parallel, is RF·s.
        """
        with np.errstate(divide="ignore"):
            conductance_per_ohm = 1 / (r_ohm + self.wire_ohm) + 1 / self.parallel_ohm
        branch_share = 1 / (1 + self.fixed_ohm * conductance_per_ohm)
        share = 1 - branch_share if self.high_side else branch_share
        junction_v: Array = self.supply_v * share + self.leakage_a * self.fixed_ohm * branch_share
        return junction_v

    def thermistor_ohm(self, share: Array) -> Array:
        """Resistance of the thermistor that puts the junction at a share of the supply: the inverse without leakage.

        Parameters
        ----------
        share : array
            Voltage of the junction over that of the supply; no unit.

        Returns
        -------
        array, broadcast with the circuit's fields
            Resistance; not a number where no thermistor gives that share. [Ω]
        """
        branch_share = 1 - share if self.high_side else share
        with np.errstate(divide="ignore", invalid="ignore"):
            conductance_per_ohm = (1 / branch_share - 1) / self.fixed_ohm - 1 / self.parallel_ohm
            r_ohm = 1 / conductance_per_ohm - self.wire_ohm
        return np.where((r_ohm > 0) & (r_ohm < np.inf), r_ohm, np.nan)

    def thermistor_w(self, r_ohm: Array) -> Array:
        """Power in the thermistor.

        Parameters
        ----------
        r_ohm : array
            Resistance of the thermistor. [Ω]

        Returns
        -------
        array, broadcast with the circuit's fields
            Power, from the voltage and the resistance that the thermistor sees (Thévenin). [W]
        """
        leakage_a = -self.leakage_a if self.high_side else self.leakage_a
        open_v = (self.supply_v / self.fixed_ohm + leakage_a) * self._resistors_ohm
        power_w: Array = open_v**2 * r_ohm / (r_ohm + self.seen_ohm) ** 2
        return power_w

    def at(self, places: Mask) -> Divider:
        """The dividers of some cases and temperatures only, of all that the fields broadcast to.

        Parameters
        ----------
        places : array of bool
            Of the shape of what the fields broadcast to with temperatures; no unit.

        Returns
        -------
        Divider
            With fields of shape (n,), one for each place.
        """

        def own(field: Figure) -> Array:
            return np.broadcast_to(field, places.shape)[places]

        return Divider(
            self.high_side,
            own(self.fixed_ohm),
            own(self.supply_v),
            own(self.parallel_ohm),
            own(self.wire_ohm),
            own(self.leakage_a),
        )

    @property
    def seen_ohm(self) -> Figure:
        """The resistance that the thermistor sees; of that value itself it takes the most power. [Ω]"""
        return self._resistors_ohm + self.wire_ohm

    @property
    def _resistors_ohm(self) -> Figure:
        return 1 / (1 / self.fixed_ohm + 1 / self.parallel_ohm)
