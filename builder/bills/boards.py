"""The boards that the catalog has positions on, and which of them a bill is of."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

from builder.problems import clipped, nearest
from builder.records import Catalog, PositionRecord


class UnknownBoard(LookupError):
    """No board goes by a name, several do, or none was named where that matters; the message says what to do."""


@dataclass(frozen=True, eq=False)
class Board:
    """The positions whose names begin alike: the part before the last "/" is the board's short name."""

    short_name: str
    places: tuple[PositionRecord, ...]

    @cached_property
    def at(self) -> Mapping[str, PositionRecord]:
        """Its positions by their references, lower case."""
        return {reference(place).casefold(): place for place in self.places}

    @property
    def names(self) -> frozenset[str]:
        """What it goes by, lower case: its short name, and what its positions call it."""
        return frozenset(name.casefold() for name in (self.short_name, *(p.position.board for p in self.places)))


def reference(place: PositionRecord) -> str:
    """A position's reference designator, without its board."""
    return place.position.position.rpartition("/")[2]


def boards(catalog: Catalog) -> tuple[Board, ...]:
    """Every board, in the order of the positions."""
    found: dict[str, list[PositionRecord]] = {}
    for place in catalog.positions:
        found.setdefault(place.position.position.rpartition("/")[0] or place.position.board, []).append(place)
    return tuple(Board(name, tuple(places)) for name, places in found.items())


def named_board(known: Sequence[Board], name: str) -> Board:
    """The board that goes by a name, upper and lower case alike.

    Raises
    ------
    UnknownBoard
        None does, or several do.
    """
    wanted = name.strip().casefold()
    found = [board for board in known if board.short_name.casefold() == wanted]
    found = found or [board for board in known if wanted in board.names]
    if len(found) == 1:
        return found[0]
    if found:
        raise UnknownBoard(f"{clipped(name)} is the name of several boards: {_listed(found)}. Use one of these.")
    near = nearest(name, sorted({n for board in known for n in (board.short_name, board.places[0].position.board)}))
    raise UnknownBoard(f"{clipped(name)} is not a board of the catalog.{near or f' Its boards: {_listed(known)}.'}")


def guessed_board(known: Sequence[Board], references: Iterable[str]) -> Board | None:
    """The one board that has all the references that any board has; None where there are no boards.

    Raises
    ------
    UnknownBoard
        Several boards have them, no single one has them all, or no board has any.
    """
    if not known:
        return None
    anywhere = {name for board in known for name in board.at}
    wanted = {name.casefold() for name in references} & anywhere
    if not wanted:
        raise UnknownBoard("no reference of the bill is one of the catalog's positions.")
    found = [board for board in known if wanted <= board.at.keys()]
    if len(found) == 1:
        return found[0]
    shown = ", ".join(sorted(name.upper() for name in wanted))
    which = f"several boards: {_listed(found)}" if found else "no single board of the catalog"
    raise UnknownBoard(f"{clipped(shown)} may stand on {which}.")


def _listed(found: Iterable[Board]) -> str:
    return ", ".join(board.short_name for board in found)
