"""The command `intake`."""

from __future__ import annotations

from typing import BinaryIO

import click

from builder.commands.named import stop
from builder.commands.options import file_name
from builder.intake import Unreadable, record_text


@click.command("intake")
@click.argument("file", type=click.File("rb"))
@click.option("--part", metavar="NUMBER", help="The maker's part number, to stand in the record.")
@click.option("--maker", metavar="NAME", help="The maker, to stand in the record.")
@click.option("--unit", metavar="UNIT", help="Unit of the resistances where the file does not say: ohm, kohm or Mohm.")
@click.option(
    "--temperature-unit", metavar="UNIT", help="Unit of the temperatures where the file does not say: C, F or K."
)
@click.option("--decimal", metavar="SIGN", help="The decimal sign where the file leaves it open: point or comma.")
@click.option(
    "--column",
    metavar="HEADING",
    help="Which resistances to read where the file has several: heading, or number from 1.",
)
def intake_command(file: BinaryIO, **options: str | None) -> None:
    """A record from the R–T table in FILE: CSV, or text pasted from a data sheet; - is standard input.

    Prints a whole record to be filled in. What was recognised and what was assumed stands in it as comments.
    """
    name = file_name(file)
    try:
        click.echo(record_text(file.read(), name=name, **options), nl=False)
    except Unreadable as refused:
        stop(f"{name}:{refused.line or 1}: {refused.message}", 1)
