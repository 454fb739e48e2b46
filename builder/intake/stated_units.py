"""The units that the file or the options state, and where."""

from __future__ import annotations

from builder.intake.choices import Choices
from builder.intake.columns import Layout
from builder.intake.numerals import temperature_unit
from builder.intake.sheets import Sheet
from builder.intake.unreadable import Unreadable


def of_resistance(sheet: Sheet, found: Layout, chosen: Choices) -> tuple[str | None, str]:
    """The unit of values that have none of their own, and where it comes from; nowhere is ''."""
    columns = found.resistance_columns
    if all(c.role == "ratio" for c in columns):
        return None, "ratios have no unit"
    headed = {c.heading.unit for c in columns if c.heading.unit}
    stated = headed or ({found.caption_resistance_unit} - {None})
    if chosen.resistance_unit and stated - {chosen.resistance_unit}:
        raise Unreadable(
            sheet.rows[0].number,
            f"the heading says {' and '.join(sorted(map(str, stated)))}, the option unit says {chosen.resistance_unit}. "
            "Leave the option out, or correct the heading.",
        )
    _check_captions(found, headed)
    bare = [c for c in columns if not c.heading.unit]
    if len(headed) > 1 and bare:
        raise Unreadable(
            sheet.rows[0].number,
            f"the headings say {' and '.join(sorted(map(str, headed)))}, but {bare[0].shown} has no unit. Write one there.",
        )
    if headed:
        if len(headed) > 1:
            return None, "each column as its heading says"
        return (
            headed.pop(),
            "as the heading says" if not bare else "as the heading that has a unit says, for all columns",
        )
    if caption := found.caption_resistance_unit:
        return caption, f"as line {found.caption_ohm_lines[caption]} says"
    if chosen.resistance_unit:
        return chosen.resistance_unit, "by the option unit"
    suffixed = all(_own_unit(row.cells[c.index]) for row in sheet.rows for c in columns if c.index < len(row.cells))
    return None, "each value has its unit behind it" if suffixed else ""


def _check_captions(found: Layout, headed: set[str]) -> None:
    """The text above the table states no other unit of resistance than the headings."""
    other = next((unit for unit in found.caption_ohm_lines if headed and unit not in headed), None)
    if other:
        raise Unreadable(
            found.caption_ohm_lines[other],
            f"line {found.caption_ohm_lines[other]} says resistances in {other}, the heading in line "
            f"{found.heading_lines[0].number} says {' and '.join(sorted(headed))}. Correct the one that is wrong.",
        )


def _own_unit(cell: str) -> bool:
    return not cell or any(c.isalpha() and c not in "eE" for c in cell)


def of_temperature(sheet: Sheet, found: Layout, chosen: Choices) -> tuple[str, str]:
    """The unit of the temperatures, and how it is known."""
    columns = [group["temperature"] for group in found.groups]
    stated = {c.heading.unit for c in columns if c.heading.unit} or ({found.caption_temperature_unit} - {None})
    if not stated:
        cells = [row.cells[c.index] for row in sheet.rows for c in columns if c.index < len(row.cells)]
        stated = {unit for cell in cells if (unit := temperature_unit(cell.lstrip("+-0123456789.,' ")))}
    if len(stated) > 1:
        raise Unreadable(
            sheet.rows[0].number,
            f"temperatures are stated in {' and '.join(sorted(map(str, stated)))}. Leave one of the columns.",
        )
    if chosen.temperature_unit:
        if stated - {chosen.temperature_unit}:
            raise Unreadable(
                sheet.rows[0].number,
                f"the file says {stated.pop()}, the option temperature_unit says {chosen.temperature_unit}. "
                "Leave the option out, or correct the heading.",
            )
        return chosen.temperature_unit, "by the option temperature_unit"
    return (str(stated.pop()), "as the file says") if stated else ("°C", "")
