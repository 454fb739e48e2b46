"""Which column is which: the headings above the rows, matched to the cells below them."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise

from builder.intake import heading_lines
from builder.intake.headings import (
    RESISTANCE_ROLES,
    Heading,
    Role,
    caption_unit,
    temperature_heading,
    temperature_unit,
)
from builder.intake.numerals import is_tolerance
from builder.intake.rated import named_ohms
from builder.intake.sheets import Sheet, SheetLine
from builder.intake.unreadable import Unreadable, clipped

_UNITS_PREFERRED = ("°C", "K", "°F", None)


@dataclass(frozen=True)
class Column:
    """A column by its place from the left, counted from nought, and what its heading says."""

    index: int
    heading: Heading

    @property
    def role(self) -> Role:
        """What the column holds."""
        return self.heading.role

    @property
    def shown(self) -> str:
        """The column as a person finds it."""
        return f'"{clipped(self.heading.text)}"' if self.heading.text else f"column {self.index + 1}"


@dataclass(frozen=True)
class Layout:
    """The columns that are read, in groups of one temperature each, and what the lines above them say."""

    groups: tuple[dict[Role, Column], ...]
    ignored: tuple[Column, ...]
    heading_lines: tuple[SheetLine, ...]
    caption_ohm_lines: dict[str, int]  # the units of resistance that text above the table states, and where
    caption_temperature_unit: str | None
    assumed: tuple[str, ...]

    @property
    def caption_resistance_unit(self) -> str | None:
        """The one unit of resistance that the text above the table states."""
        return _one(set(self.caption_ohm_lines))

    @property
    def resistance_columns(self) -> list[Column]:
        """The columns of resistances, group by group."""
        return [c for group in self.groups for role, c in group.items() if role in RESISTANCE_ROLES]


def layout(sheet: Sheet, chosen: str | None) -> Layout:
    """The columns of a sheet; `chosen` picks among several resistances by heading or by number from 1."""
    above = [line for line in sheet.lines if line.number < sheet.rows[0].number]
    lines, headings, assumed = heading_lines.headings(sheet, above)
    columns = _by_content(sheet, [Column(i, h) for i, h in enumerate(headings)])
    columns, more = _with_temperature(columns, sheet)
    columns = _chosen(columns, chosen) if chosen else _promoted(columns, sheet)
    used = _one_temperature([c for c in columns if c.role == "temperature" or c.role in RESISTANCE_ROLES])
    groups = [_group(group, sheet) for group in _divided(used)]
    kept = _alike([g for g in groups if len(g) > 1], sheet.rows[0].number)
    captions = [line for line in above if line not in lines]
    _check_one_part(kept, sheet, captions)
    read = {c.index for group in kept for c in group.values()}
    return Layout(
        tuple(kept),
        tuple(c for c in columns if c.index not in read),
        tuple(lines),
        {unit: line.number for line in captions if (unit := caption_unit(line.text, line.number))},
        _one({unit for line in captions if (unit := temperature_unit(line.text))}),
        (*assumed, *more),
    )


def _one(found: set[str]) -> str | None:
    return found.pop() if len(found) == 1 else None


def _by_content(sheet: Sheet, columns: Sequence[Column]) -> list[Column]:
    """Columns whose every value says by its own marks that it is a tolerance are tolerances."""
    return [
        _set_role(c, "tolerance")
        if (cells := [row.cells[c.index] for row in sheet.rows if c.index < len(row.cells) and row.cells[c.index]])
        and all(map(is_tolerance, cells))
        else c
        for c in columns
    ]


def _with_temperature(columns: Sequence[Column], sheet: Sheet) -> tuple[list[Column], list[str]]:
    if any(c.role == "temperature" for c in columns):
        return list(columns), []
    plain = [c for c in columns if c.role != "tolerance"]
    # Where commas divide, "25,5,10,4" may be two decimals: nothing may be taken to alternate there.
    alternating = sheet.delimiter != "commas" and len(plain) > 2 and len(plain) % 2 == 0
    if alternating and not any(c.heading.text for c in columns):
        roles: list[Role] = ["temperature", "nominal"] * (len(plain) // 2)
        assumed = f"no headings: temperature and resistance are taken to alternate over the {len(plain)} columns"
    elif len(plain) > 1 and plain[0].role == "other":
        roles = ["temperature", "nominal"] if len(plain) == 2 and plain[1].role == "other" else ["temperature"]
        assumed = "no heading names the temperature: the first column is taken as temperature"
        assumed += ", the second as resistance" if len(roles) == 2 else ""
    else:
        raise Unreadable(
            sheet.rows[0].number,
            "no column is named as temperature. Write a heading line above the rows, such as "
            "T (°C) in the temperature's column and R (kΩ) in the resistance's.",
        )
    taken = {c.index: role for c, role in zip(plain, roles, strict=False)}
    return [_set_role(c, taken[c.index]) if c.index in taken else c for c in columns], [assumed]


def _chosen(columns: Sequence[Column], chosen: str) -> list[Column]:
    """The columns with every resistance that is not the chosen one set aside."""
    offered = [c for c in columns if c.role in RESISTANCE_ROLES or c.role == "other"]
    if chosen.strip().isdecimal():
        picked = {c.index for c in offered if str(c.index + 1) == chosen.strip()}
    else:
        text = chosen.strip().casefold()
        exact = {c.index for c in offered if c.heading.text.casefold() == text}
        picked = exact or {c.index for c in offered if text and text in c.heading.text.casefold()}
    if not picked:
        raise Unreadable(
            None,
            f"the option column is {clipped(chosen)!r}, which is no column of resistance. "
            f"Choose {_listed(offered)} by heading, or by number counted from 1.",
        )
    alone = len(picked) == 1
    return [
        _set_role(c, _role_if_picked(c.role, alone) if c.index in picked else "other") if c in offered else c
        for c in columns
    ]


def _role_if_picked(role: Role, alone: bool) -> Role:
    return role if role == "ratio" or (role in RESISTANCE_ROLES and not alone) else "nominal"


def _set_role(column: Column, role: Role) -> Column:
    if role == "temperature":
        return replace(column, heading=temperature_heading(column.heading.text))
    return replace(column, heading=replace(column.heading, role=role))


def _promoted(columns: Sequence[Column], sheet: Sheet) -> list[Column]:
    """Where no heading says resistance, columns that nothing else is said of are the resistances."""
    if any(c.role in RESISTANCE_ROLES for c in columns):
        return list(columns)
    return [_set_role(c, "nominal") if c.role == "other" and _holds_values(c, sheet) else c for c in columns]


def _holds_values(column: Column, sheet: Sheet) -> bool:
    return any(column.index < len(row.cells) and row.cells[column.index] for row in sheet.rows)


def _one_temperature(used: Sequence[Column]) -> list[Column]:
    """The columns with one temperature where °C, K or °F stand side by side: the one that needs least conversion."""
    kept: list[Column] = []
    for column in used:
        if not kept or {column.role, kept[-1].role} != {"temperature"}:
            kept.append(column)
        elif _UNITS_PREFERRED.index(column.heading.unit) < _UNITS_PREFERRED.index(kept[-1].heading.unit):
            kept[-1] = column
    return kept


def _divided(used: Sequence[Column]) -> Iterator[list[Column]]:
    """The columns in groups of one temperature, which stands first in each or last in each."""
    starts = [i for i, c in enumerate(used) if c.role == "temperature"]
    if not starts:
        return
    edges = [*starts, len(used)] if starts[0] == 0 else [0, *(i + 1 for i in starts)]
    for start, end in pairwise(edges):
        yield list(used[start:end])


def _group(columns: Sequence[Column], sheet: Sheet) -> dict[Role, Column]:
    """The columns by what they hold; two that differ under one name are refused."""
    group: dict[Role, Column] = {}
    for column in columns:
        if column.role == "ratio" and any(c.role == "nominal" for c in columns):
            continue
        held = group.setdefault(column.role, column)
        if held is not column and _cells(held, sheet) != _cells(column, sheet):
            raise _several([c for c in columns if c.role == column.role], sheet)
    return group


def _several(same: Sequence[Column], sheet: Sheet) -> Unreadable:
    """Several columns of one kind: two parts, or columns without headings."""
    what = f"{_listed(same)} are {len(same)} columns of {same[0].role} resistance with different values"
    cure = "Choose one by the option column, by its heading or by its number from 1"
    if same[0].heading.text:
        return Unreadable(sheet.rows[0].number, f"{what}. {cure}.")
    spaces = " Where a space groups thousands, divide the columns by semicolons first." if sheet.aligned else ""
    return Unreadable(
        sheet.rows[0].number,
        f"{what}, and no headings tell them apart. {cure}, or head them minimum, nominal and maximum.{spaces}",
    )


def _cells(column: Column, sheet: Sheet) -> list[str]:
    return [row.cells[column.index] if column.index < len(row.cells) else "" for row in sheet.rows]


def _alike(groups: Sequence[dict[Role, Column]], line: int) -> list[dict[Role, Column]]:
    """The groups, each with a nominal resistance or a ratio, and all with the same columns."""
    if not groups:
        raise Unreadable(
            line, "no column of resistance stands beside a temperature. Head the columns T (°C) and R (kΩ)."
        )
    for group in groups:
        if "nominal" not in group and "ratio" not in group:
            raise Unreadable(
                line,
                f"{_listed([c for c in group.values() if c.role != 'temperature'])}: none of these is the nominal resistance. "
                "Add the nominal column, or head it nominal.",
            )
    if len({frozenset(group) for group in groups}) > 1:
        named = " and ".join(_listed(list(group.values())) for group in groups)
        raise Unreadable(line, f"the tables side by side have different columns: {named}. Give them in separate files.")
    return list(groups)


def _check_one_part(groups: Sequence[dict[Role, Column]], sheet: Sheet, captions: Sequence[SheetLine]) -> None:
    """Tables side by side whose headings or captions name different resistances are two parts."""
    starts = [min(c.index for c in group.values()) for group in groups]
    ends = [*starts[1:], sheet.width]
    over = [_cells_over(line, sheet, list(zip(starts, ends, strict=True))) for line in captions]
    headed = [" ".join(c.heading.text for c in group.values()) for group in groups]
    for line, texts in [(sheet.rows[0], headed), *zip(captions, over, strict=True)]:
        named = [(text, named_ohms(text)) for text in texts]
        first = next(((text, ohms) for text, ohms in named if ohms), None)
        other = next((text for text, ohms in named if first and ohms and ohms != first[1]), None)
        if first and other:
            raise Unreadable(
                line.number,
                f"the tables side by side are of different resistances, {clipped(first[0])!r} and {clipped(other)!r}. "
                "Choose one by the option column, by its heading or by its number from 1.",
            )


def _cells_over(line: SheetLine, sheet: Sheet, spans: Sequence[tuple[int, int]]) -> list[str]:
    """What a line has over each of the tables side by side."""
    if not sheet.aligned:
        return [" ".join(filter(None, line.cells[start:end])) for start, end in spans]
    wide = re.split(r" {2,}", line.text.expandtabs().strip())
    return wide if len(wide) == len(spans) else []


def _listed(columns: Sequence[Column]) -> str:
    return ", ".join(c.shown if not c.heading.text else f"{c.shown} (column {c.index + 1})" for c in columns)
