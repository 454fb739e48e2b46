"""How a command answers with rows."""

from __future__ import annotations

from typing import Any

import click

from builder.exports import rows
from builder.exports.rows import Column


def print_rows(form: str, head: dict[str, Any], columns: tuple[Column, ...], table: list[rows.Row]) -> None:
    """Rows in the form asked for; `head` goes before them in JSON."""
    if form == "json":
        click.echo(rows.json_text(head | {"rows": table}), nl=False)
    elif form == "csv":
        click.echo(rows.csv_text([c.name for c in columns], table), nl=False)
    else:
        click.echo(rows.table_text(columns, table))
