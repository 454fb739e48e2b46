"""Temperatures, R-K-M codes and numbers as people read them."""

from __future__ import annotations

import math
import re
from decimal import Decimal
from typing import overload

import numpy as np
import numpy.typing as npt

Array = npt.NDArray[np.float64]

ABSOLUTE_ZERO_C = -273.15

# Python also reads nan, inf, 1_000 and the digits of every script as numbers; nobody types those.
FIGURE = re.compile(r"[-+]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][-+]?[0-9]+)?")

# IEC 60062 also has L (1e-3), G and T; a thermistor record has no use for them, and L is a tolerance letter too.
_MULTIPLIERS = {"R": Decimal(1), "K": Decimal(1_000), "M": Decimal(1_000_000)}
_CODE = re.compile("([0-9]{0,12})([RrKkM])([0-9]{0,12})")
_ALL_DIGITS = 17  # of a float: more tell nothing
_PREFIXES = ((1e6, "MΩ"), (1e3, "kΩ"), (1.0, "Ω"))


@overload
def kelvin(t_c: float) -> float: ...
@overload
def kelvin(t_c: Array) -> Array: ...
def kelvin(t_c: float | Array) -> float | Array:
    """Absolute temperature.

    Parameters
    ----------
    t_c : float or array
        Temperature. [°C]

    Returns
    -------
    float or array, the shape of `t_c`
        The same temperature. [K]

    Examples
    --------
    >>> kelvin(25.0)
    298.15
    """
    return t_c - ABSOLUTE_ZERO_C


@overload
def celsius(t_k: float) -> float: ...
@overload
def celsius(t_k: Array) -> Array: ...
def celsius(t_k: float | Array) -> float | Array:
    """Celsius temperature.

    Parameters
    ----------
    t_k : float or array
        Absolute temperature. [K]

    Returns
    -------
    float or array, the shape of `t_k`
        The same temperature. [°C]

    Examples
    --------
    >>> celsius(298.15)
    25.0
    """
    return t_k + ABSOLUTE_ZERO_C


def resistance_from_code(code: str) -> float:
    """Resistance that an R-K-M code stands for.

    Parameters
    ----------
    code : str
        Such as `4k7`, `100R`, `R47` or `2M2`; no unit. A lower-case k is taken for K, as it is written
        everywhere; a lower-case m is not, since it would mean a thousandth.

    Returns
    -------
    float
        Resistance. [Ω]

    Raises
    ------
    ValueError
        The text is no R-K-M code.

    Notes
    -----
    The letter stands for the decimal point and the multiplier (IEC 60062).

    Examples
    --------
    >>> resistance_from_code("4k7")
    4700.0
    """
    match = _CODE.fullmatch(code)
    if not match or not (match[1] or match[3]):
        raise ValueError(f"{code} is no R-K-M code")
    return float(Decimal(f"{match[1] or 0}.{match[3] or 0}") * _MULTIPLIERS[match[2].upper()])


def ohms_from_text(text: str) -> float:
    """Resistance typed as a number or an R-K-M code.

    Parameters
    ----------
    text : str
        Such as `6830`, `1e4` or `4k7`; no unit.

    Returns
    -------
    float
        Resistance, above zero. [Ω]

    Raises
    ------
    ValueError
        The text is neither, or not above zero.

    Examples
    --------
    >>> ohms_from_text("1e4"), ohms_from_text("4k7")
    (10000.0, 4700.0)
    """
    try:
        r_ohm = float(text) if FIGURE.fullmatch(text) else resistance_from_code(text)
    except ValueError:
        raise ValueError(f"{text} is not a resistance: write ohms as a number, or an R-K-M code such as 4k7") from None
    if not 0 < r_ohm < math.inf:
        raise ValueError(f"{text} Ω is not a resistance above zero")
    return r_ohm


def number_text(value: float, digits: int = 6) -> str:
    """A number with at most so many significant digits, plain where that is short.

    Parameters
    ----------
    value : float
        Any number; no unit.
    digits : int
        Significant digits kept; no unit.

    Returns
    -------
    str
        Such as `6830`, `0.25` or `8.775e−8`.

    Examples
    --------
    >>> number_text(6830.0), number_text(-0.25), number_text(8.775e-8), number_text(1e9), number_text(float("nan"))
    ('6830', '−0.25', '8.775e−8', '1e9', '–')
    """
    if math.isnan(value):
        return "–"
    if math.isinf(value):
        return "inf" if value > 0 else "−inf"
    magnitude = abs(value)
    if magnitude == 0 or 1e-4 <= magnitude < 10 ** max(digits, 7):
        decimals = digits - 1 - (math.floor(math.log10(magnitude)) if magnitude else 0)
        text = f"{value:.{max(decimals, 0)}f}"
        text = text.rstrip("0").rstrip(".") if "." in text else text
    else:
        mantissa, exponent = f"{value:.{digits - 1}e}".split("e")
        text = f"{mantissa.rstrip('0').rstrip('.')}e{int(exponent)}"
    return "0" if text in ("-0", "0") else text.replace("-", "−")


def compared_text(value: float, limit: float, digits: int) -> str:
    """A number beside a limit, with as many more digits as keep it on its side of the limit.

    Parameters
    ----------
    value : float
        Any number; no unit.
    limit : float
        What it is compared with; no unit.
    digits : int
        Significant digits kept where these tell; no unit.

    Returns
    -------
    str
        Such as `1.6004`.

    Examples
    --------
    >>> compared_text(1.6004, 2.0, 3), compared_text(1.6004, 1.6, 3), compared_text(1.598, 1.5985, 3)
    ('1.6', '1.6004', '1.598')
    """
    while digits < _ALL_DIGITS and (float(f"{value:.{digits}g}") <= limit) != (value <= limit):
        digits += 1
    return number_text(value, digits)


def resistance_text(r_ohm: float, digits: int = 5) -> str:
    """A resistance with its unit and prefix.

    Parameters
    ----------
    r_ohm : float
        Resistance. [Ω]
    digits : int
        Significant digits kept; no unit.

    Returns
    -------
    str
        Such as `4.7 kΩ`.

    Examples
    --------
    >>> resistance_text(4700.0), resistance_text(99.6), resistance_text(2.2e6)
    ('4.7 kΩ', '99.6 Ω', '2.2 MΩ')
    """
    # 999.999 rounds to 1000: choose the prefix for what will be printed.
    shown_ohm = float(f"{r_ohm:.{digits - 1}e}")
    factor, unit = next(((f, u) for f, u in _PREFIXES if abs(shown_ohm) >= f), _PREFIXES[-1])
    return f"{number_text(r_ohm / factor, digits)} {unit}"


def temperature_text(t_c: float, digits: int = 6) -> str:
    """A temperature with its unit.

    Parameters
    ----------
    t_c : float
        Temperature. [°C]
    digits : int
        Significant digits kept; no unit.

    Returns
    -------
    str
        Such as `−40 °C`.

    Examples
    --------
    >>> temperature_text(-40.0)
    '−40 °C'
    """
    return f"{number_text(t_c, digits)} °C"


def range_text(span_c: tuple[float, float]) -> str:
    """A range of temperatures with its unit.

    Parameters
    ----------
    span_c : tuple of two floats
        Lower and upper end. [°C]

    Returns
    -------
    str
        Such as `−40 to 125 °C`.

    Examples
    --------
    >>> range_text((-40, 125))
    '−40 to 125 °C'
    """
    return f"{number_text(span_c[0])} to {number_text(span_c[1])} °C"


def signed_text(difference_k: float, decimals: int = 2) -> str:
    """A difference with its sign, zero without one.

    Parameters
    ----------
    difference_k : float
        A difference, usually of temperature. [K]
    decimals : int
        Decimals shown; no unit.

    Returns
    -------
    str
        Such as `+0.25`, `−1.10` or `0.00`; an en dash where there is no number.

    Examples
    --------
    >>> signed_text(0.251), signed_text(-1.1), signed_text(-0.0001)
    ('+0.25', '−1.10', '0.00')
    """
    if math.isnan(difference_k):
        return "–"
    text = f"{abs(difference_k):.{decimals}f}"
    sign = "" if float(text) == 0 else "+" if difference_k > 0 else "−"
    return sign + text
