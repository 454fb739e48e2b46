"""Firmware made anew for another part, by the method that a position has."""

from __future__ import annotations

from builder.fits import BValue, Equation, fit
from builder.part_curve import PartCurve, whole_steps_c
from builder.records import Position
from builder.records.position import BValueFirmware, Firmware, SteinhartHartFirmware

_STEP_K = 1.0


def with_new_firmware(position: Position, curve: PartCurve) -> Position:
    """A position whose firmware is made for another part.

    Parameters
    ----------
    position : Position
        Says by which method; no unit.
    curve : PartCurve
        Of the part; no unit.

    Returns
    -------
    Position
        The coefficients of a B-value or of Steinhart–Hart are those that fit the curve best over the position's range.
        A table and an inverse are made of whichever curve the budget is given, and name no part any more.

    Raises
    ------
    ValueError
        The equation does not fit the curve over the range.
    """
    return position.model_copy(update={"firmware": _firmware(position.firmware, curve, position.range_c)})


def _firmware(firmware: Firmware, curve: PartCurve, range_c: tuple[float, float]) -> Firmware:
    if isinstance(firmware, BValueFirmware):
        return firmware.model_copy(update=_coefficients(BValue(reference_c=firmware.at_c), curve, range_c))
    if isinstance(firmware, SteinhartHartFirmware):
        return firmware.model_copy(update=_coefficients("steinhart-hart", curve, range_c))
    return firmware.model_copy(update={"part": None})


def _coefficients(equation: str | Equation, curve: PartCurve, range_c: tuple[float, float]) -> dict[str, float]:
    t_c = whole_steps_c(range_c, _STEP_K)
    known_c = t_c[~curve.curve.extrapolated(t_c)]
    return fit(equation, known_c, curve.curve.resistance_ohm(known_c)).coefficients
