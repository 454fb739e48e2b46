"""The standing that holds, and whether it lets a part be fitted at a position."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from builder.records import PartRecord, Position, PositionRecord
from builder.records.part import Standing, StandingState

APPROVING: tuple[StandingState, ...] = ("approved", "restricted")
Verdict = Literal["approved", "restricted", "proposed", "withdrawn", "undecided", "not for here", "not named here"]


@dataclass(frozen=True)
class Permission:
    """Whether a part may be fitted, and the entry that decides it (None where there is none)."""

    verdict: Verdict
    standing: Standing | None = None

    @property
    def given(self) -> bool:
        """Whether the part may be fitted."""
        return self.verdict in APPROVING


def standing_of(part: PartRecord) -> Standing | None:
    """The entry that holds for a part; None where nobody has decided."""
    return _last(part.part.standing)


def standing_at(part: PartRecord, place: PositionRecord) -> Standing | None:
    """The entry that holds for a part as an alternate at a position; None where it is no alternate, or undecided."""
    return next((_last(a.standing) for a in place.position.alternates if goes_by(part, a.part)), None)


def may_stand(part: PartRecord, place: PositionRecord | None = None) -> Permission:
    """Whether a part may be fitted at a position, or without one anywhere at all.

    At a position the part's own entry and, for an alternate, its entry there both count: either can withdraw it or
    keep it to other places. Beyond that the fitted part's own entry decides, and the alternate's entry there; no
    other part may be fitted.
    """
    own = standing_of(part)
    if place is None:
        return _by(own)
    position, here = place.position, standing_at(part, place)
    said = [standing for standing in (own, here) if standing is not None]
    for standing in said:
        if standing.state == "withdrawn":
            return _by(standing)
    for standing in said:
        if not is_for(standing, position):
            return Permission("not for here", standing)
    if goes_by(part, position.fitted):
        return _by(own)
    is_alternate = any(goes_by(part, alternate.part) for alternate in position.alternates)
    return _by(here) if is_alternate else Permission("not named here", own)


def is_for(standing: Standing, position: Position) -> bool:
    """Whether an entry's `only_for` names the position or its board, or nothing; upper and lower case alike."""
    places = (position.position.casefold(), position.board.casefold())
    return not standing.only_for or any(name.casefold() in places for name in standing.only_for)


def goes_by(part: PartRecord, name: str) -> bool:
    """Whether a name in a position's record is this part's: its number, maker and number, or own number."""
    return name.casefold() in (n.casefold() for n in (part.number, part.name, part.own_number or ""))


def _last(standings: tuple[Standing, ...]) -> Standing | None:
    return standings[-1] if standings else None


def _by(standing: Standing | None) -> Permission:
    return Permission(standing.state if standing else "undecided", standing)
