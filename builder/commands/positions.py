"""The commands about a position: `budget`, `swap` and `shortlist`."""

from __future__ import annotations

from pathlib import Path
from typing import get_args

import click

from builder.circuit import Budget, budget, firmware_part, thermistor
from builder.commands import reading
from builder.commands.named import named_parts, named_position, tell_of_faults
from builder.commands.options import MOST_ROWS, STEP, common
from builder.decisions import Series, shortlist, swap
from builder.exports import budget_rows, rows, shortlist_rows, swap_rows
from builder.part_curve import part_curve
from builder.records import Position


@click.command("budget")
@click.argument("position")
@STEP
@common
def budget_command(position: str, step_k: float, records: Path, form: str) -> None:
    """Error budget of the part fitted at POSITION: bias, a band for each source, worst case, trips.

    POSITION is its name, such as coolbox-main/RT1. The worst case is looked for between the rows too.
    """
    catalog = reading.catalog(records)
    place = named_position(catalog, position).position
    fitted, made_for = named_parts(catalog, (place.fitted, firmware_part(place)))
    _refuse_many_rows(place, step_k)
    found = budget(place, thermistor(fitted), part_curve(made_for), step_k)
    if form == "json":
        click.echo(rows.json_text(budget_rows.budget_answer(found, fitted.part.part)), nl=False)
    else:
        _print_rows(found, form, [f"{place.position}, {place.purpose}: {fitted.name}"])
    for line in budget_rows.budget_sentences(found):
        click.echo(line, err=form != "table")


@click.command("swap")
@click.argument("position")
@click.argument("part")
@STEP
@common
def swap_command(position: str, part: str, step_k: float, records: Path, form: str) -> None:
    """What PART does in place of the part fitted at POSITION, the firmware unchanged, and whether it fits.

    The verdict stands on top with every reason; the rows are the error budget of PART there.
    """
    catalog = reading.catalog(records)
    record = named_position(catalog, position)
    place = record.position
    _, alternate, _ = named_parts(catalog, (place.fitted, part, firmware_part(place)))
    _refuse_many_rows(place, step_k)
    found = swap(record, alternate, catalog, step_k)
    if form == "json":
        click.echo(rows.json_text(swap_rows.swap_answer(found)), nl=False)
    else:
        _print_rows(found.after, form, [*swap_rows.swap_sentences(found), ""])
    for line in budget_rows.budget_sentences(found.after):
        click.echo(line, err=form != "table")


@click.command("shortlist")
@click.argument("position")
@click.option(
    "--series",
    type=click.Choice(get_args(Series)),
    default="E96",
    show_default=True,
    help="Preferred numbers that the fixed resistor is taken from.",
)
@common
def shortlist_command(position: str, series: Series, records: Path, form: str) -> None:
    """Every part of the catalog at POSITION, each with its best fixed resistor, the smallest worst case first.

    The firmware is made for each part by the position's method. Parts that are out are named with every reason.
    """
    catalog = reading.catalog(records)
    found = shortlist(named_position(catalog, position), catalog, series)
    tell_of_faults(catalog, "Records that are left out")
    if form == "json":
        click.echo(rows.json_text(shortlist_rows.shortlist_answer(found)), nl=False)
    elif form == "csv":
        click.echo(rows.csv_text(shortlist_rows.CSV_NAMES, shortlist_rows.csv_rows(found)), nl=False)
    else:
        click.echo(rows.table_text(shortlist_rows.COLUMNS, shortlist_rows.shown_rows(found)) + "\n")
        for line in shortlist_rows.shortlist_sentences(found):
            click.echo(line)


def _refuse_many_rows(place: Position, step_k: float) -> None:
    low_c, high_c = place.range_c
    if (high_c - low_c) / step_k >= MOST_ROWS:
        raise click.UsageError(f"that is more than {MOST_ROWS} rows. Choose a larger --step.")


def _print_rows(found: Budget, form: str, head: list[str]) -> None:
    """A budget's rows as CSV, or as a table below some lines; with CSV the lines go to standard error."""
    for line in head:
        click.echo(line, err=form != "table")
    if form == "csv":
        click.echo(rows.csv_text(budget_rows.csv_names(found), budget_rows.csv_rows(found)), nl=False)
    else:
        click.echo(rows.table_text(budget_rows.columns(found), budget_rows.shown_rows(found)))
