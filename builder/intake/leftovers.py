"""The lines that are no rows: which may be left out, and which look too much like a row for that."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence

from builder.intake.columns import Layout
from builder.intake.first_rows import PAGE_NUMBER, WORD, row_like
from builder.intake.heading_lines import heading_cells
from builder.intake.headings import heading, resistance_unit, temperature_unit
from builder.intake.numerals import is_numeral
from builder.intake.sheets import Sheet, SheetLine
from builder.intake.unreadable import Unreadable, clipped

_MARK = r"[*†‡§¹²³⁴⁵#]"
_EMPHASIS = re.compile(r"(?<![0-9.])(\*+)([^*]+)\1")  # Markdown's, no footnote
_MARKED = re.compile(rf"(?<=[0-9.]){_MARK}+|{_MARK}+(?=[-+]?[0-9])")


def notes(sheet: Sheet, layout: Layout) -> list[str]:
    """What is left out, with line numbers; raises at a line that may be a row."""
    first, last = sheet.rows[0].number, sheet.rows[-1].number
    above = {" ".join(line.text.split()) for line in sheet.lines if line.number < first}
    start = layout.heading_lines[0].number if layout.heading_lines else 0
    repeated: list[int] = []
    pages: list[int] = []
    others: list[str] = []
    for line in sheet.lines:
        text = " ".join(line.text.split())
        if line.is_row or line.is_empty or line in layout.heading_lines:
            continue
        if line.number > first and text in above:
            repeated.append(line.number)
            continue
        if PAGE_NUMBER.fullmatch(text):
            pages.append(line.number)
            continue
        if line.number > start:
            _check_no_row(sheet, line, inside=first < line.number < last)
        if first < line.number < last:
            _check_no_other_table(sheet, layout, line)
        others.append(f'line {line.number}: "{clipped(line.text)}"')
    return [
        *_numbered("repeated from above the table", repeated),
        *_numbered("taken as page numbers", pages),
        *_numbered(
            "footnote marks beside the values",
            [row.number for row in sheet.rows if _MARKED.search(_EMPHASIS.sub(r"\2", row.text))],
        ),
        *others,
    ]


def _numbered(what: str, lines: Sequence[int]) -> Iterator[str]:
    if lines:
        yield f"line{'s' if len(lines) > 1 else ''} {', '.join(map(str, lines))}: {what}"


def _check_no_row(sheet: Sheet, line: SheetLine, *, inside: bool) -> None:
    words = line.text.split()
    cells = [cell for cell in line.cells if cell] if len(line.cells) > 1 else words
    if not cells or not is_numeral(cells[0]):
        return
    if len(cells) == 1:
        stands_alone = len(line.cells) < 2 or not line.cells[0]  # else a temperature whose resistance is left blank
        if inside and stands_alone:
            raise Unreadable(
                line.number,
                f"{clipped(line.text)!r} is one value, where a row has {sheet.width}. Complete the row, or delete the line.",
            )
        return
    has_digit = any("0" <= c <= "9" for c in cells[1])
    in_words = sheet.aligned and WORD.search(line.text)
    if is_numeral(cells[1]) or all(map(is_numeral, words[:2])) or (has_digit and not in_words):
        raise row_like(line, cells)


def _check_no_other_table(sheet: Sheet, layout: Layout, line: SheetLine) -> None:
    """A heading between the rows may only say what the first one says."""
    read = [c.heading for group in layout.groups for c in group.values()]
    ohm_units = {h.unit for h in read if h.role != "temperature"} | {layout.caption_resistance_unit}
    t_units = {h.unit for h in read if h.role == "temperature"} | {layout.caption_temperature_unit}
    ohm_unit, t_unit = resistance_unit(line.text, line.number), temperature_unit(line.text)
    cells = heading_cells(sheet, line) or []
    said = [(h.role, h.unit) for h in (heading(cell, line.number) for cell in cells)]
    said_first = [(h.role, h.unit) for h in (heading(cell, line.number) for cell in _first_heading(sheet, layout))]
    differs = any(role == "temperature" for role, _ in said) and said != said_first
    if differs or (ohm_unit and ohm_unit not in ohm_units) or (t_unit and t_unit not in t_units):
        raise Unreadable(
            line.number,
            f"the heading {clipped(line.text)!r} between the rows says something else than the first heading. "
            "Give the two tables in separate files, or delete the heading if it means the same.",
        )


def _first_heading(sheet: Sheet, layout: Layout) -> list[str]:
    return heading_cells(sheet, layout.heading_lines[-1]) or [] if layout.heading_lines else []
