"""A file's cells as text, whatever kind of file it is."""

from __future__ import annotations

from dataclasses import dataclass

# A bill of this many lines is none; a file that claims more is not read to its end.
MOST_LINES = 100_000


@dataclass(frozen=True)
class Row:
    """One row's cells, and the line of the file or the row of the sheet that it begins on."""

    line: int
    cells: tuple[str, ...]

    def cell(self, column: int | None) -> str:
        """A cell's text on one line; empty where the row has no such cell."""
        text = " ".join(self.cells[column].split()) if column is not None and column < len(self.cells) else ""
        # What keeps a spreadsheet from taking a text for a number: ="0603".
        return text[2:-1] if text.startswith('="') and text.endswith('"') else text


@dataclass(frozen=True)
class Sheet:
    """The rows that are not empty; a text file is a sheet without a name."""

    name: str
    rows: tuple[Row, ...]
