"""Lines to cells, under each way of dividing columns that the file may use."""

from __future__ import annotations

import csv
import re
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property

from builder.intake.decoding import Line
from builder.intake.numerals import PLUS_MINUS, SUFFIX, is_numeral
from builder.intake.unreadable import Unreadable, clipped

_RULE = re.compile(r"[\s|:;,+=_-]*")
_BLANK_CELLS = {"-", "--", "---", "—", "n/a", "N/A", "na", "..", "..."}
_MARKS = "*†‡§¹²³⁴⁵# \"'"
_UNIT_GAP = re.compile(rf"(?<=[0-9.]) +(?={SUFFIX}(?: |$|\t))")
_SIGN_GAP = re.compile(rf"({PLUS_MINUS}) +|((?:^| )-) (?=[0-9])")


@dataclass(frozen=True)
class SheetLine:
    """One line divided into cells; a row when every cell that is not blank is a number, two at least."""

    number: int
    text: str
    cells: tuple[str, ...]

    @cached_property
    def is_row(self) -> bool:
        """Whether the line holds two or more figures and nothing else."""
        filled = [cell for cell in self.cells if cell]
        return len(filled) >= 2 and all(map(is_numeral, filled))

    @property
    def is_empty(self) -> bool:
        """Whether the line holds nothing but blanks and ruling."""
        return _RULE.fullmatch(self.text) is not None


@dataclass(frozen=True)
class Sheet:
    """The whole file divided one way."""

    delimiter: str
    aligned: bool  # cells take their column from their order, since nothing marks an empty one
    lines: tuple[SheetLine, ...]

    @cached_property
    def rows(self) -> list[SheetLine]:
        """The lines that are rows of figures."""
        return [line for line in self.lines if line.is_row]

    @cached_property
    def width(self) -> int:
        """The number of columns that hold something."""
        return max(max(i for i, cell in enumerate(row.cells) if cell) + 1 for row in self.rows)


def sheets(lines: Sequence[Line]) -> list[Sheet]:
    """The divisions under which the file has the most rows, the most explicit one first."""
    divided = [
        Sheet(name, aligned, tuple(SheetLine(line.number, line.text, _cells(split, line.text)) for line in lines))
        for name, aligned, split in _DIVISIONS
    ]
    counts = [len(sheet.rows) for sheet in divided]
    most = max(counts)
    if most == 0:
        return []
    for sheet, count in zip(divided[:_MARKED], counts, strict=False):
        # Bars, tabs and semicolons stand in no number: where half the rows have them, they divide the columns.
        if 2 * count >= most:
            return [sheet]
    best = [sheet for sheet, count in zip(divided, counts, strict=True) if count == most]
    if len({sheet.aligned for sheet in best}) > 1:
        first = best[0].rows[0]
        raise Unreadable(
            first.number,
            f"{clipped(first.text)!r} may be divided by its comma or by its space. Divide the columns by semicolons.",
        )
    return best


def _cells(split: Callable[[str], Iterator[str]], text: str) -> tuple[str, ...]:
    return tuple(_cleaned(cell) for cell in split(text))


def _cleaned(cell: str) -> str:
    bare = cell.strip(_MARKS)
    return "" if bare in _BLANK_CELLS else _closed(bare)


def _closed(text: str) -> str:
    """The text with signs closed up to their numbers."""
    return _SIGN_GAP.sub(lambda sign: sign[1] or sign[2], text)


def _bars(text: str) -> Iterator[str]:
    yield from text.strip().removeprefix("|").removesuffix("|").split("|") if "|" in text else ()


def _separated(mark: str) -> Callable[[str], Iterator[str]]:
    def split(text: str) -> Iterator[str]:
        try:
            yield from next(csv.reader([text], delimiter=mark, skipinitialspace=True), []) if mark in text else ()
        except csv.Error:  # a cell of more than 128 KiB is no cell of a table
            return

    return split


def _wide_spaces(text: str) -> Iterator[str]:
    yield from re.split(r" {2,}", _joined(text).strip())


def _spaces(text: str) -> Iterator[str]:
    yield from filter(None, _joined(text).split(" "))


def _joined(text: str) -> str:
    return _closed(_UNIT_GAP.sub("", text.replace("|", "  ").expandtabs()))


_DIVISIONS: tuple[tuple[str, bool, Callable[[str], Iterator[str]]], ...] = (
    ("bars", False, _bars),
    ("tabs", False, _separated("\t")),
    ("semicolons", False, _separated(";")),
    ("commas", False, _separated(",")),
    ("two or more spaces", True, _wide_spaces),
    ("spaces", True, _spaces),
)
_MARKED = 3
