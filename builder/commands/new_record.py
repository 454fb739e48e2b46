"""The command `new`."""

from __future__ import annotations

import datetime
import sys
from pathlib import Path

import click

from builder.commands import reading
from builder.commands.checking import print_problems
from builder.commands.named import stop
from builder.commands.options import NO_CACHE, RECORDS, TODAY, table_options
from builder.intake import Unreadable
from builder.problems import errors
from builder.questions import (
    Interview,
    NotWritten,
    proven_files,
    record_path,
    refusals,
    table_draft,
    write_new,
)
from builder.records import Part, Position
from builder.records.yaml_text import YamlText


@click.command("new")
@click.option("--position", "is_position", is_flag=True, help="Ask for a position instead of a part.")
@click.option(
    "--from",
    "table",
    type=click.Path(exists=True, dir_okay=False, path_type=Path),
    metavar="FILE",
    help="Take the R–T table of FILE, read as beadroll intake does, and ask for what is missing.",
)
@click.option("--csv", "as_csv", is_flag=True, help="Put the table of --from in a CSV beside the record.")
@click.option(
    "--out", type=click.Path(path_type=Path), metavar="FILE", help="The record's file; default by maker and number."
)
@table_options
@RECORDS
@NO_CACHE
@TODAY
def new_command(
    is_position: bool,
    table: Path | None,
    as_csv: bool,
    out: Path | None,
    records: Path,
    today: datetime.datetime | None,
    **options: str | None,
) -> None:
    """Ask for a new record's figures, one a line, and write it.

    Each answer is checked at once. Enter leaves out what is optional; Ctrl-C ends, and nothing is written. Never
    writes over a file.
    """
    _refuse_misuse(is_position, table, as_csv, out, records, options)
    draft, remarks = _draft(table, options)
    for line in remarks:
        click.echo(line)
    interview = Interview(
        Position if is_position else Part, draft, _ask, click.echo, refusals(reading.catalog(records), records, out)
    )
    day = today.date() if today else datetime.date.today()
    try:
        interview.fill_in()
        files = proven_files(interview, out or record_path(records, draft.value), day, csv=as_csv)
        write_new(files)
    except (click.Abort, KeyboardInterrupt):
        stop("\nThe answers ended before the record did. Nothing was written.", 1)
    except NotWritten as refused:
        stop(str(refused), 1)
    _print_written(files, records, day)


def _refuse_misuse(
    is_position: bool, table: Path | None, as_csv: bool, out: Path | None, records: Path, options: dict[str, str | None]
) -> None:
    if is_position and table:
        raise click.UsageError("a position has no R–T table. Leave out --from or --position.")
    if not table and (as_csv or any(options.values())):
        raise click.UsageError("there is no table to read. Name its file with --from.")
    if out and (out.suffix != ".yaml" or not out.resolve().is_relative_to(records.resolve())):
        raise click.UsageError(f"{out} is no record. Name a file that ends in .yaml below {records}.")
    for file in [out, out.with_suffix(".csv")] if out else []:
        if file.exists() and (file == out or as_csv):
            raise click.UsageError(f"{file} is there already. Name another file.")


def _draft(table: Path | None, options: dict[str, str | None]) -> tuple[YamlText, list[str]]:
    if table is None:
        return YamlText(value={}), []
    try:
        return table_draft(table.read_bytes(), name=table.name, **options)
    except Unreadable as refused:
        stop(f"{table.name}:{refused.line or 1}: {refused.message}", 1)


def _ask(question: str) -> str:
    if sys.stdin.isatty():
        return str(click.prompt(question, default="", show_default=False))
    click.echo(f"{question}: ", nl=False)
    try:
        line = sys.stdin.readline()
        # Where the locale is C, bytes that are not UTF-8 come as text that cannot be written.
        line.encode()
    except UnicodeError:
        stop("\nThe answers are not UTF-8. Save them as UTF-8. Nothing was written.", 2)
    if not line:
        raise click.Abort
    # What is piped in is not seen otherwise.
    click.echo(line.rstrip("\r\n"))
    return line


def _print_written(files: dict[Path, str], records: Path, day: datetime.date) -> None:
    *_, text = files.values()
    click.echo(f"\nWritten: {', '.join(path.as_posix() for path in files)}\n\n{text}")
    catalog = reading.checked(records, day).catalog
    names = {path.as_posix() for path in files}
    found = [problem for problem in catalog.problems if problem.file in names]
    print_problems(found, catalog)
    sys.exit(1 if errors(found) else 0)
