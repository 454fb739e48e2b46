"""How finely a column is printed: half a unit of each row's last digit, relative to the value."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from builder.units import Array

_MOST_DIGITS = 8
_AROUND = 3
_POWERS = 10.0 ** np.arange(_MOST_DIGITS)


def significant_digits(values: Array) -> Array:
    """Significant digits without trailing zeros, at most eight.

    Parameters
    ----------
    values : array of shape (n,)
        Positive numbers. [any unit]

    Returns
    -------
    array of shape (n,)
        Digits of each. [no unit]
    """
    scaled = mantissas(values)[:, None] * _POWERS
    whole = np.abs(scaled - np.rint(scaled)) < 1e-9 * scaled
    return np.where(whole.any(axis=1), whole.argmax(axis=1) + 1, _MOST_DIGITS).astype(float)


def mantissas(values: Array) -> Array:
    """Each value between 1 and 10, its power of ten taken off."""
    mantissa: Array = values / 10.0 ** np.floor(np.log10(values))
    return mantissa


@dataclass(frozen=True, eq=False)
class Printed:
    """A column as it was printed.

    Attributes
    ----------
    numbers : array of shape (n,)
        The numbers in the cells. [Ω]
    digits : array of shape (n,)
        Significant digits of each. [no unit]
    half : array of shape (n,)
        Half a unit of the last digit, as a share of the number. [no unit]
    """

    numbers: Array
    digits: Array
    half: Array

    def prints(self, row: int, number: float) -> bool:
        """Whether a number has no more digits, or no more decimals, than the rows around that row are printed with."""
        around = np.delete(np.arange(self.digits.size), row)
        around = around[np.abs(around - row) <= _AROUND]
        decades = np.floor(np.log10(self.numbers[around]))
        value = np.array([number])
        digits, decade = significant_digits(value)[0], np.floor(np.log10(number))
        finest = (self.digits[around] - decades).max()
        return bool(digits <= self.digits[around].max() or digits - decade <= finest)


def printed(r_ohm: Array) -> Printed:
    """How a column was printed, from the numbers themselves.

    Parameters
    ----------
    r_ohm : array of shape (n,)
        Resistances. [Ω]

    Returns
    -------
    Printed
        Numbers, digits and half units.
    """
    digits = _usual_digits(r_ohm)
    return Printed(r_ohm, digits, 5.0 * 10.0**-digits / mantissas(r_ohm))


def _usual_digits(values: Array) -> Array:
    """Digits of each value, those that end in zero by chance told from those printed more coarsely.

    A zero by chance makes both the digits and the last place coarser than its neighbours'; where only the digits
    are fewer the table has fixed decimals, where only the place is coarser it has fixed digits.
    """
    digits, decade = significant_digits(values), np.floor(np.log10(values))
    places: Array = _closed(digits - decade) + decade
    usual: Array = np.minimum(_closed(digits), places)
    return usual


def _closed(fineness: Array) -> Array:
    """Dips of one or two rows inside the table filled up to their neighbours (a morphological closing over three
    rows); a dip at an end is taken as it is, since more of it may lie beyond."""
    edge = np.full(2, -np.inf)
    return _extremes(_extremes(np.concatenate([edge, fineness, edge]), np.maximum), np.minimum)


def _extremes(values: Array, of: np.ufunc) -> Array:
    """The extreme of every three values in a row."""
    extreme: Array = of(of(values[:-2], values[1:-1]), values[2:])
    return extreme
