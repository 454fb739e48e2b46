"""An alternate in place of the fitted part: what it reads there, and whether it fits."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Literal

from builder.circuit import DEFAULT_STEP_K, Budget, Thermistor, TripBudget, budget, firmware_part, thermistor
from builder.decisions.new_firmware import with_new_firmware
from builder.decisions.requirements import About, Reason, body_text, ledger_reasons, requirement_reasons
from builder.ledger import standing_at
from builder.ledger.standings import goes_by
from builder.part_curve import part_curve
from builder.records import Catalog, PartRecord, Position, PositionRecord
from builder.units import compared_text, number_text, range_text, temperature_text

Verdict = Literal["fits", "fits with new firmware", "does not fit", "undecided"]
FIRMWARE_CURES: tuple[About, ...] = ("error", "trips")


@dataclass(frozen=True, eq=False)
class Swap:
    """What an alternate does at a position.

    `before` is the fitted part with its firmware, `after` the alternate with the firmware in the field, `new_firmware`
    the alternate with firmware made for it by the same method; that is `after` again where none can be made. `reasons`
    tells all that speaks for and against, not only what decides.
    """

    position: PositionRecord
    fitted: PartRecord
    alternate: PartRecord
    before: Budget
    after: Budget
    new_firmware: Budget
    verdict: Verdict
    reasons: tuple[Reason, ...]


def swap(position: PositionRecord, alternate: PartRecord, catalog: Catalog, step_k: float = DEFAULT_STEP_K) -> Swap:
    """An alternate in place of the part that is fitted at a position.

    Parameters
    ----------
    position : PositionRecord
        The place; no unit.
    alternate : PartRecord
        The part to fit there, whether the position names it or not; no unit.
    catalog : Catalog
        Has the fitted part, and the one that the firmware was made for; no unit.
    step_k : float
        Distance of the budgets' rows. [K]

    Returns
    -------
    Swap
        With its verdict and every reason.

    Raises
    ------
    UnknownPart
        The catalog has no such part as the position names.
    """
    place = position.position
    fitted, made_for = (catalog.part(name) for name in (place.fitted, firmware_part(place)))
    field_curve, other = part_curve(made_for), thermistor(alternate)
    before = budget(place, thermistor(fitted), field_curve, step_k)
    after = budget(place, other, field_curve, step_k)
    new_firmware = _with_new_firmware(place, other, step_k)
    reasons = (
        *_reading_reasons(before, after, new_firmware),
        *_body_reasons(place, fitted, alternate),
        *requirement_reasons(place, alternate.part),
        *([Reason("power", after.overload, True)] if after.overload else []),
        *_alternate_reasons(position, alternate),
    )
    verdict = _verdict(reasons, after, new_firmware)
    return Swap(position, fitted, alternate, before, after, new_firmware or after, verdict, reasons)


def _with_new_firmware(place: Position, other: Thermistor, step_k: float) -> Budget | None:
    try:
        place = with_new_firmware(place, other.made)
    except ValueError:
        return None
    return budget(place, other, other.made, step_k)


def _verdict(reasons: tuple[Reason, ...], after: Budget, new_firmware: Budget | None) -> Verdict:
    others = [reason.against for reason in reasons if reason.about not in FIRMWARE_CURES]
    unchanged, renewed = _is_met(after), _is_met(new_firmware) if new_firmware else False
    if True in others or (unchanged is False and renewed is False):
        return "does not fit"
    if None in (*others, unchanged) or (unchanged is False and renewed is None):
        return "undecided"
    return "fits" if unchanged else "fits with new firmware"


def _is_met(found: Budget) -> bool | None:
    """Limit and trips together: False where one is missed for certain, None where one is open."""
    each = (found.meets_limit, *(trip.ok for trip in found.trips))
    return False if False in each else None if None in each else True


def _reading_reasons(before: Budget, after: Budget, new_firmware: Budget | None) -> Iterator[Reason]:
    yield _error_reason(after)
    yield from _trip_reasons(after)
    if _is_met(after) is False:
        yield from _new_firmware_reasons(after, new_firmware)
    for reason in (_error_reason(before), *_trip_reasons(before)):
        if reason.against:
            yield Reason(reason.about, f"the fitted part itself: {reason.message}", False)
    yield from _fault_reasons(after)


def _new_firmware_reasons(after: Budget, new_firmware: Budget | None) -> Iterator[Reason]:
    if new_firmware is None:
        over = range_text(after.position.range_c)
        message = f"no {after.position.firmware.method} equation fits its curve over {over}, so no firmware can be made"
        yield Reason("error", message, True)
        return
    for reason in (_error_reason(new_firmware), *_trip_reasons(new_firmware)):
        yield replace(reason, message=f"with new firmware: {reason.message}")


def _error_reason(found: Budget) -> Reason:
    worst = f"worst case {compared_text(found.worst_k, found.position.limit_k, 3)} K at {temperature_text(found.worst_at_c)}"
    limit = f"±{number_text(found.position.limit_k)} K"
    if math.isnan(found.worst_k):
        worst = f"some boards have no reading at {temperature_text(found.worst_at_c)}"
        if found.meets_limit is False:
            return Reason("error", worst, True)
    if found.meets_limit is None:
        return _open("error", f"{worst} against {limit}", found)
    compared = "is within" if found.meets_limit else "exceeds"
    return Reason("error", f"{worst} {compared} {limit}", not found.meets_limit)


def _trip_reasons(found: Budget) -> Iterator[Reason]:
    for trip, acts in zip(found.position.trips, found.trips, strict=True):
        limit = f"±{number_text(trip.within_k or found.position.limit_k)} K of {temperature_text(trip.at_c)}"
        if acts.ok is None:
            yield _open("trips", f"{_acts_text(acts)} against {limit}", found)
        else:
            yield Reason("trips", f"{_acts_text(acts)}, {'within' if acts.ok else 'not within'} {limit}", not acts.ok)


def _acts_text(trip: TripBudget) -> str:
    if math.isnan(trip.acts_from_c + trip.acts_to_c):
        return f"{trip.name} does not act on every board"
    return f"{trip.name} acts between {_degrees(trip.acts_from_c)} and {_degrees(trip.acts_to_c)}"


def _open(about: About, message: str, found: Budget) -> Reason:
    message = f"{message} is undecided, not stated: {', '.join(found.missing)}"
    return Reason(about, message, None, found.missing)


def _degrees(t_c: float) -> str:
    return temperature_text(round(t_c, 2))


def _fault_reasons(after: Budget) -> Iterator[Reason]:
    for fault, margin_codes in (("an open", after.open_margin_codes), ("a shorted", after.short_margin_codes)):
        if margin_codes <= 0:
            message = f"no code is left for telling {fault} sensor from a real temperature"
            yield Reason("sensor faults", message, False)


def _body_reasons(place: Position, fitted: PartRecord, alternate: PartRecord) -> Iterator[Reason]:
    if place.requires.size_code is None and alternate.part.body != fitted.part.body:
        message = f"its body is {body_text(alternate.part)}, the fitted part's {body_text(fitted.part)}"
        yield Reason("body", message, True)


def _alternate_reasons(position: PositionRecord, alternate: PartRecord) -> Iterator[Reason]:
    place = position.position
    if any(goes_by(alternate, entry.part) for entry in place.alternates):
        yield from ledger_reasons(f"the alternate at {place.position}", standing_at(alternate, position), place)
    else:
        yield Reason("standing", f"{place.position} does not name it as an alternate", False)
