"""Marks on a line that say whether its part is fitted."""

from __future__ import annotations

from collections.abc import Iterable

from builder.bills.headings import NOT_FITTED, Columns, words
from builder.bills.sheet import Row
from builder.bills.spelling import word_key

_YES = words("yes y true 1 x ja j wahr oui o vrai si s verdadero fitted populated mounted bestuckt monte montado ✓ ✔")
_NOT_FITTED = NOT_FITTED | words("nb")  # as a heading, "Nb" is French for how many
_NO = words("no n false 0 nein falsch non faux falso - – — ✗ ✘")


class Marks:
    """How one bill marks what is fitted and what is not."""

    def __init__(self, rows: Iterable[Row], read: Columns) -> None:
        self._read = read
        self._yes_is_said = {column for row in rows for column in read.fitted if _mark(row, column) in _YES}

    def say_fitted(self, row: Row) -> bool:
        """Whether nothing on the line says that its part is not fitted."""
        read = self._read
        told = (*read.descriptions, *read.fitted, *(read.of.get(role) for role in ("number", "own-number", "quantity")))
        return not (
            any(_mark(row, column) not in _NO | {""} for column in read.not_fitted)
            or any(self._says_no(row, column) for column in read.fitted)
            or any(_mark(row, column) in _NOT_FITTED for column in told)
        )

    def _says_no(self, row: Row, column: int) -> bool:
        """A blank cell says no where other cells of its column say yes."""
        mark = _mark(row, column)
        return mark in _NO or (not mark and column in self._yes_is_said)


def _mark(row: Row, column: int | None) -> str:
    """A cell as marks are compared; a tick has no letters."""
    cell = row.cell(column)
    return word_key(cell) or cell
