"""Rules about which part stands where: at positions whose record names what may not be fitted there."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from builder.ledger import APPROVING, Entry, is_for, standing_of
from builder.problems import Problem, clipped, errors, nearest
from builder.records import Catalog, PositionRecord
from builder.records.part import Standing


def fitting_findings(catalog: Catalog, holding: Sequence[Entry]) -> Iterator[Problem]:
    """What is wrong or doubtful about parts at positions; `holding` are the entries that hold."""
    for place in catalog.positions:
        yield from _fitted(place, catalog)
        yield from _repeated(place, catalog)
    for entry in holding:
        if entry.position is not None and entry.standing.state in APPROVING:
            yield from _approved_here(entry, entry.position)
    # While a record cannot be read, its position cannot be told from one that is not there.
    if not errors(catalog.problems):
        yield from _unknown_places(catalog, holding)


def _fitted(place: PositionRecord, catalog: Catalog) -> Iterator[Problem]:
    part = catalog.known_part(place.position.fitted)
    own = standing_of(part) if part else None
    if part is None or own is None:
        return
    if own.state == "withdrawn":
        message = f"{part.name} is withdrawn since {own.on.isoformat()}. Fit another part, or an approved alternate."
        yield place.source.problem(("fitted",), "withdrawn-fitted", message, "warning")
    elif not is_for(own, place.position):
        message = f"{part.name} is {_only_for(own)}. Fit another part, or append an entry to its standing that names this position."
        yield place.source.problem(("fitted",), "not-for-here", message)


def _approved_here(entry: Entry, place: PositionRecord) -> Iterator[Problem]:
    own, name, state = standing_of(entry.part), entry.part.name, entry.standing.state
    if own is not None and own.state == "withdrawn":
        message = (
            f"{state} here, where {name} is withdrawn since {own.on.isoformat()}. "
            "Append an entry that withdraws it here too, or approve the part again."
        )
        yield entry.problem(("state",), "approved-though-withdrawn", message)
    elif own is not None and not is_for(own, place.position):
        message = f"{state} here, where {name} is {_only_for(own)}. Append an entry to one of the two."
        yield entry.problem(("state",), "not-for-here", message)
    if not is_for(entry.standing, place.position):
        message = f"{_listed(entry.standing)} is not this position. Name it or its board, or leave only_for out: the entry is for here."
        yield entry.problem(("only_for",), "not-for-here", message)


def _repeated(place: PositionRecord, catalog: Catalog) -> Iterator[Problem]:
    seen = {id(catalog.known_part(place.position.fitted)): "is the fitted part"}
    for i, alternate in enumerate(place.position.alternates):
        part = catalog.known_part(alternate.part)
        if part is not None and id(part) in seen:
            message = f"{clipped(alternate.part)} {seen[id(part)]} already. Keep one, with all its entries."
            yield place.source.problem(("alternates", i, "part"), "alternate-repeated", message)
        seen.setdefault(id(part), "is an alternate")


def _unknown_places(catalog: Catalog, holding: Sequence[Entry]) -> Iterator[Problem]:
    places = [place.position for place in catalog.positions]
    known = {name.casefold(): name for place in places for name in (place.position, place.board)}
    for entry in holding:
        for i, name in enumerate(entry.standing.only_for):
            if name.casefold() not in known:
                cure = nearest(name, known.values()) or " Check the name; the part may be fitted nowhere by it."
                message = f"{clipped(name)} is no position and no board of the catalog.{cure}"
                yield entry.problem(("only_for", i), "only-for-unknown", message, "warning")


def _only_for(standing: Standing) -> str:
    return f"only for {_listed(standing)} since {standing.on.isoformat()}"


def _listed(standing: Standing) -> str:
    return clipped(" and ".join(standing.only_for))
