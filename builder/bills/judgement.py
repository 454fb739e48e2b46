"""A bill of materials against the ledger: every finding, line by line, and what is missing."""

from __future__ import annotations

from collections import Counter, defaultdict
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from builder.bills.bill import Bill
from builder.bills.boards import Board, reference
from builder.bills.finding import Finding, Kind, Severity
from builder.bills.numbers import Numbers, is_maker
from builder.bills.placement import placement
from builder.bills.recognition import Recognised, recognised
from builder.bills.spelling import word_key
from builder.problems import clipped, count_text, one_line
from builder.records import Catalog, PartRecord

# Item numbers count the lines of many bills; what is longer is meant as an own number.
_LONGEST_COUNT = 4


@dataclass(frozen=True, eq=False)
class Judgement:
    """The findings of a bill in the order of its lines, those without a line last."""

    board: Board | None
    findings: tuple[Finding, ...]
    thermistor_lines: int
    other_lines: int

    def count(self, severity: Severity) -> int:
        """How many findings have a severity."""
        return sum(finding.severity == severity for finding in self.findings)


def judgement(bill: Bill, catalog: Catalog, board: Board | None) -> Judgement:
    """What is to be said of a bill; without a board nothing is said of its positions."""
    numbers = Numbers(catalog.parts)
    items = [recognised(line, numbers, board) for line in bill.lines]
    thermistors = [item for item in items if item.is_thermistor]
    holders = _holders(items)
    found = [finding for item in items for finding in _of_line(item, numbers, board, holders)]
    found += _missing(thermistors, numbers, board)
    return Judgement(board, tuple(found), len(thermistors), len(items) - len(thermistors))


def _holders(items: Sequence[Recognised]) -> Mapping[str, list[Recognised]]:
    """The lines that fit something at each reference, where one of them is a thermistor's."""
    found: defaultdict[str, list[Recognised]] = defaultdict(list)
    for item in items:
        if item.line.is_fitted:
            for name in item.line.references:
                found[name.casefold()].append(item)
    return {name: held for name, held in found.items() if any(item.is_thermistor for item in held)}


def _of_line(
    item: Recognised, numbers: Numbers, board: Board | None, holders: Mapping[str, list[Recognised]]
) -> Iterator[Finding]:
    if not item.line.is_fitted:
        yield from _not_fitted(item, board, holders)
        return
    for source in item.sources:
        if source.part is None:
            yield from _unknown(source, numbers)
        else:
            yield from _of_part(source, source.part, board)
    if item.is_thermistor:
        yield from _quantity(item)
    yield from _repeated(item, holders)


def _found(item: Recognised, kind: Kind, severity: Severity, message: str, where: str | None = None) -> Finding:
    line = item.line
    listed = ", ".join(line.references) if where is None else where
    part = item.part.part.part if item.part else None
    number = one_line(line.number or line.own_number)
    told = f"{clipped(line.column)}: {message}" if line.column else message
    return Finding(line.line, one_line(listed), number, part, kind, severity, told)


def _not_fitted(item: Recognised, board: Board | None, holders: Mapping[str, list[Recognised]]) -> Iterator[Finding]:
    for name in item.line.references or ("",):
        place = board.at.get(name.casefold()) if board else None
        if place is not None and name.casefold() not in holders:
            fitted = f"{place.position.position} is made for {place.position.fitted}"
            message = (
                f"the line says that nothing is fitted; {fitted}. Fit it, or take the position out of the records."
            )
            yield _found(item, "not-fitted", "blocks", message, name)
        elif item.is_thermistor:
            yield _found(item, "not-fitted", "ok", "the line says that nothing is fitted.", name)


def _unknown(item: Recognised, numbers: Numbers) -> Iterator[Finding]:
    severity: Severity = "blocks" if item.is_thermistor else "warning"
    alike = numbers.alike(item.line.number)
    if item.is_thermistor or alike:
        yield _found(item, "unknown-number", severity, f"{_what_is_unknown(item)} {_cure(item, alike)}")


def _what_is_unknown(item: Recognised) -> str:
    line, several = item.line, item.by_number or item.by_own_number
    shown = clipped(line.number or line.own_number)
    if len(several) > 1:
        return f"{shown} is the number of {count_text(len(several), 'part')}: {_listed(several)}."
    if several:
        return f"{shown} is not a part of the catalog, while {clipped(line.own_number)} is {_listed(several)}."
    return f"{shown} is not a part of the catalog." if shown else "a thermistor's line has no part number."


def _cure(item: Recognised, alike: Sequence[str]) -> str:
    number = word_key(item.line.number)
    if len(item.by_number or item.by_own_number) > 1:
        return "Name the maker too."
    if not alike:
        return "Give the number of a part that has a record, or write its record."
    mean = f"Did you mean {' or '.join(map(clipped, alike))}?"
    is_longer = len(alike) == 1 and number.startswith(word_key(alike[0])) and number != word_key(alike[0])
    return f"{mean} If the rest is its packaging, add it to the record's packaging_suffixes." if is_longer else mean


def _listed(parts: Iterable[PartRecord]) -> str:
    return clipped(", ".join(part.name for part in parts), 120)


def _of_part(item: Recognised, part: PartRecord, board: Board | None) -> Iterator[Finding]:
    line, own = item.line, part.part.own_number
    if item.differs:
        shown = f"{clipped(line.own_number)} is {_listed(item.by_own_number)}, {clipped(line.number)} is {part.name}."
        yield _found(item, "own-number-differs", "blocks", f"{shown} Correct one of the two numbers.")
    elif line.own_number and not item.by_own_number and own and not _counts(line.own_number):
        shown = f"{clipped(line.own_number)} is not the own number of {part.name}, {own}."
        yield _found(item, "own-number-differs", "warning", f"{shown} Correct it in the bill or in the record.")
    if line.maker and not is_maker(line.maker, part):
        shown = f"{clipped(line.maker)} is not the maker on record, {part.part.maker}."
        yield _found(item, "maker-differs", "blocks", f"{shown} Fit that maker's part, or correct the bill.")
    for name in line.references or ("",):
        yield _found(item, *placement(part, name, board), name)


def _counts(number: str) -> bool:
    return number.isdigit() and len(number) <= _LONGEST_COUNT


def _quantity(item: Recognised) -> Iterator[Finding]:
    line, count = item.line, len(item.line.references)
    if not line.quantity or not count or line.count == count:
        return
    if line.count is None:
        message = (
            f"{clipped(line.quantity)} is not a whole number. Write {count}, for its {count_text(count, 'reference')}."
        )
    else:
        message = f"the quantity is {line.count}, for {count_text(count, 'reference')}. Correct one of the two."
    yield _found(item, "quantity", "warning", message)


def _repeated(item: Recognised, holders: Mapping[str, list[Recognised]]) -> Iterator[Finding]:
    """References that an earlier line has already, or that this one has twice."""
    typed = {name.casefold(): name for name in item.line.references}
    for key, times in Counter(name.casefold() for name in item.line.references).items():
        name, held = typed[key], holders.get(key, [item])
        if held[0] is not item:
            message = f"{name} stands on line {held[0].line.line} already. Take it from one of the two."
            yield _found(item, "repeated-reference", "blocks", message, name)
        elif times > 1 and item.is_thermistor:
            message = f"{name} stands {times} times on the line. Leave it once."
            yield _found(item, "repeated-reference", "blocks", message, name)


def _missing(items: Iterable[Recognised], numbers: Numbers, board: Board | None) -> Iterator[Finding]:
    """The board's positions that no line names."""
    named = {name.casefold() for item in items for name in item.line.references}
    for place in board.places if board else ():
        if reference(place).casefold() not in named:
            position = place.position
            part = next((found.part.part for found in numbers.parts(position.fitted)), None)
            message = f"{position.position} is not on the bill; it is made for {position.fitted}. Add it, or take the position out of the records."
            yield Finding(None, reference(place), "", part, "missing-reference", "blocks", message)
