"""Rules about stated coefficients and B-values: do they fit the rest of the record?"""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import chain, pairwise

import numpy as np

from builder.crosschecks.subject import Check, Subject
from builder.curves import Curve
from builder.curves.b_value import COLD_BENDS_K2, HOT_BENDS_K2
from builder.part_curve import stated_curve, whole_steps_c
from builder.problems import Problem
from builder.records.part import BValue, SteinhartHart
from builder.units import celsius, kelvin, number_text, range_text, resistance_text, signed_text, temperature_text

# Coefficients printed with four digits cost 0.02 to 0.06 K, and B-values printed without decimals as much again.
_WITHIN_K = 0.3
# A wrong unit is off by tens of kelvin; read the right way the rated temperature comes back far better than this.
_UNIT_WITHIN_K = 3.0
# Well beyond the bends of the fourteen public tables, so that only a wrong figure gets there; two B-values, each
# rounded to a whole kelvin, may lie 1 K closer or farther apart.
_LIKELY_BENDS_K2 = (-6e5, 0.5e5)
_B_ROUNDING_K = 1.0


def _units_look_wrong(subject: Subject) -> Iterator[Problem]:
    stated, rated = subject.record.part.steinhart_hart, subject.record.part.rated
    if stated is None or abs(_reads_c(stated, math.log(rated.resistance_ohm)) - rated.at_c) < _UNIT_WITHIN_K:
        return
    for arguments, advice in _other_arguments(rated.resistance_ohm).items():
        if abs(_reads_c(stated, arguments) - rated.at_c) < _UNIT_WITHIN_K:
            yield subject.record.source.problem(("steinhart_hart",), "units-look-wrong", advice)
            return


def _other_arguments(rated_ohm: float) -> dict[float, str]:
    """What coefficients may have been made for instead of ln R in ohm, and how to put them right."""
    return {
        0.0: "the coefficients are made for R over the rated resistance, not for ohms. Ask for coefficients in ohm.",
        math.log10(rated_ohm): "the coefficients are made for log10 R, not ln R. Divide b by 2.302585 and c by 12.208.",
        math.log(rated_ohm / 1000): "the coefficients are made for R in kΩ, not Ω. Ask for coefficients in ohm.",
    }


def _reads_c(stated: SteinhartHart, argument: float) -> float:
    """Temperature that the coefficients give for an argument in place of ln R; nan where they give none."""
    x_per_k = stated.a + stated.b * argument + stated.c * argument**3
    return celsius(1 / x_per_k) if x_per_k > 0 else math.nan


def _coefficients_differ(subject: Subject) -> Iterator[Problem]:
    part, source = subject.record.part, subject.record.source
    stated = part.steinhart_hart
    told = chain(_units_look_wrong(subject), _coefficients_make_no_curve(subject))
    if stated is None or any(True for _ in told):
        return
    off_k = _reads_c(stated, math.log(part.rated.resistance_ohm)) - part.rated.at_c
    if not abs(off_k) <= _WITHIN_K:
        read = "give no temperature" if math.isnan(off_k) else f"read {temperature_text(part.rated.at_c + off_k, 4)}"
        message = (
            f"the coefficients {read} at the rated resistance, {resistance_text(part.rated.resistance_ohm)} at "
            f"{temperature_text(part.rated.at_c)}. Compare both with the data sheet."
        )
        yield source.problem(("steinhart_hart",), "rated-differs", message, "warning")
    yield from _table_differs(subject, stated)
    yield from _b_values_differ(subject, stated)


def _table_differs(subject: Subject, stated: SteinhartHart) -> Iterator[Problem]:
    curve = subject.curve
    if curve is None or curve.curve.basis != "table":
        return
    low, high = max(stated.span_c[0], curve.curve.span_c[0]), min(stated.span_c[1], curve.curve.span_c[1])
    if low >= high:
        return
    t_c = whole_steps_c((low, high), 1.0)
    off_k = stated_curve(stated).extended_temperature_c(curve.curve.resistance_ohm(t_c)) - t_c
    worst = int(np.argmax(np.abs(np.nan_to_num(off_k, nan=np.inf))))
    at, off = temperature_text(float(t_c[worst])), float(off_k[worst])
    if not abs(off) <= _WITHIN_K:
        read = (
            f"give no temperature at {at}, where the table has a resistance"
            if math.isnan(off)
            else f"read {signed_text(off)} K off the table at {at}, the most from {range_text((low, high))}"
        )
        message = f"the coefficients {read}. Compare both with the data sheet."
        yield subject.record.source.problem(("steinhart_hart",), "coefficients-differ", message, "warning")


def _b_values_differ(subject: Subject, stated: SteinhartHart) -> Iterator[Problem]:
    """Judged in kelvin at the pair's other temperature, where the record has no table to judge by."""
    part = subject.record.part
    if part.r_t_table is not None:
        return
    curve = stated_curve(stated)
    for i, b in enumerate(part.b_values):
        computed_k = curve.b_value_k(*b.between_c)
        near_k, far_k = (kelvin(t_c) for t_c in sorted(b.between_c, key=lambda t_c: abs(t_c - part.rated.at_c)))
        off_k = (computed_k / b.b_k - 1) * abs(1 / near_k - 1 / far_k) * far_k**2
        if abs(off_k) > _WITHIN_K:  # not where the coefficients give no number
            message = (
                f"{number_text(b.b_k)} K, where the coefficients give {number_text(computed_k, 5)} K: "
                f"{number_text(abs(off_k), 2)} K apart at {temperature_text(celsius(far_k))}. Compare both with the data sheet."
            )
            yield subject.record.source.problem(("b_values", i, "b_k"), "b-differs", message, "warning")


def _coefficients_make_no_curve(subject: Subject) -> Iterator[Problem]:
    stated = subject.record.part.steinhart_hart
    if stated is not None and not _falls(stated_curve(stated), stated.span_c):
        yield _no_curve(subject, "steinhart_hart", "the coefficients give", stated.span_c)


def _figures_make_no_curve(subject: Subject) -> Iterator[Problem]:
    part, made = subject.record.part, subject.curve
    if made is None or made.curve.basis == "steinhart-hart":
        return
    low_c, high_c = zip(made.curve.span_c, made.operating_c, strict=True)
    used_c = min(low_c), max(high_c)
    if not _falls(made.curve, used_c):
        if made.curve.basis == "table":
            yield _no_curve(subject, "r_t_table", "the first and last rows give", used_c)
        else:
            used = (part.b_values_at_rated() or part.b_values)[: 1 if made.curve.basis == "b-value" else None]
            values = " and ".join(map(_b_text, used))
            yield _no_curve(subject, "b_values", f"{values} {'give' if used[1:] else 'gives'}", used_c)


def _falls(curve: Curve, span_c: tuple[float, float]) -> bool:
    """Whether a curve has a resistance everywhere in a range, lower from kelvin to kelvin."""
    r_ohm = curve.resistance_ohm(whole_steps_c(span_c, 1.0))
    return bool(np.isfinite(r_ohm).all() and (np.diff(r_ohm) < 0).all())


def _no_curve(subject: Subject, field: str, what: str, span_c: tuple[float, float]) -> Problem:
    message = (
        f"{what} no resistance that falls with temperature everywhere from {range_text(span_c)}. "
        "Compare them with the data sheet."
    )
    return subject.record.source.problem((field,), "no-curve-here", message)


def _b_order(subject: Subject) -> Iterator[Problem]:
    part = subject.record.part
    for before, after in pairwise(part.b_values_at_rated()):
        if part.other_c(before) > part.rated.at_c and not before.b_k < after.b_k:
            how = "equal" if before.b_k == after.b_k else "in falling order"
            message = (
                f"{_b_text(before)} and {_b_text(after)} are {how}; a ceramic's "
                "B-value rises with temperature. Compare both with the data sheet: were they computed, or exchanged?"
            )
            yield _pair_problem(subject, after, "b-order", message)


def _bend_unlikely(subject: Subject) -> Iterator[Problem]:
    if any(True for check in (_figures_make_no_curve, _b_order) for _ in check(subject)):
        return
    part = subject.record.part
    for before, after in pairwise(part.b_values_at_rated()):
        distance_per_k = 1 / kelvin(part.other_c(after)) - 1 / kelvin(part.other_c(before))
        bend_k2 = (after.b_k - before.b_k) / distance_per_k
        rounding_k2 = _B_ROUNDING_K / abs(distance_per_k)
        if not _LIKELY_BENDS_K2[0] - rounding_k2 <= bend_k2 <= _LIKELY_BENDS_K2[1] + rounding_k2:
            message = (
                f"{_b_text(before)} and {_b_text(after)} bend the curve by {number_text(float(f'{bend_k2:.2g}'))} K², where a ceramic "
                f"bends by {number_text(COLD_BENDS_K2[0])} to {number_text(HOT_BENDS_K2[1])} K². Compare both with the data sheet."
            )
            yield _pair_problem(subject, after, "bend-unlikely", message)


def _pair_problem(subject: Subject, b: BValue, rule: str, message: str) -> Problem:
    path = ("b_values", subject.record.part.b_values.index(b), "b_k")
    return subject.record.source.problem(path, rule, message, "warning")


def _b_text(b: BValue) -> str:
    return f"B{'/'.join(map(number_text, b.between_c))} = {number_text(b.b_k)} K"


CHECKS: tuple[Check, ...] = (
    _units_look_wrong,
    _coefficients_make_no_curve,
    _coefficients_differ,
    _figures_make_no_curve,
    _b_order,
    _bend_unlikely,
)
