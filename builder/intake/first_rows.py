"""A first row with a slip in it, which must not pass for one more line of the heading."""

from __future__ import annotations

import re
from collections.abc import Sequence

from builder.intake.headings import RESISTANCE_ROLES, Role, temperature_unit
from builder.intake.numerals import is_numeral, is_tolerance
from builder.intake.sheets import Sheet, SheetLine
from builder.intake.unreadable import Unreadable, clipped

PAGE_NUMBER = re.compile(
    r"[- ]*[0-9]{1,3}[- ]*|[- ]*[0-9]{1,4} ?(?:/|of|von|sur|de) ?[0-9]{1,4}[- ]*|(?:page|seite|p\.|sheet) ?[0-9]{1,4}.*",
    re.I,
)
WORD = re.compile(r"[^\W\d_]{4,}")
_DIGIT = re.compile("[0-9]")
_NAMED_FIGURE = re.compile(r"[RB]_? ?\(?[0-9]", re.I)  # R25, B25/85
_FIGURE_SHAPES = str.maketrans("OolI", "0011")


def check(sheet: Sheet, line: SheetLine, roles: Sequence[Role]) -> None:
    """Refuse a line under a heading, whose columns hold `roles`, that has a figure where the rows have theirs."""
    cells = [*line.cells] if len(line.cells) > 1 or not sheet.aligned else line.text.split()
    filled = [cell for cell in cells if cell]
    if not filled or (len(filled) == 1 and cells[0]) or PAGE_NUMBER.fullmatch(" ".join(line.text.split())):
        return
    in_words = sheet.aligned and WORD.search(line.text) is not None
    temperatures = [cell for cell, role in zip(cells, roles, strict=False) if role == "temperature"]
    resistances = [cell for cell, role in zip(cells, roles, strict=False) if role in RESISTANCE_ROLES]
    if any(map(_is_figure, temperatures)):
        refused = not in_words or any(map(_DIGIT.search, resistances))
    else:
        refused = not in_words and not any(map(_is_named, temperatures)) and any(map(_is_value, resistances))
    if refused:
        raise row_like(line, cells)


def _is_figure(cell: str) -> bool:
    """Whether a cell is a number but for one letter or any other signs; R25 and B25/85 are names."""
    bare = cell.translate(_FIGURE_SHAPES)
    if is_numeral(bare):
        return not is_tolerance(bare)
    return bool(_DIGIT.search(cell)) and not _NAMED_FIGURE.match(cell) and sum(map(str.isalpha, bare)) <= 1


def _is_named(cell: str) -> bool:
    return _NAMED_FIGURE.match(cell) is not None or temperature_unit(cell, bracketed=True) is not None


def _is_value(cell: str) -> bool:
    return is_numeral(cell) and not is_tolerance(cell)


def row_like(line: SheetLine, cells: Sequence[str]) -> Unreadable:
    """The refusal of a line that may be a row."""
    wrong = next((cell for cell in cells if cell and not is_numeral(cell)), None)
    what = (
        f"but {clipped(wrong)!r} cannot be read as one of its values" if wrong else "but is not divided as the rows are"
    )
    return Unreadable(
        line.number,
        f"{clipped(line.text)!r} looks like a row, {what}. Correct it, or delete the line or the column.",
    )
