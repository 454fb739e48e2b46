"""Slips of the pen: which single edit turns a value that does not belong into one that does."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from itertools import pairwise
from math import erf, log, sqrt

from builder.misprints.table import Slip

_SURE = 0.9
_DECIMALS = {
    -3: "comma-for-point", -2: "decimal-place", -1: "decimal-place",
    1: "decimal-place", 2: "decimal-place", 3: "kilo-missed",
}  # fmt: skip


def edits(value: float, digits: int) -> Iterator[tuple[Slip, float]]:
    """Every value that one slip may have turned into this one.

    Parameters
    ----------
    value : float
        The value as typed. [any unit]
    digits : int
        Its significant digits. [no unit]

    Yields
    ------
    Slip, float
        Kind and value before the slip, and half a unit of that value's last digit as a share of it.
    """
    mantissa, exponent = f"{value:.{digits - 1}e}".split("e")
    figures, place = "0" + mantissa.replace(".", ""), int(exponent) - digits + 1
    for kind, other in (*_digit_edits(figures), *_swaps(figures)):
        if int(other):
            yield Slip(kind, float(f"{int(other)}e{place}")), 0.5 / int(other)
    for power, kind in _DECIMALS.items():
        yield Slip(kind, float(f"{int(figures)}e{place + power}")), 0.5 / int(figures)


def _digit_edits(figures: str) -> Iterator[tuple[str, str]]:
    for at, old in enumerate(figures):
        yield from (("one-digit", figures[:at] + new + figures[at + 1 :]) for new in "0123456789" if new != old)


def _swaps(figures: str) -> Iterator[tuple[str, str]]:
    for at, (a, b) in enumerate(pairwise(figures)):
        if a != b:
            yield "two-digits-swapped", figures[:at] + b + a + figures[at + 2 :]


def explanations(
    value: float, digits: int, *, expected: float, sigma: float, most: float, prints: Callable[[float], bool]
) -> tuple[Slip, ...]:
    """The slips that explain a value, the likeliest first; one alone where it is the only likely one.

    Parameters
    ----------
    value, expected : float
        As typed, and as the rest of the table expects. [any unit]
    digits : int
        Significant digits printed. [no unit]
    sigma : float
        Standard uncertainty of the expectation, in ln R. [no unit]
    most : float
        How far a row that belongs may lie from the expectation, in ln R. [no unit]
    prints : function
        Whether the table prints its rows as finely as such a value. [no unit]

    Returns
    -------
    tuple of Slip
        None, one, or several that cannot be told apart.
    """
    likely = {}
    for slip, half in edits(value, digits):
        off = log(slip.restored / expected)
        if abs(off) <= most and prints(slip.restored):
            likely[slip.restored] = (_chance(off, half, sigma), slip)
    ranked = sorted(likely.values(), key=lambda pair: -pair[0])
    total = sum(chance for chance, _ in ranked)
    if ranked and ranked[0][0] >= _SURE * total:
        return (ranked[0][1],)
    return tuple(slip for chance, slip in ranked if chance > (1 - _SURE) / 10 * total)


def _chance(off: float, half: float, sigma: float) -> float:
    """Chance that the true value, spread by sigma about the expectation, rounds to one that lies `off` from it."""
    scale = sqrt(2) * sigma
    return erf((off + half) / scale) - erf((off - half) / scale)


def temperature_edits(t_c: float) -> Iterator[Slip]:
    """Temperatures that one slip may have turned into this one."""
    yield Slip("sign-missed", -t_c)
    typed, sign = f"{abs(t_c):.4f}".rstrip("0").rstrip("."), -1.0 if t_c < 0 else 1.0
    figures, place = typed.replace(".", ""), len(typed.partition(".")[2])
    for _, other in (*_digit_edits("0" + figures), *_swaps("0" + figures)):
        yield Slip("temperature-mistyped", sign * float(f"{int(other)}e-{place}"))
