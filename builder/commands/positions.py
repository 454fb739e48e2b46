"""The commands about a position: `budget`."""

from __future__ import annotations

from pathlib import Path

import click

from builder.circuit import budget, firmware_part, thermistor
from builder.commands import reading
from builder.commands.named import named_parts, named_position
from builder.commands.options import MOST_ROWS, STEP, common
from builder.exports import budget_rows, rows
from builder.part_curve import part_curve


@click.command("budget")
@click.argument("position")
@STEP
@common
def budget_command(position: str, step_k: float, records: Path, form: str) -> None:
    """Error budget of the part fitted at POSITION: bias, a band for each source, worst case, trips.

    POSITION is its name, such as coolbox-main/RT1. The worst case is looked for between the rows too.
    """
    catalog = reading.catalog(records)
    place = named_position(catalog, position)
    fitted, made_for = named_parts(catalog, (place.fitted, firmware_part(place)))
    low_c, high_c = place.range_c
    if (high_c - low_c) / step_k >= MOST_ROWS:
        raise click.UsageError(f"that is more than {MOST_ROWS} rows. Choose a larger --step.")
    found = budget(place, thermistor(fitted), part_curve(made_for), step_k)
    if form == "json":
        click.echo(rows.json_text(budget_rows.budget_answer(found, fitted.part.part)), nl=False)
    elif form == "csv":
        click.echo(rows.csv_text(budget_rows.csv_names(found), budget_rows.csv_rows(found)), nl=False)
    else:
        click.echo(f"{place.position}, {place.purpose}: {fitted.name}")
        click.echo(rows.table_text(budget_rows.columns(found), budget_rows.shown_rows(found)))
    for line in budget_rows.budget_sentences(found):
        click.echo(line, err=form != "table")
