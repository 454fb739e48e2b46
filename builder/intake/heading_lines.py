"""The lines above the rows that head the columns, divided as the columns are."""

from __future__ import annotations

import re
from collections.abc import Sequence

from builder.intake import first_rows
from builder.intake.headings import Heading, Role, heading
from builder.intake.sheets import Sheet, SheetLine
from builder.intake.unreadable import Unreadable, clipped

_MOST_HEADING_LINES = 3
_HEADERLESS = Heading("", "other", None)
_QUALIFIER = re.compile(r"[\[(].*|(?:[kKM]|kilo|mega)?-?(?:Ω|[Oo]hms?)|°[CFK]|k|R25.*|value|values", re.I)
_EXTREME = re.compile(r"(?:min|max|nom|typ|low|high|cent)\w*\.?,?", re.I)
_RESISTANCE_WORD = re.compile(r"R|Rt|res\.?|resistance", re.I)


def headings(sheet: Sheet, above: Sequence[SheetLine]) -> tuple[list[SheetLine], list[Heading], list[str]]:
    """The heading lines, one heading a column, and what had to be assumed for it."""
    _check_first_rows(sheet, above)
    lines = _heading_lines(sheet, above)
    parts = [cells for line in lines if (cells := heading_cells(sheet, line))]
    if not sheet.aligned:
        parts[:-1] = [_spread(cells) for cells in parts[:-1]]
    texts = [" ".join(" ".join(cells).split()) for cells in zip(*parts, strict=True)]
    found = [heading(text, lines[-1].number) for text in texts]
    if not sheet.aligned:
        _check_even(sheet, lines[-1] if lines else None)
    if not lines:
        return [], [_HEADERLESS] * sheet.width, []
    repeats = sheet.width // len(texts)
    tiled = f"the {len(texts)} headings hold for each of the {repeats} tables side by side"
    return lines, found * repeats, [tiled] if repeats > 1 else []


def _check_first_rows(sheet: Sheet, above: Sequence[SheetLine]) -> None:
    """No line under the heading has a figure where the rows have theirs; without a heading, no line that may be one."""
    roles: list[Role] = []
    for line in above:
        if roles and not line.is_empty:
            first_rows.check(sheet, line, roles)
        cells = heading_cells(sheet, line)
        if cells and _is_complete(cells, line.number):
            roles = [heading(cell, line.number).role for cell in cells] * (sheet.width // len(cells))
    if not roles:
        for line in _heading_lines(sheet, above) or [line for line in above if not line.is_empty][-1:]:
            first_rows.check(sheet, line, ["temperature"])


def _check_even(sheet: Sheet, heading_line: SheetLine | None) -> None:
    """Where marks divide the columns, every column is headed; where commas do, no row has a value more or less."""
    lines = [*([heading_line] if heading_line else []), *sheet.rows]
    widths = [len(line.cells) for line in lines]
    if heading_line and widths[0] < sheet.width:
        raise Unreadable(
            heading_line.number,
            f"{clipped(heading_line.text)!r} heads {widths[0]} columns, but rows have up to {sheet.width} values. "
            "Head every column, or delete what has no heading; where commas are decimal signs too, divide by semicolons.",
        )
    odd = next((line for line, width in zip(lines, widths, strict=True) if width != widths[0]), None)
    if odd and sheet.delimiter == "commas":
        raise Unreadable(
            odd.number,
            f"{clipped(odd.text)!r} has {len(odd.cells)} values between commas where the first line has {widths[0]}. "
            "Complete the row; where commas are decimal signs too, divide the columns by semicolons.",
        )


def _heading_lines(sheet: Sheet, above: Sequence[SheetLine]) -> list[SheetLine]:
    """The lines right above the rows that divide into columns as the rows do."""
    lines: list[SheetLine] = []
    width, complete = 0, False
    apart = False
    for line in reversed(above):
        if line.is_empty:
            apart = apart or not line.text.strip()
            continue
        cells = heading_cells(sheet, line)
        if not cells or (width and len(cells) != width) or len(lines) == _MOST_HEADING_LINES:
            break
        if apart and not _is_complete(cells, line.number):
            break  # a sentence above an empty line, whose words happen to divide as the columns do
        if complete and (sheet.aligned or not _spans(cells, line.number)):
            break  # a title or a figure of the part, whose words happen to divide as the columns do
        lines.insert(0, line)
        width = len(cells)
        complete = _is_complete(cells, line.number)
    return lines


def _spans(cells: Sequence[str], line: int) -> bool:
    """Whether the cells can be headings over several columns each."""
    return "" in cells and (not cells[0] or heading(cells[0], line).role == "temperature")


def _is_complete(cells: Sequence[str], line: int) -> bool:
    roles = {heading(cell, line).role for cell in cells}
    return "temperature" in roles and len(roles) > 1 and not all(map(_QUALIFIER.fullmatch, cells))


def heading_cells(sheet: Sheet, line: SheetLine) -> list[str] | None:
    """The line's cells if they can head the sheet's columns, else None."""
    width = sheet.width
    if sheet.aligned:
        wide = re.split(r" {2,}", line.text.expandtabs().strip())
        if len(wide) == width and any(heading(cell, line.number).role != "other" for cell in wide):
            return wide
        for cells in (wide, _merged(line.text.replace("|", " ").split())):
            if len(cells) > 1 and width % len(cells) == 0 and _names_temperature(cells, line.number, width):
                return cells
        return None
    cells = [*line.cells, *[""] * width][:width]
    filled = [cell for cell in cells if cell]
    return cells if len(filled) > 1 or (filled and not cells[0]) else None


def _names_temperature(cells: Sequence[str], line: int, width: int) -> bool:
    """Whether words are headings and not a sentence: one is the temperature's, once in each table side by side."""
    count = [heading(cell, line).role for cell in cells].count("temperature")
    return count == 1 or (count > 1 and len(cells) == width)


def _merged(words: Sequence[str]) -> list[str]:
    """Words put together to headings: "R min (kΩ)" is one."""
    cells: list[str] = []
    for word in words:
        last = cells[-1].split()[-1] if cells else ""
        opened = bool(cells) and cells[-1].count("(") > cells[-1].count(")")
        pair = (_EXTREME.fullmatch(word) and _RESISTANCE_WORD.fullmatch(last)) or (
            _EXTREME.fullmatch(last) and _RESISTANCE_WORD.fullmatch(word)
        )
        if cells and (opened or pair or _QUALIFIER.fullmatch(word) or last == "in" or word == "in"):
            cells[-1] += f" {word}"
        else:
            cells.append(word)
    return cells


def _spread(cells: Sequence[str]) -> list[str]:
    """A heading over several columns, repeated over the empty cells at its right."""
    spread: list[str] = []
    for cell in cells:
        spread.append(cell or (spread[-1] if spread else ""))
    return spread
