"""Which lines of a bill are thermistors, and which part each one names."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass, replace

from builder.bills.bill import BillLine
from builder.bills.boards import Board
from builder.bills.numbers import Numbers
from builder.records import PartRecord

_SAYS_THERMISTOR = re.compile(
    r"thermistor|thermistance|termistor|heißleiter|heissleiter|\bntc(?![a-z])|\bctn(?![a-z])", re.I
)
_SAYS_PTC = re.compile(r"\bptc(?![a-z])|\bctp(?![a-z])", re.I)


@dataclass(frozen=True, eq=False)
class Recognised:
    """A line with the part that it names; None where it names none, or does not say which.

    `by_number` and `by_own_number` are the parts that the two numbers name; `seconds` is the same of each second source.
    """

    line: BillLine
    part: PartRecord | None
    by_number: tuple[PartRecord, ...]
    by_own_number: tuple[PartRecord, ...]
    is_thermistor: bool
    seconds: tuple[Recognised, ...] = ()

    @property
    def sources(self) -> tuple[Recognised, ...]:
        """All that the line names, the second sources too; itself alone where there is none of them."""
        return (self, *self.seconds) if self.line.is_numbered or not self.seconds else self.seconds

    @property
    def differs(self) -> bool:
        """Whether the two numbers name different parts."""
        return bool(self.by_number and self.by_own_number) and not set(self.by_number) & set(self.by_own_number)


def recognised(line: BillLine, numbers: Numbers, board: Board | None) -> Recognised:
    """What a line names, and whether it is a thermistor's: by its numbers, its description or its references."""
    first = _recognised(line, numbers)
    seconds = [_recognised(second, numbers) for second in line.seconds]
    is_thermistor = (
        any(each.is_thermistor for each in (first, *seconds))
        or _says_thermistor(line.description)
        or _is_placed(line.references, board)
    )
    marked = tuple(replace(second, is_thermistor=is_thermistor) for second in seconds)
    return replace(first, is_thermistor=is_thermistor, seconds=marked)


def _recognised(line: BillLine, numbers: Numbers) -> Recognised:
    """What the numbers alone say."""
    by_number = numbers.parts(line.number, line.maker)
    by_own_number = numbers.parts(line.own_number, line.maker)
    both = tuple(part for part in by_number if part in by_own_number)
    # The maker's number is what is bought: an internal one does not stand in for a number that nobody knows.
    meant = both or (by_number if line.number else by_own_number)
    is_known = bool(by_number or by_own_number)
    return Recognised(line, meant[0] if len(meant) == 1 else None, by_number, by_own_number, is_known)


def _says_thermistor(description: str) -> bool:
    if _SAYS_PTC.search(description) and "ntc" not in description.casefold():
        return False
    return _SAYS_THERMISTOR.search(description) is not None


def _is_placed(references: Iterable[str], board: Board | None) -> bool:
    return board is not None and any(name.casefold() in board.at for name in references)
