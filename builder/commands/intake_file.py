"""The command `intake`."""

from __future__ import annotations

from typing import BinaryIO

import click

from builder.commands.named import stop
from builder.commands.options import file_name, table_options
from builder.intake import Unreadable, record_text


@click.command("intake")
@click.argument("file", type=click.File("rb"))
@click.option("--part", metavar="NUMBER", help="The maker's part number, to stand in the record.")
@click.option("--maker", metavar="NAME", help="The maker, to stand in the record.")
@table_options
def intake_command(file: BinaryIO, **options: str | None) -> None:
    """A record from the R–T table in FILE: CSV, or text pasted from a data sheet; - is standard input.

    Prints a whole record to be filled in. What was recognised and what was assumed stands in it as comments.
    """
    name = file_name(file)
    try:
        click.echo(record_text(file.read(), name=name, **options), nl=False)
    except Unreadable as refused:
        stop(f"{name}:{refused.line or 1}: {refused.message}", 1)
